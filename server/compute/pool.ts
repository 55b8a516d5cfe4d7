import { Worker } from "node:worker_threads";
import { costOf, type Job } from "./job.ts";

export type JobFaultReason = "busy" | "deadline" | "died" | "cancelled" | "failed";

/** A job that did not give an answer, and why. */
export class JobFault extends Error {
  override readonly name = "JobFault";
  readonly reason: JobFaultReason;
  constructor(reason: JobFaultReason, message: string) {
    super(message);
    this.reason = reason;
  }
}

interface Waiting {
  readonly job: Job;
  readonly long: boolean;
  readonly megabytes: number;
  readonly deadlineMs: number;
  readonly resolve: (value: unknown) => void;
  readonly reject: (fault: JobFault) => void;
  readonly signal: AbortSignal | undefined;
}

export interface Pool {
  run<T>(job: Job, options?: { deadlineMs?: number; signal?: AbortSignal }): Promise<T>;
  /** Jobs running and waiting. */
  load(): { running: number; waiting: number };
  close(): Promise<void>;
}

const MOST_WAITING = 32;
/** What all running jobs together are estimated to need at most. A worker's heap limit does not cover typed arrays: so the input decides. */
const BUDGET_MEGABYTES = 1024;

type Answer = { readonly ok: true; readonly value: unknown } | { readonly ok: false; readonly message: string };

/**
 * Workers that run core's functions off the event loop: a queue with a limit, a deadline for each job, a budget of memory, cancel by ending the worker and
 * starting another. One worker is kept for short jobs. A worker that dies takes only its own job with it; no job is tried twice.
 */
export function createPool(script: URL, size: number): Pool {
  const idle: Worker[] = [];
  const all = new Set<Worker>();
  const queue: Waiting[] = [];
  const running = new Set<Waiting>();
  let closed = false;

  const start = (): Worker => {
    // no settings and no secrets reach a worker
    const worker = new Worker(script, { resourceLimits: { maxOldGenerationSizeMb: 512 }, env: {} });
    all.add(worker);
    // an idle one that dies is only forgotten; what a busy one's job is told stands in `give`
    worker.on("error", () => undefined);
    worker.on("exit", () => {
      all.delete(worker);
      const at = idle.indexOf(worker);
      if (at >= 0) idle.splice(at, 1);
    });
    worker.unref();
    return worker;
  };

  /** The first in the queue that may start now. */
  const takeNext = (): Waiting | undefined => {
    const used = [...running].reduce((sum, one) => sum + one.megabytes, 0);
    const longOnes = [...running].filter((one) => one.long).length;
    const at = queue.findIndex((one) => (!one.long || longOnes < size - 1) && (running.size === 0 || used + one.megabytes <= BUDGET_MEGABYTES));
    return at < 0 ? undefined : queue.splice(at, 1)[0];
  };

  const pump = () => {
    while (!closed && running.size < size) {
      const next = takeNext();
      if (!next) return;
      give(next, idle.pop() ?? start());
    }
  };

  const give = (next: Waiting, worker: Worker) => {
    running.add(next);
    let done = false;
    const finish = (settle: () => void, reuse: boolean) => {
      if (done) return;
      done = true;
      running.delete(next);
      clearTimeout(timer);
      worker.off("message", onMessage).off("error", onError).off("exit", onExit);
      next.signal?.removeEventListener("abort", onAbort);
      if (reuse && !closed) idle.push(worker);
      else void worker.terminate();
      settle();
      pump();
    };
    const fail = (reason: JobFaultReason, message: string) => finish(() => next.reject(new JobFault(reason, message)), false);
    const onMessage = (answer: Answer) => finish(() => (answer.ok ? next.resolve(answer.value) : next.reject(new JobFault("failed", answer.message))), true);
    const onError = (error: Error) => fail("died", error.message);
    const onExit = () => fail("died", "the worker ended");
    const onAbort = () => fail("cancelled", "cancelled");
    const timer = setTimeout(() => fail("deadline", "This took too long and was stopped."), next.deadlineMs);
    next.signal?.addEventListener("abort", onAbort, { once: true });
    worker.on("message", onMessage).on("error", onError).on("exit", onExit);
    worker.postMessage(next.job);
  };

  return {
    run<T>(job: Job, { deadlineMs = 30_000, signal }: { deadlineMs?: number; signal?: AbortSignal } = {}) {
      if (closed) return Promise.reject(new JobFault("busy", "The server is stopping."));
      if (signal?.aborted) return Promise.reject(new JobFault("cancelled", "cancelled"));
      if (queue.length >= MOST_WAITING) return Promise.reject(new JobFault("busy", "Many computations are waiting. Try again in a moment."));
      return new Promise<T>((resolve, reject) => {
        const waiting: Waiting = { job, ...costOf(job), deadlineMs, resolve: resolve as (value: unknown) => void, reject, signal };
        queue.push(waiting);
        signal?.addEventListener("abort", () => {
          const at = queue.indexOf(waiting);
          if (at < 0) return;
          queue.splice(at, 1);
          reject(new JobFault("cancelled", "cancelled"));
        }, { once: true });
        pump();
      });
    },
    load: () => ({ running: running.size, waiting: queue.length }),
    async close() {
      closed = true;
      for (const one of queue.splice(0)) one.reject(new JobFault("busy", "The server is stopping."));
      await Promise.all([...all].map((worker) => worker.terminate()));
    },
  };
}
