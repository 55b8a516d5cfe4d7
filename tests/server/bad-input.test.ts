import { request as httpRequest } from "node:http";
import type { AddressInfo } from "node:net";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { errorSchema } from "#contracts/errors.ts";
import { demoIds, signInAs, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

let server: TestServer;
let owner: Agent;
let ids: { buildId: string; layoutId: string };
let good: { parts: Record<string, unknown>[]; runs: Record<string, unknown>[]; [key: string]: unknown };
let before: string;

const stored = async () => {
  const { db } = server.connection;
  const rows = await db.selectFrom("layout_item").selectAll().orderBy("layout_id").orderBy("list").orderBy("key").execute();
  const layouts = await db.selectFrom("layout").select(["id", "seq"]).orderBy("id").execute();
  return JSON.stringify([rows, layouts]);
};

beforeAll(async () => {
  server = await startTestServer();
  owner = await signInAs(server.app, "owner");
  ids = await demoIds(owner);
  good = (await owner.get(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}`).expect(200)).body.document;
  before = await stored();
});
afterAll(() => server.close());

const bringIn = (text: string) => owner.post(`/api/builds/${ids.buildId}/layouts/import`).set("Content-Type", "application/json").send(text);
const withPart = (change: (part: Record<string, unknown>) => void) => {
  const copy = structuredClone(good);
  change(copy.parts[0]!);
  return JSON.stringify(copy);
};

describe("a layout file that cannot be taken", () => {
  const outline = (n: number) => Array.from({ length: n }, (_, i) => [1000 * Math.cos((2 * Math.PI * i) / n), 1000 * Math.sin((2 * Math.PI * i) / n)]);
  const cases: [string, () => string, string][] = [
    ["a self-crossing outline", () => withPart((p) => (p["solids"] = [{ type: "prism", plane: "xy", outline: [[0, 0], [100, 100], [100, 0], [0, 100]], from: 0, to: 9 }])), "parts[0].solids[0].outline"],
    ["an outline without area", () => withPart((p) => (p["solids"] = [{ type: "prism", plane: "xy", outline: [[0, 0], [50, 0], [100, 0]], from: 0, to: 9 }])), "parts[0].solids[0].outline"],
    ["a size of zero", () => withPart((p) => (p["solids"] = [{ type: "box", size: [0, 10, 10] }])), "parts[0].solids[0].size[0]"],
    ["a negative size", () => withPart((p) => (p["solids"] = [{ type: "ball", diameter: -4 }])), "parts[0].solids[0].diameter"],
    ["a number beyond all doubles", () => withPart((p) => (p["at"] = [0, 0, 0])).replace('"at":[0,0,0]', '"at":[1e999,0,0]'), "at[0]"],
    ["NaN as a word", () => withPart((p) => (p["mass"] = "NaN")), "parts[0].mass"],
    ["an unknown key", () => withPart((p) => (p["colour"] = "red")), "parts[0].colour"],
    ["a key twice", () => JSON.stringify({ ...good, parts: [...good.parts, good.parts[0]] }), "parts[51].key"],
    ["carriers in a circle", () => { const copy = structuredClone(good); copy.parts[0]!["carriedBy"] = copy.parts[1]!["key"]; copy.parts[1]!["carriedBy"] = copy.parts[0]!["key"]; return JSON.stringify(copy); }, "parts[0].carriedBy"],
    ["a run with a loop", () => { const copy = structuredClone(good); const run = copy.runs.find((r) => r["key"] === "loom-main")!; (run["legs"] as unknown[]).push({ from: "k", to: "ecu" }); return JSON.stringify(copy); }, "legs["],
    ["a 50 000-point outline", () => withPart((p) => (p["solids"] = [{ type: "prism", plane: "xy", outline: outline(50_000), from: 0, to: 9 }])), "parts[0].solids[0].outline"],
    ["100 000 brackets", () => "[".repeat(100_000) + "]".repeat(100_000), ""],
    ["no JSON", () => "{ not json", ""],
    ["a list", () => "[]", ""],
    ["a NUL in a name", () => JSON.stringify({ ...good, name: "a\u0000b" }), ""],
    ["half a surrogate pair", () => JSON.stringify({ ...good, name: "a" }).replace('"name":"a"', '"name":"a\\ud800"'), ""],
    ["__proto__ as a key", () => JSON.stringify(good).replace('{"format"', '{"__proto__":{"x":1},"format"'), "__proto__"],
  ];
  it.each(cases)("%s is named at its place, and nothing is stored", async (_, make, path) => {
    const answer = await bringIn(make());
    expect(answer.status).toBe(400);
    const { error } = errorSchema.parse(answer.body);
    expect(error.message.length).toBeGreaterThan(5);
    if (path) expect(error.fields!.some((field) => field.path.includes(path))).toBe(true);
    expect(await stored()).toBe(before);
  }, 60_000);

  it.each(["with its length said", "in pieces of unknown length"])("of 200 MB, %s, is refused before much more than the limit is read", async (how) => {
    const listener = server.app.listen(0, "127.0.0.1");
    await new Promise((resolve) => listener.once("listening", resolve));
    let received = 0;
    listener.on("connection", (socket) => socket.on("close", () => (received += socket.bytesRead)));
    const cookie = (owner as unknown as { jar: { getCookies: (at: unknown) => { toValueString: () => string } } }).jar.getCookies({ domain: "127.0.0.1", path: "/", secure: false, script: false }).toValueString();
    const chunk = Buffer.alloc(1024 * 1024, " ");
    const outcome = await new Promise<number | "closed">((resolve) => {
      const upload = httpRequest({
        host: "127.0.0.1", port: (listener.address() as AddressInfo).port, method: "POST", path: `/api/builds/${ids.buildId}/layouts/import`,
        headers: { Cookie: cookie, "Content-Type": "application/json", ...(how === "with its length said" ? { "Content-Length": 200 * 1024 * 1024 } : { "Transfer-Encoding": "chunked" }) },
      });
      upload.on("response", (response) => resolve(response.statusCode!));
      upload.on("error", () => resolve("closed"));
      let sent = 0;
      const more = () => {
        while (sent < 200 && !upload.destroyed) {
          sent++;
          if (!upload.write(chunk)) return void upload.once("drain", more);
        }
        upload.end();
      };
      more();
    });
    // while it is still sending, a client may lose the answer with the connection
    expect([413, "closed"]).toContain(outcome);
    await new Promise((resolve) => listener.close(resolve));
    expect(received).toBeLessThan(22 * 1024 * 1024);
    await owner.get("/api/me").expect(200);
    expect(await stored()).toBe(before);
  }, 60_000);

  it("is refused in another type and when compressed", async () => {
    await owner.post(`/api/builds/${ids.buildId}/layouts/import`).set("Content-Type", "text/plain").send("{}").expect(415);
    await owner.post(`/api/builds/${ids.buildId}/layouts/import`).set("Content-Type", "application/json").set("Content-Encoding", "gzip").send("x").expect(415);
  });
});

describe("a command that cannot be taken", () => {
  const post = (body: object) => owner.post(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/commands`).send(body);
  const fresh = () => ({ commandId: crypto.randomUUID(), base: 0, label: "try", command: { kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, 0] } });

  it("names its field", async () => {
    const answer = await post({ ...fresh(), command: { kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, "x"] } }).expect(400);
    expect(answer.body.error.fields[0].path).toContain("command");
  });

  it("for a part that is not there, that others need, or that is locked is refused in words", async () => {
    expect((await post({ ...fresh(), command: { kind: "remove", list: "parts", key: "nothing" } }).expect(422)).body.error.message).toMatch(/no "nothing"/);
    expect((await post({ ...fresh(), command: { kind: "remove", list: "parts", key: "engine" } }).expect(422)).body.error.message).toMatch(/still used by/);
  });

  it("based on a later seq than anything stored is refused", () => post({ ...fresh(), base: 99 }).expect(400));

  it("of another build, of a stranger's number or of no number at all is a 404", async () => {
    for (const buildId of [crypto.randomUUID(), "not-a-number", "..%2f..%2fetc"]) {
      const answer = await owner.get(`/api/builds/${buildId}/layouts/${ids.layoutId}`);
      expect(answer.status).toBe(404);
    }
  });

  it("left everything as it was", async () => expect(await stored()).toBe(before));
});

describe("every error", () => {
  it("has the one shape, with a request id", async () => {
    for (const path of ["/api/nothing", "/api/builds/%E0%A4%A"]) {
      const answer = await owner.get(path);
      expect(answer.status).toBeGreaterThanOrEqual(400);
      expect(answer.status).toBeLessThan(500);
      expect(errorSchema.parse(answer.body).error.requestId).toMatch(/^[0-9a-f-]{36}$/);
    }
  });

  it("keeps what it knows to itself: no stack, no SQL", async () => {
    const answer = await request(server.app).post("/api/sign-in").set("Content-Type", "application/json").send("{");
    expect(answer.status).toBe(400);
    expect(JSON.stringify(answer.body)).not.toMatch(/at .*\.(ts|js)|select|SyntaxError/);
  });
});
