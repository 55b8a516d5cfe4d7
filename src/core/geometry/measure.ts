import type { Body } from "./body.ts";
import { buildBody, setPose } from "./body.ts";
import { coreDistance, closestA, closestB } from "./gjk.ts";
import { coreDepth, depthIsCertain } from "./depth.ts";
import { separatingNormal } from "./depth-search.ts";
import type { Piece, Pose, TravelBox } from "./piece.ts";

/** What measuring two bodies gives. Made once and overwritten by every call. */
export interface Measure {
  /** Signed, mm: apart the least distance of the surfaces, overlapping minus the depth, Infinity beyond the cut-off. */
  distance: number;
  /**
   * On a, and on b as its travel has moved it; apart, |pointA - pointB| = distance. Overlapping: the two points that
   * the least parting moves onto each other.
   */
  readonly pointA: Float64Array;
  readonly pointB: Float64Array;
  /** The pieces of a and of b that govern; -1 beyond the cut-off. */
  pieceA: number;
  pieceB: number;
  overlapping: boolean;
  /** The depth is a lower estimate: more than one pair of pieces could matter, or the search ran out of its budget. */
  depthIsEstimate: boolean;
}

export function createMeasure(): Measure {
  return {
    distance: Infinity,
    pointA: new Float64Array(3),
    pointB: new Float64Array(3),
    pieceA: -1,
    pieceB: -1,
    overlapping: false,
    depthIsEstimate: false,
  };
}

/** Which pair of pieces governed the last time, by a slot number of the caller: a hint that saves work and changes nothing. */
export interface PairCache {
  pieceA: Int32Array;
  pieceB: Int32Array;
}

export function createPairCache(slots: number): PairCache {
  return { pieceA: new Int32Array(slots).fill(-1), pieceB: new Int32Array(slots).fill(-1) };
}

/** mm: pruning keeps anything this close to the best, so that the order of the search cannot decide the answer. */
const SLACK = 1e-9;

const TRAVEL = new Float64Array(6);
const PARTED = new Float64Array(6);
/** Direction in which b leaves a most shortly, of the best pair so far. */
const WAY_OUT = new Float64Array(3);
let coresOverlap = false;
let stack = new Int32Array(2 * 1024);
let stackBound = new Float64Array(1024);

function writeTravel(travel: TravelBox | null): Float64Array | null {
  if (travel === null) return null;
  const { low, high } = travel;
  if (low[0] === 0 && low[1] === 0 && low[2] === 0 && high[0] === 0 && high[1] === 0 && high[2] === 0) return null;
  for (let k = 0; k < 3; k++) {
    TRAVEL[k] = low[k]!;
    TRAVEL[3 + k] = high[k]!;
  }
  return TRAVEL;
}

/**
 * Signed distance of the boxes of two nodes, a lower bound of that of anything in them: apart their distance, else minus
 * the least width of the overlap.
 */
function boxBound(p: Float64Array, i: number, q: Float64Array, j: number, travel: Float64Array | null): number {
  let x = Math.max(q[j]! - p[i + 3]!, p[i]! - q[j + 3]!);
  let y = Math.max(q[j + 1]! - p[i + 4]!, p[i + 1]! - q[j + 4]!);
  let z = Math.max(q[j + 2]! - p[i + 5]!, p[i + 2]! - q[j + 5]!);
  if (travel !== null) {
    x = Math.max(q[j]! + travel[0]! - p[i + 3]!, p[i]! - q[j + 3]! - travel[3]!);
    y = Math.max(q[j + 1]! + travel[1]! - p[i + 4]!, p[i + 1]! - q[j + 4]! - travel[4]!);
    z = Math.max(q[j + 2]! + travel[2]! - p[i + 5]!, p[i + 2]! - q[j + 5]! - travel[5]!);
  }
  const most = Math.max(x, y, z);
  if (most <= 0) return most;
  let square = 0;
  if (x > 0) square += x * x;
  if (y > 0) square += y * y;
  if (z > 0) square += z * z;
  return Math.sqrt(square);
}

/** Measures one pair of pieces and keeps it in `out` when it is nearer (or as near, and earlier). */
function measurePair(
  a: Body,
  i: number,
  b: Body,
  j: number,
  travel: Float64Array | null,
  best: number,
  out: Measure,
): number {
  const ra = a.radius[i]!;
  const rb = b.radius[j]!;
  const core = coreDistance(a, i, b, j, travel, best + ra + rb + SLACK);
  if (core === Infinity) return best;
  if (core > 0) {
    const distance = core - ra - rb;
    if (distance > best || (distance === best && out.pieceA >= 0 && !earlier(i, j, out))) return best;
    out.distance = distance;
    out.pieceA = i;
    out.pieceB = j;
    out.depthIsEstimate = false;
    coresOverlap = false;
    for (let k = 0; k < 3; k++) {
      const n = (closestB[k]! - closestA[k]!) / core;
      out.pointA[k] = closestA[k]! + ra * n;
      out.pointB[k] = closestB[k]! - rb * n;
    }
    return distance;
  }
  const width = Math.max(0, coreDepth(a, i, b, j, travel, -best - ra - rb - SLACK));
  // No minus zero where they only touch.
  const distance = 0 - width - ra - rb;
  if (distance > best || (distance === best && out.pieceA >= 0 && !earlier(i, j, out))) return best;
  out.distance = distance;
  out.pieceA = i;
  out.pieceB = j;
  out.depthIsEstimate = !depthIsCertain;
  WAY_OUT.set(separatingNormal);
  coresOverlap = true;
  return distance;
}

