import type { Vec2 } from "../frames.ts";
import { PROJECTION, type View } from "../frames.ts";
import type { Piece } from "./piece.ts";
import { convexHull } from "./polygons.ts";

const MOST_CHORDS = 720;

/** How many chords a full circle of this radius needs to stay within `tolerance`, a multiple of 4, 12 to 720. */
export function chordsFor(radius: number, tolerance: number): number {
  if (!(radius > tolerance)) return 12;
  const chords = Math.PI / Math.acos(1 - tolerance / radius);
  return Math.min(MOST_CHORDS, Math.max(12, 4 * Math.ceil(chords / 4)));
}

/**
 * Outline of a convex piece in a view: what the eye sees of it, mm at full size. Anticlockwise. Exact for flat-faced pieces; curves become chords
 * within `tolerance` of them (inside). Greatest extents along the paper and the lines where the eye grazes cylinders, cones and tubes are exact.
 * @param piece in the car frame (`placePiece` places it)
 */
export function outlineOfPiece(piece: Piece, view: View, tolerance = 0.2): Vec2[] {
  const { u, v } = PROJECTION[view];
  const points: Vec2[] = piece.points.map((p) => [p[u], p[v]]);
  const ellipses = piece.discs.map((d): Ellipse => ({ cu: d.centre[u], cv: d.centre[v], pu: d.u[u], pv: d.u[v], qu: d.v[u], qv: d.v[v] }));
  for (const ellipse of ellipses) addEllipse(ellipse, tolerance, points);
  for (let i = 0; i < ellipses.length; i++) for (let j = i + 1; j < ellipses.length; j++) addGrazing(ellipses[i]!, ellipses[j]!, points);
  return grow(convexHull(points), piece.radius, tolerance);
}

/** {centre + cos t p + sin t q}: a disc as a view sees it. */
interface Ellipse {
  readonly cu: number;
  readonly cv: number;
  readonly pu: number;
  readonly pv: number;
  readonly qu: number;
  readonly qv: number;
}

function addAt(e: Ellipse, t: number, out: Vec2[]): void {
  const [s, c] = [Math.sin(t), Math.cos(t)];
  out.push([e.cu + c * e.pu + s * e.qu, e.cv + c * e.pv + s * e.qv]);
}

function addEllipse(e: Ellipse, tolerance: number, out: Vec2[]): void {
  // half-axes from the conjugate ones (the singular values of [p q])
  const sum = e.pu ** 2 + e.pv ** 2 + e.qu ** 2 + e.qv ** 2;
  const det = e.pu * e.qv - e.pv * e.qu;
  const half = Math.sqrt(Math.max(0, sum * sum - 4 * det * det));
  const major = Math.sqrt((sum + half) / 2);
  if (major === 0) {
    out.push([e.cu, e.cv]);
    return;
  }
  // farthest along u and along v: exact extents, and the ends of a disc seen edge on
  const tu = Math.atan2(e.qu, e.pu);
  const tv = Math.atan2(e.qv, e.pv);
  for (const t of [tu, tu + Math.PI, tv, tv + Math.PI]) addAt(e, t, out);
  if (Math.abs(det) < 1e-12 * major * major) return;
  const n = chordsFor(major, tolerance);
  for (let i = 0; i < n; i++) addAt(e, (2 * Math.PI * i) / n, out);
}

/** Ends of the lines that touch both ellipses from outside, where they are alike (cones, ovals) or lie on one tube. */
function addGrazing(a: Ellipse, b: Ellipse, out: Vec2[]): void {
  const [du, dv] = [b.cu - a.cu, b.cv - a.cv];
  const sizeA = Math.hypot(a.pu, a.pv, a.qu, a.qv);
  const sizeB = Math.hypot(b.pu, b.pv, b.qu, b.qv);
  const [big, size] = sizeA >= sizeB ? [a, sizeA] : [b, sizeB];
  if (size === 0) return;
  const det = big.pu * big.qv - big.pv * big.qu;
  const [ka, kb] = [sizeA / size, sizeB / size];
  const alike = Math.hypot(a.pu - ka * big.pu, a.pv - ka * big.pv, a.qu - ka * big.qu, a.qv - ka * big.qv, b.pu - kb * big.pu, b.pv - kb * big.pv, b.qu - kb * big.qu, b.qv - kb * big.qv) < 1e-9 * size;
  if (alike && Math.abs(det) > 1e-12 * size * size) {
    // where the big one is a circle of radius 1: circles of radius ka and kb, w apart
    const wu = (big.qv * du - big.qu * dv) / det;
    const wv = (big.pu * dv - big.pv * du) / det;
    const w = Math.hypot(wu, wv);
    if (w <= Math.abs(ka - kb)) return;
    const middle = Math.atan2(wv, wu);
    const half = Math.acos((ka - kb) / w);
    for (const t of [middle - half, middle + half]) {
      addAt(a, t, out);
      addAt(b, t, out);
    }
    return;
  }
  // on one tube: rulings run along the centre line, and graze where the normal is square to it
  for (const e of [a, b]) {
    const t = Math.atan2(du * e.qv - dv * e.qu, du * e.pv - dv * e.pu);
    addAt(e, t, out);
    addAt(e, t + Math.PI, out);
  }
}

/** A convex polygon grown by a disc: hull of a circle about each corner. */
export function grow(hull: readonly Vec2[], radius: number, tolerance: number): Vec2[] {
  if (radius <= 0) return [...hull];
  const n = chordsFor(radius, tolerance);
  const circle = Array.from({ length: n }, (_, i): Vec2 => [radius * Math.cos((2 * Math.PI * i) / n), radius * Math.sin((2 * Math.PI * i) / n)]);
  return convexHull(hull.flatMap((p) => circle.map(([a, b]): Vec2 => [p[0] + a, p[1] + b])));
}
