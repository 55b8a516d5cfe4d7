import type { Body } from "./body.ts";
import { CIRCULAR, CORE, CORE_DISCS, CORE_ROUND, CORNERS, DISCS, FACTS, HALF, SIZES, START } from "./compile.ts";
import { closestA, closestB, slabAlong } from "./gjk.ts";
import { NOTHING, supportAt } from "./support.ts";

/**
 * Quick ways to the distance of round pieces, each of which proves its answer or gives none: the answer is the length of a
 * vector between two points of the pieces, taken only when the slab along it is as wide (to 1e-9 mm). What they do not
 * find is left to the descent of gjk.ts, which needs a dozen steps where a rim is involved.
 *
 * Newton's method on v = w(v), w the support point of A - B: where it is a corner or a point of a rim, w has the derivative
 * -(t t') / reach for a rim (t its tangent, reach the disc's extent along v) and nothing for a corner. A line (the axis of a
 * round side, an edge) is taken out by working square to it.
 */

const PROVEN = 1e-9;
const MOST_STEPS = 9;
const A = new Float64Array(3);
const B = new Float64Array(3);
/** Tangents at the support points of A and of B. */
const TA = new Float64Array(3);
const TB = new Float64Array(3);
const V = new Float64Array(3);

/** A line that stands for one of the pieces: a point of it, its unit direction, the radius of the round side about it. */
export const LINE = new Float64Array(7);

/** Support point and tangent of the edge it is on; returns one over the reach, 0 for a corner, -1 where the rim degenerates. */
function edgePoint(
  body: Body,
  piece: number,
  dx: number,
  dy: number,
  dz: number,
  out: Float64Array,
  tangent: Float64Array,
): number {
  const { world } = body;
  const s = body.facts[FACTS * piece + START]!;
  const core = body.facts[FACTS * piece + CORE]!;
  const discs = body.facts[FACTS * piece + DISCS]!;
  const name = supportAt(world, s, core, body.facts[FACTS * piece + CORNERS]!, discs, dx, dy, dz, out, 0);
  if (name >= 0) return 0;
  let w = s + 6;
  if (core === CORE_DISCS) {
    // The disc that the support point is on: the one that reaches farthest.
    const n = body.facts[FACTS * piece + CORNERS]!;
    let most = -Infinity;
    const vectors = s + 3 * (n + discs);
    for (let d = 0; d < discs; d++) {
      const c = s + 3 * (n + d);
      const v = vectors + 6 * d;
      const p = world[v]! * dx + world[v + 1]! * dy + world[v + 2]! * dz;
      const q = world[v + 3]! * dx + world[v + 4]! * dy + world[v + 5]! * dz;
      const along = world[c]! * dx + world[c + 1]! * dy + world[c + 2]! * dz + Math.sqrt(p * p + q * q);
      if (along > most) {
        most = along;
        w = v;
      }
    }
  } else if (core !== CORE_ROUND) return -1;
  const p = world[w]! * dx + world[w + 1]! * dy + world[w + 2]! * dz;
  const q = world[w + 3]! * dx + world[w + 4]! * dy + world[w + 5]! * dz;
  const reach = Math.sqrt(p * p + q * q);
  if (!(reach > NOTHING)) return -1;
  const a = -q / reach;
  const b = p / reach;
  tangent[0] = a * world[w]! + b * world[w + 3]!;
  tangent[1] = a * world[w + 1]! + b * world[w + 4]!;
  tangent[2] = a * world[w + 2]! + b * world[w + 5]!;
  return 1 / reach;
}

/**
 * Distance of the cores of two pieces by Newton's method from the vector `v` (of B's point to A's); -1 when it does not prove
 * one, Infinity when it is more than `enough`. `line`: 0 none, 1 or 2 the piece for which `LINE` stands. Writes `closestA` and `closestB`; where a line stands for
 * a piece the caller must see to it that the point is on the piece.
 */
