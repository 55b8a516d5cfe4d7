import { featureCollection, polygon, union } from "@turf/turf";
import type { Vec2, View } from "../frames.ts";
import { PROJECTION } from "../frames.ts";
import { outlineOfPiece } from "./outline-of-piece.ts";
import type { Piece } from "./piece.ts";

/** A closed loop of a drawing, mm at full size: outer ones anticlockwise, holes clockwise. */
export type Loop = readonly Vec2[];

/**
 * Outline of the union of pieces in a view. A silhouette does not change when a thing moves along, only when it turns: callers keep it by
 * turn and shift it.
 * Curves within `tolerance`. Cost grows with the pieces' corners; one piece costs nothing but its own outline.
 * @param pieces in the car frame
 */
export function silhouette(pieces: readonly Piece[], view: View, tolerance = 0.2): Loop[] {
  const outlines = pieces.map((piece) => outlineOfPiece(piece, view, tolerance)).filter((loop) => loop.length >= 3);
  return unionOf(outlines);
}

/** Union of simple loops (turf's planar union, exact to rounding). */
export function unionOf(loops: readonly Loop[]): Loop[] {
  if (loops.length <= 1) return [...loops];
  const features = loops.map((loop) => polygon([[...loop, loop[0]!].map((p) => [p[0], p[1]])]));
  const joined = union(featureCollection(features));
  if (!joined) return [];
  const polygons = joined.geometry.type === "Polygon" ? [joined.geometry.coordinates] : joined.geometry.coordinates;
  return polygons.flatMap((rings) => rings.map((ring) => ring.slice(0, -1).map((p): Vec2 => [p[0]!, p[1]!])));
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
