import type { Vec3 } from "../frames.ts";
import type { Disc, Piece } from "../geometry/piece.ts";
import type { Source } from "../layout/schema.ts";

/** The part of a source's plus-minus that is taken off the gap as it is, mm; a box is not one. */
export function scalarPlusMinus(source: Source): number {
  return typeof source.plusMinus === "number" ? source.plusMinus : 0;
}

/**
 * Pieces grown by a box plus-minus: Minkowski sum with the box in local axes, so each way by its own amount. Exact and convex: every corner and disc
 * stands at each of the box's corners. Null where there is no box or it is nothing.
 */
export function grownByPlusMinus(pieces: readonly Piece[], source: Source): Piece[] | null {
  if (typeof source.plusMinus === "number") return null;
  const { x, y, z } = source.plusMinus;
  const ends = (range: readonly [number, number]) => (range[0] === range[1] ? [range[0]] : [range[0], range[1]]);
  const shifts: Vec3[] = ends(x).flatMap((dx) => ends(y).flatMap((dy) => ends(z).map((dz): Vec3 => [dx, dy, dz])));
  if (shifts.length === 1 && shifts[0]!.every((d) => d === 0)) return null;
  const plus = (p: Vec3, d: Vec3): Vec3 => [p[0] + d[0], p[1] + d[1], p[2] + d[2]];
  return pieces.map((piece) => {
    const square = piece.discs.length === 0 && piece.radius === 0 ? squareBox(piece.points) : null;
    if (square) return grownBox(square, [x, y, z]);
    return {
      points: piece.points.flatMap((p) => shifts.map((d) => plus(p, d))),
      discs: piece.discs.flatMap((disc) => shifts.map((d): Disc => ({ ...disc, centre: plus(disc.centre, d) }))),
      radius: piece.radius,
      form: "grown" as const,
    };
  });
}

/** Low and high corner where eight points are those of a box square to the axes, else null. */
function squareBox(points: readonly Vec3[]): readonly [Vec3, Vec3] | null {
  if (points.length !== 8) return null;
  const low = [0, 1, 2].map((k) => Math.min(...points.map((p) => p[k]!)));
  const high = [0, 1, 2].map((k) => Math.max(...points.map((p) => p[k]!)));
  const corners = new Set(points.map((p) => p.map((v, k) => (v === low[k] ? 0 : v === high[k] ? 1 : 2)).join("")));
  if (corners.size !== 8 || [...corners].some((corner) => corner.includes("2"))) return null;
  return [low as unknown as Vec3, high as unknown as Vec3];
}

function grownBox([low, high]: readonly [Vec3, Vec3], by: readonly (readonly [number, number])[]): Piece {
  const ends = [0, 1, 2].map((k) => [low[k]! + by[k]![0], high[k]! + by[k]![1]] as const);
  const points = ends[0]!.flatMap((px) => ends[1]!.flatMap((py) => ends[2]!.map((pz): Vec3 => [px, py, pz])));
  return { points, discs: [], radius: 0, form: "box" };
}
