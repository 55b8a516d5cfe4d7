import type { Piece } from "../geometry/piece.ts";
import { cutTube, type TubePath, type TubePiece } from "../geometry/tubes.ts";
import type { Run } from "../layout/schema.ts";

/**
 * Mean coefficient of thermal expansion from 20 degC, 1e-6/K, at some temperatures, valid from about 0 degC to the last one named. 304: 17.2 to 100 degC
 * from a published property table (second-hand), the rest from memory; steel 11.7 to 100 from a published table (second-hand), 14 to 600 from memory;
 * 321, 409, titanium from memory.
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

/** Lengthening of a straight length, mm: alpha (temperature - 20) x length; negative when colder than 20 degC. @example 1000 mm of 304 at 620 is 11.17 */
export function lengthening(material: NonNullable<Run["material"]>, temperature: number, length: number): number {
  return expansionCoefficient(material, temperature) * (temperature - 20) * length;
}

export interface Growth {
  /** How far each node may have moved, mm: growth of the path from the anchor to it. */
  readonly atNode: ReadonlyMap<string, number>;
  /** True where the run is hot but its material or anchor is missing: growth is then 0 and not covered. */
  readonly unknown: boolean;
  /** False where nothing grows. */
  readonly any: boolean;
}

/**
 * Thermal growth of a run at every node: alpha (surface - 20) x path length from the anchor, each leg at the hotter of its nodes' surfaces (a node
 * without one has the run's; a leg with neither has that of the hottest node of the run). Shrinking when cold counts by its size.
 * A run without a surface has no growth.
 */
export function growthOf(run: Run, path: TubePath): Growth {
  const given = run.nodes.map((node) => node.surface ?? run.heat?.surface);
  const known = given.filter((surface): surface is number => surface !== undefined);
  const none = (unknown: boolean): Growth => ({ atNode: new Map(run.nodes.map((node) => [node.key, 0])), unknown, any: false });
  if (known.length === 0) return none(false);
  if (run.material === undefined || run.anchor === undefined) return none(true);
  const hottest = Math.max(...known);
  const surfaceAt = new Map(run.nodes.map((node, i) => [node.key, given[i]]));
  const atNode = new Map<string, number>([[run.anchor, 0]]);
  const open = [run.anchor];
  while (open.length > 0) {
    const key = open.pop()!;
    for (const index of path.nodes.get(key)!.legs) {
      const leg = path.legs[index]!;
      const next = leg.from === key ? leg.to : leg.from;
      if (atNode.has(next)) continue;
      const surfaces = [surfaceAt.get(leg.from), surfaceAt.get(leg.to)].filter((surface): surface is number => surface !== undefined);
      const surface = surfaces.length > 0 ? Math.max(...surfaces) : hottest;
      atNode.set(next, atNode.get(key)! + Math.abs(lengthening(run.material, surface, leg.length)));
      open.push(next);
    }
  }
  return { atNode, unknown: false, any: [...atNode.values()].some((g) => g > 0) };
}

/** Growth at a place along a leg, mm: it rises evenly from the node nearer the anchor. */
function growthAt(growth: Growth, path: TubePath, tube: TubePiece, along: number): number {
  const from = growth.atNode.get(tube.nodes[0]) ?? 0;
  if (tube.leg < 0) return from;
  const to = growth.atNode.get(tube.nodes[1]) ?? 0;
  const { length } = path.legs[tube.leg]!;
  return length > 0 ? from + (to - from) * Math.min(1, Math.max(0, along / length)) : Math.max(from, to);
}

/** Growth at the end of a stretch that is farther from the anchor, mm: never less than anywhere on it. */
function growthOn(growth: Growth, path: TubePath, tube: TubePiece): number {
  return Math.max(growthAt(growth, path, tube, tube.from), growthAt(growth, path, tube, tube.to));
}

/** The most that any of some tubes grows, mm. */
export function mostGrowth(tubes: readonly TubePiece[], growth: Growth, path: TubePath): number {
  return tubes.reduce((most, tube) => Math.max(most, growthOn(growth, path, tube)), 0);
}

/** Growth rises by no more than this within a stretch, mm: what worst may be pessimistic by. */
export const GROWTH_STEP = 0.2;
const MOST_STRETCHES = 200;

/** Pieces as they are drawn, each a ball larger by the growth at its farther end: never less than the true growth. */
export function grownPieces(tubes: readonly TubePiece[], pieces: readonly Piece[], growth: Growth, path: TubePath): Piece[] {
  return pieces.map((piece, i) => ({ ...piece, radius: piece.radius + growthOn(growth, path, tubes[i]!) }));
}

/** Tubes cut into stretches along which growth rises by at most `GROWTH_STEP`. */
export function cutByGrowth(tubes: readonly TubePiece[], growth: Growth, path: TubePath): TubePiece[] {
  return tubes.flatMap((tube) => {
    const rise = Math.abs(growthAt(growth, path, tube, tube.to) - growthAt(growth, path, tube, tube.from));
    const stretches = Math.min(MOST_STRETCHES, Math.ceil(rise / GROWTH_STEP));
    if (tube.leg < 0 || stretches < 2) return [tube];
    const place = (k: number) => tube.from + ((tube.to - tube.from) * k) / stretches;
    return Array.from({ length: stretches }, (_, k) => [
      ...(k > 0 ? [{ leg: tube.leg, from: -Infinity, to: place(k) }] : []),
      ...(k + 1 < stretches ? [{ leg: tube.leg, from: place(k + 1), to: Infinity }] : []),
    ]).flatMap((away) => cutTube([tube], away, new Set()));
  });
}
