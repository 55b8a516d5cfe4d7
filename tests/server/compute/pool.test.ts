import { setMaxListeners } from "node:events";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { costOf } from "../../../server/compute/job.ts";
import { createPool, type Pool } from "../../../server/compute/pool.ts";

let pool: Pool;
beforeEach(() => {
  pool = createPool(new URL("../../support/odd-worker.js", import.meta.url), 2);
});
afterEach(() => pool.close());

const ask = (text: string, options = {}) => pool.run<string>({ kind: "parse", text }, options);
const LONG = " ".repeat(1024 * 1024 + 1);

describe("the worker pool", () => {
  it("answers each job with its own answer", async () => {
    const texts = Array.from({ length: 20 }, (_, i) => `say ${i % 3}`);
    expect(await Promise.all(texts.map((text) => ask(text)))).toEqual(texts);
    expect(pool.load()).toEqual({ running: 0, waiting: 0 });
  });

  it("gives a job's own failure to that job only", async () => {
    await expect(ask("refuse")).rejects.toMatchObject({ reason: "failed" });
    expect(await ask("fine")).toBe("fine");
  });

  it.each(["exit", "throw"])("outlives workers that end by %s, again and again", async (word) => {
    for (let i = 0; i < 15; i++) await expect(ask(word)).rejects.toMatchObject({ reason: "died" });
    expect(await ask("fine")).toBe("fine");
  });

  it("outlives a worker that takes all the memory it may", async () => {
    const [greedy, other] = await Promise.allSettled([ask("grow"), ask("say 20")]);
    expect(greedy).toMatchObject({ status: "rejected", reason: { reason: "died" } });
    expect(other).toMatchObject({ status: "fulfilled", value: "say 20" });
    expect(await ask("fine")).toBe("fine");
  }, 60_000);

  it("stops a job at its deadline, even one that never yields", async () => {
    await expect(ask("spin", { deadlineMs: 200 })).rejects.toMatchObject({ reason: "deadline" });
    expect(await ask("fine")).toBe("fine");
  });

  it("stops a job that nobody waits for any more, running or waiting", async () => {
    const stop = new AbortController();
    const running = [ask("spin", { signal: stop.signal }), ask("spin", { signal: stop.signal })];
    const waiting = ask("never", { signal: stop.signal });
    expect(pool.load()).toEqual({ running: 2, waiting: 1 });
    stop.abort();
    for (const job of [...running, waiting]) await expect(job).rejects.toMatchObject({ reason: "cancelled" });
    expect(pool.load()).toEqual({ running: 0, waiting: 0 });
    await expect(ask("late", { signal: stop.signal })).rejects.toMatchObject({ reason: "cancelled" });
    expect(await ask("fine")).toBe("fine");
  });

  it("keeps one worker for short jobs: a short one is answered before the long ones have ended", async () => {
    const order: string[] = [];
    const long = [1, 2].map((n) => ask(`say 400 ${LONG}`).then(() => order.push(`long ${n}`)));
    const short = ask("say 0").then(() => order.push("short"));
    expect(pool.load()).toEqual({ running: 2, waiting: 1 });
    await Promise.all([...long, short]);
    expect(order[0]).toBe("short");
  });

  it("refuses work beyond its queue, with a reason that is a 503", async () => {
    const stop = new AbortController();
    setMaxListeners(100, stop.signal);
    const jobs = Array.from({ length: 34 }, () => ask("spin", { signal: stop.signal }).catch((fault: { reason: string }) => fault.reason));
    await expect(ask("one more")).rejects.toMatchObject({ reason: "busy" });
    stop.abort();
    expect(new Set(await Promise.all(jobs))).toEqual(new Set(["cancelled"]));
  });

  it("lets go of everything when it is closed", async () => {
    const jobs = ["spin", "spin", "waits"].map((text) => ask(text).catch((fault: { reason: string }) => fault.reason));
    await pool.close();
    expect(await Promise.all(jobs)).toEqual(["died", "died", "busy"]);
    await expect(ask("late")).rejects.toMatchObject({ reason: "busy" });
  });

  it("reckons memory from what goes in: 20 MB of text is long and heavy, a small layout neither", () => {
    expect(costOf({ kind: "parse", text: "x".repeat(20 * 1024 * 1024) })).toEqual({ long: true, megabytes: 430 });
    expect(costOf({ kind: "parse", text: "{}" })).toMatchObject({ long: false });
  });
});
