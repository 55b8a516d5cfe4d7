import type { Body } from "./body.ts";
import { leastWidth, tryDirection } from "./depth-search.ts";
import type { Facets } from "./facets.ts";
import { supportPoint } from "./support.ts";
import type { Vec3 } from "../frames.ts";

const POINT = new Float64Array(3);
let turnedA = new Float64Array(9 * 64);
let turnedB = new Float64Array(9 * 64);
let endsA = new Float64Array(3 * 64);
let endsB = new Float64Array(3 * 64);
/** The other body's point that is foremost against each facet's normal, moved by the travel that counts there. */
let facingA = new Float64Array(3 * 64);
let facingB = new Float64Array(3 * 64);
/** Edges of B that may still give less than the least width so far, and what each gives at least. */
let kept = new Int32Array(64);
let floors = new Float64Array(64);

function turn(rotation: readonly number[], from: Float64Array, to: Float64Array, sign: number, at: Vec3 = ORIGIN): void {
  const m0 = rotation[0]!;
  const m1 = rotation[1]!;
  const m2 = rotation[2]!;
  const m3 = rotation[3]!;
  const m4 = rotation[4]!;
  const m5 = rotation[5]!;
  const m6 = rotation[6]!;
  const m7 = rotation[7]!;
  const m8 = rotation[8]!;
  const ax = at[0];
  const ay = at[1];
  const az = at[2];
  for (let i = 0; i < from.length; i += 3) {
    const x = from[i]! * sign;
    const y = from[i + 1]! * sign;
    const z = from[i + 2]! * sign;
    to[i] = m0 * x + m1 * y + m2 * z + ax;
    to[i + 1] = m3 * x + m4 * y + m5 * z + ay;
    to[i + 2] = m6 * x + m7 * y + m8 * z + az;
  }
}

const ORIGIN: Vec3 = [0, 0, 0];

/** Arcs of normals within this much (sine) of crossing are taken to cross: a direction too many does no harm. */
const NEARLY = 1e-9;

/**
 * Depth of two polytopes by separating axes: every facet normal, and every two edges whose arcs of normals cross (that pair is
 * a facet of A - B). Writes the least to `tryDirection`'s best and returns it, or any width not above `enough`.
 */
