import type { Rect } from "./paper.ts";
import type { LineType, Mark, Stroke } from "./plan.ts";
import { INK } from "./paper.ts";

export type Paper = readonly [x: number, y: number];

/** Collects marks; everything that draws on a sheet takes one. */
export interface Pen {
  readonly marks: Mark[];
  line(layer: string, from: Paper, to: Paper, stroke: Stroke, of?: string): void;
  polyline(layer: string, points: readonly Paper[], closed: boolean, stroke: Stroke | null, fill?: string | null, of?: string): void;
  arc(layer: string, centre: Paper, radius: number, stroke: Stroke | null, fill?: string | null, of?: string, start?: number, sweep?: number): void;
  text(layer: string, at: Paper, text: string, size: number, style?: { weight?: "regular" | "bold"; align?: "left" | "centre" | "right"; turn?: 0 | 90; ink?: string; of?: string }): void;
  box(layer: string, area: Rect, stroke: Stroke | null, fill?: string | null): void;
}

/** How a line is inked; width in mm of paper. */
export const stroke = (width: number, ink: string = INK, type: LineType = "continuous"): Stroke => ({ width, type, ink });

/** Paper coordinates to a thousandth of a millimetre: what is drawn does not depend on rounding of the last bits. */
const r3 = (p: Paper): Paper => [Math.round(p[0] * 1000) / 1000 + 0, Math.round(p[1] * 1000) / 1000 + 0];
const known = (of: string | undefined) => (of === undefined ? {} : { of });

/** A pen that collects marks in drawing order: millimetres of paper, y down. */
export function createPen(): Pen {
  const marks: Mark[] = [];
  return {
    marks,
    line(layer, from, to, s, of) {
      marks.push({ kind: "line", layer, ...known(of), from: r3(from), to: r3(to), stroke: s });
    },
    polyline(layer, points, closed, s, fill = null, of) {
      if (points.length >= 2) marks.push({ kind: "polyline", layer, ...known(of), points: points.map(r3), closed, stroke: s, fill });
    },
    arc(layer, centre, radius, s, fill = null, of, start = 0, sweep = 360) {
      marks.push({ kind: "arc", layer, ...known(of), centre: r3(centre), radius, start, sweep, stroke: s, fill });
    },
    text(layer, at, text, size, style = {}) {
      if (text === "") return;
      marks.push({ kind: "text", layer, ...known(style.of), at: r3(at), text, size, weight: style.weight ?? "regular", align: style.align ?? "left", turn: style.turn ?? 0, ink: style.ink ?? INK });
    },
    box(layer, area, s, fill = null) {
      marks.push({ kind: "polyline", layer, points: [[area.left, area.top], [area.right, area.top], [area.right, area.bottom], [area.left, area.bottom]].map((p) => r3(p as [number, number])), closed: true, stroke: s, fill });
    },
  };
}
