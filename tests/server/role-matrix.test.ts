import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Endpoint } from "#contracts/endpoint.ts";
import * as builds from "#contracts/builds.contract.ts";
import * as layouts from "#contracts/layouts.contract.ts";
import * as reports from "#contracts/reports.contract.ts";
import * as signIn from "#contracts/sign-in.contract.ts";
import { LISTS, ROLES, SINGLETONS, type Command, type Role } from "#core/layout/commands.ts";
import type { Layout } from "#core/layout/schema.ts";
import { mount, type Mounted } from "../../server/http/mount.ts";
import { demoIds, signInAs, signInStranger, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

const isEndpoint = (value: unknown): value is Endpoint => typeof value === "object" && value !== null && "policy" in value && "path" in value;
const ALL: readonly Endpoint[] = [signIn, builds, layouts, reports].flatMap((module) => Object.values(module).filter(isEndpoint));

/**
 * Who may do what, written by hand from the product's description of the roles and not read from the code: o owner, d designer, f fabricator, v viewer;
 * "signed-in" needs no build, "anyone" not even that.
 */
const MAY: Readonly<Record<string, string>> = {
  getMe: "anyone", signIn: "anyone", signInDemo: "anyone", getLayoutSchema: "anyone",
  signOut: "signed-in", setPreferences: "signed-in", listBuilds: "signed-in", createBuild: "signed-in",
  getBuild: "odfv", listMembers: "odfv", listLayouts: "odfv", getLayout: "odfv", exportLayout: "odfv", listChanges: "odfv", getReport: "odfv", getSheet: "odfv",
  renameBuild: "o", deleteBuild: "o", createLayout: "o", importLayout: "o", duplicateLayout: "o", archiveLayout: "o",
  postCommand: "odf",
};
const isOfBuild = (endpoint: Endpoint) => !["anyone", "signed-in"].includes(MAY[endpoint.name]!);
const may = (name: string, role: Role) => MAY[name]!.includes(role[0]!);

let server: TestServer;
let ids: { buildId: string; layoutId: string };
let foreign: { buildId: string; layoutId: string };
const agents = {} as Record<Role | "stranger" | "nobody", Agent>;

beforeAll(async () => {
  server = await startTestServer();
  for (const role of ROLES) agents[role] = await signInAs(server.app, role);
  agents.stranger = await signInStranger(server.app, server.connection);
  agents.nobody = request.agent(server.app);
  ids = await demoIds(agents.owner);
  const build = await agents.stranger.post("/api/builds").send({ name: "Somebody else's" }).expect(200);
  const layout = await agents.stranger.post(`/api/builds/${build.body.id}/layouts`).send({ name: "Canary 7741" }).expect(200);
  foreign = { buildId: build.body.id, layoutId: layout.body.id };
});
afterAll(() => server.close());

const go = (agent: Agent, endpoint: Endpoint, body: unknown = {}, where = ids) => {
  const path = endpoint.path.replace(":buildId", where.buildId).replace(":layoutId", where.layoutId);
  const method = endpoint.method.toLowerCase() as "get" | "post" | "patch" | "put" | "delete";
  const call = agent[method](path);
  return endpoint.method === "GET" ? call : call.set("Content-Type", "application/json").send(JSON.stringify(body));
};
const bodyWithoutId = (body: { error: { requestId: string } }) => ({ error: { ...body.error, requestId: "" } });

describe("every endpoint", () => {
  it("that is described is served, and the other way round; each has its line in the table of roles", () => {
    expect(server.endpoints.map((e) => e.name).sort()).toEqual(ALL.map((e) => e.name).sort());
    expect(Object.keys(MAY).sort()).toEqual(ALL.map((e) => e.name).sort());
  });

  it("without a policy cannot be mounted", () => {
    const { policy: _, ...open } = builds.listBuilds;
    expect(() => mount({ endpoints: [], router: null, options: { db: server.connection.db, checkResponses: true } } as unknown as Mounted, open as typeof builds.listBuilds, () => Promise.reject(new Error()))).toThrow(/no policy/);
  });

  it.each(ALL.filter((e) => MAY[e.name] !== "anyone").map((e) => [e.name, e] as const))("%s answers 401 to somebody who is not signed in, and to a cookie that was made up", async (_, endpoint) => {
    for (const agent of [agents.nobody, request.agent(server.app).set("Cookie", "handbreadth=s%3Aforged.0000000000000000000000000000000000000000000")]) {
      const { status, body } = await go(agent as Agent, endpoint);
      expect(status).toBe(401);
      expect(body.error.code).toBe("not-signed-in");
    }
  });

  it.each(ALL.filter(isOfBuild).map((e) => [e.name, e] as const))("%s of another person's build is answered like one that does not exist", async (_, endpoint) => {
    const theirs = await go(agents.owner, endpoint, {}, foreign);
    const none = await go(agents.owner, endpoint, {}, { buildId: crypto.randomUUID(), layoutId: crypto.randomUUID() });
    expect([theirs.status, none.status]).toEqual([404, 404]);
    expect(bodyWithoutId(theirs.body)).toEqual(bodyWithoutId(none.body));
  });

  it.each(ALL.filter((e) => e.path.includes(":layoutId")).map((e) => [e.name, e] as const))("%s does not reach another build's layout through one's own build", async (name, endpoint) => {
    const body = name === "duplicateLayout" ? { name: "mine now" } : name === "archiveLayout" ? { archived: true }
      : name === "postCommand" ? { commandId: crypto.randomUUID(), base: 0, label: "x", command: { kind: "set", which: "air", value: { temperature: 1, speed: 0, surroundings: 1 } } } : {};
    const mixed = await go(agents.owner, endpoint, body, { buildId: ids.buildId, layoutId: foreign.layoutId });
    const none = await go(agents.owner, endpoint, body, { buildId: ids.buildId, layoutId: crypto.randomUUID() });
    expect([mixed.status, none.status]).toEqual([404, 404]);
    expect(bodyWithoutId(mixed.body)).toEqual(bodyWithoutId(none.body));
    expect(mixed.text).not.toContain("Canary 7741");
  });

  const refused = ALL.filter(isOfBuild).flatMap((e) => ROLES.filter((role) => !may(e.name, role)).map((role) => [e.name, role, e] as const));
  it.each(refused)("%s refuses a %s with 403", async (_, role, endpoint) => {
    const { status, body } = await go(agents[role], endpoint);
    expect(status).toBe(403);
    expect(body.error.code).toBe("wrong-role");
  });

  // a body that no schema takes shows that the policy let the request through, without changing anything; deleting takes no body that could be wrong
  const allowed = ALL.filter(isOfBuild).flatMap((e) => ROLES.filter((role) => may(e.name, role)).map((role) => [e.name, role, e] as const)).filter(([name]) => name !== "getSheet");
  it.each(allowed)("%s lets a %s through its policy", async (_, role, endpoint) => {
    const { status } = await go(agents[role], endpoint, endpoint.method === "GET" ? undefined : { nonsense: true });
    expect(status).toBe(endpoint.method === "GET" ? 200 : 400);
  });

  it("that changes something is refused to a member whose role was taken away meanwhile", async () => {
    const { db } = server.owner;
    const fabricator = await db.selectFrom("person").select("id").where("email", "=", "fabricator@example.test").executeTakeFirstOrThrow();
    const command = () => ({ commandId: crypto.randomUUID(), base: 0, label: "x", command: { kind: "status", key: "ecu", status: "fitted" } });
    const path = `/api/builds/${ids.buildId}/layouts/${ids.layoutId}/commands`;
    await db.deleteFrom("membership").where("person_id", "=", fabricator.id).execute();
    await agents.fabricator.post(path).send(command()).expect(404);
    await db.insertInto("membership").values({ build_id: ids.buildId, person_id: fabricator.id, role: "viewer" }).execute();
    await agents.fabricator.post(path).send(command()).expect(403);
    await db.updateTable("membership").set({ role: "fabricator" }).where("person_id", "=", fabricator.id).execute();
  });
});

/** One command of every kind and place, and by hand who may give it. */
function commandsOf(document: Layout): readonly (readonly [may: string, command: Command])[] {
  const first = <L extends (typeof LISTS)[number]>(list: L) => document[list][0]! as Layout[L][number];
  const ecu = document.parts.find((part) => part.key === "ecu")!;
  const run = document.runs[0]!;
  const air: Command = { kind: "set", which: "air", value: { temperature: 55, speed: 0, surroundings: 55 } };
  const status: Command = { kind: "status", key: "ecu", status: "fitted" };
  const renamedBoot = { ...first("spaces"), name: "Boot" };
  const listMay = { parts: "o", runs: "o", shafts: "o", spaces: "od", luggage: "od", glass: "od", eyes: "od" } as const;
  const singletonMay = { document: "o", chassis: "o", body: "od", air: "o", rules: "o", contacts: "o" } as const;
  const values = { document: { name: document.name, notes: "seen" }, chassis: document.chassis, body: document.body, air: document.air, rules: document.rules, contacts: document.contacts } as const;
  const filled = LISTS.filter((list) => document[list].length > 0);
  return [
    ...filled.map((list) => [listMay[list], { kind: "replace", list, item: first(list) } as Command] as const),
    ...filled.map((list) => [listMay[list], { kind: "add", list, item: { ...first(list), key: "another-one" } } as Command] as const),
    ...filled.map((list) => [listMay[list], { kind: "reorder", list, key: first(list).key, position: 0 } as Command] as const),
    ...filled.map((list) => [listMay[list], { kind: "rename", list, key: first(list).key, to: "other-key" } as Command] as const),
    ...SINGLETONS.map((which) => [singletonMay[which], { kind: "set", which, value: values[which] } as Command] as const),
    ["od", { kind: "remove", list: "luggage", key: first("luggage").key }],
    ["o", { kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, 0] }],
    ["od", { kind: "move", items: [{ list: "spaces", key: first("spaces").key }], by: [1, 0, 0] }],
    ["o", { kind: "move", items: [{ list: "spaces", key: first("spaces").key }, { list: "parts", key: "ecu" }], by: [1, 0, 0] }],
    ["o", { kind: "place", key: "ecu", at: [1600, 360, 400] }],
    ["o", { kind: "move-node", run: run.key, node: run.nodes[0]!.key, at: run.nodes[0]!.at }],
    ["of", status],
    ["of", { kind: "restore", changes: [{ list: "parts", key: "ecu", before: ecu, after: { ...ecu, status: "fitted" } }] }],
    ["o", { kind: "restore", changes: [{ list: "parts", key: "ecu", before: ecu, after: { ...ecu, name: "Computer" } }] }],
    ["od", { kind: "restore", changes: [{ list: "spaces", key: renamedBoot.key, before: first("spaces"), after: renamedBoot }] }],
    ["of", { kind: "together", label: "fitted", commands: [status] }],
    ["o", { kind: "together", label: "both", commands: [status, air] }],
    ["o", { kind: "together", label: "both", commands: [{ kind: "replace", list: "spaces", item: renamedBoot }, status] }],
  ];
}

