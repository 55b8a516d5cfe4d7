import { useEffect, useRef, useState } from "react";
import type { PlanAnswer, PlanQuestion } from "./plan-worker.ts";

/** Has sheets planned beside the page's own thread; the last answer stays until the next one comes. */
export function usePlannedSheets(question: PlanQuestion | null): { answer: PlanAnswer | null; busy: boolean } {
  const [answer, setAnswer] = useState<PlanAnswer | null>(null);
  const [done, setDone] = useState<PlanQuestion | null>(null);
  const worker = useRef<Worker | null>(null);
  useEffect(() => () => worker.current?.terminate(), []);
  useEffect(() => {
    if (!question) return;
    // a plan that is no longer wanted is not waited for
    worker.current?.terminate();
    const made = new Worker(new URL("./plan-worker.ts", import.meta.url), { type: "module" });
    worker.current = made;
    const take = (next: PlanAnswer) => {
      setAnswer(next);
      setDone(question);
    };
    made.onmessage = ({ data }: MessageEvent<PlanAnswer>) => take(data);
    made.onerror = () => take({ ok: false, message: "The sheet could not be planned in this browser." });
    made.postMessage(question);
  }, [question]);
  return { answer, busy: question !== null && done !== question };
}