export function polytopeDepth(
  a: Body,
  pieceA: number,
  facetsA: Facets,
  b: Body,
  pieceB: number,
  facetsB: Facets,
  travel: Float64Array | null,
  enough: number,
): number {
  const need = Math.max(facetsA.edges.length, facetsB.edges.length, facetsA.normals.length, facetsB.normals.length);
  if (turnedA.length < need) {
    turnedA = new Float64Array(need);
    turnedB = new Float64Array(need);
    endsA = new Float64Array(need);
    endsB = new Float64Array(need);
    facingA = new Float64Array(need);
    facingB = new Float64Array(need);
    kept = new Int32Array(need);
    floors = new Float64Array(need);
  }
  turn(a.pose.rotation, facetsA.normals, turnedA, 1);
  turn(a.pose.rotation, facetsA.corners, endsA, 1, a.pose.at);
  for (let i = 0; i < facetsA.normals.length; i += 3) {
    const x = turnedA[i]!;
    const y = turnedA[i + 1]!;
    const z = turnedA[i + 2]!;
    // A facet's corner is A's support along its normal, to rounding; where that cannot win nothing else is asked.
    supportPoint(b, pieceB, -x, -y, -z, POINT, 0);
    const reach = travel === null ? 0 : travelReach(travel, x, y, z);
    stand(facingA, i, 1, travel, x, y, z);
    const width = (endsA[i]! - POINT[0]!) * x + (endsA[i + 1]! - POINT[1]!) * y + (endsA[i + 2]! - POINT[2]!) * z + reach;
    if (width < leastWidth()) tryDirection(a, pieceA, b, pieceB, travel, x, y, z);
  }
  turn(b.pose.rotation, facetsB.normals, turnedB, -1);
  turn(b.pose.rotation, facetsB.corners, endsB, 1, b.pose.at);
  for (let i = 0; i < facetsB.normals.length; i += 3) {
    const x = turnedB[i]!;
    const y = turnedB[i + 1]!;
    const z = turnedB[i + 2]!;
    supportPoint(a, pieceA, x, y, z, POINT, 0);
    const reach = travel === null ? 0 : travelReach(travel, x, y, z);
    stand(facingB, i, -1, travel, x, y, z);
    const width = (POINT[0]! - endsB[i]!) * x + (POINT[1]! - endsB[i + 1]!) * y + (POINT[2]! - endsB[i + 2]!) * z + reach;
    if (width < leastWidth()) tryDirection(a, pieceA, b, pieceB, travel, x, y, z);
  }
  if (leastWidth() <= enough) return leastWidth();
  turn(a.pose.rotation, facetsA.edges, turnedA, 1);
  // Normals of B count for -B; its edge directions may have either sign.
  turn(b.pose.rotation, facetsB.edges, turnedB, -1);
  turn(a.pose.rotation, facetsA.ends, endsA, 1, a.pose.at);
  turn(b.pose.rotation, facetsB.ends, endsB, 1, b.pose.at);
  if (travel !== null) {
    crossWithTravel(a, pieceA, b, pieceB, travel, turnedA, facetsA.edges.length);
    crossWithTravel(a, pieceA, b, pieceB, travel, turnedB, facetsB.edges.length);
  }
  let count = 0;
  for (let j = 0; j < facetsB.edges.length; j += 9) {
    const floor = floorOf(turnedB, j, endsB, facetsB.sides, facingB, -1);
    if (floor >= leastWidth()) continue;
    kept[count] = j;
    floors[count++] = floor;
  }
  for (let i = 0; i < facetsA.edges.length; i += 9) {
    if (floorOf(turnedA, i, endsA, facetsA.sides, facingA, 1) >= leastWidth()) continue;
    const ex = turnedA[i]!;
    const ey = turnedA[i + 1]!;
    const ez = turnedA[i + 2]!;
    const n1x = turnedA[i + 3]!;
    const n1y = turnedA[i + 4]!;
    const n1z = turnedA[i + 5]!;
    const n2x = turnedA[i + 6]!;
    const n2y = turnedA[i + 7]!;
    const n2z = turnedA[i + 8]!;
    const looseA = n1x === 0 && n1y === 0 && n1z === 0;
    for (let k = 0; k < count; k++) {
      const j = kept[k]!;
      if (floors[k]! >= leastWidth()) continue;
      const fx = turnedB[j]!;
      const fy = turnedB[j + 1]!;
      const fz = turnedB[j + 2]!;
      const m1x = turnedB[j + 3]!;
      const m1y = turnedB[j + 4]!;
      const m1z = turnedB[j + 5]!;
      const m2x = turnedB[j + 6]!;
      const m2y = turnedB[j + 7]!;
      const m2z = turnedB[j + 8]!;
      const looseB = m1x === 0 && m1y === 0 && m1z === 0;
      // The arc n1 n2 lies square to e, the arc m1 m2 square to f: they can only meet along e x f.
      if (!looseA && (n1x * fx + n1y * fy + n1z * fz) * (n2x * fx + n2y * fy + n2z * fz) > NEARLY) continue;
      if (!looseB && (m1x * ex + m1y * ey + m1z * ez) * (m2x * ex + m2y * ey + m2z * ez) > NEARLY) continue;
      const x = ey * fz - ez * fy;
      const y = ez * fx - ex * fz;
      const z = ex * fy - ey * fx;
      const length = Math.sqrt(x * x + y * y + z * z);
      if (!(length > 1e-12)) continue;
      const sideA = looseA ? 0 : x * (n1x + n2x) + y * (n1y + n2y) + z * (n1z + n2z);
      const sideB = looseB ? 0 : x * (m1x + m2x) + y * (m1y + m2y) + z * (m1z + m2z);
      if (sideA * sideB < -NEARLY) continue;
      const sign = sideA + sideB;
      // Two points of the edges bound the width from below, and are the width where the arcs do cross.
      const i3 = i / 3;
      const j3 = j / 3;
      const along =
        ((endsA[i3]! - endsB[j3]!) * x + (endsA[i3 + 1]! - endsB[j3 + 1]!) * y + (endsA[i3 + 2]! - endsB[j3 + 2]!) * z) /
        length;
      const least = leastWidth();
      const reach = travel === null ? 0 : travelReach(travel, x / length, y / length, z / length);
      const back = travel === null ? 0 : travelReach(travel, -x / length, -y / length, -z / length);
      if (sign >= -NEARLY && along + reach < least) {
        tryDirection(a, pieceA, b, pieceB, travel, x / length, y / length, z / length);
      }
      if (sign <= NEARLY && back - along < least) {
        tryDirection(a, pieceA, b, pieceB, travel, -x / length, -y / length, -z / length);
      }
    }
    if (leastWidth() <= enough) return leastWidth();
  }
  return leastWidth();
}

