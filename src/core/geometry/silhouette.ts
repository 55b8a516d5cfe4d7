import type { View } from "../frames.ts";
import { PROJECTION } from "../frames.ts";
import { uniteLoops, type Loop } from "./loop-booleans.ts";
import { outlineOfPiece } from "./outline-of-piece.ts";
import type { Piece } from "./piece.ts";
import { signedArea } from "./polygons.ts";

export type { Loop } from "./loop-booleans.ts";

/**
 * Outline of the union of pieces in a view. A silhouette does not change when a thing moves along, only when it turns: callers keep it by
 * turn and shift it.
 * Curves within `tolerance`. Cost grows with the pieces' corners; one piece costs nothing but its own outline, ten about a millisecond.
 * @param pieces in the car frame
 */
export function silhouette(pieces: readonly Piece[], view: View, tolerance = 0.2): Loop[] {
  return unionOf(pieces.map((piece) => outlineOfPiece(piece, view, tolerance)).filter((loop) => loop.length >= 3), tolerance);
}

/**
 * Union of simple loops. Holes narrower than `tolerance`, which are the chords of neighbouring curves and not there in truth, are closed.
 */
export function unionOf(loops: readonly Loop[], tolerance = 0): Loop[] {
  if (loops.length <= 1) return [...loops];
  const joined = uniteLoops(loops);
  return tolerance > 0 ? joined.filter((loop) => !isCrack(loop, tolerance)) : joined;
}

/** A hole whose mean width, twice the area over the way round, is below the tolerance. */
function isCrack(loop: Loop, tolerance: number): boolean {
  const area = signedArea(loop);
  if (area > 0) return false;
  let around = 0;
  loop.forEach((p, i) => (around += Math.hypot(loop[(i + 1) % loop.length]![0] - p[0], loop[(i + 1) % loop.length]![1] - p[1])));
  return -2 * area < tolerance * around;
}

/** How far a thing reaches toward the reader in a view: things that reach farther are drawn later. */
export function nearnessOf(pieces: readonly Piece[], view: View): number {
  const { depth, toward } = PROJECTION[view];
  let nearest = -Infinity;
  for (const piece of pieces) {
    for (const p of piece.points) nearest = Math.max(nearest, toward * p[depth] + piece.radius);
    for (const d of piece.discs) nearest = Math.max(nearest, toward * d.centre[depth] + Math.hypot(d.u[depth], d.v[depth]) + piece.radius);
  }
  return nearest;
}
