import type { Body } from "./body.ts";
import { CIRCULAR, CORE, CORE_BOX, CORE_POINTS, CORE_ROUND, CORNERS, DISCS, FACTS, START } from "./compile.ts";
import type { Vec3 } from "../frames.ts";
import { leastWidth, searchDepth, searchWasCertain, startSearch, tryDirection } from "./depth-search.ts";
import { discDepth } from "./depth-disc.ts";
import { isZonotope, zonotopeDepth } from "./depth-zonotope.ts";
import { supportPoint } from "./support.ts";
import { facetsOf, type Facets } from "./facets.ts";

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
    const facetsA = facetsOfAny(a, pieceA);
    const facetsB = facetsOfAny(b, pieceB);
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

function facetsOfAny(body: Body, piece: number): Facets | null {
  if (body.facts[FACTS * piece + CORE] !== CORE_BOX) return facetsOf(body, piece);
  return (body.facets[piece] ??= boxFacets(body.local, body.facts[FACTS * piece + START]! + 3));
}

function boxFacets(local: Float64Array, at: number): Facets {
  const h = [0, 1, 2].map((k) => [local[at + 3 * k]!, local[at + 3 * k + 1]!, local[at + 3 * k + 2]!] as const);
  const unit = (v: readonly number[]): number[] => v.map((c) => c / Math.hypot(...v));
  const faces = [0, 1, 2].map((k) => {
    const [p, q] = [h[(k + 1) % 3]!, h[(k + 2) % 3]!];
    const n = unit([p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]]);
    const outward = n[0]! * h[k]![0] + n[1]! * h[k]![1] + n[2]! * h[k]![2] > 0;
    return outward ? n : n.map((c) => -c);
  });
  const negated = (n: number[]): number[] => n.map((c) => -c);
  const edges = [0, 1, 2].flatMap((k) => {
    const [p, q] = [faces[(k + 1) % 3]!, faces[(k + 2) % 3]!];
    return [p, negated(p)].flatMap((m) => [q, negated(q)].flatMap((n) => [...unit(h[k]!), ...m, ...n]));
  });
  const corners = [0, 1, 2].flatMap((k) =>
    [1, -1].flatMap((s) => [0, 1, 2].map((i) => local[at - 3 + i]! + s * h[k]![i]!)),
  );
  const ends = [0, 1, 2].flatMap((k) => {
    const [p, q] = [h[(k + 1) % 3]!, h[(k + 2) % 3]!];
    return [1, -1].flatMap((s) => [1, -1].flatMap((t) => [0, 1, 2].map((i) => local[at - 3 + i]! + s * p[i]! + t * q[i]!)));
  });
  return {
    normals: Float64Array.from(faces.flatMap((n) => [...n, ...negated(n)])),
    edges: Float64Array.from(edges),
    ends: Float64Array.from(ends),
    corners: Float64Array.from(corners),
  };
}

const POINT = new Float64Array(3);
let turnedA = new Float64Array(9 * 64);
let turnedB = new Float64Array(9 * 64);
let endsA = new Float64Array(3 * 64);
let endsB = new Float64Array(3 * 64);

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

function polytopeDepth(
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
  for (let i = 0; i < facetsA.edges.length; i += 9) {
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
    for (let j = 0; j < facetsB.edges.length; j += 9) {
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
