// A worker that misbehaves on request: what the pool is tested with.
import { parentPort } from "node:worker_threads";

parentPort?.on("message", (/** @type {{ text: string }} */ job) => {
  const [word, number] = job.text.split(" ");
  if (word === "spin") for (;;);
  if (word === "exit") process.exit(3);
  if (word === "throw") setTimeout(() => { throw new Error("thrown in a worker"); }, 0);
  else if (word === "grow") { const kept = []; for (;;) kept.push(new Array(100_000).fill(Math.random())); }
  else if (word === "refuse") parentPort?.postMessage({ ok: false, message: "cannot" });
  else setTimeout(() => parentPort?.postMessage({ ok: true, value: job.text }), Number(number ?? 0));
});
