import { afterAll, beforeAll, describe, expect, it } from "vitest";
import fc from "fast-check";
import { applyDiff, sameValue } from "#core/layout/diff.ts";
import type { Diff } from "#core/layout/commands.ts";
import { layoutSchema, type Layout } from "#core/layout/schema.ts";
import { demoIds, signInAs, type Agent } from "../support/members.ts";
import { startTestServer, type TestServer } from "../support/database.ts";

const SEED = 20261201;
const HISTORIES = 40;

let server: TestServer;
let agents: Agent[];
let ids: { buildId: string; layoutId: string };
beforeAll(async () => {
  server = await startTestServer();
  agents = [await signInAs(server.app, "owner"), await signInAs(server.app, "owner"), await signInAs(server.app, "fabricator")];
  ids = await demoIds(agents[0]!);
});
afterAll(() => server.close());

/** One thing that a device on a bad line may do: send an edit (new, again, or again with other content), from a base that may be long gone. */
const step = fc.record({
  client: fc.nat({ max: 2 }),
  what: fc.constantFrom("new", "again", "again", "other content"),
  which: fc.nat({ max: 20 }),
  behind: fc.nat({ max: 4 }),
  part: fc.constantFrom("ecu", "battery", "tank"),
  at: fc.integer({ min: 1, max: 50 }),
  together: fc.boolean(),
});

interface Sent {
  readonly body: { commandId: string; base: number; label: string; command: unknown };
  readonly client: number;
  taken: { body: Sent["body"]; seq: number; diff: unknown } | null;
}

describe("edits sent late, twice, out of order and at once", () => {
  it(`are each taken at most once, and the document is what its history says (${HISTORIES} histories, seed ${SEED})`, async () => {
    let replays = 0;
    let conflicts = 0;
    let reused = 0;
    const property = fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 20 }), async (steps) => {
      const { body: made } = await agents[0]!.post(`/api/builds/${ids.buildId}/layouts/${ids.layoutId}/duplicate`).send({ name: "history" }).expect(200);
      const path = `/api/builds/${ids.buildId}/layouts/${made.id}`;
      const start = layoutSchema.parse((await agents[0]!.get(path).expect(200)).body.document);
      const sent: Sent[] = [];
      let latest = 0;
      const give = async (one: Sent, body: Sent["body"]) => {
        const answer = await agents[one.client]!.post(`${path}/commands`).send(body);
        if (one.taken && JSON.stringify(body) === JSON.stringify(one.taken.body)) {
          // the first answer, whatever happened since
          replays++;
          expect(answer.status).toBe(200);
          expect(answer.body).toEqual({ seq: one.taken.seq, diff: one.taken.diff, replay: true });
        } else if (one.taken) {
          reused++;
          expect([answer.status, answer.body.error?.code]).toEqual([422, "key-reused"]);
        } else if (answer.status === 200) {
          expect(answer.body.replay).toBe(false);
          one.taken = { body, seq: answer.body.seq, diff: answer.body.diff };
          latest = Math.max(latest, answer.body.seq);
        } else {
          conflicts++;
          expect([answer.status, answer.body.error.code]).toEqual([409, "conflict"]);
        }
      };
      const waiting: Promise<void>[] = [];
      for (const s of steps) {
        const command = s.client === 2 ? { kind: "status", key: s.part, status: s.at % 2 ? "fitted" : "on hand" } : { kind: "move", items: [{ list: "parts", key: s.part }], by: [s.at, 0, 0] };
        const old = sent.filter((one) => one.client === s.client)[s.which % Math.max(1, sent.filter((one) => one.client === s.client).length)];
        // a repeat is sent only when the first try's fate is known: so its answer can be foretold
        if (s.what !== "new") await Promise.all(waiting.splice(0));
        let going: Promise<void>;
        if (s.what === "new" || !old) {
          const one: Sent = { client: s.client, taken: null, body: { commandId: crypto.randomUUID(), base: Math.max(0, latest - s.behind), label: "try", command } };
          sent.push(one);
          going = give(one, one.body);
        } else if (s.what === "again") going = give(old, old.body);
        else going = give(old, { ...old.body, command: { kind: "status", key: "header", status: "needed" } });
        // some wait for their answer, some are on the wire together
        if (s.together && s.what === "new") waiting.push(going);
        else {
          await going;
          await Promise.all(waiting.splice(0));
        }
      }
      await Promise.all(waiting);
      const { body: end } = await agents[0]!.get(path).expect(200);
      const { body: history } = await agents[0]!.get(`${path}/changes?after=0&limit=200`).expect(200);
      expect(history.changes.map((c: { seq: number }) => c.seq)).toEqual(Array.from({ length: end.seq }, (_, i) => i + 1));
      const folded = history.changes.reduce((layout: Layout, c: { diff: Diff }) => applyDiff(layout, c.diff), start);
      expect(sameValue(end.document, folded)).toBe(true);
      // what was answered with success is in the history, once
      const taken = sent.flatMap((one) => (one.taken ? [one.body.commandId] : []));
      const known = history.changes.map((c: { commandId: string }) => c.commandId);
      expect([...known].sort()).toEqual([...taken].sort());
    });
    await fc.assert(property, { seed: SEED, numRuns: HISTORIES, endOnFailure: true });
    // the histories did contain what they are about
    expect(replays).toBeGreaterThan(20);
    expect(conflicts).toBeGreaterThan(10);
    expect(reused).toBeGreaterThan(10);
  }, 180_000);
});
