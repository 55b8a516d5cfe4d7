import type { Vec2 } from "../frames.ts";

/** A convex polygon of a view, anticlockwise, mm, with its box; two points for what is seen edge on. */
export interface Facet {
  readonly points: readonly Vec2[];
  readonly left: number;
  readonly right: number;
  readonly low: number;
  readonly high: number;
  /** How far the piece reaches toward the reader. */
  readonly near: number;
  /** For each side three numbers: its outward normal, and the normal times any of its points. Empty for what is seen edge on. */
  readonly sides: Float64Array;
}

/** A convex polygon (anticlockwise, view, mm at full size) made ready for clipping; `near` is how far its piece reaches toward the reader. */
export function facetOf(points: readonly Vec2[], near = 0): Facet {
  let [left, right, low, high] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const [a, b] of points) {
    left = Math.min(left, a);
    right = Math.max(right, a);
    low = Math.min(low, b);
    high = Math.max(high, b);
  }
  const sides = new Float64Array(points.length < 3 ? 0 : 3 * points.length);
  let count = 0;
  for (let i = 0; i < points.length && points.length >= 3; i++) {
    const p = points[i]!;
    const q = points[i + 1 === points.length ? 0 : i + 1]!;
    const edge = Math.hypot(q[0] - p[0], q[1] - p[1]);
    if (!(edge > 1e-9)) continue;
    // outward normal of an anticlockwise polygon
    const nx = (q[1] - p[1]) / edge;
    const ny = (p[0] - q[0]) / edge;
    sides[count++] = nx;
    sides[count++] = ny;
    sides[count++] = nx * p[0] + ny * p[1];
  }
  return { points, left, right, low, high, near, sides: sides.subarray(0, count) };
}

export type Span = readonly [from: number, to: number];

/**
 * The stretch of the segment a to b that lies inside a convex polygon, as shares of its length; null where it does not. Cyrus and Beck's clip.
 * `along` widens the polygon (mm) at edges that run with the segment, `across` at all others; negative narrows it.
 */
export function spanInside(a: Vec2, b: Vec2, facet: Facet, along: number, across: number): Span | null {
  const { sides } = facet;
  if (sides.length === 0) return null;
  const dx = b[0] - a[0];
  const dy = b[1] - a[1];
  const length = Math.sqrt(dx * dx + dy * dy);
  if (!(length > 0)) return null;
  let from = 0;
  let to = 1;
  for (let i = 0; i < sides.length; i += 3) {
    const nx = sides[i]!;
    const ny = sides[i + 1]!;
    // a side runs along (-ny, nx): with the segment where that has its direction
    const same = dy * nx - dx * ny > 0.9995 * length;
    const outside = nx * a[0] + ny * a[1] - sides[i + 2]! - (same ? along : across);
    const slope = nx * dx + ny * dy;
    if (Math.abs(slope) < 1e-12 * length) {
      if (outside > 0) return null;
      continue;
    }
    const t = -outside / slope;
    if (slope > 0) {
      if (t < to) to = t;
    } else if (t > from) from = t;
    if (from >= to) return null;
  }
  return [from, to];
}

/** What is left of [0, 1] without the given spans, in order. */
export function without(spans: readonly Span[]): Span[] {
  const sorted = [...spans].sort((s, t) => s[0] - t[0]);
  const out: Span[] = [];
  let at = 0;
  for (const [from, to] of sorted) {
    if (from > at) out.push([at, Math.min(1, from)]);
    at = Math.max(at, to);
    if (at >= 1) break;
  }
  if (at < 1) out.push([at, 1]);
  return out;
}

/** A stretch of outline and the facet it bounds. */
export interface Edge {
  readonly from: Vec2;
  readonly to: Vec2;
  readonly facet: Facet;
}

/**
 * Outline of the union of convex polygons, as stretches of their edges that no other one covers. Nothing is assembled into loops, so there is
 * nothing that rounding could break; edges shared from opposite sides go, edges shared from one side stay once.
 * @param slack mm by which polygons may miss each other and still join (twice their chord error)
 */
