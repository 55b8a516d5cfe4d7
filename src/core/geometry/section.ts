import { axisIndex, type Axis, type Vec2, type Vec3 } from "../frames.ts";
import { chordsFor, grow } from "./outline-of-piece.ts";
import type { Piece } from "./piece.ts";
import { convexHull } from "./polygons.ts";

/**
 * Section of a convex piece by the plane square to a car axis at `at`: a convex polygon in the other two coordinates, in the order x, y, z (so a
 * section square to x is in y, z). Empty where the plane misses it.
 *
 * Exact for flat-faced pieces: hull of all crossings between corners on either side. Discs: the rulings between like points of two
 * discs, and the discs themselves; curves within `tolerance`. Grown pieces: the union over slices h of the core's section at at + h grown by
 * sqrt(r^2 - h^2), 24 slices.
 * @param piece in the car frame
 */
export function pieceSection(piece: Piece, axis: Axis, at: number, tolerance = 0.2): Vec2[] {
  const c = axisIndex(axis);
  const [u, v] = c === 0 ? [1, 2] : c === 1 ? [0, 2] : [0, 1];
  if (piece.radius <= 0) return coreSection(piece, c, u as 0 | 1 | 2, v as 0 | 1 | 2, at, tolerance);
  const [low, high] = coreReach(piece, c);
  if (at < low - piece.radius || at > high + piece.radius) return [];
  const points: Vec2[] = [];
  const heights = new Set<number>();
  for (let i = 0; i <= 24; i++) heights.add(piece.radius * Math.cos((Math.PI * i) / 24));
  for (const edge of [low, high, ...piece.points.map((p) => p[c]!)]) heights.add(edge - at);
  for (const h of heights) {
    if (Math.abs(h) > piece.radius) continue;
    const where = at + h;
    const core = coreSection(piece, c, u as 0 | 1 | 2, v as 0 | 1 | 2, where < low && where > low - 1e-9 ? low : where > high && where < high + 1e-9 ? high : where, tolerance);
    if (core.length > 0) points.push(...grow(core, Math.sqrt(Math.max(0, piece.radius ** 2 - h * h)), tolerance));
  }
  return convexHull(points);
}

function coreReach(piece: Piece, c: 0 | 1 | 2): [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const p of piece.points) {
    low = Math.min(low, p[c]);
    high = Math.max(high, p[c]);
  }
  for (const d of piece.discs) {
    const reach = Math.hypot(d.u[c], d.v[c]);
    low = Math.min(low, d.centre[c] - reach);
    high = Math.max(high, d.centre[c] + reach);
  }
  return [low, high];
}

function coreSection(piece: Piece, c: 0 | 1 | 2, u: 0 | 1 | 2, v: 0 | 1 | 2, at: number, tolerance: number): Vec2[] {
  const out: Vec2[] = [];
  const cross = (p: Vec3, q: Vec3) => {
    const dp = p[c] - at;
    const dq = q[c] - at;
    if (dp === 0) out.push([p[u], p[v]]);
    if (dq === 0) out.push([q[u], q[v]]);
    if ((dp < 0 && dq > 0) || (dp > 0 && dq < 0)) {
      const t = dp / (dp - dq);
      out.push([p[u] + t * (q[u] - p[u]), p[v] + t * (q[v] - p[v])]);
    }
  };
  const points = piece.points;
  if (points.length === 1) cross(points[0]!, points[0]!);
  for (let i = 0; i < points.length; i++) for (let j = i + 1; j < points.length; j++) cross(points[i]!, points[j]!);

  const rings = piece.discs.map((disc) => {
    const reach = Math.max(Math.hypot(...disc.u), Math.hypot(...disc.v));
    const n = reach === 0 ? 0 : chordsFor(reach, tolerance);
    return { disc, n };
  });
  const n = Math.max(0, ...rings.map((r) => r.n));
  const ringPoints = rings.map(({ disc }) => Array.from({ length: Math.max(1, n) }, (_, i): Vec3 => {
    const [s, k] = [Math.sin((2 * Math.PI * i) / Math.max(1, n)), Math.cos((2 * Math.PI * i) / Math.max(1, n))];
    return [0, 1, 2].map((m) => disc.centre[m]! + k * disc.u[m]! + s * disc.v[m]!) as unknown as Vec3;
  }));
  for (let a = 0; a < ringPoints.length; a++) {
    for (let b = a + 1; b < ringPoints.length; b++) for (let i = 0; i < ringPoints[a]!.length; i++) cross(ringPoints[a]![i]!, ringPoints[b]![i]!);
    for (const p of points) for (const q of ringPoints[a]!) cross(p, q);
    crossDisc(rings[a]!.disc, c, u, v, at, out);
  }
  return convexHull(out);
}

/** The two places where a disc's edge pierces the plane: a cos t + b sin t = at - centre. */
function crossDisc(disc: Piece["discs"][number], c: 0 | 1 | 2, u: 0 | 1 | 2, v: 0 | 1 | 2, at: number, out: Vec2[]): void {
  const a = disc.u[c];
  const b = disc.v[c];
  const reach = Math.hypot(a, b);
  const off = at - disc.centre[c];
  if (reach === 0 || Math.abs(off) > reach) return;
  const middle = Math.atan2(b, a);
  const half = Math.acos(off / reach);
  for (const t of [middle - half, middle + half]) {
    const [s, k] = [Math.sin(t), Math.cos(t)];
    out.push([disc.centre[u] + k * disc.u[u] + s * disc.v[u], disc.centre[v] + k * disc.u[v] + s * disc.v[v]]);
  }
}
