import type { Body } from "./body.ts";
import { FACTS, HALF, RECTANGULAR, SEGMENT_FROM, SEGMENT_TO, SIZES, SPINE, SPINE_POINTS, START } from "./compile.ts";
import { closestA, closestB, coreDistance, TOUCHING } from "./gjk.ts";
import { capDistance, edgeDistance, lineBetween, roundBoxDistance } from "./rims.ts";
import { BEYOND, CLOSEST_AT, segmentBoxSquare } from "./segments.ts";

/** The distance of two pieces' cores by the quickest way that proves it: closed forms, round sides, rims, then descent. */

/** mm: how far beyond its end plane a point of a round side still counts as on it. */
const ON_SIDE = 1e-9;

/** Whether the point of a spine grown by its radius along n, starting from x, y, z, is between the piece's end planes. */
function onRoundSide(body: Body, piece: number, x: number, y: number, z: number): boolean {
  const { world } = body;
  const e = body.facts[FACTS * piece + SPINE]! + 3 * body.facts[FACTS * piece + SPINE_POINTS]!;
  const low = (x - world[e]!) * world[e + 6]! + (y - world[e + 1]!) * world[e + 7]! + (z - world[e + 2]!) * world[e + 8]!;
  if (low > ON_SIDE) return false;
  const high =
    (x - world[e + 3]!) * world[e + 9]! + (y - world[e + 4]!) * world[e + 10]! + (z - world[e + 5]!) * world[e + 11]!;
  return high <= ON_SIDE;
}

/** Whether a point is within a segment, up to a billionth of its length. */
function onSegment(world: Float64Array, at: number, to: number, p: Float64Array): boolean {
  const x = world[to]! - world[at]!;
  const y = world[to + 1]! - world[at + 1]!;
  const z = world[to + 2]! - world[at + 2]!;
  const t = (p[0]! - world[at]!) * x + (p[1]! - world[at + 1]!) * y + (p[2]! - world[at + 2]!) * z;
  const square = x * x + y * y + z * z;
  return t >= 0 && t <= square;
}

/**
 * The nearest features of two segment-like pieces are not both round sides: a rim or an end of one against the side or a
 * rim or end of the other. -1 when that is not so either (an end face, say).
 */
function rimDistance(
  a: Body,
  i: number,
  b: Body,
  j: number,
  s: number,
  sEnd: number,
  t: number,
  tEnd: number,
  enough: number,
): number {
  const vx = closestA[0]! - closestB[0]!;
  const vy = closestA[1]! - closestB[1]!;
  const vz = closestA[2]! - closestB[2]!;
  const insideA = CLOSEST_AT[0]! > 0 && CLOSEST_AT[0]! < 1;
  const insideB = CLOSEST_AT[1]! > 0 && CLOSEST_AT[1]! < 1;
  if (insideA && !insideB && lineBetween(a.world, s, sEnd, a.sizes[SIZES * i + 1]!)) {
    const found = edgeDistance(a, i, b, j, vx, vy, vz, 1, enough);
    if (found === Infinity) return found;
    if (found > 0 && (a.facts[FACTS * i + SPINE]! >= 0 ? onRoundSide(a, i, closestA[0]!, closestA[1]!, closestA[2]!) : onSegment(a.world, s, sEnd, closestA))) return found;
  } else if (insideB && !insideA && lineBetween(b.world, t, tEnd, b.sizes[SIZES * j + 1]!)) {
    const found = edgeDistance(a, i, b, j, vx, vy, vz, 2, enough);
    if (found === Infinity) return found;
    if (found > 0 && (b.facts[FACTS * j + SPINE]! >= 0 ? onRoundSide(b, j, closestB[0]!, closestB[1]!, closestB[2]!) : onSegment(b.world, t, tEnd, closestB))) return found;
  }
  return edgeDistance(a, i, b, j, vx, vy, vz, 0, enough);
}

/**
 * Distance of the cores of two pieces, -1 when they overlap, Infinity when more than `enough`; closest points in
 * `closestA`, `closestB`. Segments and the spines of round pieces have closed forms; a spine's answer counts where the
 * point it gives is on the piece's round side, and bounds the distance from below everywhere.
 */
