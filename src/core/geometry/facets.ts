import type { Body } from "./body.ts";
import { CORE, CORE_BOX, CORE_PRISM, CORE_RING, CORNERS, FACTS, START } from "./compile.ts";

/** Facet normals and edges of a convex polytope, in the coordinates of its points: what separating axes are made of. */
export interface Facets {
  /** Outward unit normals, three doubles each. */
  readonly normals: Float64Array;
  /**
   * Nine doubles each: unit direction, and the normals at both ends of the arc of directions in which the edge is foremost.
   * All-zero normals: any direction square to the edge.
   */
  readonly edges: Float64Array;
  /** A corner of each facet. */
  readonly corners: Float64Array;
  /** One end of each edge. */
  readonly ends: Float64Array;
  /** Two numbers an edge: the facets whose normals end its arc; -1 where the arc ends in none. */
  readonly sides: Int32Array;
}

/** Share of the size under which points coincide, and within which they lie on one plane. */
const SAME = 1e-12;
const FLAT = 1e-10;

type P = readonly [number, number, number];
const sub = (a: P, b: P): P => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: P, b: P): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: P, b: P): P => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
const scale = (s: number, a: P): P => [s * a[0], s * a[1], s * a[2]];
const mix = (s: number, a: P, t: number, b: P): P => [s * a[0] + t * b[0], s * a[1] + t * b[1], s * a[2] + t * b[2]];
const length = (a: P): number => Math.sqrt(dot(a, a));

/** Facets of a piece whose core has no discs, in local coordinates; null when they cannot be told reliably. */
export function facetsOf(body: Body, piece: number): Facets | null {
  const known = body.facets[piece];
  if (known !== undefined) return known;
  if (body.facts[FACTS * piece + CORE] === CORE_BOX) {
    return (body.facets[piece] = boxFacets(body.local, body.facts[FACTS * piece + START]! + 3));
  }
  const points: P[] = [];
  const s = body.facts[FACTS * piece + START]!;
  const n = body.facts[FACTS * piece + CORNERS]!;
  const read = (at: number): P => [body.local[at]!, body.local[at + 1]!, body.local[at + 2]!];
  for (let i = 0; i < n; i++) points.push(read(s + 3 * i));
  if (body.facts[FACTS * piece + CORE] === CORE_PRISM || body.facts[FACTS * piece + CORE] === CORE_RING) {
    const offset = read(s + 3 * n);
    for (let i = 0; i < n; i++) points.push(mix(1, points[i]!, 1, offset));
  }
  const found = hullFacets(points);
  body.facets[piece] = found;
  return found;
}

/**
 * Facets of the convex hull of some points by gift wrapping, points within 1e-10 of the size of a plane taken as on it.
 * Flat and straight sets have the facets and edges of a body without thickness. Null if the wrapping does not close.
 */
export function hullFacets(given: readonly P[]): Facets | null {
  const size = Math.max(...[0, 1, 2].map((k) => Math.max(...given.map((p) => p[k]!)) - Math.min(...given.map((p) => p[k]!))));
  const points: P[] = [];
  for (const p of given) if (!points.some((q) => length(sub(p, q)) <= SAME * size)) points.push(p);
  const slack = FLAT * size;
  const normals: P[] = [];
  const edges: P[] = [];
  const ends: P[] = [];
  const corners: P[] = [];
  const done = (): Facets => withSides(normals.flat(), edges.flat(), ends.flat(), corners.flat());
  if (points.length === 1) return done();
  const farthest = (value: (p: P) => number): P => points.reduce((a, b) => (value(b) > value(a) ? b : a));
  const end = farthest((p) => length(sub(p, points[0]!)));
  const along = scale(1 / length(sub(end, points[0]!)), sub(end, points[0]!));
  const off = (p: P): P => mix(1, sub(p, points[0]!), -dot(sub(p, points[0]!), along), along);
  const wide = farthest((p) => length(off(p)));
  if (length(off(wide)) <= slack) {
    edges.push(along, [0, 0, 0], [0, 0, 0]);
    ends.push(end);
    return done();
  }
  const across = scale(1 / length(off(wide)), off(wide));
  const up = cross(along, across);
  if (points.every((p) => Math.abs(dot(sub(p, points[0]!), up)) <= slack)) {
    normals.push(up, scale(-1, up));
    corners.push(points[0]!, points[0]!);
    const ring = ringOf(points, points.map((_, i) => i), up, slack);
    if (!ring) return null;
    ring.forEach((i, k) => {
      const e = sub(points[ring[(k + 1) % ring.length]!]!, points[i]!);
      const d = scale(1 / length(e), e);
      const out = cross(d, up);
      edges.push(d, up, out, d, out, scale(-1, up));
      ends.push(points[i]!, points[i]!);
    });
    return done();
  }
  return wrap(points, slack, normals, edges, ends, corners) ? done() : null;
}

