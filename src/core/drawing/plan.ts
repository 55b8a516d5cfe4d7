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
  | (MarkBase & { readonly kind: "text"; readonly at: readonly [number, number]; readonly text: string; /** height of the em, mm */ readonly size: number; readonly weight: "regular" | "bold"; readonly align: "left" | "centre" | "right"; /** degrees, anticlockwise */ readonly turn: number; readonly ink: string });

export interface SheetPlan {
  readonly paper: { readonly name: string; readonly width: number; readonly height: number };
  readonly title: string;
  readonly scale: number;
  readonly marks: readonly Mark[];
  /** Things the plan could not do, in words ("12 rows of 40 shown: the rest are on sheet 2"). */
  readonly remarks: readonly string[];
}
