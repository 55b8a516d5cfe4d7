import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { sql } from "kysely";
import { errorSchema } from "#contracts/errors.ts";
import type { Endpoint } from "#contracts/endpoint.ts";
import { demoIds, signInAs, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

let server: TestServer;
let owner: Agent;
let ids: { buildId: string; layoutId: string };
beforeAll(async () => {
  server = await startTestServer();
  owner = await signInAs(server.app, "owner");
  ids = await demoIds(owner);
});
afterAll(() => server.close());

const addressOf = (endpoint: Endpoint, where = ids) => endpoint.path.replace(":buildId", where.buildId).replace(":layoutId", where.layoutId);
const give = (agent: Agent, endpoint: Endpoint, text: string, query = "") => {
  const method = endpoint.method.toLowerCase() as "get" | "post" | "patch" | "put" | "delete";
  const call = agent[method](addressOf(endpoint) + query);
  return endpoint.method === "GET" ? call : call.set("Content-Type", "application/json").send(text);
};
/** Everything that could have changed, in one number. */
const everything = async () => (await sql<{ all: string }>`select md5(
  (select coalesce(string_agg(b::text, ',' order by id), '') from build b) || (select coalesce(string_agg(l::text, ',' order by id), '') from layout l) ||
  (select coalesce(string_agg(i::text, ',' order by layout_id, list, key), '') from layout_item i) || (select coalesce(string_agg(c::text, ',' order by layout_id, seq), '') from layout_change c) ||
  (select coalesce(string_agg(m::text, ',' order by build_id, person_id), '') from membership m) || (select coalesce(string_agg(p::text, ',' order by id), '') from person p)) as all`.execute(server.owner.db)).rows[0]!.all;

const NONSENSE = ["", "null", "true", "5", '"text"', "[]", '{"unknown":1}', '{"__proto__":{"admin":true}}', '{"name":"\\u0000"}', '{"name":"\\ud800"}', '{"name":', "\u0000", "[".repeat(20_000) + "]".repeat(20_000), '{"name":{"a":'.repeat(40) + "1" + "}}".repeat(40),
  '{"email":1,"password":[]}', '{"id":"x","role":"owner","name":"x"}'];

describe("every endpoint that takes a body", () => {
  it("answers nonsense with 4xx in the one shape, and nothing stored changes", async () => {
    const before = await everything();
    const tried = new Map<string, number>();
    // signing out and deleting want no body: an empty object is what they take
    for (const endpoint of server.endpoints.filter((e) => e.method !== "GET" && !["signOut", "deleteBuild", "setPreferences"].includes(e.name))) {
      for (const text of NONSENSE) {
        const { status, body } = await give(owner, endpoint, text);
        expect([endpoint.name, text.slice(0, 30), status]).toEqual([endpoint.name, text.slice(0, 30), expect.toSatisfy((n: number) => n >= 400 && n < 500)]);
        expect(errorSchema.safeParse(body).success).toBe(true);
        tried.set(endpoint.name, (tried.get(endpoint.name) ?? 0) + 1);
      }
    }
    expect(tried.size).toBeGreaterThanOrEqual(8);
    expect(await everything()).toBe(before);
  });

  it("refuses unknown keys even where it wants none", async () => {
    const before = await everything();
    for (const name of ["signOut", "deleteBuild", "setPreferences"]) {
      const endpoint = server.endpoints.find((e) => e.name === name)!;
      for (const text of ['{"unknown":1}', "[1]", '"x"', "5"]) expect([name, text, (await give(owner, endpoint, text)).status]).toEqual([name, text, 400]);
    }
    await owner.get("/api/builds").expect(200);
    expect(await everything()).toBe(before);
  });
});

describe("every endpoint that reads", () => {
  it("refuses unknown, repeated and impossible query parameters with their names", async () => {
    for (const endpoint of server.endpoints.filter((e) => e.method === "GET")) {
      const answer = await give(owner, endpoint, "", "?unknown=1");
      expect([endpoint.name, answer.status]).toEqual([endpoint.name, 400]);
      expect(answer.body.error.fields[0].path).toBe("query.unknown");
    }
    const changes = server.endpoints.find((e) => e.name === "listChanges")!;
    for (const query of ["?limit=0", "?limit=201", "?limit=x", "?limit=1&limit=2", "?after=9e15", "?before=1e400", "?after=1.5", "?after=-7", "?before=';select pg_sleep(3)--"]) {
      expect([query, (await give(owner, changes, "", query)).status]).toEqual([query, 400]);
    }
    await give(owner, changes, "", "?after=2147483647").expect(200);
    const sheet = server.endpoints.find((e) => e.name === "getSheet")!;
    for (const query of ["?paper=A9", "?scale=3", "?station=NaN", "?station=1e9", "?units=feet"]) expect([query, (await give(owner, sheet, "", query)).status]).toEqual([query, 400]);
  });

  it("changes nothing, however often it is asked", async () => {
    const before = await everything();
    for (let i = 0; i < 2; i++) for (const endpoint of server.endpoints.filter((e) => e.method === "GET" && e.name !== "getSheet")) await give(owner, endpoint, "").expect(200);
    expect(await everything()).toBe(before);
  });
});

describe("every answer", () => {
  it("whatever its status is marked: not to be kept, not to be sniffed, not to be framed, with a policy and a request id", async () => {
    const answers = [
      await owner.get("/api/me"), await owner.get("/api/builds"), await request(server.app).get("/api/builds"), await owner.get("/api/nothing"), await owner.post("/api/builds").send({}),
      await owner.post("/api/builds").set("Content-Type", "text/plain").send("x"), await owner.get(addressOf(server.endpoints.find((e) => e.name === "exportLayout")!)),
    ];
    expect(answers.map((a) => a.status)).toEqual([200, 200, 401, 404, 400, 415, 200]);
    for (const { headers } of answers) {
      expect(headers["cache-control"]).toBe("no-store");
      expect(headers["x-content-type-options"]).toBe("nosniff");
      expect(headers["referrer-policy"]).toBe("no-referrer");
      expect(headers["content-security-policy"]).toMatch(/default-src 'none'.*frame-ancestors 'none'/);
      expect(headers["content-security-policy"]).not.toMatch(/script-src[^;]*unsafe/);
      expect(headers["access-control-allow-origin"]).toBeUndefined();
      expect(headers["content-type"]).toMatch(/^application\/json; charset=utf-8$/);
      expect(headers["x-request-id"]).toMatch(/^[0-9a-f-]{36}$/);
    }
  });

  it("outside the interface is never the page of another address: files that are not there, odd methods, hidden folders", async () => {
    for (const path of ["/.git/HEAD", "/.env", "/package.json", "/assets/none.js", "/server/main.ts"]) expect([path, (await request(server.app).get(path)).status]).toEqual([path, 404]);
    const odd = await request(server.app).post("/").send({});
    expect([odd.status, errorSchema.safeParse(odd.body).success]).toEqual([404, true]);
  });
});
