import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { DEMO_PASSWORD } from "../../server/database/seed-demo.ts";
import { readSettings } from "../../server/settings.ts";
import { signInAs } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer({ signInTries: 5 });
});
afterAll(() => server.close());

describe("signing in", () => {
  it("gives a session in a cookie that scripts cannot read and other sites do not send", async () => {
    const answer = await request(server.app).post("/api/sign-in").send({ email: "Owner@Example.test", password: DEMO_PASSWORD }).expect(200);
    expect(answer.headers["set-cookie"]![0]).toMatch(/HttpOnly/);
    expect(answer.headers["set-cookie"]![0]).toMatch(/SameSite=Lax/);
    expect(JSON.stringify(answer.body)).not.toMatch(/hash|password/);
  });

  it("says the same for a wrong password and an unknown address", async () => {
    const wrong = await request(server.app).post("/api/sign-in").send({ email: "viewer@example.test", password: "wrong" }).expect(401);
    const unknown = await request(server.app).post("/api/sign-in").send({ email: "nobody@example.test", password: "wrong" }).expect(401);
    expect(wrong.body.error.message).toBe(unknown.body.error.message);
  });

  it("is slowed down after too many tries, with the time to wait", async () => {
    const statuses: number[] = [];
    for (let i = 0; i < 7; i++) statuses.push((await request(server.app).post("/api/sign-in").send({ email: "slow@example.test", password: "wrong" })).status);
    expect(statuses.slice(0, 5)).toEqual([401, 401, 401, 401, 401]);
    expect(statuses[6]).toBe(429);
  });

  it("ends for good when it is signed out: the old cookie is dead even if its session row comes back", async () => {
    const agent = await signInAs(server.app, "designer");
    const { db } = server.connection;
    const sessions = await db.selectFrom("sign_in").select(["id", "ended_at"]).where("ended_at", "is", null).execute();
    await agent.post("/api/sign-out").send({}).expect(200);
    const after = await db.selectFrom("sign_in").select("id").where("ended_at", "is not", null).execute();
    expect(after.length).toBeGreaterThanOrEqual(1);
    expect(sessions.some((s) => after.some((a) => a.id === s.id))).toBe(true);
    expect((await agent.get("/api/me").expect(200)).body.person).toBeNull();
    await agent.get("/api/builds").expect(401);
  });

  it("that is ended by its row stops the next request", async () => {
    const agent = await signInAs(server.app, "viewer");
    await agent.get("/api/builds").expect(200);
    await server.connection.db.updateTable("sign_in").set({ ended_at: new Date() }).execute();
    await agent.get("/api/builds").expect(401);
  });
});

describe("every answer", () => {
  it("carries a policy without inline script, and no frames", async () => {
    const { headers } = await request(server.app).get("/api/me").expect(200);
    expect(headers["content-security-policy"]).toMatch(/script-src 'self'(;|$)/);
    expect(headers["content-security-policy"]).toMatch(/frame-ancestors 'none'/);
    expect(headers["x-content-type-options"]).toBe("nosniff");
    expect(headers["cache-control"]).toBe("no-store");
    expect(headers["x-powered-by"]).toBeUndefined();
  });

  it("to a write from another site is a refusal", async () => {
    const agent = await signInAs(server.app, "owner");
    await agent.post("/api/builds").set("Origin", "https://elsewhere.test").send({ name: "x" }).expect(403);
    await agent.post("/api/builds").set("Sec-Fetch-Site", "cross-site").send({ name: "x" }).expect(403);
  });
});

describe("in production", () => {
  it("there are no demo accounts and no demo sign-in", async () => {
    const live = await startTestServer({ publicUrl: "https://handbreadth.test" });
    try {
      const me = await request(live.app).get("/api/me").set("X-Forwarded-Proto", "https").expect(200);
      expect(me.body).toMatchObject({ demo: [], production: true });
      await request(live.app).post("/api/sign-in/demo").set("X-Forwarded-Proto", "https").send({ email: "owner@example.test" }).expect(404);
      expect(me.headers["strict-transport-security"]).toMatch(/max-age/);
    } finally {
      await live.close();
    }
  });

  it("a secret is needed, and every wrong setting is named", () => {
    const database = "postgres://u:p@127.0.0.1:5432/d";
    expect(() => readSettings({ DATABASE_URL: database, PUBLIC_URL: "https://x.test" })).toThrow(/SESSION_SECRET/);
    expect(() => readSettings({ DATABASE_URL: "nonsense", PORT: "x" })).toThrow(/DATABASE_URL[\s\S]*PORT/);
    expect(readSettings({ DATABASE_URL: database, PUBLIC_URL: "https://x.test/", SESSION_SECRET: "s".repeat(32) })).toMatchObject({ production: true, publicUrl: "https://x.test" });
  });
});
