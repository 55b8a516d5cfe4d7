import type { SheetInfo, SheetOptions } from "#core/drawing/sheet.ts";
import type { SheetReport } from "#core/drawing/sheet-tables.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { Section } from "#core/reports.ts";

/** What a worker can be asked for. */
export type Job =
  | { readonly kind: "report"; readonly layout: Layout; readonly section: Section }
  | { readonly kind: "parse"; readonly text: string }
  /** Plans the sheets and inks them; the date is given, so that the same input gives the same bytes. */
  | { readonly kind: "sheet"; readonly layout: Layout; readonly report: SheetReport; readonly options: SheetOptions; readonly info: SheetInfo; readonly created: Date };

/** A sheet as bytes, or why it cannot be made as asked. */
export type SheetAnswer = { readonly ok: true; readonly pdf: Uint8Array } | { readonly ok: false; readonly field: string; readonly message: string };

/** Whether a job may take long, and about how much memory it needs: from the size of what goes in, before it starts. */
export function costOf(job: Job): { long: boolean; megabytes: number } {
  if (job.kind === "parse") {
    const megabytes = job.text.length / 1024 / 1024;
    return { long: megabytes > 1, megabytes: 30 + 20 * megabytes };
  }
  const { parts, runs } = job.layout;
  const solids = parts.reduce((sum, part) => sum + part.solids.length, 0) + runs.reduce((sum, run) => sum + run.nodes.length, 0);
  return { long: job.kind === "sheet" || solids > 400, megabytes: (job.kind === "sheet" ? 120 : 60) + 0.15 * solids };
}