/** Keeps the foremost point against a facet's normal n; `side` 1: of B, moved with its travel; -1: of A, moved against it. */
function stand(to: Float64Array, at: number, side: 1 | -1, travel: Float64Array | null, x: number, y: number, z: number): void {
  to[at] = POINT[0]! + (travel === null ? 0 : side * (x > 0 ? travel[0]! : travel[3]!));
  to[at + 1] = POINT[1]! + (travel === null ? 0 : side * (y > 0 ? travel[1]! : travel[4]!));
  to[at + 2] = POINT[2]! + (travel === null ? 0 : side * (z > 0 ? travel[2]! : travel[5]!));
}

/**
 * What the width is at least along any direction in an edge's arc, or -Infinity where that is not known. The edge's end is foremost in all of the arc,
 * and any point of the other body bounds its support: (end - point) n is a sine along the arc, so that where it is above zero at both ends it is
 * nowhere less between them than at the lesser.
 */
function floorOf(edges: Float64Array, i: number, ends: Float64Array, sides: Int32Array, against: Float64Array, side: 1 | -1): number {
  const s = (2 * i) / 9;
  let floor = -Infinity;
  for (let k = 0; k < 2; k++) {
    const f = 3 * sides[s + k]!;
    if (f < 0) continue;
    const x = side * (ends[i / 3]! - against[f]!);
    const y = side * (ends[i / 3 + 1]! - against[f + 1]!);
    const z = side * (ends[i / 3 + 2]! - against[f + 2]!);
    const first = x * edges[i + 3]! + y * edges[i + 4]! + z * edges[i + 5]!;
    const second = x * edges[i + 6]! + y * edges[i + 7]! + z * edges[i + 8]!;
    const least = first < second ? first : second;
    if (least > 0 && least > floor) floor = least;
  }
  return floor;
}

/** What the travel of B adds to the width along n. */
function travelReach(travel: Float64Array, x: number, y: number, z: number): number {
  return -(x * (x > 0 ? travel[0]! : travel[3]!) + y * (y > 0 ? travel[1]! : travel[4]!) + z * (z > 0 ? travel[2]! : travel[5]!));
}

/** The directions square to an edge and to one edge of the travel box. */
function crossWithTravel(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array,
  edges: Float64Array,
  count: number,
): void {
  for (let i = 0; i < count; i += 9) {
    for (let k = 0; k < 3; k++) {
      if (travel[k] === travel[3 + k]) continue;
      const x = k === 0 ? 0 : k === 1 ? -edges[i + 2]! : edges[i + 1]!;
      const y = k === 0 ? edges[i + 2]! : k === 1 ? 0 : -edges[i]!;
      const z = k === 0 ? -edges[i + 1]! : k === 1 ? edges[i]! : 0;
      const length = Math.sqrt(x * x + y * y + z * z);
      if (!(length > 1e-12)) continue;
      tryDirection(a, pieceA, b, pieceB, travel, x / length, y / length, z / length);
      tryDirection(a, pieceA, b, pieceB, travel, -x / length, -y / length, -z / length);
    }
  }
}
