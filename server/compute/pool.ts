import { Worker } from "node:worker_threads";
import type { Job } from "./job.ts";

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
/** Jobs estimated to need more than this are refused before they start, bytes of input text. */
const MOST_INPUT = 24 * 1024 * 1024;

/**
 * Workers that run core's functions off the event loop: a queue with a limit, a deadline for each job, cancel by ending the worker and starting another. A worker
 * that dies takes only its own job with it.
 */
export function createPool(script: URL, size: number): Pool {
  const idle: Worker[] = [];
  const all = new Set<Worker>();
  const queue: Waiting[] = [];
  let running = 0;
  let closed = false;

  const start = (): Worker => {
    const worker = new Worker(script, { resourceLimits: { maxOldGenerationSizeMb: 512 } });
    all.add(worker);
    worker.once("exit", () => {
      all.delete(worker);
      const at = idle.indexOf(worker);
      if (at >= 0) idle.splice(at, 1);
    });
    worker.unref();
    return worker;
  };

  const pump = () => {
    while (!closed && queue.length > 0 && running < size) {
      const next = queue.shift()!;
      if (next.signal?.aborted) {
        next.reject(new JobFault("cancelled", "cancelled"));
        continue;
      }
      give(next, idle.pop() ?? start());
    }
  };

  const give = (next: Waiting, worker: Worker) => {
    running++;
    let done = false;
    const finish = (settle: () => void, reuse: boolean) => {
      if (done) return;
      done = true;
      running--;
      clearTimeout(timer);
      worker.removeAllListeners("message");
      worker.removeAllListeners("error");
      worker.off("exit", died);
      next.signal?.removeEventListener("abort", abort);
      if (reuse && !closed) idle.push(worker);
      else void worker.terminate();
      settle();
      pump();
    };
    const died = () => finish(() => next.reject(new JobFault("died", "the worker ended")), false);
    const abort = () => finish(() => next.reject(new JobFault("cancelled", "cancelled")), false);
    const timer = setTimeout(() => finish(() => next.reject(new JobFault("deadline", "This took too long and was stopped.")), false), next.deadlineMs);
    next.signal?.addEventListener("abort", abort, { once: true });
    worker.once("message", (answer: { ok: boolean; value?: unknown; message?: string }) =>
      finish(() => (answer.ok ? next.resolve(answer.value) : next.reject(new JobFault("failed", answer.message ?? "failed"))), true));
    worker.once("error", (error: Error) => finish(() => next.reject(new JobFault("died", error.message)), false));
    worker.once("exit", died);
    worker.postMessage(next.job);
  };

  return {
    run<T>(job: Job, { deadlineMs = 30_000, signal }: { deadlineMs?: number; signal?: AbortSignal } = {}) {
      if (closed) return Promise.reject(new JobFault("busy", "The server is stopping."));
      if (queue.length >= MOST_WAITING) return Promise.reject(new JobFault("busy", "Many computations are waiting. Try again in a moment."));
      if (job.kind === "parse" && job.text.length > MOST_INPUT) return Promise.reject(new JobFault("busy", "That is more than can be taken at once."));
      return new Promise<T>((resolve, reject) => {
        queue.push({ job, deadlineMs, resolve: resolve as (value: unknown) => void, reject, signal });
        pump();
      });
    },
    load: () => ({ running, waiting: queue.length }),
    async close() {
      closed = true;
      for (const one of queue.splice(0)) one.reject(new JobFault("busy", "The server is stopping."));
      await Promise.all([...all].map((worker) => worker.terminate()));
    },
  };
}
