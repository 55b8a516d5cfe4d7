import type { Body } from "./body.ts";
import { CORE, CORE_BOX, CORE_POINTS, CORNERS, FACTS, START } from "./compile.ts";
import { tryDirection } from "./depth-search.ts";
import { NOTHING } from "./support.ts";

/**
 * Depth of boxes, segments and points, with any travel: A - B - T is a sum of segments about a centre (a zonotope), whose
 * facets are square to two of them each. Exact.
 */

/** Half edges of both and of the travel, three doubles each, and the difference of the centres. */
export const GENERATORS = new Float64Array(30);
export const CENTRE = new Float64Array(3);

export const isZonotope = (body: Body, piece: number): boolean =>
  body.facts[FACTS * piece + CORE] === CORE_BOX || (body.facts[FACTS * piece + CORE] === CORE_POINTS && body.facts[FACTS * piece + CORNERS]! <= 2);

/** Adds a piece's half edges; returns how many there are then. `sign` places its centre. */
export function addGenerators(body: Body, piece: number, sign: number, count: number): number {
  const { world } = body;
  const s = body.facts[FACTS * piece + START]!;
  if (body.facts[FACTS * piece + CORE] === CORE_BOX) {
    for (let k = 0; k < 3; k++) CENTRE[k] = CENTRE[k]! + sign * world[s + k]!;
    for (let k = 0; k < 9; k++) GENERATORS[3 * count + k] = world[s + 3 + k]!;
    return count + 3;
  }
  if (body.facts[FACTS * piece + CORNERS] === 1) {
    for (let k = 0; k < 3; k++) CENTRE[k] = CENTRE[k]! + sign * world[s + k]!;
    return count;
  }
  for (let k = 0; k < 3; k++) {
    const p = world[s + k]!;
    const q = world[s + 3 + k]!;
    CENTRE[k] = CENTRE[k]! + (sign * (p + q)) / 2;
    GENERATORS[3 * count + k] = (q - p) / 2;
  }
  return count + 1;
}

export function addTravel(travel: Float64Array, count: number): number {
  for (let k = 0; k < 3; k++) {
    CENTRE[k] = CENTRE[k]! - (travel[k]! + travel[3 + k]!) / 2;
    const half = (travel[3 + k]! - travel[k]!) / 2;
    if (!(half > NOTHING)) continue;
    GENERATORS.fill(0, 3 * count, 3 * count + 3);
    GENERATORS[3 * count + k] = half;
    count++;
  }
  return count;
}

export function zonotopeDepth(a: Body, pieceA: number, b: Body, pieceB: number, travel: Float64Array | null): number {
  CENTRE.fill(0);
  let count = addGenerators(a, pieceA, 1, 0);
  count = addGenerators(b, pieceB, -1, count);
  if (travel !== null) count = addTravel(travel, count);
  let best = Infinity;
  let bx = 1;
  let by = 0;
  let bz = 0;
  for (let i = 0; i < count; i++) {
    const gx = GENERATORS[3 * i]!;
    const gy = GENERATORS[3 * i + 1]!;
    const gz = GENERATORS[3 * i + 2]!;
    for (let j = i + 1; j < count; j++) {
      const hx = GENERATORS[3 * j]!;
      const hy = GENERATORS[3 * j + 1]!;
      const hz = GENERATORS[3 * j + 2]!;
      let x = gy * hz - gz * hy;
      let y = gz * hx - gx * hz;
      let z = gx * hy - gy * hx;
      const square = x * x + y * y + z * z;
      if (!(square > 1e-24 * (gx * gx + gy * gy + gz * gz) * (hx * hx + hy * hy + hz * hz))) continue;
      const length = Math.sqrt(square);
      if (!(length > NOTHING)) continue;
      x /= length;
      y /= length;
      z /= length;
      let reach = 0;
      for (let k = 0; k < 3 * count; k += 3) {
        reach += Math.abs(GENERATORS[k]! * x + GENERATORS[k + 1]! * y + GENERATORS[k + 2]! * z);
      }
      const along = CENTRE[0]! * x + CENTRE[1]! * y + CENTRE[2]! * z;
      const width = reach - Math.abs(along);
      if (width < best) {
        const sign = along > 0 ? -1 : 1;
        best = width;
        bx = sign * x;
        by = sign * y;
        bz = sign * z;
      }
    }
  }
  if (best === Infinity) {
    // Fewer than two directions: a line or a point, which any direction square to it (and to the offset) leaves at once.
    const gx = count > 0 ? GENERATORS[0]! : CENTRE[0]!;
    const gy = count > 0 ? GENERATORS[1]! : CENTRE[1]!;
    const gz = count > 0 ? GENERATORS[2]! : CENTRE[2]!;
    if (gx * gx + gy * gy + gz * gz > NOTHING) {
      const [mx, my, mz] = [Math.abs(gx), Math.abs(gy), Math.abs(gz)];
      const x = mx <= my && mx <= mz ? 0 : my <= mz ? -gz : gy;
      const y = mx <= my && mx <= mz ? gz : my <= mz ? 0 : -gx;
      const z = mx <= my && mx <= mz ? -gy : my <= mz ? gx : 0;
      const length = Math.sqrt(x * x + y * y + z * z);
      bx = x / length;
      by = y / length;
      bz = z / length;
    }
  }
  return tryDirection(a, pieceA, b, pieceB, travel, bx, by, bz);
}

