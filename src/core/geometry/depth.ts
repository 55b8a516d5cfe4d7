import type { Body } from "./body.ts";
import { CIRCULAR, CORE, CORE_POINTS, CORE_ROUND, CORNERS, DISCS, FACTS, START } from "./compile.ts";
import { leastWidth, searchDepth, searchWasCertain, startSearch, tryDirection } from "./depth-search.ts";
import { discDepth } from "./depth-disc.ts";
import { polytopeDepth } from "./depth-polytope.ts";
import { isZonotope, zonotopeDepth } from "./depth-zonotope.ts";
import { facetsOf } from "./facets.ts";

/**
 * Overlap depth of two convex cores: the least translation that parts them, by the shortest exact way the pair allows.
 * Boxes, segments and points (and the travel box) are sums of segments, whose facets are square to two of them each.
 * Polytopes: facet normals, and crossed edges whose arcs of normals cross. Cylinders with one axis, segments along it and
 * points: side and ends. Anything else: the certain search of depth-search.ts.
 */

/** Whether the last depth is exact (to rounding, or certain to 1e-6 mm by search). */
export let depthIsCertain = true;

/**
 * Least width of A - B - T over all directions, mm, or any width not above `enough` as soon as one is found. Negative
 * when a direction parts the cores after all. The direction is in `separatingNormal`.
 */
export function coreDepth(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  enough: number,
): number {
  depthIsCertain = true;
  startSearch();
  if (isZonotope(a, pieceA) && isZonotope(b, pieceB)) return zonotopeDepth(a, pieceA, b, pieceB, travel);
  if (travel === null && parallelRounds(a, pieceA, b, pieceB)) return leastWidth();
  tryAxes(a, pieceA, b, pieceB, travel);
  if (leastWidth() <= enough) return leastWidth();
  if (a.facts[FACTS * pieceA + CIRCULAR] === 1 && isZonotope(b, pieceB)) return discDepth(a, pieceA, 1, b, pieceB, a, pieceA, b, pieceB, travel);
  if (b.facts[FACTS * pieceB + CIRCULAR] === 1 && isZonotope(a, pieceA)) return discDepth(b, pieceB, -1, a, pieceA, a, pieceA, b, pieceB, travel);
  if (a.facts[FACTS * pieceA + DISCS] === 0 && b.facts[FACTS * pieceB + DISCS] === 0) {
    const facetsA = facetsOf(a, pieceA);
    const facetsB = facetsOf(b, pieceB);
    if (facetsA && facetsB) return polytopeDepth(a, pieceA, facetsA, b, pieceB, facetsB, travel, enough);
  }
  const width = searchDepth(a, pieceA, b, pieceB, travel, enough);
  depthIsCertain = searchWasCertain;
  return width;
}

/** Axis (half length times direction) and radius of a cylinder, a segment or a point; false for anything else. */
const AXES = new Float64Array(14);
function readAxis(body: Body, piece: number, at: number): boolean {
  const { world } = body;
  const s = body.facts[FACTS * piece + START]!;
  if (body.facts[FACTS * piece + CORE] === CORE_ROUND) {
    if (body.facts[FACTS * piece + CIRCULAR] === 0) return false;
    for (let k = 0; k < 6; k++) AXES[at + k] = world[s + k]!;
    AXES[at + 6] = Math.sqrt(world[s + 6]! ** 2 + world[s + 7]! ** 2 + world[s + 8]! ** 2);
    return true;
  }
  if (body.facts[FACTS * piece + CORE] !== CORE_POINTS || body.facts[FACTS * piece + CORNERS]! > 2) return false;
  const q = body.facts[FACTS * piece + CORNERS] === 2 ? s + 3 : s;
  for (let k = 0; k < 3; k++) {
    AXES[at + k] = (world[s + k]! + world[q + k]!) / 2;
    AXES[at + 3 + k] = (world[q + k]! - world[s + k]!) / 2;
  }
  AXES[at + 6] = 0;
  return true;
}

