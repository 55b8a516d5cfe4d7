import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Endpoint } from "#contracts/endpoint.ts";
import * as builds from "#contracts/builds.contract.ts";
import * as layouts from "#contracts/layouts.contract.ts";
import * as reports from "#contracts/reports.contract.ts";
import * as signIn from "#contracts/sign-in.contract.ts";
import { rolesFor } from "#core/layout/command-access.ts";
import { ROLES, type Command, type Role } from "#core/layout/commands.ts";
import { demoIds, signInAs, signInStranger, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

const isEndpoint = (value: unknown): value is Endpoint => typeof value === "object" && value !== null && "policy" in value && "path" in value;
const ALL: readonly Endpoint[] = [signIn, builds, layouts, reports].flatMap((module) => Object.values(module).filter(isEndpoint));

let server: TestServer;
let ids: { buildId: string; layoutId: string };
const agents = {} as Record<Role | "stranger" | "nobody", Agent>;

beforeAll(async () => {
  server = await startTestServer();
  for (const role of ROLES) agents[role] = await signInAs(server.app, role);
  agents.stranger = await signInStranger(server.app, server.connection);
  agents.nobody = request.agent(server.app);
  ids = await demoIds(agents.owner);
});
afterAll(() => server.close());

const go = (agent: Agent, endpoint: Endpoint, body: unknown = {}) => {
  const path = endpoint.path.replace(":buildId", ids.buildId).replace(":layoutId", ids.layoutId);
  const method = endpoint.method.toLowerCase() as "get" | "post" | "patch" | "put" | "delete";
  const call = agent[method](path);
  return endpoint.method === "GET" ? call : call.set("Content-Type", "application/json").send(JSON.stringify(body));
};

describe("every endpoint", () => {
  it("that is described is served, and the other way round", () => {
    expect(server.endpoints.map((e) => e.name).sort()).toEqual(ALL.map((e) => e.name).sort());
  });

  it.each(ALL.filter((e) => e.policy.who !== "anyone").map((e) => [e.name, e] as const))("%s answers 401 to somebody who is not signed in", async (_, endpoint) => {
    const { status, body } = await go(agents.nobody, endpoint);
    expect(status).toBe(401);
    expect(body.error.code).toBe("not-signed-in");
  });

  it.each(ALL.filter((e) => e.policy.who === "member").map((e) => [e.name, e] as const))("%s says 404 to somebody who is not a member", async (_, endpoint) => {
    const { status, body } = await go(agents.stranger, endpoint);
    expect(status).toBe(404);
    expect(body.error.code).toBe("not-found");
  });

  const refused = ALL.flatMap((e) => (e.policy.who === "member" ? ROLES.filter((role) => !(e.policy as { roles: readonly Role[] }).roles.includes(role)).map((role) => [e.name, role, e] as const) : []));
  it.each(refused)("%s refuses a %s with 403", async (_, role, endpoint) => {
    const { status, body } = await go(agents[role], endpoint);
    expect(status).toBe(403);
    expect(body.error.code).toBe("wrong-role");
  });

  // a body that no schema takes shows that the policy let the request through, without changing anything
  const allowed = ALL.flatMap((e) => (e.policy.who === "member" ? e.policy.roles.map((role) => [e.name, role, e] as const) : [])).filter(([name]) => name !== "deleteBuild" && name !== "getSheet");
  it.each(allowed)("%s lets a %s through its policy", async (_, role, endpoint) => {
    const { status } = await go(agents[role], endpoint, endpoint.method === "GET" ? undefined : { nonsense: true });
    expect(endpoint.method === "GET" ? [200] : [400]).toContain(status);
  });
});

describe("every command", () => {
  const move: Command = { kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, 0] };
  const space = (document: { spaces: unknown[] }) => document.spaces[0];
  const commandsOf = (document: Record<string, never> & { spaces: unknown[]; parts: { key: string }[]; runs: unknown[]; chassis: unknown; body: unknown; air: unknown; rules: unknown; contacts: unknown }): Command[] => [
    move,
    { kind: "place", key: "ecu", at: [1600, 360, 400] },
    { kind: "move-node", run: "fuel-line", node: "b", at: [1900, -120, 740] },
    { kind: "status", key: "ecu", status: "fitted" },
    { kind: "replace", list: "spaces", item: { ...(space(document) as object), name: "Boot" } } as Command,
    { kind: "replace", list: "runs", item: { ...(document.runs[0] as object), name: "Downpipe 2" } } as Command,
    { kind: "set", which: "body", value: document.body } as Command,
    { kind: "set", which: "air", value: { temperature: 55, speed: 0, surroundings: 55 } },
    { kind: "set", which: "rules", value: document.rules } as Command,
    { kind: "set", which: "chassis", value: document.chassis } as Command,
    { kind: "add", list: "eyes", item: { key: "another-eye", name: "Another", at: [0, 0, 1500] } },
    { kind: "remove", list: "luggage", key: "bag" },
    { kind: "together", label: "both", commands: [{ kind: "status", key: "ecu", status: "on hand" }, { kind: "set", which: "air", value: { temperature: 50, speed: 0, surroundings: 50 } }] },
  ];

  it("is taken from the roles that core allows, and refused to all others", async () => {
    const owner = agents.owner;
    const seen: Record<string, string> = {};
    const start = await owner.get(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}`).expect(200);
    for (const command of commandsOf(start.body.document)) {
      for (const role of ROLES) {
        // each on a fresh copy: refusals and acceptances do not mix
        const copy = await owner.post(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/duplicate`).send({ name: `copy for ${role}` }).expect(200);
        const answer = await agents[role].post(`/api/builds/${ids.buildId}/layouts/${copy.body.id}/commands`).send({ commandId: crypto.randomUUID(), base: 0, command, label: "try" });
        const may = role !== "viewer" && rolesFor(command).includes(role);
        expect([command.kind, role, answer.status]).toEqual([command.kind, role, may ? 200 : 403]);
        seen[`${command.kind}`] = "tried";
      }
    }
    expect(Object.keys(seen).length).toBeGreaterThanOrEqual(8);
  }, 120_000);
});