describe("every command", () => {
  const KINDS = ["add", "replace", "remove", "reorder", "rename", "set", "move", "place", "move-node", "status", "restore", "together"];

  it.each(ROLES)("is taken from a %s or refused, as the table says", async (role) => {
    const start = await agents.owner.get(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}`).expect(200);
    const cases = commandsOf(start.body.document);
    expect([...new Set(cases.map(([, command]) => command.kind))].sort()).toEqual([...KINDS].sort());
    let copy = "";
    let seq = -1;
    for (const [letters, command] of cases) {
      // a copy stays in use until a command was taken: each begins from the demo as it is
      if (seq !== 0) copy = (await agents.owner.post(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/duplicate`).send({ name: `copy for ${role}` }).expect(200)).body.id;
      const answer = await agents[role].post(`/api/builds/${ids.buildId}/layouts/${copy}/commands`).send({ commandId: crypto.randomUUID(), base: 0, command, label: "try" });
      const what = command.kind === "set" ? `set ${command.which}` : "list" in command ? `${command.kind} ${command.list}` : command.kind;
      expect([what, answer.status, answer.status === 200 ? "" : answer.body.error.code]).toEqual([what, ...(letters.includes(role[0]!) ? [200, ""] : [403, "wrong-role"])]);
      seq = answer.status === 200 ? answer.body.seq : 0;
    }
  }, 120_000);
});
