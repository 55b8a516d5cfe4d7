import { parentPort } from "node:worker_threads";
import { parseLayout, type ParsedLayout } from "#core/layout/parse-layout.ts";
import { REPORTS } from "#core/reports.ts";
import { wellFormed } from "../http/well-formed.ts";
import { planSheets, SheetError } from "#core/drawing/sheet.ts";
import { inkPdf } from "../sheets/ink-pdf.ts";
import type { Job, SheetAnswer } from "./job.ts";

function parse(text: string): ParsedLayout {
  let json: unknown;
  try {
    json = JSON.parse(text, wellFormed);
  } catch (error) {
    return { ok: false, faults: [{ path: "", message: `not JSON: ${error instanceof Error ? error.message : String(error)}` }] };
  }
  return parseLayout(json);
}

async function sheet(job: Extract<Job, { kind: "sheet" }>): Promise<SheetAnswer> {
  try {
    const plans = planSheets(job.layout, job.report, job.options, job.info);
    return { ok: true, pdf: await inkPdf(plans, { title: plans[0]!.title, author: job.info.creator ?? "", created: job.created }) };
  } catch (error) {
    if (error instanceof SheetError) return { ok: false, field: error.field, message: error.message };
    throw error;
  }
}

async function work(job: Job): Promise<unknown> {
  switch (job.kind) {
    case "report":
      return REPORTS[job.section](job.layout);
    case "parse":
      return parse(job.text);
    case "sheet":
      return sheet(job);
  }
}

parentPort!.on("message", (job: Job) => {
  work(job).then(
    (value) => parentPort!.postMessage({ ok: true, value }),
    (error: unknown) => parentPort!.postMessage({ ok: false, message: error instanceof Error ? (error.stack ?? error.message) : String(error) }),
  );
});
