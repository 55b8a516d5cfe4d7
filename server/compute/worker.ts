import { parentPort } from "node:worker_threads";
import { parseLayout, type ParsedLayout } from "#core/layout/parse-layout.ts";
import { REPORTS } from "#core/reports.ts";
import { wellFormed } from "../http/well-formed.ts";
import type { Job } from "./job.ts";

function parse(text: string): ParsedLayout {
  let json: unknown;
  try {
    json = JSON.parse(text, wellFormed);
  } catch (error) {
    return { ok: false, faults: [{ path: "", message: `not JSON: ${error instanceof Error ? error.message : String(error)}` }] };
  }
  return parseLayout(json);
}

async function work(job: Job): Promise<unknown> {
  switch (job.kind) {
    case "report":
      return REPORTS[job.section](job.layout);
    case "parse":
      return parse(job.text);
  }
}

parentPort!.on("message", (job: Job) => {
  work(job).then(
    (value) => parentPort!.postMessage({ ok: true, value }),
    (error: unknown) => parentPort!.postMessage({ ok: false, message: error instanceof Error ? (error.stack ?? error.message) : String(error) }),
  );
});
