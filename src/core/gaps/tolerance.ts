import type { Vec3 } from "../frames.ts";
import type { Disc, Piece } from "../geometry/piece.ts";
import type { TubePath } from "../geometry/tubes.ts";
import type { Run, Source } from "../layout/schema.ts";

/** The part of a source's plus-minus that is taken off the gap as it is, mm; a box is not one. */
export function scalarPlusMinus(source: Source): number {
  return typeof source.plusMinus === "number" ? source.plusMinus : 0;
}

/**
 * Pieces grown by a box plus-minus: Minkowski sum with the box in local axes, so each way by its own amount. Exact and convex: every corner and disc at
 * the box's corners. Null where there is no box or it is nothing.
 */
export function grownByPlusMinus(pieces: readonly Piece[], source: Source): Piece[] | null {
  if (typeof source.plusMinus === "number") return null;
  const { x, y, z } = source.plusMinus;
  const ends = (range: readonly [number, number]) => (range[0] === range[1] ? [range[0]] : [range[0], range[1]]);
  const shifts: Vec3[] = ends(x).flatMap((dx) => ends(y).flatMap((dy) => ends(z).map((dz): Vec3 => [dx, dy, dz])));
  if (shifts.length === 1 && shifts[0]!.every((d) => d === 0)) return null;
  const plus = (p: Vec3, d: Vec3): Vec3 => [p[0] + d[0], p[1] + d[1], p[2] + d[2]];
  return pieces.map((piece) => ({
    points: piece.points.flatMap((p) => shifts.map((d) => plus(p, d))),
    discs: piece.discs.flatMap((disc) => shifts.map((d): Disc => ({ ...disc, centre: plus(disc.centre, d) }))),
    radius: piece.radius,
    form: "grown",
  }));
}

/** Largest reach of a box plus-minus, mm: for the broad phase. */
export function greatestPlusMinus(source: Source): number {
  if (typeof source.plusMinus === "number") return source.plusMinus;
  const { x, y, z } = source.plusMinus;
  return Math.hypot(Math.max(-x[0], x[1]), Math.max(-y[0], y[1]), Math.max(-z[0], z[1]));
}

/**
 * Mean coefficient of thermal expansion from 20 degC, 1e-6/K, at some temperatures. 304: 17.2 to 100 degC from a published property table (second-hand), the
 * rest from memory; steel 11.7 to 100 from a published table (second-hand), 14 to 600 from memory; 321, 409, titanium from memory.
 */
const EXPANSION: Readonly<Record<NonNullable<Run["material"]>, readonly (readonly [number, number])[]>> = {
  "304": [[100, 17.2], [540, 18.4], [650, 18.7]],
  "321": [[100, 16.6], [540, 18.6], [650, 19.3]],
  "409": [[100, 11.7], [540, 12.4], [650, 12.6]],
  steel: [[100, 11.7], [600, 14]],
  titanium: [[100, 8.6]],
};

/** Mean coefficient from 20 degC to `temperature`, 1/K: straight lines between the known values, level beyond them. */
export function expansionCoefficient(material: NonNullable<Run["material"]>, temperature: number): number {
  const table = EXPANSION[material];
  const above = table.findIndex(([at]) => at >= temperature);
  if (above === 0) return table[0]![1] * 1e-6;
  if (above < 0) return table[table.length - 1]![1] * 1e-6;
  const [t0, a0] = table[above - 1]!;
  const [t1, a1] = table[above]!;
  return (a0 + ((a1 - a0) * (temperature - t0)) / (t1 - t0)) * 1e-6;
}

export interface Growth {
  /** Growth at each node, mm, away from the anchor along the path. */
  readonly atNode: ReadonlyMap<string, number>;
  /** For each leg the larger of its two nodes. */
  readonly onLeg: readonly number[];
  /** True where the run is hot but its material or anchor is missing. */
  readonly unknown: boolean;
}

/**
 * Thermal growth of a run at every node: alpha (surface - 20) x path length from the anchor, each leg at the hotter of its nodes' surfaces (a node
 * without one has the run's). A run without a surface does not grow. Shrinking when cold counts by its size.
 */
export function growthOf(run: Run, path: TubePath): Growth {
  const surfaceAt = new Map(run.nodes.map((node) => [node.key, node.surface ?? run.heat?.surface]));
  const hot = [...surfaceAt.values()].some((surface) => surface !== undefined);
  const none = { atNode: new Map(run.nodes.map((node) => [node.key, 0])), onLeg: path.legs.map(() => 0) };
  if (!hot) return { ...none, unknown: false };
  if (run.material === undefined || run.anchor === undefined) return { ...none, unknown: true };
  const material = run.material;
  const atNode = new Map<string, number>([[run.anchor, 0]]);
  const open = [run.anchor];
  while (open.length > 0) {
    const key = open.pop()!;
    for (const index of path.nodes.get(key)!.legs) {
      const leg = path.legs[index]!;
      const next = leg.from === key ? leg.to : leg.from;
      if (atNode.has(next)) continue;
      const surfaces = [surfaceAt.get(leg.from), surfaceAt.get(leg.to)].filter((s): s is number => s !== undefined);
      const surface = surfaces.length > 0 ? Math.max(...surfaces) : 20;
      const stretch = Math.abs(expansionCoefficient(material, surface) * (surface - 20) * leg.length);
      atNode.set(next, atNode.get(key)! + stretch);
      open.push(next);
    }
  }
  return { atNode, onLeg: path.legs.map((leg) => Math.max(atNode.get(leg.from) ?? 0, atNode.get(leg.to) ?? 0)), unknown: false };
}
