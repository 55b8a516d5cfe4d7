import type { Vec2 } from "../frames.ts";
import { PROJECTION, type View } from "../frames.ts";
import type { Piece } from "./piece.ts";
import { convexHull } from "./polygons.ts";

/** How many chords a full circle of this radius needs to stay within `tolerance`, a multiple of 4, 12 to 180. */
export function chordsFor(radius: number, tolerance: number): number {
  if (!(radius > tolerance)) return 12;
  const chords = Math.PI / Math.acos(1 - tolerance / radius);
  return Math.min(180, Math.max(12, 4 * Math.ceil(chords / 4)));
}

/**
 * Outline of a convex piece in a view: what the eye sees of it, mm at full size. Exact for flat-faced pieces; curves become chords within
 * `tolerance` of them (inside). Anticlockwise.
 * @param piece in the car frame (`placePiece` places it)
 */
export function outlineOfPiece(piece: Piece, view: View, tolerance = 0.2): Vec2[] {
  const { u, v } = PROJECTION[view];
  const points: [number, number][] = piece.points.map((p) => [p[u], p[v]]);
  for (const disc of piece.discs) {
    const reach = Math.max(Math.hypot(disc.u[u], disc.u[v]), Math.hypot(disc.v[u], disc.v[v]));
    const n = reach === 0 ? 1 : chordsFor(reach * 1.5, tolerance);
    for (let i = 0; i < n; i++) {
      const [s, c] = [Math.sin((2 * Math.PI * i) / n), Math.cos((2 * Math.PI * i) / n)];
      points.push([disc.centre[u] + c * disc.u[u] + s * disc.v[u], disc.centre[v] + c * disc.u[v] + s * disc.v[v]]);
    }
  }
  return grow(convexHull(points), piece.radius, tolerance);
}

/** A convex polygon grown by a disc: hull of a circle about each corner. */
export function grow(hull: readonly Vec2[], radius: number, tolerance: number): Vec2[] {
  if (radius <= 0) return [...hull];
  const n = chordsFor(radius, tolerance);
  return convexHull(hull.flatMap((p) => Array.from({ length: n }, (_, i): Vec2 => [p[0] + radius * Math.cos((2 * Math.PI * i) / n), p[1] + radius * Math.sin((2 * Math.PI * i) / n)])));
}