export function pairDistance(a: Body, i: number, b: Body, j: number, travel: Float64Array | null, enough: number): number {
  const spineA = a.facts[FACTS * i + SPINE]! >= 0;
  const spineB = b.facts[FACTS * j + SPINE]! >= 0;
  const ra = spineA ? a.sizes[SIZES * i + 1]! : 0;
  const rb = spineB ? b.sizes[SIZES * j + 1]! : 0;
  const within = enough + ra + rb;
  const s = travel === null ? a.facts[FACTS * i + SEGMENT_FROM]! : -1;
  const t = travel === null ? b.facts[FACTS * j + SEGMENT_FROM]! : -1;
  const sEnd = a.facts[FACTS * i + SEGMENT_TO]!;
  const tEnd = b.facts[FACTS * j + SEGMENT_TO]!;
  let core: number;
  if (s >= 0 && t >= 0) {
    // Measured just before (see measurePair): the points are there, the distance is between them.
    const x = closestA[0]! - closestB[0]!;
    const y = closestA[1]! - closestB[1]!;
    const z = closestA[2]! - closestB[2]!;
    core = x * x + y * y + z * z;
  } else if (s >= 0 && b.facts[FACTS * j + RECTANGULAR] === 1) {
    core = segmentBoxSquare(a.world, s, sEnd, b.world, b.facts[FACTS * j + START]!, b.sizes, SIZES * j + HALF, closestA, closestB, within > 0 ? within * within : Infinity);
  } else if (t >= 0 && a.facts[FACTS * i + RECTANGULAR] === 1) {
    core = segmentBoxSquare(b.world, t, tEnd, a.world, a.facts[FACTS * i + START]!, a.sizes, SIZES * i + HALF, closestB, closestA, within > 0 ? within * within : Infinity);
  } else {
    if (!spineA && !spineB) return coreDistance(a, i, b, j, travel, enough);
    core = coreDistance(a, i, b, j, travel, within, spineA, spineB);
    if (core === Infinity) return core;
    core = core > 0 ? core * core : 0;
  }
  if (core > within * within && within > 0) return Infinity;
  core = core > TOUCHING * TOUCHING ? Math.sqrt(core) : -1;
  if (!spineA && !spineB) return core;
  const distance = core - ra - rb;
  if (distance > TOUCHING) {
    const nx = (closestB[0]! - closestA[0]!) / core;
    const ny = (closestB[1]! - closestA[1]!) / core;
    const nz = (closestB[2]! - closestA[2]!) / core;
    const ax = closestA[0]! + ra * nx;
    const ay = closestA[1]! + ra * ny;
    const az = closestA[2]! + ra * nz;
    if (!spineA || onRoundSide(a, i, ax, ay, az)) {
      const bx = closestB[0]! - rb * nx;
      const by = closestB[1]! - rb * ny;
      const bz = closestB[2]! - rb * nz;
      if (!spineB || (travel === null && onRoundSide(b, j, bx, by, bz))) {
        closestA[0] = ax;
        closestA[1] = ay;
        closestA[2] = az;
        closestB[0] = bx;
        closestB[1] = by;
        closestB[2] = bz;
        return distance;
      }
    }
  }
  if (core > 0 && travel === null) {
    const vx = closestA[0]! - closestB[0]!;
    const vy = closestA[1]! - closestB[1]!;
    const vz = closestA[2]! - closestB[2]!;
    let found: number;
    if (s >= 0 && t >= 0) found = rimDistance(a, i, b, j, s, sEnd, t, tEnd, enough);
    else if (s >= 0 && b.facts[FACTS * j + RECTANGULAR] === 1) found = roundBoxDistance(a, i, b, j, true, BEYOND, enough);
    else if (t >= 0 && a.facts[FACTS * i + RECTANGULAR] === 1) found = roundBoxDistance(b, j, a, i, false, BEYOND, enough);
    else found = edgeDistance(a, i, b, j, vx, vy, vz, 0, enough);
    if (found > 0) return found;
    found = capDistance(a, i, b, j, true, vx, vy, vz, enough);
    if (found > 0) return found;
    found = capDistance(b, j, a, i, false, -vx, -vy, -vz, enough);
    if (found > 0) return found;
  }
  return coreDistance(a, i, b, j, travel, enough);
}