/** The corners of the convex hull of points on a plane, anticlockwise seen from its normal. */
function ringOf(points: readonly P[], on: readonly number[], normal: P, slack: number): number[] | null {
  const first = points[on[0]!]!;
  const reach = on.map((i) => sub(points[i]!, first)).reduce((a, b) => (dot(b, b) > dot(a, a) ? b : a));
  if (length(reach) === 0) return null;
  const flat = mix(1, reach, -dot(reach, normal), normal);
  const x = scale(1 / length(flat), flat);
  const y = cross(normal, x);
  const at = on
    .map((i) => ({ i, u: dot(sub(points[i]!, first), x), v: dot(sub(points[i]!, first), y) }))
    .sort((p, q) => p.u - q.u || p.v - q.v);
  // Lower and upper chain; a corner must stand out by more than the slack.
  const chain = (list: typeof at): typeof at => {
    const kept: typeof at = [];
    for (const p of list) {
      while (kept.length >= 2) {
        const a = kept[kept.length - 2]!;
        const b = kept[kept.length - 1]!;
        const base = Math.hypot(p.u - a.u, p.v - a.v);
        if ((p.u - a.u) * (b.v - a.v) - (p.v - a.v) * (b.u - a.u) > -slack * base) kept.pop();
        else break;
      }
      kept.push(p);
    }
    return kept.slice(0, -1);
  };
  const ring = [...chain(at), ...chain([...at].reverse())].map((p) => p.i);
  return ring.length >= 3 ? ring : null;
}

/** Turns a supporting plane with outward normal n about an edge (p, e) towards `s` until it meets a point: its new normal. */
function pivot(points: readonly P[], p: P, n: P, s: P, slack: number): P | null {
  let least = Infinity;
  let c = 1;
  let d = 0;
  for (const q of points) {
    const w = sub(q, p);
    const x = dot(w, s);
    const y = Math.max(0, -dot(w, n));
    const r = Math.hypot(x, y);
    if (r <= slack) continue;
    // Angle in [0, pi], told apart by a value that grows with it.
    const turn = 1 - x / r;
    if (turn < least) {
      least = turn;
      c = x / r;
      d = y / r;
    }
  }
  if (least === Infinity) return null;
  const normal = mix(c, n, d, s);
  return scale(1 / length(normal), normal);
}

