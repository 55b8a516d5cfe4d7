import { fork, type ChildProcess } from "node:child_process";
import { inject } from "vitest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { addressOf, asOwner, TEMPLATE } from "../support/template.ts";

const database = `t_crash_${process.pid}`;
const CYCLES = 4;
const EDITORS = 4;

beforeAll(() => asOwner(inject("clusterUrl"), `create database ${database} template ${TEMPLATE}`));
let running: ChildProcess | null = null;
afterAll(async () => {
  running?.kill("SIGKILL");
  await asOwner(inject("clusterUrl"), `drop database ${database} with (force)`);
});

/** The server as it is started for real, in a process of its own. */
async function startProcess(port: number): Promise<number> {
  const child = fork(new URL("../../dist/server/main.js", import.meta.url).pathname, { env: {
    PATH: process.env["PATH"], DATABASE_URL: addressOf(inject("clusterUrl"), database, "application"), TABLES_READY: "1", PORT: String(port), SESSION_SECRET: "kept-over-restarts-in-this-test-only", LOG_LEVEL: "silent",
  }, stdio: ["ignore", "ignore", "inherit", "ipc"] });
  running = child;
  return new Promise((resolve, reject) => {
    child.once("message", (message: { listening: number }) => resolve(message.listening));
    child.once("exit", (code) => reject(new Error(`the server ended with ${code}`)));
  });
}

describe("a server that is killed while people edit", () => {
  it(`loses nothing that it had answered, and takes nothing twice (${CYCLES} kills, ${EDITORS} editors)`, async () => {
    let port = await startProcess(0);
    const url = () => `http://127.0.0.1:${port}`;
    const signedIn = await fetch(`${url()}/api/sign-in/demo`, { method: "POST", headers: { "Content-Type": "application/json" }, body: '{"email":"owner@example.test"}' });
    const cookie = signedIn.headers.get("set-cookie")!.split(";")[0]!;
    const get = async (path: string) => (await fetch(url() + path, { headers: { Cookie: cookie } })).json() as Promise<Record<string, unknown>>;
    const buildId = ((await get("/api/builds"))["builds"] as { id: string }[])[0]!.id;
    const layoutId = ((await get(`/api/builds/${buildId}/layouts`))["layouts"] as { id: string }[])[0]!.id;
    const path = `/api/builds/${buildId}/layouts/${layoutId}`;
    const parts = ((await get(path))["document"] as { parts: { key: string; locked?: boolean }[] }).parts.filter((part) => !part.locked).slice(0, EDITORS);

    /** What each editor was told: a ledger on the client's side. */
    const acknowledged: { commandId: string; seq: number }[] = [];
    const sent = new Set<string>();
    let unanswered = 0;
    let stop = false;
    const edit = async (key: string) => {
      let base = 0;
      for (let n = 0; !stop; n++) {
        const body = JSON.stringify({ commandId: crypto.randomUUID(), base, label: "status", command: { kind: "status", key, status: n % 2 ? "fitted" : "on hand" } });
        sent.add(JSON.parse(body).commandId);
        // the same command until it is answered, as a device on a bad line does
        for (;;) {
          try {
            const answer = await fetch(`${url()}${path}/commands`, { method: "POST", headers: { "Content-Type": "application/json", Cookie: cookie }, body, signal: AbortSignal.timeout(5_000) });
            const json = (await answer.json()) as { seq: number };
            if (answer.status !== 200) throw new Error(`${answer.status}: ${JSON.stringify(json)}`);
            acknowledged.push({ commandId: JSON.parse(body).commandId, seq: json.seq });
            base = json.seq;
            break;
          } catch (error) {
            if (error instanceof Error && /^4/.test(error.message)) throw error;
            unanswered++;
            await new Promise((resolve) => setTimeout(resolve, 50));
          }
        }
      }
    };
    const editors = parts.map((part) => edit(part.key));
    for (let cycle = 0; cycle < CYCLES; cycle++) {
      // well under way, then at a moment that differs each time
      for (const enough = acknowledged.length + 2 * EDITORS; acknowledged.length < enough; ) await new Promise((resolve) => setTimeout(resolve, 10));
      await new Promise((resolve) => setTimeout(resolve, 7 * cycle));
      const child = running!;
      child.removeAllListeners("exit");
      const gone = new Promise((resolve) => child.once("exit", resolve));
      child.kill("SIGKILL");
      await gone;
      port = await startProcess(port);
    }
    stop = true;
    await Promise.all(editors);

    const stored: { commandId: string; seq: number }[] = [];
    for (let after = 0; ; after = stored.at(-1)!.seq) {
      const page = (await get(`${path}/changes?after=${after}&limit=200`)) as unknown as { changes: { commandId: string; seq: number }[]; more: boolean };
      stored.push(...page.changes);
      if (!page.more) break;
    }
    expect(acknowledged.length).toBeGreaterThan(CYCLES * EDITORS);
    expect(unanswered).toBeGreaterThan(0);
    const bySeq = new Map(stored.map((change) => [change.seq, change.commandId]));
    expect(acknowledged.filter((one) => bySeq.get(one.seq) !== one.commandId)).toEqual([]);
    expect(new Set(stored.map((change) => change.commandId)).size).toBe(stored.length);
    expect(stored.filter((change) => !sent.has(change.commandId))).toEqual([]);
    expect(stored.map((change) => change.seq)).toEqual(stored.map((_, i) => i + 1));
  }, 120_000);
});
