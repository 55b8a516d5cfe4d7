/**
 * A sheet plan: a drawing as data, in millimetres of paper, origin at the sheet's upper left, y down (as PDF and canvas ink
 * it). Core decides everything; whoever inks it (pdfkit on the server, Konva or SVG in the browser) decides nothing.
 */
export type LineType = "continuous" | "dashed" | "chain" | "double-chain" | "dotted";

export interface Stroke {
  /** Line width, mm of paper: 0.5 visible, 0.25 dimension (ISO 128). */
  readonly width: number;
  readonly type: LineType;
  /** "#rrggbb"; state inks only where the state is also said in a word. */
  readonly ink: string;
}

/** Dash lengths of a stroke, mm of paper: line, space, line, space …; empty for a continuous one (ISO 128-20, in multiples of the width d). */
export function dashesOf(stroke: Stroke): readonly number[] {
  const d = stroke.width;
  // 12 d dashes of ISO 128-20 are longer than many a part at 1 : 20: half of that, no shorter than can be seen
  if (stroke.type === "dashed") return [Math.max(1.2, 6 * d), Math.max(0.7, 3 * d)];
  if (stroke.type === "chain") return [24 * d, 3 * d, Math.max(0.2, 0.5 * d), 3 * d];
  if (stroke.type === "double-chain") return [24 * d, 3 * d, Math.max(0.2, 0.5 * d), 3 * d, Math.max(0.2, 0.5 * d), 3 * d];
  if (stroke.type === "dotted") return [Math.max(0.2, 0.5 * d), 3 * d];
  return [];
}

export interface MarkBase {
  /** Layer in words: "outlines", "hidden", "datums", "dimensions", "gaps", "frame", "title block", "tables" … */
  readonly layer: string;
  /** What it stands for: a part's key, "a|b" of a gap, a datum's key; absent for furniture. */
  readonly of?: string;
}

export type Mark =
  | (MarkBase & { readonly kind: "line"; readonly from: readonly [number, number]; readonly to: readonly [number, number]; readonly stroke: Stroke })
  | (MarkBase & { readonly kind: "polyline"; readonly points: readonly (readonly [number, number])[]; readonly closed: boolean; readonly stroke: Stroke | null; readonly fill: string | null })
  | (MarkBase & { readonly kind: "arc"; readonly centre: readonly [number, number]; readonly radius: number; /** degrees, anticlockwise on paper from the right */ readonly start: number; readonly sweep: number; readonly stroke: Stroke | null; readonly fill: string | null })
  | (MarkBase & { readonly kind: "text"; /** on the baseline, at the left end, middle or right end as `align` says */ readonly at: readonly [number, number]; readonly text: string; /** height of the em, mm */ readonly size: number; readonly weight: "regular" | "bold"; readonly align: "left" | "centre" | "right"; /** degrees, anticlockwise */ readonly turn: number; readonly ink: string });

export interface SheetPlan {
  readonly paper: { readonly name: string; readonly width: number; readonly height: number };
  readonly title: string;
  /** One in this many. */
  readonly scale: number;
  /** Which sheet of how many, from 1. */
  readonly sheet: number;
  readonly sheets: number;
  readonly marks: readonly Mark[];
  /** Things the plan could not do, in words ("12 rows of 40 shown: the rest are on sheet 2"). */
  readonly remarks: readonly string[];
}