function wrap(
  points: readonly P[],
  slack: number,
  normals: P[],
  edges: P[],
  ends: P[],
  corners: P[],
): boolean {
  // A direction in no special position to the axes or each other, so that one corner is foremost.
  const d: P = [0.5352331346596349, 0.6208609386262817, 0.5727622013463471];
  const start = points.reduce((a, b) => (dot(b, d) > dot(a, d) ? b : a));
  let n = scale(1 / length(d), d);
  const t = cross(n, [0.2672612419124244, -0.5345224838248488, 0.8017837257372732]);
  const axis = scale(1 / length(t), t);
  const first = pivot(points, start, n, cross(axis, n), slack);
  if (!first) return false;
  n = first;
  const on = points.filter((p) => Math.abs(dot(sub(p, start), n)) <= slack && length(sub(p, start)) > slack);
  const other = on.reduce<P | null>((a, b) => (!a || length(sub(b, start)) > length(sub(a, start)) ? b : a), null);
  if (!other) return false;
  const e = scale(1 / length(sub(other, start)), sub(other, start));
  const facet = pivot(points, start, n, cross(e, n), slack) ?? n;
  const open: { from: number; to: number; normal: P }[] = [];
  const normalOf = new Map<number, P>();
  const key = (i: number, j: number): number => i * points.length + j;
  const addFacet = (through: P, normal: P): boolean => {
    const members: number[] = [];
    points.forEach((p, i) => {
      if (Math.abs(dot(sub(p, through), normal)) <= 4 * slack) members.push(i);
    });
    const ring = ringOf(points, members, normal, slack);
    if (!ring) return false;
    // The normal of the whole ring, which is better known than that of three corners.
    let sum: P = [0, 0, 0];
    const origin = points[ring[0]!]!;
    ring.forEach((i, k) => {
      sum = mix(1, sum, 1, cross(sub(points[i]!, origin), sub(points[ring[(k + 1) % ring.length]!]!, origin)));
    });
    if (!(dot(sum, normal) > 0)) return false;
    const exact = scale(1 / length(sum), sum);
    normals.push(exact);
    corners.push(origin);
    ring.forEach((i, k) => {
      const j = ring[(k + 1) % ring.length]!;
      normalOf.set(key(i, j), exact);
      open.push({ from: i, to: j, normal: exact });
    });
    return true;
  };
  if (!addFacet(start, facet)) return false;
  for (let k = 0; k < open.length; k++) {
    if (normals.length > 2 * points.length) return false;
    const { from, to, normal } = open[k]!;
    if (!normalOf.has(key(to, from))) {
      const p = points[from]!;
      const direction = scale(1 / length(sub(points[to]!, p)), sub(points[to]!, p));
      const next = pivot(points, p, normal, cross(direction, normal), slack);
      if (!next || !addFacet(p, next) || !normalOf.has(key(to, from))) return false;
    }
    if (from < to) {
      const e = sub(points[to]!, points[from]!);
      edges.push(scale(1 / length(e), e), normal, normalOf.get(key(to, from))!);
      ends.push(points[from]!);
    }
  }
  return true;
}

/** Facets of a parallelepiped from its three half edges; its centre stands before them. */
function boxFacets(local: Float64Array, at: number): Facets {
  const h = [0, 1, 2].map((k) => [local[at + 3 * k]!, local[at + 3 * k + 1]!, local[at + 3 * k + 2]!] as const);
  const unit = (v: readonly number[]): number[] => v.map((c) => c / Math.hypot(...v));
  const faces = [0, 1, 2].map((k) => {
    const [p, q] = [h[(k + 1) % 3]!, h[(k + 2) % 3]!];
    const n = unit([p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]]);
    const outward = n[0]! * h[k]![0] + n[1]! * h[k]![1] + n[2]! * h[k]![2] > 0;
    return outward ? n : n.map((c) => -c);
  });
  const negated = (n: number[]): number[] => n.map((c) => -c);
  const edges = [0, 1, 2].flatMap((k) => {
    const [p, q] = [faces[(k + 1) % 3]!, faces[(k + 2) % 3]!];
    return [p, negated(p)].flatMap((m) => [q, negated(q)].flatMap((n) => [...unit(h[k]!), ...m, ...n]));
  });
  const corners = [0, 1, 2].flatMap((k) =>
    [1, -1].flatMap((s) => [0, 1, 2].map((i) => local[at - 3 + i]! + s * h[k]![i]!)),
  );
  const ends = [0, 1, 2].flatMap((k) => {
    const [p, q] = [h[(k + 1) % 3]!, h[(k + 2) % 3]!];
    return [1, -1].flatMap((s) => [1, -1].flatMap((t) => [0, 1, 2].map((i) => local[at - 3 + i]! + s * p[i]! + t * q[i]!)));
  });
  return withSides(faces.flatMap((n) => [...n, ...negated(n)]), edges, ends, corners);
}

/** Finds which facets' normals end the arc of each edge: they are the very same numbers. */
function withSides(normals: readonly number[], edges: readonly number[], ends: readonly number[], corners: readonly number[]): Facets {
  const facetOf = new Map<string, number>();
  const key = (list: readonly number[], at: number): string => `${list[at]! + 0},${list[at + 1]! + 0},${list[at + 2]! + 0}`;
  for (let i = 0; i < normals.length; i += 3) facetOf.set(key(normals, i), i / 3);
  const sides: number[] = [];
  for (let i = 0; i < edges.length; i += 9) sides.push(facetOf.get(key(edges, i + 3)) ?? -1, facetOf.get(key(edges, i + 6)) ?? -1);
  return { normals: Float64Array.from(normals), edges: Float64Array.from(edges), ends: Float64Array.from(ends), corners: Float64Array.from(corners), sides: Int32Array.from(sides) };
}
