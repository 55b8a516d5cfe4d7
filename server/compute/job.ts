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
