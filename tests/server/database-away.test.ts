import { inject } from "vitest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { sql } from "kysely";
import { demoIds, signInAs, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";
import { startProxy, type Proxy } from "../support/proxy.ts";

let proxy: Proxy;
let server: TestServer;
let owner: Agent;
let path: string;
beforeAll(async () => {
  proxy = await startProxy({ port: Number(new URL(inject("clusterUrl")).port) });
  server = await startTestServer({ through: proxy.port });
  owner = await signInAs(server.app, "owner");
  const ids = await demoIds(owner);
  path = `/api/builds/${ids.buildId}/layouts/${ids.layoutId}`;
});
afterAll(async () => {
  proxy.mend();
  await server.close();
  await proxy.close();
});

const warm = (temperature: number, base: number) => ({ commandId: crypto.randomUUID(), base, label: "air", command: { kind: "set", which: "air", value: { temperature, speed: 0, surroundings: temperature } } });

describe("a database that is away", () => {
  it("is a 503 with the time to try again, and nothing else suffers; afterwards all is well without a restart", async () => {
    proxy.cut();
    for (const address of ["/api/builds", path, "/health/ready"]) {
      const answer = await owner.get(address);
      expect([address, answer.status, answer.body.error?.code]).toEqual([address, 503, "away"]);
      expect(Number(answer.headers["retry-after"])).toBeGreaterThan(0);
    }
    expect((await owner.post(`${path}/commands`).send(warm(41, 0))).status).toBe(503);
    await owner.get("/health/live").expect(200);
    proxy.mend();
    await owner.get("/health/ready").expect(200);
    const { body } = await owner.get(path).expect(200);
    expect(body.seq).toBe(0);
  });

  it("whose answer to COMMIT is lost leaves the command to be asked again by its id: taken once", async () => {
    const command = warm(42, 0);
    proxy.onAnswer = (data) => (data.includes("COMMIT") ? "cut" : "pass");
    const first = await owner.post(`${path}/commands`).send(command);
    proxy.onAnswer = null;
    expect(first.status).toBe(503);
    const second = await owner.post(`${path}/commands`).send(command).expect(200);
    expect(second.body).toMatchObject({ seq: 1, replay: true });
    expect((await owner.get(path).expect(200)).body).toMatchObject({ seq: 1, document: { air: { temperature: 42 } } });
  });

  it("is never waited for without end: every connection carries its limits", async () => {
    const limits = async (name: string) => (await sql<Record<string, string>>`show ${sql.ref(name)}`.execute(server.connection.db)).rows[0]![name];
    expect(await limits("statement_timeout")).toBe("10s");
    expect(await limits("lock_timeout")).toBe("5s");
    expect(await limits("idle_in_transaction_session_timeout")).toBe("15s");
    expect(server.connection.pool.options.connectionTimeoutMillis).toBe(5_000);
  });

  it("that is locked for longer than that is a 503, and the connection is given back", async () => {
    const holder = await server.owner.pool.connect();
    await holder.query("begin");
    await holder.query("lock table layout in access exclusive mode");
    const answer = await owner.post(`${path}/commands`).send(warm(43, 1));
    await holder.query("rollback");
    holder.release();
    expect([answer.status, answer.body.error.code]).toEqual([503, "busy"]);
    expect(server.connection.pool.waitingCount).toBe(0);
    await owner.post(`${path}/commands`).send(warm(44, 1)).expect(200);
  });
});

describe("a request that breaks off", () => {
  it("half-way through its body stores nothing", async () => {
    const { connect } = await import("node:net");
    const listener = server.app.listen(0, "127.0.0.1");
    await new Promise((resolve) => listener.once("listening", resolve));
    const before = (await owner.get(path).expect(200)).body.seq;
    const text = JSON.stringify(warm(45, before));
    const cookie = (owner as unknown as { jar: { getCookies: (at: unknown) => { toValueString: () => string } } }).jar.getCookies({ domain: "127.0.0.1", path: "/", secure: false, script: false }).toValueString();
    const { port } = listener.address() as { port: number };
    for (const length of [0, 1, 17, 101, text.length - 1]) {
      await new Promise<void>((resolve) => {
        const socket = connect(port, "127.0.0.1", () => {
          socket.write(`POST ${path}/commands HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nCookie: ${cookie}\r\nContent-Type: application/json\r\nContent-Length: ${text.length}\r\n\r\n${text.slice(0, length)}`, () => setTimeout(() => socket.destroy(), 50));
        });
        socket.on("close", () => resolve());
      });
    }
    await new Promise((resolve) => setTimeout(resolve, 200));
    expect((await owner.get(path).expect(200)).body.seq).toBe(before);
    await new Promise((resolve) => listener.close(resolve));
  });
});