export function edgeDistance(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  vx: number,
  vy: number,
  vz: number,
  line: number,
  enough: number,
): number {
  const most = line === 0 ? enough : enough + LINE[6]!;
  const ux = LINE[3]!;
  const uy = LINE[4]!;
  const uz = LINE[5]!;
  if (line !== 0) {
    const along = vx * ux + vy * uy + vz * uz;
    vx -= along * ux;
    vy -= along * uy;
    vz -= along * uz;
  }
  let last = Infinity;
  for (let step = 0; step < MOST_STEPS; step++) {
    let ka = 0;
    let kb = 0;
    if (line === 1) {
      A[0] = LINE[0]!;
      A[1] = LINE[1]!;
      A[2] = LINE[2]!;
    } else ka = edgePoint(a, pieceA, -vx, -vy, -vz, A, TA);
    if (line === 2) {
      B[0] = LINE[0]!;
      B[1] = LINE[1]!;
      B[2] = LINE[2]!;
    } else kb = edgePoint(b, pieceB, vx, vy, vz, B, TB);
    if (ka < 0 || kb < 0) return -1;
    let wx = A[0]! - B[0]!;
    let wy = A[1]! - B[1]!;
    let wz = A[2]! - B[2]!;
    if (line !== 0) {
      const along = wx * ux + wy * uy + wz * uz;
      wx -= along * ux;
      wy -= along * uy;
      wz -= along * uz;
      const t = line === 1 ? TB : TA;
      const lean = t[0]! * ux + t[1]! * uy + t[2]! * uz;
      t[0] = t[0]! - lean * ux;
      t[1] = t[1]! - lean * uy;
      t[2] = t[2]! - lean * uz;
    }
    // The slab along v, for the early end: a line's own piece reaches its radius beyond the line, square to it.
    const slab = vx * wx + vy * wy + vz * wz;
    if (slab > 0 && slab * slab > most * most * (vx * vx + vy * vy + vz * vz) && most > 0) return Infinity;
    const rx = wx - vx;
    const ry = wy - vy;
    const rz = wz - vz;
    const square = wx * wx + wy * wy + wz * wz;
    const miss = rx * rx + ry * ry + rz * rz;
    if (miss <= 1e-22 * square) {
      V[0] = wx;
      V[1] = wy;
      V[2] = wz;
      return proveEdge(a, pieceA, b, pieceB, Math.sqrt(square), line);
    }
    // Far from home, or not getting nearer: not a pair of edges.
    if (step > 2 && !(miss < 0.5 * last)) return -1;
    last = miss;
    // (I + ka ta ta' + kb tb tb') d = r
    const ra = ka === 0 ? 0 : TA[0]! * rx + TA[1]! * ry + TA[2]! * rz;
    const rb = kb === 0 ? 0 : TB[0]! * rx + TB[1]! * ry + TB[2]! * rz;
    const aa = ka === 0 ? 1 : 1 + ka * (TA[0]! * TA[0]! + TA[1]! * TA[1]! + TA[2]! * TA[2]!);
    const bb = kb === 0 ? 1 : 1 + kb * (TB[0]! * TB[0]! + TB[1]! * TB[1]! + TB[2]! * TB[2]!);
    const ab = ka === 0 || kb === 0 ? 0 : TA[0]! * TB[0]! + TA[1]! * TB[1]! + TA[2]! * TB[2]!;
    const whole = aa * bb - ka * kb * ab * ab;
    const fa = (ka * (ra * bb - kb * ab * rb)) / whole;
    const fb = (kb * (rb * aa - ka * ab * ra)) / whole;
    vx += rx - (fa === 0 ? 0 : fa * TA[0]!) - (fb === 0 ? 0 : fb * TB[0]!);
    vy += ry - (fa === 0 ? 0 : fa * TA[1]!) - (fb === 0 ? 0 : fb * TB[1]!);
    vz += rz - (fa === 0 ? 0 : fa * TA[2]!) - (fb === 0 ? 0 : fb * TB[2]!);
    if (!(vx * vx + vy * vy + vz * vz > 1e-12)) return -1;
  }
  return -1;
}

