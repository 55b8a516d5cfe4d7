import { sql } from "kysely";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { parseLayout } from "#core/layout/parse-layout.ts";
import { sameValue } from "#core/layout/diff.ts";
import { demoIds, signInAs, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

let server: TestServer;
let owner: Agent;
let fabricator: Agent;
let ids: { buildId: string; layoutId: string };
beforeAll(async () => {
  server = await startTestServer();
  owner = await signInAs(server.app, "owner");
  fabricator = await signInAs(server.app, "fabricator");
  ids = await demoIds(owner);
});
afterAll(() => server.close());

const copy = async () => {
  const made = await owner.post(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/duplicate`).send({ name: "copy" }).expect(200);
  return `/api/builds/${ids.buildId}/layouts/${made.body.id}`;
};
const move = (key: string, x: number, base = 0, commandId = crypto.randomUUID()) => ({ commandId, base, label: `Move ${key}`, command: { kind: "move", items: [{ list: "parts", key }], by: [x, 0, 0] } });
const documentOf = async (path: string) => (await owner.get(path).expect(200)).body.document;
const xOf = (document: { parts: { key: string; at: number[] }[] }, key: string) => document.parts.find((part) => part.key === key)!.at[0];

describe("a command", () => {
  it("is stored with its diff and label, and a repeat gets the first answer", async () => {
    const path = await copy();
    const body = move("ecu", 5);
    const first = await owner.post(`${path}/commands`).send(body).expect(200);
    const again = await owner.post(`${path}/commands`).send(body).expect(200);
    expect(first.body).toMatchObject({ seq: 1, replay: false });
    expect(again.body).toMatchObject({ seq: 1, replay: true });
    expect(again.body.diff).toEqual(first.body.diff);
    const { body: history } = await owner.get(`${path}/changes`).expect(200);
    expect(history.changes).toHaveLength(1);
    expect(history.changes[0]).toMatchObject({ seq: 1, label: "Move ecu", by: { name: "Maren Built" } });
  });

  it("under an id that stood for something else is refused; an id of somebody else is as unknown", async () => {
    const path = await copy();
    const body = move("ecu", 5);
    await owner.post(`${path}/commands`).send(body).expect(200);
    await owner.post(`${path}/commands`).send({ ...body, command: { ...body.command, by: [6, 0, 0] } }).expect(422);
    const elsewhere = await copy();
    await owner.post(`${elsewhere}/commands`).send(body).expect(422);
    const theirs = await fabricator.post(`${path}/commands`).send({ ...body, base: 1, command: { kind: "status", key: "ecu", status: "fitted" } }).expect(200);
    expect(theirs.body).toMatchObject({ seq: 2, replay: false });
  });

  it("conflicts only where what it touches changed after its base, and then shows the values stored", async () => {
    const path = await copy();
    await owner.post(`${path}/commands`).send(move("ecu", 5)).expect(200);
    await owner.post(`${path}/commands`).send(move("battery", 5)).expect(200);
    const clash = await owner.post(`${path}/commands`).send(move("ecu", 7)).expect(409);
    expect(clash.body.error.current.seq).toBe(2);
    // the computer, and the loom that is bound to its plug
    expect(clash.body.error.current.items.map((item: { key: string }) => item.key).sort()).toEqual(["ecu", "loom-main"]);
    await owner.post(`${path}/commands`).send(move("ecu", 7, 2)).expect(200);
    expect(xOf(await documentOf(path), "ecu")).toBe(1598 + 12);
  });

  it("that two people give at once is taken once each, in some order, with nothing lost", async () => {
    const path = await copy();
    const answers = await Promise.all(Array.from({ length: 12 }, (_, i) => owner.post(`${path}/commands`).send(move(["ecu", "battery", "tank", "header"][i % 4]!, 1, 0))));
    const taken = answers.filter((a) => a.status === 200);
    expect(answers.every((a) => a.status === 200 || a.status === 409)).toBe(true);
    expect(taken).toHaveLength(4);
    expect(new Set(taken.map((a) => a.body.seq)).size).toBe(4);
    const document = await documentOf(path);
    for (const [key, x] of [["ecu", 1598], ["battery", 300], ["tank", 1775], ["header", 1950]] as const) expect(xOf(document, key)).toBe(x + 1);
  });

  it("that is undone by restore leaves the document as it was, and only where nothing changed since", async () => {
    const path = await copy();
    const was = await documentOf(path);
    const { body: made } = await owner.post(`${path}/commands`).send(move("engine", 10)).expect(200);
    const inverse = made.diff.map((c: { list: string; key: string; before: unknown; after: unknown; positionBefore?: number; positionAfter?: number }) => ({ list: c.list, key: c.key, before: c.after, after: c.before, positionBefore: c.positionAfter, positionAfter: c.positionBefore }));
    await owner.post(`${path}/commands`).send({ commandId: crypto.randomUUID(), base: 1, label: "Undo", command: { kind: "restore", changes: inverse } }).expect(200);
    expect(sameValue(await documentOf(path), was)).toBe(true);
    await owner.post(`${path}/commands`).send({ commandId: crypto.randomUUID(), base: 2, label: "Undo again", command: { kind: "restore", changes: inverse } }).expect(422);
  });

  it("cannot alter the history, not even through the database role of the application", async () => {
    const { db } = server.connection;
    await expect(sql`update layout_change set label = 'x'`.execute(db)).rejects.toThrow(/permission denied/);
    await expect(sql`delete from layout_change`.execute(db)).rejects.toThrow(/permission denied/);
  });
});

describe("a layout", () => {
  it("exported and imported again is the same document", async () => {
    const file = await owner.get(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/file`).expect(200);
    expect(file.headers["content-disposition"]).toMatch(/attachment; filename="mufflers-flat-third-try\.layout\.json"/);
    const parsed = parseLayout(JSON.parse(file.text));
    expect(parsed.ok).toBe(true);
    const made = await owner.post(`/api/builds/${ids.buildId}/layouts/import`).set("Content-Type", "application/json").send(file.text).expect(200);
    expect(sameValue(await documentOf(`/api/builds/${ids.buildId}/layouts/${made.body.id}`), JSON.parse(file.text))).toBe(true);
  });

  it("in the archive takes no commands until it is out again", async () => {
    const path = await copy();
    await owner.post(`${path}/archive`).send({ archived: true }).expect(200);
    await owner.post(`${path}/commands`).send(move("ecu", 1)).expect(422);
    await owner.post(`${path}/archive`).send({ archived: false }).expect(200);
    await owner.post(`${path}/commands`).send(move("ecu", 1)).expect(200);
  });

  it("has its report computed once for each content", async () => {
    const first = await owner.get(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/report`).expect(200);
    expect(Object.keys(first.body)).toEqual(expect.arrayContaining(["format", "gaps", "trusted", "counts", "body", "mass", "spaces"]));
    const again = await owner.get(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/report?section=gaps`).expect(200);
    expect(again.body.gaps).toEqual(first.body.gaps);
    const kept = await server.connection.db.selectFrom("report").select("section").where("content_hash", "=", first.body.contentHash).execute();
    expect(kept.map((row) => row.section).sort()).toEqual(["body", "gaps", "mass", "spaces"]);
  }, 60_000);

  it("whose build is deleted is gone with its history", async () => {
    const build = await owner.post("/api/builds").send({ name: "Short-lived" }).expect(200);
    const made = await owner.post(`/api/builds/${build.body.id}/layouts`).send({ name: "one" }).expect(200);
    await owner.post(`/api/builds/${build.body.id}/layouts/${made.body.id}/commands`).send({ commandId: crypto.randomUUID(), base: 0, label: "air", command: { kind: "set", which: "air", value: { temperature: 40, speed: 0, surroundings: 40 } } }).expect(200);
    await owner.delete(`/api/builds/${build.body.id}`).set("Content-Type", "application/json").send("{}").expect(200);
    await owner.get(`/api/builds/${build.body.id}`).expect(404);
    const left = await server.connection.db.selectFrom("layout_change").select("seq").where("layout_id", "=", made.body.id).execute();
    expect(left).toEqual([]);
  });
});
