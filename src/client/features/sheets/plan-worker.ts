import { planSheets, SheetError, type SheetInfo, type SheetOptions } from "#core/drawing/sheet.ts";
import type { SheetReport } from "#core/drawing/sheet-tables.ts";
import { planToSvg } from "#core/drawing/plan-to-svg.ts";
import type { Layout } from "#core/layout/schema.ts";

export interface PlanQuestion {
  readonly layout: Layout;
  readonly report: SheetReport;
  readonly options: SheetOptions;
  readonly info: SheetInfo;
}
export type PlanAnswer =
  | { readonly ok: true; readonly sheets: readonly { readonly svg: string; readonly scale: number; readonly width: number; readonly height: number }[]; readonly remarks: readonly string[] }
  | { readonly ok: false; readonly message: string };

/** Plans sheets off the page's own thread, with the same core that the printed one uses. */
self.onmessage = ({ data }: MessageEvent<PlanQuestion>) => {
  let answer: PlanAnswer;
  try {
    const plans = planSheets(data.layout, data.report, data.options, data.info);
    answer = {
      ok: true, remarks: [...new Set(plans.flatMap((plan) => plan.remarks))],
      sheets: plans.map((plan) => ({ svg: planToSvg(plan), scale: plan.scale, width: plan.paper.width, height: plan.paper.height })),
    };
  } catch (error) {
    answer = { ok: false, message: error instanceof SheetError ? error.message : "The sheet could not be planned." };
  }
  self.postMessage(answer);
};
