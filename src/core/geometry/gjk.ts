import type { Body } from "./body.ts";
import { CORE, CORE_POINTS, CORNERS, DISCS, FACTS, LEAF, NODE, SPINE, SPINE_POINTS, START } from "./compile.ts";
import { supportAt, supportPoint } from "./support.ts";

/**
 * Distance of two convex cores by descent on their Minkowski difference (Gilbert, Johnson, Keerthi 1988), in doubles, with
 * these choices: the length of the simplex's point comes from its barycentric weights, never from a plane; the end is an
 * absolute gap between that length (an upper bound) and the support's lower bound; degenerate simplices fall back to their
 * faces. The travel box belongs to the second core.
 *
 * Everything here lives in a few module-wide arrays: nothing is allocated, and a call depends on its arguments alone.
 */

/** mm: the iteration ends when the distance is known this well. */
export const GAP_WANTED = 1e-9;
/** mm: cores nearer than this are treated as touching. */
export const TOUCHING = 1e-10;
/** mm: under this, cores that no direction was seen to part count as touching. */
const NOT_TOLD_APART = 1e-6;
const MOST_STEPS = 200;

/** Corners of the simplex (difference), and the points of the first core they come from; three doubles each. */
const W = new Float64Array(12);
const A = new Float64Array(12);
const B = new Float64Array(3);
/** Which corners of the two cores made the simplex's corner: one number, -1 where a round edge did. */
const NAMES = new Float64Array(4);
const WEIGHT = new Float64Array(4);
/** Slots of the simplex found nearest by the last reduction, their weights, and its point. */
const KEEP = new Int32Array(4);
const KEPT_WEIGHT = new Float64Array(4);
const V = new Float64Array(3);

/** Closest points of the last `coreDistance` that did not overlap: on the first core, on the second (moved by its travel). */
export const closestA = new Float64Array(3);
export const closestB = new Float64Array(3);

let kept = 0;

/** Least squared distance seen in the running reduction. */
const LEAST = new Float64Array(1);

function offer(square: number, x: number, y: number, z: number): boolean {
  if (square >= LEAST[0]!) return false;
  LEAST[0] = square;
  V[0] = x;
  V[1] = y;
  V[2] = z;
  return true;
}

function tryPoint(i: number): void {
  const x = W[3 * i]!;
  const y = W[3 * i + 1]!;
  const z = W[3 * i + 2]!;
  if (offer(x * x + y * y + z * z, x, y, z)) {
    kept = 1;
    KEEP[0] = i;
    KEPT_WEIGHT[0] = 1;
  }
}

function trySegment(i: number, j: number): void {
  const ax = W[3 * i]!;
  const ay = W[3 * i + 1]!;
  const az = W[3 * i + 2]!;
  const ex = W[3 * j]! - ax;
  const ey = W[3 * j + 1]! - ay;
  const ez = W[3 * j + 2]! - az;
  const along = -(ax * ex + ay * ey + az * ez);
  const square = ex * ex + ey * ey + ez * ez;
  if (!(along > 0)) return tryPoint(i);
  if (!(along < square)) return tryPoint(j);
  const t = along / square;
  const x = ax + t * ex;
  const y = ay + t * ey;
  const z = az + t * ez;
  if (offer(x * x + y * y + z * z, x, y, z)) {
    kept = 2;
    KEEP[0] = i;
    KEEP[1] = j;
    KEPT_WEIGHT[0] = 1 - t;
    KEPT_WEIGHT[1] = t;
  }
}

/** Share of the product of its edges under which a triangle's area says nothing. */
const FLAT = 1e-14;

function tryTriangle(i: number, j: number, k: number): void {
  const ax = W[3 * i]!;
  const ay = W[3 * i + 1]!;
  const az = W[3 * i + 2]!;
  const bx = W[3 * j]!;
  const by = W[3 * j + 1]!;
  const bz = W[3 * j + 2]!;
  const cx = W[3 * k]!;
  const cy = W[3 * k + 1]!;
  const cz = W[3 * k + 2]!;
  const ux = bx - ax;
  const uy = by - ay;
  const uz = bz - az;
  const vx = cx - ax;
  const vy = cy - ay;
  const vz = cz - az;
  const nx = uy * vz - uz * vy;
  const ny = uz * vx - ux * vz;
  const nz = ux * vy - uy * vx;
  const square = nx * nx + ny * ny + nz * nz;
  if (!(square > FLAT * FLAT * (ux * ux + uy * uy + uz * uz) * (vx * vx + vy * vy + vz * vz))) {
    trySegment(i, j);
    trySegment(i, k);
    trySegment(j, k);
    return;
  }
  // Twice the signed areas seen from the origin's projection, times the length of the normal.
  const wc = -((ny * uz - nz * uy) * ax + (nz * ux - nx * uz) * ay + (nx * uy - ny * ux) * az);
  const wb = (ny * vz - nz * vy) * ax + (nz * vx - nx * vz) * ay + (nx * vy - ny * vx) * az;
  const sx = cx - bx;
  const sy = cy - by;
  const sz = cz - bz;
  const wa = -((ny * sz - nz * sy) * bx + (nz * sx - nx * sz) * by + (nx * sy - ny * sx) * bz);
  if (wa > 0 && wb > 0 && wc > 0) {
    const whole = wa + wb + wc;
    const la = wa / whole;
    const lb = wb / whole;
    const lc = wc / whole;
    const x = la * ax + lb * bx + lc * cx;
    const y = la * ay + lb * by + lc * cy;
    const z = la * az + lb * bz + lc * cz;
    if (offer(x * x + y * y + z * z, x, y, z)) {
      kept = 3;
      KEEP[0] = i;
      KEEP[1] = j;
      KEEP[2] = k;
      KEPT_WEIGHT[0] = la;
      KEPT_WEIGHT[1] = lb;
      KEPT_WEIGHT[2] = lc;
    }
    return;
  }
  if (!(wc > 0)) trySegment(i, j);
  if (!(wb > 0)) trySegment(i, k);
  if (!(wa > 0)) trySegment(j, k);
}

