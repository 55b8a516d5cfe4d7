import { textBox, type TextMark } from "./lettering.ts";
import type { Rect } from "./paper.ts";
import type { Mark } from "./plan.ts";

export interface TextOverlap {
  readonly text: string;
  readonly other: string;
  /** How far they reach into each other, mm, the lesser of the two directions. */
  readonly depth: number;
}

const depthOf = (a: Rect, b: Rect) => Math.min(Math.min(a.right, b.right) - Math.max(a.left, b.left), Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top));

/** Pairs of texts whose ink boxes reach more than `slack` mm into each other. Sorted sweep along x. */
export function findTextOverlaps(marks: readonly Mark[], slack = 0.02): TextOverlap[] {
  const texts = marks.filter((mark): mark is TextMark => mark.kind === "text").map((mark) => ({ text: mark.text, box: textBox(mark) }));
  texts.sort((a, b) => a.box.left - b.box.left);
  const out: TextOverlap[] = [];
  for (let i = 0; i < texts.length; i++) {
    for (let j = i + 1; j < texts.length && texts[j]!.box.left < texts[i]!.box.right; j++) {
      const depth = depthOf(texts[i]!.box, texts[j]!.box);
      if (depth > slack) out.push({ text: texts[i]!.text, other: texts[j]!.text, depth });
    }
  }
  return out;
}

/** Texts that reach over the edge of an area. */
export function findTextOutside(marks: readonly Mark[], area: Rect): string[] {
  return marks.filter((mark): mark is TextMark => mark.kind === "text").filter((mark) => {
    const box = textBox(mark);
    return box.left < area.left - 0.02 || box.right > area.right + 0.02 || box.top < area.top - 0.02 || box.bottom > area.bottom + 0.02;
  }).map((mark) => mark.text);
}

/**
 * Texts that a line runs through: its stroke reaches more than `slack` mm into the ink box, and no later white ground under the text hides it
 * there. Curves are taken as polygons.
 */
export function findTextOnLines(marks: readonly Mark[], slack = 0.05): { readonly text: string; readonly layer: string }[] {
  const out: { text: string; layer: string }[] = [];
  const inked = marks.map((mark) => (mark.kind === "text" || !mark.stroke ? null : { reach: boundsOf(mark), segments: segmentsOf(mark) }));
  marks.forEach((mark, index) => {
    if (mark.kind !== "text") return;
    const whole = textBox(mark);
    const box = { left: whole.left + slack, right: whole.right - slack, top: whole.top + slack, bottom: whole.bottom - slack };
    marks.forEach((other, place) => {
      const lines = inked[place];
      if (other.kind === "text" || !lines) return;
      const half = other.stroke!.width / 2;
      if (depthOf({ left: lines.reach.left - half, right: lines.reach.right + half, top: lines.reach.top - half, bottom: lines.reach.bottom + half }, box) < 0) return;
      if (!lines.segments.some(([a, b]) => meets(a, b, box, half))) return;
      const hidden = marks.slice(place + 1, index).some((cover) => covers(cover, whole));
      if (!hidden) out.push({ text: mark.text, layer: other.layer });
    });
  });
  return out;
}

type P = readonly [number, number];

/** Box of a mark's line, without its width. */
export function boundsOf(mark: Exclude<Mark, TextMark>): Rect {
  if (mark.kind === "arc") return { left: mark.centre[0] - mark.radius, right: mark.centre[0] + mark.radius, top: mark.centre[1] - mark.radius, bottom: mark.centre[1] + mark.radius };
  const points = mark.kind === "line" ? [mark.from, mark.to] : mark.points;
  const box = { left: Infinity, right: -Infinity, top: Infinity, bottom: -Infinity };
  for (const [x, y] of points) {
    box.left = Math.min(box.left, x);
    box.right = Math.max(box.right, x);
    box.top = Math.min(box.top, y);
    box.bottom = Math.max(box.bottom, y);
  }
  return box;
}

function segmentsOf(mark: Exclude<Mark, TextMark>): [P, P][] {
  if (!mark.stroke) return [];
  if (mark.kind === "line") return [[mark.from, mark.to]];
  const points: P[] = mark.kind === "polyline" ? [...mark.points] : arcPoints(mark);
  const ends: [P, P][] = points.slice(1).map((p, i) => [points[i]!, p]);
  if (mark.kind === "polyline" && mark.closed && points.length > 2) ends.push([points.at(-1)!, points[0]!]);
  return ends;
}

/** An arc as a polygon on it, paper mm; its chords leave it by 0.2 % of the radius at 48 steps a turn. */
export function arcPoints(mark: Extract<Mark, { kind: "arc" }>, steps = 48): P[] {
  return Array.from({ length: steps + 1 }, (_, i): P => {
    const angleRad = ((mark.start + (mark.sweep * i) / steps) * Math.PI) / 180;
    return [mark.centre[0] + mark.radius * Math.cos(angleRad), mark.centre[1] - mark.radius * Math.sin(angleRad)];
  });
}

/** Does a segment with half its width pass through a box? Clipped by the four sides. */
function meets(a: P, b: P, box: Rect, half: number): boolean {
  let low = 0;
  let high = 1;
  const clip = (from: number, by: number, least: number, most: number) => {
    if (by === 0) {
      if (from < least || from > most) high = -1;
      return;
    }
    const s = (least - from) / by;
    const t = (most - from) / by;
    low = Math.max(low, Math.min(s, t));
    high = Math.min(high, Math.max(s, t));
  };
  clip(a[0], b[0] - a[0], box.left - half, box.right + half);
  clip(a[1], b[1] - a[1], box.top - half, box.bottom + half);
  return low < high;
}

/** A filled disc or box that wholly lies under the text. */
function covers(mark: Mark, box: Rect): boolean {
  if (mark.kind === "arc" && mark.fill && mark.sweep === 360) {
    return [[box.left, box.top], [box.right, box.top], [box.left, box.bottom], [box.right, box.bottom]].every(([x, y]) => Math.hypot(x! - mark.centre[0], y! - mark.centre[1]) <= mark.radius + 0.35);
  }
  if (mark.kind === "polyline" && mark.closed && mark.fill) {
    const xs = mark.points.map((p) => p[0]);
    const ys = mark.points.map((p) => p[1]);
    return Math.min(...xs) <= box.left && Math.max(...xs) >= box.right && Math.min(...ys) <= box.top && Math.max(...ys) >= box.bottom;
  }
  return false;
}
