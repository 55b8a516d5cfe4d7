import type { Vec3 } from "../frames.ts";
import type { Body } from "../geometry/body.ts";
import { createMeasure, measureBodies, type Measure } from "../geometry/measure.ts";
import type { TravelBox } from "../geometry/piece.ts";
import { hullOfMovements, relativeMovement, type RelativeMovement } from "./movement.ts";
import type { Block, Thing } from "./things.ts";

/** How two things may move against each other, block by block, and whether they do at all. */
export interface PairMovement {
  readonly blocksA: readonly Block[];
  readonly blocksB: readonly Block[];
  /** Of block i of a and j of b at i * blocksB.length + j. */
  readonly relative: readonly RelativeMovement[];
  /** They move against each other, covered or not. */
  readonly moving: boolean;
  readonly notCovered: readonly string[];
}

const NOTHING: readonly string[] = [];

export function pairMovement(a: Thing, b: Thing): PairMovement {
  const blocksA = a.against.get(b.owner) ?? a.blocks;
  const blocksB = b.against.get(a.owner) ?? b.blocks;
  const relative: RelativeMovement[] = [];
  let moving = false;
  let words: Set<string> | null = null;
  for (const word of a.notCovered) (words ??= new Set()).add(word);
  for (const word of b.notCovered) (words ??= new Set()).add(word);
  for (const p of blocksA) {
    for (const q of blocksB) {
      const here = p.chains.length === 1 && q.chains.length === 1
        ? relativeMovement(p.chains[0]!, q.chains[0]!)
        : hullOfMovements(p.chains.flatMap((one) => q.chains.map((other) => relativeMovement(one, other))));
      relative.push(here);
      if (!here.still || here.notCovered.length > 0) moving = true;
      for (const word of here.notCovered) (words ??= new Set()).add(word);
    }
  }
  return { blocksA, blocksB, relative, moving, notCovered: words === null ? NOTHING : [...words].sort() };
}

export interface MeasuredPair {
  readonly distance: number;
  readonly pointA: Vec3;
  readonly pointB: Vec3;
  readonly depthIsEstimate: boolean;
  readonly worst: number;
  readonly shares: { readonly movement: number; readonly plusMinus: number; readonly growth: number };
}

const drawn = createMeasure();
const scratch = createMeasure();

/** The drawn distance of two things over all their blocks, written to `drawn`; null where one has nothing left to check. */
function measureDrawn(movement: PairMovement): { distance: number; pointA: Vec3; pointB: Vec3; depthIsEstimate: boolean } | null {
  const { blocksA, blocksB } = movement;
  let found: { distance: number; pointA: Vec3; pointB: Vec3; depthIsEstimate: boolean } | null = null;
  for (const p of blocksA) {
    for (const q of blocksB) {
      measureBodies(p.body, q.body, null, found === null ? Infinity : found.distance, drawn);
      if (found !== null && !(drawn.distance < found.distance)) continue;
      found = { distance: drawn.distance, pointA: pointOf(drawn.pointA), pointB: pointOf(drawn.pointB), depthIsEstimate: drawn.depthIsEstimate };
    }
  }
  if (found !== null && found.distance < 0 && blocksA.length * blocksB.length > 1) found.depthIsEstimate = true;
  return found;
}

function pointOf(p: Measure["pointA"]): Vec3 {
  return [p[0]!, p[1]!, p[2]!];
}

type Size = "drawn" | "grown" | "stretches" | "whole";

function bodyAt(block: Block, size: Size): Body {
  if (size === "drawn") return block.body;
  if (size === "grown" || block.hot === null) return block.grown ?? block.body;
  return size === "stretches" ? block.hot.stretches() : block.hot.whole();
}

/** Least signed distance over all blocks, swept by their movement, at a size; Infinity beyond the cut-off. */
function swept({ blocksA, blocksB, relative }: PairMovement, size: Size, cutoff: number): number {
  let least = Infinity;
  for (let i = 0, n = 0; i < blocksA.length; i++) {
    for (let j = 0; j < blocksB.length; j++, n++) {
      const move = relative[n]!;
      const travel: TravelBox | null = move.still ? null : move.travel;
      measureBodies(bodyAt(blocksA[i]!, size), bodyAt(blocksB[j]!, size), travel, Math.min(cutoff, least), scratch);
      if (scratch.distance < least) least = scratch.distance;
    }
  }
  return least;
}

/** Drawn distance alone, for pairs that are meant to touch; null where it is beyond `reach` or there is nothing left to check. */
export function measureTrusted(a: Thing, b: Thing, reach: number): { distance: number; pointA: Vec3; pointB: Vec3 } | null {
  const found = measureDrawn(pairMovement(a, b));
  return found !== null && found.distance <= reach ? found : null;
}

/**
 * Drawn and worst distance of two things, mm; null where worst is beyond `reach`.
 * Worst takes off, one after the other: movement (drawn less swept distance), plus-minus (what box plus-minuses then cost, and both
 * scalar ones), growth (what remains). The shares add up to drawn less worst, each is at least 0.
 */
export function measurePair(a: Thing, b: Thing, movement: PairMovement, reach: number): MeasuredPair | null {
  const scalars = a.plusMinus + b.plusMinus;
  const { blocksA, blocksB, relative } = movement;
  const hot = blocksA.some((block) => block.hot !== null) || blocksB.some((block) => block.hot !== null);
  const boxed = blocksA.some((block) => block.grown !== null) || blocksB.some((block) => block.grown !== null);
  const still = relative.every((one) => one.still);

  let least = Infinity;
  if (hot || boxed || !still) {
    least = swept(movement, hot ? "stretches" : "grown", reach + scalars);
    if (least === Infinity) return null;
    // Depths of short stretches say little: overlapping, the pieces as drawn are asked.
    if (hot && least <= 0) least = Math.min(least, swept(movement, "whole", Infinity));
  }
  const asDrawn = measureDrawn(movement);
  if (asDrawn === null) return null;
  const { distance } = asDrawn;
  if (!hot && !boxed && still) least = distance;

  // Each step can only take away: what the measurements differ by in their last digits is not a share.
  const moved = still ? distance : !hot && !boxed ? Math.min(distance, least) : Math.min(distance, swept(movement, "drawn", Infinity));
  const grown = !boxed ? moved : !hot ? Math.min(moved, least) : Math.min(moved, swept(movement, "grown", Infinity));
  const worst = Math.min(least, grown) - scalars;
  if (!(worst <= reach)) return null;
  const shares = { movement: distance - moved, plusMinus: moved - grown + scalars, growth: grown - Math.min(least, grown) };
  return { ...asDrawn, worst, shares };
}