/** Where the overlap of the governing pieces is met: b parted along the least way out by one millimetre more, then put back. */
function writeOverlapPoints(a: Body, b: Body, travel: Float64Array | null, out: Measure): void {
  const ra = a.radius[out.pieceA]!;
  const rb = b.radius[out.pieceB]!;
  const way = -out.distance - ra - rb + 1;
  for (let k = 0; k < 3; k++) {
    const step = way * WAY_OUT[k]!;
    PARTED[k] = (travel === null ? 0 : travel[k]!) + step;
    PARTED[3 + k] = (travel === null ? 0 : travel[3 + k]!) + step;
  }
  coreDistance(a, out.pieceA, b, out.pieceB, PARTED, Infinity);
  for (let k = 0; k < 3; k++) {
    const n = WAY_OUT[k]!;
    out.pointA[k] = closestA[k]! + ra * n;
    out.pointB[k] = closestB[k]! - way * n - rb * n;
  }
}

function earlier(i: number, j: number, out: Measure): boolean {
  return i < out.pieceA || (i === out.pieceA && j < out.pieceB);
}

/**
 * Least signed distance of two bodies where b may be moved by any translation within `travel` (car frame; null: none).
 * Branch and bound over the two trees; the answer does not depend on the cache. Beyond `cutoff` (mm) the distance is Infinity.
 * Overlapping: minus the largest, over the overlapping pairs of pieces, of the least translation that parts the pair:
 * exact when each body is one convex piece, else a lower estimate, which `depthIsEstimate` says.
 * Never NaN; symmetric in a and b; no allocation.
 */
export function measureBodies(
  a: Body,
  b: Body,
  travel: TravelBox | null,
  cutoff: number,
  out: Measure,
  cache?: PairCache,
  slot = 0,
): void {
  const move = writeTravel(travel);
  out.distance = Infinity;
  out.pieceA = -1;
  out.pieceB = -1;
  out.overlapping = false;
  out.depthIsEstimate = false;
  coresOverlap = false;
  let best = cutoff;
  let doneA = -1;
  let doneB = -1;
  if (cache !== undefined) {
    const i = cache.pieceA[slot]!;
    const j = cache.pieceB[slot]!;
    if (i >= 0 && i < a.count && j >= 0 && j < b.count) {
      best = measurePair(a, i, b, j, move, best, out);
      doneA = i;
      doneB = j;
    }
  }
  const p = a.boxes;
  const q = b.boxes;
  let top = 0;
  stack[0] = 0;
  stack[1] = 0;
  stackBound[0] = boxBound(p, 0, q, 0, move);
  top = 1;
  while (top > 0) {
    top--;
    if (stackBound[top]! > best + SLACK) continue;
    const m = stack[2 * top]!;
    const n = stack[2 * top + 1]!;
    const mRight = a.second[m]!;
    const nRight = b.second[n]!;
    if (mRight === 0 && nRight === 0) {
      const i = a.leafPiece[m]!;
      const j = b.leafPiece[n]!;
      if (i === doneA && j === doneB) continue;
      best = measurePair(a, i, b, j, move, best, out);
      continue;
    }
    if (top + 2 > stackBound.length) growStack();
    const splitA = nRight === 0 || (mRight !== 0 && largest(p, 6 * m) >= largest(q, 6 * n));
    const m1 = splitA ? m + 1 : m;
    const m2 = splitA ? mRight : m;
    const n1 = splitA ? n : n + 1;
    const n2 = splitA ? n : nRight;
    const first = boxBound(p, 6 * m1, q, 6 * n1, move);
    const second = boxBound(p, 6 * m2, q, 6 * n2, move);
    // The nearer one is taken next.
    if (first <= second) {
      if (second <= best + SLACK) top = push(top, m2, n2, second);
      if (first <= best + SLACK) top = push(top, m1, n1, first);
    } else {
      if (first <= best + SLACK) top = push(top, m1, n1, first);
      if (second <= best + SLACK) top = push(top, m2, n2, second);
    }
  }
  if (cache !== undefined) {
    cache.pieceA[slot] = out.pieceA;
    cache.pieceB[slot] = out.pieceB;
  }
  if (out.pieceA < 0) return;
  if (coresOverlap) writeOverlapPoints(a, b, move, out);
  out.overlapping = out.distance <= 0;
  if (out.overlapping && out.distance < 0 && (a.count > 1 || b.count > 1)) out.depthIsEstimate = true;
}

function push(top: number, m: number, n: number, bound: number): number {
  stack[2 * top] = m;
  stack[2 * top + 1] = n;
  stackBound[top] = bound;
  return top + 1;
}

function growStack(): void {
  const wider = new Int32Array(2 * stack.length);
  wider.set(stack);
  stack = wider;
  const bounds = new Float64Array(2 * stackBound.length);
  bounds.set(stackBound);
  stackBound = bounds;
}

function largest(boxes: Float64Array, at: number): number {
  return Math.max(boxes[at + 3]! - boxes[at]!, boxes[at + 4]! - boxes[at + 1]!, boxes[at + 5]! - boxes[at + 2]!);
}

/**
 * The same for two pieces at given poses, allocating: for tests and single questions.
 * @example measurePieces(ball, IDENTITY, ball, { ...IDENTITY, at: [100, 0, 0] }).distance
 */
export function measurePieces(a: Piece, poseA: Pose, b: Piece, poseB: Pose, travel: TravelBox | null = null): Measure {
  const bodyA = buildBody([a]);
  const bodyB = buildBody([b]);
  setPose(bodyA, poseA);
  setPose(bodyB, poseB);
  const out = createMeasure();
  measureBodies(bodyA, bodyB, travel, Infinity, out);
  return out;
}
