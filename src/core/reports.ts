import { bodyReport } from "./body/stance.ts";
import { massReport } from "./body/mass.ts";
import { checkGaps } from "./gaps/scene.ts";
import type { GapReport } from "./gaps/gap.ts";
import type { Layout } from "./layout/schema.ts";
import { spacesReport } from "./luggage/spaces-report.ts";

/**
 * One registry, section to function, used by command line, workers, API and browser. A section that is not built is not here. "gaps" fills three
 * keys of the report: gaps, trusted, counts.
 */
export const REPORTS = {
  gaps: checkGaps,
  body: bodyReport,
  mass: massReport,
  spaces: spacesReport,
} as const satisfies Record<string, (layout: Layout) => unknown>;

export type Section = keyof typeof REPORTS;
export const SECTIONS = Object.keys(REPORTS) as Section[];

/** Raised when any computed number's definition changes, so that kept reports are computed anew. */
export const CORE_VERSION = 4;

export interface FullReport extends GapReport {
  readonly format: "handbreadth-report";
  readonly version: 1;
  readonly layout: string;
  readonly body: ReturnType<typeof bodyReport>;
  readonly mass: ReturnType<typeof massReport>;
  readonly spaces: ReturnType<typeof spacesReport>;
}

/** Every section, in the shape of the report format. Full doubles, never rounded. */
export function fullReport(layout: Layout): FullReport {
  const { gaps, ...rest } = REPORTS;
  const sections = Object.fromEntries(Object.entries(rest).map(([name, compute]) => [name, compute(layout)])) as Pick<FullReport, "body" | "mass" | "spaces">;
  return { format: "handbreadth-report", version: 1, layout: layout.name, ...gaps(layout), ...sections };
}