/** Nearest point of a tetrahedron; true when it holds the origin. */
function tryTetrahedron(): boolean {
  const ax = W[0]!;
  const ay = W[1]!;
  const az = W[2]!;
  const bx = W[3]! - ax;
  const by = W[4]! - ay;
  const bz = W[5]! - az;
  const cx = W[6]! - ax;
  const cy = W[7]! - ay;
  const cz = W[8]! - az;
  const dx = W[9]! - ax;
  const dy = W[10]! - ay;
  const dz = W[11]! - az;
  const px = by * cz - bz * cy;
  const py = bz * cx - bx * cz;
  const pz = bx * cy - by * cx;
  const volume = px * dx + py * dy + pz * dz;
  const size = Math.sqrt((px * px + py * py + pz * pz) * (dx * dx + dy * dy + dz * dz));
  const flat = !(Math.abs(volume) > 1e-13 * size);
  const sign = volume < 0 ? -1 : 1;
  // Origin beyond the face opposite each corner? The volume of that face with the origin, oriented like the whole.
  const vd = -sign * (px * ax + py * ay + pz * az);
  const vb = -sign * ((cy * dz - cz * dy) * ax + (cz * dx - cx * dz) * ay + (cx * dy - cy * dx) * az);
  const vc = -sign * ((dy * bz - dz * by) * ax + (dz * bx - dx * bz) * ay + (dx * by - dy * bx) * az);
  const va = Math.abs(volume) - vb - vc - vd;
  if (!flat && va > 0 && vb > 0 && vc > 0 && vd > 0) return true;
  if (flat || !(vd > 0)) tryTriangle(0, 1, 2);
  if (flat || !(vb > 0)) tryTriangle(0, 2, 3);
  if (flat || !(vc > 0)) tryTriangle(0, 1, 3);
  if (flat || !(va > 0)) tryTriangle(1, 2, 3);
  return false;
}

function copySlot(from: number, to: number): void {
  const f = 3 * from;
  const t = 3 * to;
  W[t] = W[f]!;
  W[t + 1] = W[f + 1]!;
  W[t + 2] = W[f + 2]!;
  A[t] = A[f]!;
  A[t + 1] = A[f + 1]!;
  A[t + 2] = A[f + 2]!;
  NAMES[to] = NAMES[from]!;
}

/**
 * Distance of the cores of two pieces, mm; -1 when they overlap or touch; Infinity as soon as it is certain to exceed `enough`.
 * `travel` holds low x, y, z, high x, y, z of the second core's freedom. Writes `closestA` and `closestB` when the answer
 * is a distance. With `spineA`, `spineB` the spine of a round piece stands for its core. Accuracy: 1e-8 mm or, where rounding ends the descent first, the best point reached.
 */