/** The slab along V must be as wide as V is long, less the radius of a line's round side. */
function proveEdge(a: Body, pieceA: number, b: Body, pieceB: number, length: number, line: number): number {
  const radius = line === 0 ? 0 : LINE[6]!;
  const distance = length - radius;
  if (!(distance > 1e-6)) return -1;
  const x = V[0]! / length;
  const y = V[1]! / length;
  const z = V[2]! / length;
  if (distance - slabAlong(a, pieceA, b, pieceB, null, x, y, z) > PROVEN) return -1;
  if (line === 1) {
    closestA[0] = B[0]! + distance * x;
    closestA[1] = B[1]! + distance * y;
    closestA[2] = B[2]! + distance * z;
  } else {
    closestA[0] = A[0]!;
    closestA[1] = A[1]!;
    closestA[2] = A[2]!;
  }
  if (line === 2) {
    closestB[0] = A[0]! - distance * x;
    closestB[1] = A[1]! - distance * y;
    closestB[2] = A[2]! - distance * z;
  } else {
    closestB[0] = B[0]!;
    closestB[1] = B[1]!;
    closestB[2] = B[2]!;
  }
  return distance;
}

/** Puts the axis of a spine (or of a segment) between two points of `world` into `LINE`. */
export function lineBetween(world: Float64Array, at: number, to: number, radius: number): boolean {
  const x = world[to]! - world[at]!;
  const y = world[to + 1]! - world[at + 1]!;
  const z = world[to + 2]! - world[at + 2]!;
  const length = Math.sqrt(x * x + y * y + z * z);
  if (!(length > 0)) return false;
  LINE[0] = world[at]!;
  LINE[1] = world[at + 1]!;
  LINE[2] = world[at + 2]!;
  LINE[3] = x / length;
  LINE[4] = y / length;
  LINE[5] = z / length;
  LINE[6] = radius;
  return true;
}

const FACE = new Float64Array(3);

/**
 * A round piece before a rectangular box, after the round piece's spine was measured against it: over a face (the round
 * piece's foremost point stands on it), beside an edge, or off a corner, as `beyond` tells. -1 when that proves nothing.
 * `roundFirst`: the round piece is A.
 */
export function roundBoxDistance(
  round: Body,
  piece: number,
  box: Body,
  boxPiece: number,
  roundFirst: boolean,
  beyond: Float64Array,
  enough: number,
): number {
  const { world, sizes } = box;
  const s = box.facts[FACTS * boxPiece + START]!;
  const u = beyond[0]!;
  const v = beyond[1]!;
  const w = beyond[2]!;
  const sides = (u === 0 ? 0 : 1) + (v === 0 ? 0 : 1) + (w === 0 ? 0 : 1);
  const sign = roundFirst ? 1 : -1;
  if (sides === 1) {
    const k = u !== 0 ? 0 : v !== 0 ? 1 : 2;
    const half = sizes[SIZES * boxPiece + HALF + k]!;
    const side = (u + v + w < 0 ? -1 : 1) / half;
    const e = s + 3 + 3 * k;
    const nx = side * world[e]!;
    const ny = side * world[e + 1]!;
    const nz = side * world[e + 2]!;
    supportAt(round.world, round.facts[FACTS * piece + START]!, round.facts[FACTS * piece + CORE]!, round.facts[FACTS * piece + CORNERS]!, round.facts[FACTS * piece + DISCS]!, -nx, -ny, -nz, FACE, 0);
    const x = FACE[0]! - world[s]!;
    const y = FACE[1]! - world[s + 1]!;
    const z = FACE[2]! - world[s + 2]!;
    const gap = x * nx + y * ny + z * nz - half;
    if (!(gap > 1e-6)) return -1;
    if (gap > enough) return Infinity;
    for (let other = 0; other < 3; other++) {
      if (other === k) continue;
      const f = s + 3 + 3 * other;
      const h = sizes[SIZES * boxPiece + HALF + other]!;
      if (Math.abs(x * world[f]! + y * world[f + 1]! + z * world[f + 2]!) > h * h) return edgeDistanceOf(round, piece, box, boxPiece, roundFirst, nx, ny, nz, 0, enough);
    }
    const mine = roundFirst ? closestA : closestB;
    const other = roundFirst ? closestB : closestA;
    mine[0] = FACE[0]!;
    mine[1] = FACE[1]!;
    mine[2] = FACE[2]!;
    other[0] = FACE[0]! - gap * nx;
    other[1] = FACE[1]! - gap * ny;
    other[2] = FACE[2]! - gap * nz;
    return gap;
  }
  const vx = sign * (closestA[0]! - closestB[0]!);
  const vy = sign * (closestA[1]! - closestB[1]!);
  const vz = sign * (closestA[2]! - closestB[2]!);
  if (sides === 2) {
    const k = u === 0 ? 0 : v === 0 ? 1 : 2;
    const half = sizes[SIZES * boxPiece + HALF + k]!;
    for (let axis = 0; axis < 3; axis++) {
      let c = world[s + axis]!;
      for (let m = 0; m < 3; m++) if (m !== k) c += (beyond[m]! < 0 ? -1 : 1) * world[s + 3 + 3 * m + axis]!;
      LINE[axis] = c;
      LINE[3 + axis] = world[s + 3 + 3 * k + axis]! / half;
    }
    LINE[6] = 0;
    const found = edgeDistanceOf(round, piece, box, boxPiece, roundFirst, vx, vy, vz, roundFirst ? 2 : 1, enough);
    if (found === Infinity) return found;
    if (found > 0) {
      const on = roundFirst ? closestB : closestA;
      const along = (on[0]! - LINE[0]!) * LINE[3]! + (on[1]! - LINE[1]!) * LINE[4]! + (on[2]! - LINE[2]!) * LINE[5]!;
      if (Math.abs(along) <= half) return found;
    }
  }
  return edgeDistanceOf(round, piece, box, boxPiece, roundFirst, vx, vy, vz, 0, enough);
}