export function outlineEdges(facets: readonly Facet[], slack: number): Edge[] {
  const out: Edge[] = [];
  facets.forEach((facet, i) => {
    const n = facet.points.length;
    const rivals: { other: Facet; before: boolean }[] = [];
    facets.forEach((other, j) => {
      if (j !== i && other.points.length >= 3 && other.left <= facet.right + slack && other.right >= facet.left - slack && other.low <= facet.high + slack && other.high >= facet.low - slack) {
        rivals.push({ other, before: j < i });
      }
    });
    for (let k = 0; k < (n === 2 ? 1 : n); k++) {
      const a = facet.points[k]!;
      const b = facet.points[(k + 1) % n]!;
      const spans: Span[] = [];
      const [left, right] = a[0] < b[0] ? [a[0], b[0]] : [b[0], a[0]];
      const [low, high] = a[1] < b[1] ? [a[1], b[1]] : [b[1], a[1]];
      for (const { other, before } of rivals) {
        if (other.left > right + slack || other.right < left - slack || other.low > high + slack || other.high < low - slack) continue;
        const span = spanInside(a, b, other, before ? slack : -slack, slack);
        if (span) spans.push(span);
      }
      for (const [from, to] of spans.length === 0 ? [[0, 1] as const] : without(spans)) {
        if ((to - from) * Math.hypot(b[0] - a[0], b[1] - a[1]) > 1e-6) out.push({ from: along(a, b, from), to: along(a, b, to), facet });
      }
    }
  });
  return out;
}

const along = (a: Vec2, b: Vec2, t: number): Vec2 => (t <= 0 ? a : t >= 1 ? b : [a[0] + (b[0] - a[0]) * t, a[1] + (b[1] - a[1]) * t]);

/** Parts an edge into what stands clear of the covers (narrowed by `slack`) and what lies under them. */
export function partEdge(edge: Pick<Edge, "from" | "to">, covers: readonly Facet[], slack: number): { clear: [Vec2, Vec2][]; covered: [Vec2, Vec2][] } {
  const { from: a, to: b } = edge;
  const [left, right] = [Math.min(a[0], b[0]), Math.max(a[0], b[0])];
  const [low, high] = [Math.min(a[1], b[1]), Math.max(a[1], b[1])];
  const spans: Span[] = [];
  for (const cover of covers) {
    if (cover.left > right || cover.right < left || cover.low > high || cover.high < low) continue;
    const span = spanInside(a, b, cover, -slack, -slack);
    if (span) spans.push(span);
  }
  if (spans.length === 0) return { clear: [[a, b]], covered: [] };
  const clearSpans = without(spans);
  const coveredSpans = without(clearSpans);
  const cut = (list: readonly Span[]) => list.map(([s, t]): [Vec2, Vec2] => [along(a, b, s), along(a, b, t)]);
  return { clear: cut(clearSpans), covered: cut(coveredSpans) };
}

/** Strings segments together end to start, so that a dash pattern runs on around corners. */
export function joinSegments(segments: readonly (readonly [Vec2, Vec2])[], slack: number): Vec2[][] {
  const cell = Math.max(slack, 1e-6);
  const name = (p: Vec2) => `${Math.round(p[0] / cell)},${Math.round(p[1] / cell)}`;
  const starts = new Map<string, number[]>();
  segments.forEach(([a], i) => {
    const list = starts.get(name(a));
    if (list) list.push(i);
    else starts.set(name(a), [i]);
  });
  const ends = new Set(segments.map(([, b]) => name(b)));
  const used = new Uint8Array(segments.length);
  const out: Vec2[][] = [];
  const follow = (first: number) => {
    const line: Vec2[] = [...segments[first]!];
    used[first] = 1;
    for (;;) {
      const next = starts.get(name(line.at(-1)!))?.find((i) => used[i] === 0);
      if (next === undefined) break;
      used[next] = 1;
      line.push(segments[next]![1]);
    }
    out.push(line);
  };
  segments.forEach(([a], i) => {
    if (used[i] === 0 && !ends.has(name(a))) follow(i);
  });
  segments.forEach((_, i) => {
    if (used[i] === 0) follow(i);
  });
  return out;
}

/** Is a point inside a facet or on its edge? */
export const isInside = (p: Vec2, facet: Facet): boolean =>
  p[0] >= facet.left && p[0] <= facet.right && p[1] >= facet.low && p[1] <= facet.high && facet.sides.length > 0 && depthInside(p, facet) >= 0;

/** How deep a point lies inside a convex polygon: least distance to its sides' lines, negative outside. */
export function depthInside(p: Vec2, facet: Facet): number {
  let depth = Infinity;
  const { sides } = facet;
  for (let i = 0; i < sides.length; i += 3) depth = Math.min(depth, sides[i + 2]! - sides[i]! * p[0] - sides[i + 1]! * p[1]);
  return depth;
}
