import request from "supertest";
import { pino } from "pino";
import { Writable } from "node:stream";
import { sql } from "kysely";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { DEMO_PASSWORD } from "../../server/database/seed-demo.ts";
import { hashPassword } from "../../server/features/sign-in/passwords.ts";
import { signInAs, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

let server: TestServer;
let lines: string[] = [];
beforeAll(async () => {
  const memory = new Writable({ write: (chunk, _, done) => { lines.push(String(chunk)); done(); } });
  server = await startTestServer({ log: pino({ level: "trace" }, memory) });
});
afterAll(() => server.close());

const cookieOf = (answer: request.Response) => answer.headers["set-cookie"]![0]!.split(";")[0]!;
const signedIn = async (agent: Agent) => (await agent.get("/api/builds")).status === 200;

describe("a sign-in", () => {
  it("gets a new session id each time: one that was planted is not taken over", async () => {
    const first = await request(server.app).post("/api/sign-in").send({ email: "owner@example.test", password: DEMO_PASSWORD }).expect(200);
    const second = await request(server.app).post("/api/sign-in").set("Cookie", cookieOf(first)).send({ email: "designer@example.test", password: DEMO_PASSWORD }).expect(200);
    expect(cookieOf(second)).not.toBe(cookieOf(first));
    await request(server.app).get("/api/builds").set("Cookie", cookieOf(first)).expect(401);
    await request(server.app).get("/api/builds").set("Cookie", cookieOf(second)).expect(200);
  });

  it("that was ended stays ended when its session row comes back", async () => {
    const agent = await signInAs(server.app, "owner");
    const { db } = server.owner;
    const kept = (await sql<{ sid: string; sess: unknown; expire: Date }>`select * from session`.execute(db)).rows;
    await agent.post("/api/sign-out").send({}).expect(200);
    const stale = agent;
    for (const row of kept) await sql`insert into session (sid, sess, expire) values (${row.sid}, ${JSON.stringify(row.sess)}, ${row.expire}) on conflict do nothing`.execute(db);
    expect(await signedIn(stale)).toBe(false);
  });

  it("with its cookie kept by a thief is dead after signing out", async () => {
    const answer = await request(server.app).post("/api/sign-in/demo").send({ email: "owner@example.test" }).expect(200);
    const stolen = cookieOf(answer);
    await request(server.app).get("/api/builds").set("Cookie", stolen).expect(200);
    await request(server.app).post("/api/sign-out").set("Cookie", stolen).send({}).expect(200);
    await request(server.app).get("/api/builds").set("Cookie", stolen).expect(401);
  });

  it("ends after 3 days without a request, and after 14 days whatever happens", async () => {
    const { db } = server.owner;
    for (const [column, hours, left] of [["last_seen_at", 71, true], ["last_seen_at", 73, false], ["created_at", 24 * 14 - 1, true], ["created_at", 24 * 14 + 1, false]] as const) {
      const agent = await signInAs(server.app, "viewer");
      await sql`update sign_in set ${sql.ref(column)} = now() - make_interval(hours => ${hours}) where ended_at is null and id = (select id from sign_in order by created_at desc limit 1)`.execute(db);
      expect([column, hours, await signedIn(agent)]).toEqual([column, hours, left]);
      await sql`update sign_in set ended_at = now()`.execute(db);
    }
  });

  it("is answered by the same work for an unknown address as for a wrong password", async () => {
    // told apart only by a message would be enough; here: same status, same body
    const ask = (email: string) => request(server.app).post("/api/sign-in").send({ email, password: "not-the-password" });
    const [known, unknown] = [await ask("owner@example.test"), await ask("nobody-at-all@example.test")];
    expect(known.status).toBe(401);
    expect({ ...known.body.error, requestId: "" }).toEqual({ ...unknown.body.error, requestId: "" });
  });

  it("stores its password as argon2id with the parameters it should have", async () => {
    const { password_hash: stored } = await server.owner.db.selectFrom("person").select("password_hash").limit(1).executeTakeFirstOrThrow();
    expect(stored).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  });
});

describe("a sign-in in production", () => {
  it("comes with a cookie bound to this host and to TLS; and demo members cannot come in by their password", async () => {
    const live = await startTestServer({ publicUrl: "https://handbreadth.test" });
    try {
      await live.owner.db.insertInto("person").values({ email: "builder@example.test", name: "Builder", password_hash: await hashPassword("long enough to be one"), demo_role: null }).execute();
      const post = (path: string, body: object) => request(live.app).post(path).set("X-Forwarded-Proto", "https").set("Origin", "https://handbreadth.test").send(body);
      const answer = await post("/api/sign-in", { email: "builder@example.test", password: "long enough to be one" }).expect(200);
      const cookie = answer.headers["set-cookie"]![0]!;
      expect(cookie).toMatch(/^__Host-handbreadth=/);
      for (const word of ["Secure", "HttpOnly", "SameSite=Lax", "Path=/"]) expect(cookie).toContain(word);
      expect(cookie).not.toContain("Domain");
      expect(answer.headers["strict-transport-security"]).toBe("max-age=31536000; includeSubDomains");
      await post("/api/sign-in", { email: "owner@example.test", password: DEMO_PASSWORD }).expect(401);
      // a write that names another origin is refused, also this server's own loopback address
      await request(live.app).post("/api/sign-in").set("X-Forwarded-Proto", "https").set("Origin", "http://127.0.0.1").send({ email: "a@example.test", password: "x" }).expect(403);
    } finally {
      await live.close();
    }
  });

  it("does not count a demo member's sign-in from before", async () => {
    const agent = await signInAs(server.app, "owner");
    expect(await signedIn(agent)).toBe(true);
    const { findLiveSignIn } = await import("../../server/features/sign-in/people.repository.ts");
    const { id } = await server.owner.db.selectFrom("sign_in").select("id").where("ended_at", "is", null).orderBy("created_at", "desc").executeTakeFirstOrThrow();
    expect(await findLiveSignIn(server.connection.db, id, true)).toBeDefined();
    expect(await findLiveSignIn(server.connection.db, id, false)).toBeUndefined();
  });
});

describe("the log", () => {
  it("holds neither passwords, nor cookies, nor what was sent; each line is JSON with a request id, whatever names hold", async () => {
    lines = [];
    const answer = await request(server.app).post("/api/sign-in").set("User-Agent", "canary-agent %s").send({ email: "%s%d%o-canary@example.test", password: "canary-password-1" }).expect(401);
    const agent = await request(server.app).post("/api/sign-in").send({ email: "owner@example.test", password: DEMO_PASSWORD }).expect(200);
    await request(server.app).get("/api/builds?token=canary-query").set("Cookie", cookieOf(agent)).expect(400);
    const text = lines.join("");
    expect(lines.length).toBeGreaterThan(2);
    for (const secret of ["canary-password-1", DEMO_PASSWORD, cookieOf(agent).split("=")[1]!, "canary-query", "canary-agent", "$argon2id"]) expect(text).not.toContain(secret);
    expect(text).toContain(answer.body.error.requestId);
    for (const line of text.trim().split("\n")) expect(JSON.parse(line)).toHaveProperty("time");
  });
});

describe("a write", () => {
  const forms: [string, Record<string, string>][] = [
    ["of a page of another site", { "Sec-Fetch-Site": "cross-site" }],
    ["of a neighbouring site", { "Sec-Fetch-Site": "same-site" }],
    ["with a foreign origin", { Origin: "https://evil.test" }],
    ["without an origin that can be named", { Origin: "null" }],
  ];
  it.each(forms)("%s is refused everywhere, and nothing is stored", async (_, headers) => {
    const agent = await signInAs(server.app, "owner");
    const count = async () => (await sql<{ n: number }>`select (select count(*) from build)::int + (select count(*) from sign_in where ended_at is not null)::int as n`.execute(server.owner.db)).rows[0]!.n;
    const before = await count();
    for (const endpoint of server.endpoints.filter((e) => e.method !== "GET")) {
      const path = endpoint.path.replaceAll(/:[a-zA-Z]+/g, () => crypto.randomUUID());
      const method = endpoint.method.toLowerCase() as "post" | "patch" | "put" | "delete";
      const answer = await agent[method](path).set(headers).send({ name: "planted" });
      expect([endpoint.name, answer.status]).toEqual([endpoint.name, 403]);
    }
    expect(await count()).toBe(before);
  });

  it.each(["text/plain", "application/x-www-form-urlencoded", "multipart/form-data; boundary=x", "application/jsonx"])("sent as %s is refused: only JSON is taken, also without a body", async (type) => {
    const agent = await signInAs(server.app, "owner");
    await agent.post("/api/builds").set("Content-Type", type).send('{"name":"planted"}').expect(415);
    await agent.post("/api/sign-out").set("Content-Type", type).send("").expect(415);
    expect(await signedIn(agent)).toBe(true);
  });
});