/** `edgeDistance` with the round piece and the box in their places; the vector leads from the box to the round piece. */
function edgeDistanceOf(
  round: Body,
  piece: number,
  box: Body,
  boxPiece: number,
  roundFirst: boolean,
  x: number,
  y: number,
  z: number,
  line: number,
  enough: number,
): number {
  return roundFirst
    ? edgeDistance(round, piece, box, boxPiece, x, y, z, line, enough)
    : edgeDistance(box, boxPiece, round, piece, -x, -y, -z, line, enough);
}

/**
 * The end face of a circular cylinder before anything: the foremost point of the other piece stands over the face. The vector
 * leads from the other piece to the round one. -1 when it does not.
 */
export function capDistance(
  round: Body,
  piece: number,
  other: Body,
  otherPiece: number,
  roundFirst: boolean,
  vx: number,
  vy: number,
  vz: number,
  enough: number,
): number {
  if (round.facts[FACTS * piece + CIRCULAR] === 0) return -1;
  const { world } = round;
  const s = round.facts[FACTS * piece + START]!;
  let nx = world[s + 3]!;
  let ny = world[s + 4]!;
  let nz = world[s + 5]!;
  const half = Math.sqrt(nx * nx + ny * ny + nz * nz);
  const scale = (nx * vx + ny * vy + nz * vz > 0 ? -1 : 1) / half;
  nx *= scale;
  ny *= scale;
  nz *= scale;
  supportAt(other.world, other.facts[FACTS * otherPiece + START]!, other.facts[FACTS * otherPiece + CORE]!, other.facts[FACTS * otherPiece + CORNERS]!, other.facts[FACTS * otherPiece + DISCS]!, -nx, -ny, -nz, FACE, 0);
  const x = FACE[0]! - world[s]!;
  const y = FACE[1]! - world[s + 1]!;
  const z = FACE[2]! - world[s + 2]!;
  const along = x * nx + y * ny + z * nz;
  const gap = along - half;
  if (!(gap > 1e-6)) return -1;
  if (gap > enough) return Infinity;
  const px = x - along * nx;
  const py = y - along * ny;
  const pz = z - along * nz;
  const r = round.sizes[SIZES * piece + 1]!;
  if (px * px + py * py + pz * pz > r * r) return -1;
  const mine = roundFirst ? closestA : closestB;
  const its = roundFirst ? closestB : closestA;
  its[0] = FACE[0]!;
  its[1] = FACE[1]!;
  its[2] = FACE[2]!;
  mine[0] = FACE[0]! - gap * nx;
  mine[1] = FACE[1]! - gap * ny;
  mine[2] = FACE[2]! - gap * nz;
  return gap;
}