export function coreDistance(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  enough: number,
  spineA = false,
  spineB = false,
): number {
  const p = a.middles;
  const q = b.middles;
  const leafA = NODE * a.facts[FACTS * pieceA + LEAF]!;
  const leafB = NODE * b.facts[FACTS * pieceB + LEAF]!;
  let vx = p[leafA]! - q[leafB]!;
  let vy = p[leafA + 1]! - q[leafB + 1]!;
  let vz = p[leafA + 2]! - q[leafB + 2]!;
  if (travel !== null) {
    vx -= (travel[0]! + travel[3]!) / 2;
    vy -= (travel[1]! + travel[4]!) / 2;
    vz -= (travel[2]! + travel[5]!) / 2;
  }
  let square = vx * vx + vy * vy + vz * vz;
  if (square === 0) {
    vx = 1;
    square = 1;
  }
  const worldA = a.world;
  const startA = spineA ? a.facts[FACTS * pieceA + SPINE]! : a.facts[FACTS * pieceA + START]!;
  const coreA = spineA ? CORE_POINTS : a.facts[FACTS * pieceA + CORE]!;
  const cornersA = spineA ? a.facts[FACTS * pieceA + SPINE_POINTS]! : a.facts[FACTS * pieceA + CORNERS]!;
  const discsA = a.facts[FACTS * pieceA + DISCS]!;
  const worldB = b.world;
  const startB = spineB ? b.facts[FACTS * pieceB + SPINE]! : b.facts[FACTS * pieceB + START]!;
  const coreB = spineB ? CORE_POINTS : b.facts[FACTS * pieceB + CORE]!;
  const cornersB = spineB ? b.facts[FACTS * pieceB + SPINE_POINTS]! : b.facts[FACTS * pieceB + CORNERS]!;
  const discsB = b.facts[FACTS * pieceB + DISCS]!;
  // Corners of the simplex kept so far; the new one is put after them.
  let size = 0;
  let best = Math.sqrt(square);
  let proven = 0;
  for (let step = 0; step < MOST_STEPS; step++) {
    const o = 3 * size;
    const nameA = supportAt(worldA, startA, coreA, cornersA, discsA, -vx, -vy, -vz, A, o);
    const nameB = supportAt(worldB, startB, coreB, cornersB, discsB, vx, vy, vz, B, 0);
    let wx = A[o]! - B[0]!;
    let wy = A[o + 1]! - B[1]!;
    let wz = A[o + 2]! - B[2]!;
    let name = nameA >= 0 && nameB >= 0 ? nameA * 1048576 + nameB : -1;
    if (travel !== null) {
      wx -= vx < 0 ? travel[0]! : travel[3]!;
      wy -= vy < 0 ? travel[1]! : travel[4]!;
      wz -= vz < 0 ? travel[2]! : travel[5]!;
      if (name >= 0) name = 8 * name + (vx < 0 ? 0 : 1) + (vy < 0 ? 0 : 2) + (vz < 0 ? 0 : 4);
    }
    const lower = (vx * wx + vy * wy + vz * wz) / best;
    if (lower > enough) return Infinity;
    W[o] = wx;
    W[o + 1] = wy;
    W[o + 2] = wz;
    NAMES[size] = name;
    if (size === 0) {
      square = wx * wx + wy * wy + wz * wz;
      if (square <= TOUCHING * TOUCHING) return -1;
      best = Math.sqrt(square);
      vx = wx;
      vy = wy;
      vz = wz;
      WEIGHT[0] = 1;
      size = 1;
      continue;
    }
    if (lower > 0) {
      if (best - lower <= GAP_WANTED) {
        proven = lower;
        break;
      }
      if (lower > proven) proven = lower;
    }
    if (name >= 0) {
      if (NAMES[0] === name) break;
      if (size > 1 && NAMES[1] === name) break;
      if (size > 2 && NAMES[2] === name) break;
    }
    LEAST[0] = Infinity;
    if (size === 1) trySegment(0, 1);
    else if (size === 2) tryTriangle(0, 1, 2);
    else if (tryTetrahedron()) return -1;
    const least = LEAST[0]!;
    if (least <= TOUCHING * TOUCHING) return -1;
    const now = Math.sqrt(least);
    // No progress left in doubles: what was kept before this step is the answer.
    if (!(now < best)) break;
    best = now;
    size = kept;
    for (let i = 0; i < size; i++) {
      const from = KEEP[i]!;
      if (from !== i) copySlot(from, i);
      WEIGHT[i] = KEPT_WEIGHT[i]!;
    }
    vx = V[0]!;
    vy = V[1]!;
    vz = V[2]!;
  }
  // Nothing parts them, though no common point was met: rounding lies between. Only where they touch.
  if (proven === 0 && best < NOT_TOLD_APART) return -1;
  let x = 0;
  let y = 0;
  let z = 0;
  for (let i = 0; i < size; i++) {
    const weight = WEIGHT[i]!;
    x += weight * A[3 * i]!;
    y += weight * A[3 * i + 1]!;
    z += weight * A[3 * i + 2]!;
  }
  closestA[0] = x;
  closestA[1] = y;
  closestA[2] = z;
  closestB[0] = x - vx;
  closestB[1] = y - vy;
  closestB[2] = z - vz;
  return best;
}

const SA = new Float64Array(3);
const SB = new Float64Array(3);

/** How far the cores are apart along v (from b to a), times the length of v: a lower bound of their distance; negative: not parted by it. */
export function slabAlong(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  vx: number,
  vy: number,
  vz: number,
): number {
  supportPoint(a, pieceA, -vx, -vy, -vz, SA, 0);
  supportPoint(b, pieceB, vx, vy, vz, SB, 0);
  let gap = (SA[0]! - SB[0]!) * vx + (SA[1]! - SB[1]!) * vy + (SA[2]! - SB[2]!) * vz;
  if (travel !== null) {
    gap -= vx * (vx < 0 ? travel[0]! : travel[3]!) + vy * (vy < 0 ? travel[1]! : travel[4]!) + vz * (vz < 0 ? travel[2]! : travel[5]!);
  }
  return gap;
}
