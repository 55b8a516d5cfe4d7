import type { Layout } from "#core/layout/schema.ts";
import type { Section } from "#core/reports.ts";

/** What a worker can be asked for. */
export type Job =
  | { readonly kind: "report"; readonly layout: Layout; readonly section: Section }
  | { readonly kind: "parse"; readonly text: string };
