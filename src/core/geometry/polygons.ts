import type { Vec2 } from "../frames.ts";
import { turnAt } from "./orientation.ts";

/** Simple polygons in a plane, mm: corners in order, the first not repeated. */
export type Outline = readonly Vec2[];

/** Signed area, mm2: positive where the corners run anticlockwise (u right, v up). */
export function signedArea(outline: Outline): number {
  // about the first corner, so that far from the origin nothing is lost
  const [ou, ov] = outline[0] ?? [0, 0];
  let twice = 0;
  for (let i = 1; i + 1 < outline.length; i++) {
    const a = outline[i]!;
    const b = outline[i + 1]!;
    twice += (a[0] - ou) * (b[1] - ov) - (b[0] - ou) * (a[1] - ov);
  }
  return twice / 2;
}

export interface OutlineFault {
  readonly kind: "too-few" | "no-area" | "crosses" | "repeats";
  /** Corner or edge numbers concerned. */
  readonly corners: readonly number[];
  readonly at: Vec2;
  readonly message: string;
}

/**
 * What is wrong with an outline, or null: fewer than three corners, two equal neighbours, no area, or edges that cross or touch
 * (with the place). Edges are compared only where their boxes overlap: about n log n for outlines that are not tangles.
 */
export function findOutlineFault(outline: Outline): OutlineFault | null {
  const n = outline.length;
  const first: Vec2 = outline[0] ?? [0, 0];
  if (n < 3) return { kind: "too-few", corners: [], at: first, message: `an outline needs at least 3 corners, found ${n}` };
  for (let i = 0; i < n; i++) {
    const a = outline[i]!;
    const b = outline[(i + 1) % n]!;
    if (a[0] === b[0] && a[1] === b[1]) {
      const closing = i === n - 1 ? " (the first corner is not repeated at the end)" : "";
      return { kind: "repeats", corners: [i, (i + 1) % n], at: a, message: `corners ${i} and ${(i + 1) % n} are the same place, ${a[0]}, ${a[1]}${closing}` };
    }
  }
  const order = outline
    .map((a, i) => ({ i, low: Math.min(a[0], outline[(i + 1) % n]![0]), high: Math.max(a[0], outline[(i + 1) % n]![0]) }))
    .sort((p, q) => p.low - q.low);
  for (let k = 0; k < n; k++) {
    const e = order[k]!;
    for (let m = k + 1; m < n && order[m]!.low <= e.high; m++) {
      const i = Math.min(e.i, order[m]!.i);
      const j = Math.max(e.i, order[m]!.i);
      const at = meeting(outline, i, j);
      if (at) return { kind: "crosses", corners: [i, j], at, message: `it crosses itself: the edge from corner ${i} meets the edge from corner ${j} at ${at[0].toFixed(3)}, ${at[1].toFixed(3)}` };
    }
  }
  let extent = 0;
  for (const p of outline) extent = Math.max(extent, Math.abs(p[0] - first[0]), Math.abs(p[1] - first[1]));
  if (Math.abs(signedArea(outline)) <= 1e-12 * extent * extent) return { kind: "no-area", corners: [], at: first, message: "the outline encloses no area" };
  return null;
}

/** Where edges i and j meet although they should not; neighbours may share their corner but not fold back on each other. */
function meeting(outline: Outline, i: number, j: number): Vec2 | null {
  const n = outline.length;
  const a = outline[i]!;
  const b = outline[(i + 1) % n]!;
  const c = outline[j]!;
  const d = outline[(j + 1) % n]!;
  if (Math.min(a[1], b[1]) > Math.max(c[1], d[1]) || Math.max(a[1], b[1]) < Math.min(c[1], d[1])) return null;
  if (j === i + 1 || (i === 0 && j === n - 1)) {
    // neighbours: shared corner s, outer ends p and q; a fault only where they run over each other
    const [s, p, q] = j === i + 1 ? [b, a, d] : [a, b, c];
    const along = (p[0] - s[0]) * (q[0] - s[0]) + (p[1] - s[1]) * (q[1] - s[1]);
    return turnAt(s, p, q) === 0 && along > 0 ? s : null;
  }
  const abc = turnAt(a, b, c);
  const abd = turnAt(a, b, d);
  const cda = turnAt(c, d, a);
  const cdb = turnAt(c, d, b);
  if (((abc > 0 && abd < 0) || (abc < 0 && abd > 0)) && ((cda > 0 && cdb < 0) || (cda < 0 && cdb > 0))) {
    const t = cda / (cda - cdb);
    return [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])];
  }
  if (abc === 0 && within(a, b, c)) return c;
  if (abd === 0 && within(a, b, d)) return d;
  if (cda === 0 && within(c, d, a)) return a;
  if (cdb === 0 && within(c, d, b)) return b;
  return null;
}

function within(a: Vec2, b: Vec2, p: Vec2): boolean {
  return Math.min(a[0], b[0]) <= p[0] && p[0] <= Math.max(a[0], b[0]) && Math.min(a[1], b[1]) <= p[1] && p[1] <= Math.max(a[1], b[1]);
}

/** Convex hull, anticlockwise from the least corner, without corners on straight edges (Andrew's monotone chain). */
export function convexHull(points: readonly Vec2[]): Vec2[] {
  const sorted = [...points].sort((a, b) => a[0] - b[0] || a[1] - b[1]);
  if (sorted.length < 3) return sorted;
  const half = (list: readonly Vec2[]) => {
    const chain: Vec2[] = [];
    for (const p of list) {
      while (chain.length >= 2 && turnAt(chain[chain.length - 2]!, chain[chain.length - 1]!, p) <= 0) chain.pop();
      chain.push(p);
    }
    chain.pop();
    return chain;
  };
  const hull = [...half(sorted), ...half(sorted.reverse())];
  return hull.length > 0 ? hull : [sorted[0]!];
}

/** Even-odd test; a point on the edge may fall either way. */
export function insideOutline(outline: Outline, p: Vec2): boolean {
  let inside = false;
  for (let i = 0, j = outline.length - 1; i < outline.length; j = i++) {
    const a = outline[i]!;
    const b = outline[j]!;
    if (a[1] > p[1] !== b[1] > p[1] && p[0] < ((b[0] - a[0]) * (p[1] - a[1])) / (b[1] - a[1]) + a[0]) inside = !inside;
  }
  return inside;
}

/** What a convex polygon (anticlockwise) keeps left of the line through a toward b. */
export function clipConvex(polygon: Outline, a: Vec2, b: Vec2): Vec2[] {
  const out: Vec2[] = [];
  for (let i = 0; i < polygon.length; i++) {
    const p = polygon[i]!;
    const q = polygon[(i + 1) % polygon.length]!;
    const dp = turnAt(a, b, p);
    const dq = turnAt(a, b, q);
    if (dp >= 0) out.push(p);
    if ((dp > 0 && dq < 0) || (dp < 0 && dq > 0)) {
      const t = dp / (dp - dq);
      out.push([p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1])]);
    }
  }
  return out;
}
