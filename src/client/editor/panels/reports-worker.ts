import { bodyReport, type BodyReport } from "#core/body/stance.ts";
import { massReport, type MassReport } from "#core/body/mass.ts";
import type { Layout } from "#core/layout/schema.ts";
import { spacesReport, type SpaceReport } from "#core/luggage/spaces-report.ts";

/** What the page asks: the quick sections, or the litres, of one state of the document. */
export interface ReportQuestion {
  readonly turn: number;
  readonly section: "stance" | "spaces";
  readonly layout: Layout;
}
export type ReportAnswer =
  | { readonly turn: number; readonly section: "stance"; readonly body: BodyReport; readonly mass: MassReport }
  | { readonly turn: number; readonly section: "spaces"; readonly spaces: readonly SpaceReport[] }
  | { readonly turn: number; readonly section: "stance" | "spaces"; readonly failed: string };

onmessage = (event: MessageEvent<ReportQuestion>) => {
  const { turn, section, layout } = event.data;
  try {
    const answer: ReportAnswer = section === "stance" ? { turn, section, body: bodyReport(layout), mass: massReport(layout) } : { turn, section, spaces: spacesReport(layout) };
    postMessage(answer);
  } catch (error) {
    postMessage({ turn, section, failed: error instanceof Error ? error.message : String(error) } satisfies ReportAnswer);
  }
};