/**
 * Cylinders, segments and points whose axes have one direction: A - B is a cylinder, left through an end or the side,
 * whichever is nearer. Tries those directions and says whether the pair was such.
 */
function parallelRounds(a: Body, pieceA: number, b: Body, pieceB: number): boolean {
  if (!readAxis(a, pieceA, 0) || !readAxis(b, pieceB, 7)) return false;
  const halfA = Math.sqrt(AXES[3]! ** 2 + AXES[4]! ** 2 + AXES[5]! ** 2);
  const halfB = Math.sqrt(AXES[10]! ** 2 + AXES[11]! ** 2 + AXES[12]! ** 2);
  const o = halfA >= halfB ? 3 : 10;
  const half = Math.max(halfA, halfB);
  if (half === 0) return false;
  const x = AXES[o]! / half;
  const y = AXES[o + 1]! / half;
  const z = AXES[o + 2]! / half;
  const other = o === 3 ? 10 : 3;
  const sx = y * AXES[other + 2]! - z * AXES[other + 1]!;
  const sy = z * AXES[other]! - x * AXES[other + 2]!;
  const sz = x * AXES[other + 1]! - y * AXES[other]!;
  if (sx * sx + sy * sy + sz * sz > 1e-24 * half * half) return false;
  const cx = AXES[0]! - AXES[7]!;
  const cy = AXES[1]! - AXES[8]!;
  const cz = AXES[2]! - AXES[9]!;
  const along = cx * x + cy * y + cz * z;
  const end = along > 0 ? -1 : 1;
  tryDirection(a, pieceA, b, pieceB, null, end * x, end * y, end * z);
  let rx = cx - along * x;
  let ry = cy - along * y;
  let rz = cz - along * z;
  let off = Math.sqrt(rx * rx + ry * ry + rz * rz);
  if (!(off > 1e-9)) {
    // On one axis: every way out through the side is as long.
    const [mx, my, mz] = [Math.abs(x), Math.abs(y), Math.abs(z)];
    rx = mx <= my && mx <= mz ? 0 : my <= mz ? -z : y;
    ry = mx <= my && mx <= mz ? z : my <= mz ? 0 : -x;
    rz = mx <= my && mx <= mz ? -y : my <= mz ? x : 0;
    off = Math.sqrt(rx * rx + ry * ry + rz * rz);
  }
  tryDirection(a, pieceA, b, pieceB, null, -rx / off, -ry / off, -rz / off);
  return true;
}

/** Directions that are often the answer and cost next to nothing: the car's axes, and the axes the pieces have. */
function tryAxes(a: Body, pieceA: number, b: Body, pieceB: number, travel: Float64Array | null): void {
  for (let sign = 1; sign >= -1; sign -= 2) {
    tryDirection(a, pieceA, b, pieceB, travel, sign, 0, 0);
    tryDirection(a, pieceA, b, pieceB, travel, 0, sign, 0);
    tryDirection(a, pieceA, b, pieceB, travel, 0, 0, sign);
  }
  for (let side = 0; side < 2; side++) {
    const body = side === 0 ? a : b;
    const piece = side === 0 ? pieceA : pieceB;
    if (body.facts[FACTS * piece + CORE] !== CORE_ROUND) continue;
    const u = body.facts[FACTS * piece + START]! + 6;
    const { world } = body;
    // Square to the end discs.
    const x = world[u + 1]! * world[u + 5]! - world[u + 2]! * world[u + 4]!;
    const y = world[u + 2]! * world[u + 3]! - world[u]! * world[u + 5]!;
    const z = world[u]! * world[u + 4]! - world[u + 1]! * world[u + 3]!;
    const length = Math.sqrt(x * x + y * y + z * z);
    if (!(length > 0)) continue;
    tryDirection(a, pieceA, b, pieceB, travel, x / length, y / length, z / length);
    tryDirection(a, pieceA, b, pieceB, travel, -x / length, -y / length, -z / length);
  }
}
