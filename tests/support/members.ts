import request from "supertest";
import type { Express } from "express";
import type { Role } from "#core/layout/commands.ts";
import { hashPassword } from "../../server/features/sign-in/passwords.ts";
import type { Connection } from "../../server/database/connection.ts";

export type Agent = ReturnType<typeof request.agent>;

/** Signed in as the demo member of a role. */
export async function signInAs(app: Express, role: Role): Promise<Agent> {
  const agent = request.agent(app);
  await agent.post("/api/sign-in/demo").send({ email: `${role}@example.test` }).expect(200);
  return agent;
}

/** Signed in as somebody who is in no build. */
export async function signInStranger(app: Express, { db }: Connection): Promise<Agent> {
  const email = `stranger-${crypto.randomUUID()}@example.test`;
  await db.insertInto("person").values({ email, name: "Nobody's Member", password_hash: await hashPassword("a-long-password-of-mine"), demo_role: null }).execute();
  const agent = request.agent(app);
  await agent.post("/api/sign-in").send({ email, password: "a-long-password-of-mine" }).expect(200);
  return agent;
}

/** The demo build and its layout, as its owner sees them. */
export async function demoIds(owner: Agent): Promise<{ buildId: string; layoutId: string; seq: number }> {
  const builds = await owner.get("/api/builds").expect(200);
  const buildId = builds.body.builds[0].id as string;
  const layouts = await owner.get(`/api/builds/${buildId}/layouts`).expect(200);
  return { buildId, layoutId: layouts.body.layouts[0].id as string, seq: layouts.body.layouts[0].seq as number };
}
