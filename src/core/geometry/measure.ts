import { buildBody, setPose, type Body } from "./body.ts";
import { FACTS, NODE, RADIUS, RECTANGULAR, SEGMENT_FROM, SEGMENT_TO, SIZES } from "./compile.ts";
import { separatingNormal } from "./depth-search.ts";
import { coreDepth, depthIsCertain } from "./depth.ts";
import { closestA, closestB, coreDistance, slabAlong, TOUCHING } from "./gjk.ts";
import { pairDistance } from "./pair-distance.ts";
import { segmentSquare } from "./segments.ts";
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

/** mm: cores of grown pieces nearer than this are taken as touching. */
const ALL_BUT_TOUCHING = 1e-8;
/** mm: less travel than this is none. */
const NO_TRAVEL = 1e-12;
const TRAVEL = new Float64Array(6);
const PARTED = new Float64Array(6);
/** From b to a along the gap (or against the shortest way out) of the best pair so far, unit length. */
const DIRECTION = new Float64Array(3);
let coresOverlap = false;
let stack = new Int32Array(2 * 1024);
let stackBound = new Float64Array(1024);

function writeTravel(travel: TravelBox | null): Float64Array | null {
  if (travel === null) return null;
  let any = false;
  for (let k = 0; k < 3; k++) {
    const low = travel.low[k]!;
    const high = travel.high[k]!;
    TRAVEL[k] = Math.abs(low) < NO_TRAVEL ? 0 : low;
    TRAVEL[3 + k] = Math.abs(high) < NO_TRAVEL ? 0 : high;
    if (TRAVEL[k] !== 0 || TRAVEL[3 + k] !== 0) any = true;
  }
  return any ? TRAVEL : null;
}

/**
 * How near anything in two nodes can be, mm, signed like a distance: a node is a box grown by a ball, so apart it is the
 * boxes' distance less both radii, else minus the least width of their overlap less both radii.
 */
function nodeDistance(p: Float64Array, i: number, q: Float64Array, j: number): number {
  const x = Math.abs(p[i]! - q[j]!) - (p[i + 3]! + q[j + 3]!);
  const y = Math.abs(p[i + 1]! - q[j + 1]!) - (p[i + 4]! + q[j + 4]!);
  const z = Math.abs(p[i + 2]! - q[j + 2]!) - (p[i + 5]! + q[j + 5]!);
  return parted(x, y, z) - p[i + RADIUS]! - q[j + RADIUS]!;
}

/** The same where the second node may move by `travel`. */
function movingNodeDistance(p: Float64Array, i: number, q: Float64Array, j: number, travel: Float64Array): number {
  const x = Math.abs(p[i]! - q[j]! - (travel[0]! + travel[3]!) / 2) - (p[i + 3]! + q[j + 3]! + (travel[3]! - travel[0]!) / 2);
  const y = Math.abs(p[i + 1]! - q[j + 1]! - (travel[1]! + travel[4]!) / 2) - (p[i + 4]! + q[j + 4]! + (travel[4]! - travel[1]!) / 2);
  const z = Math.abs(p[i + 2]! - q[j + 2]! - (travel[2]! + travel[5]!) / 2) - (p[i + 5]! + q[j + 5]! + (travel[5]! - travel[2]!) / 2);
  return parted(x, y, z) - p[i + RADIUS]! - q[j + RADIUS]!;
}

/** Distance of two boxes that are x, y, z apart (negative: overlap) along the axes. */
function parted(x: number, y: number, z: number): number {
  // Twice the positive part, without a branch.
  const u = x + Math.abs(x);
  const v = y + Math.abs(y);
  const w = z + Math.abs(z);
  const square = u * u + v * v + w * w;
  return square > 0 ? Math.sqrt(square) / 2 : x > y ? (x > z ? x : z) : y > z ? y : z;
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
  const ra = a.sizes[SIZES * i]!;
  const rb = b.sizes[SIZES * j]!;
  const enough = best + ra + rb + SLACK;
  const s = a.facts[FACTS * i + SEGMENT_FROM]!;
  const t = b.facts[FACTS * j + SEGMENT_FROM]!;
  let core = 0;
  let plainSegments = false;
  if (travel === null && s >= 0 && t >= 0) {
    // Two segments, or the spines that hold round pieces: most end here.
    const within = enough + a.sizes[SIZES * i + 1]! + b.sizes[SIZES * j + 1]!;
    const square = segmentSquare(a.world, s, a.facts[FACTS * i + SEGMENT_TO]!, b.world, t, b.facts[FACTS * j + SEGMENT_TO]!);
    if (square > within * within && within > 0) return best;
    plainSegments = a.sizes[SIZES * i + 1] === 0 && b.sizes[SIZES * j + 1] === 0;
    if (plainSegments) core = square > TOUCHING * TOUCHING ? Math.sqrt(square) : -1;
  } else if (out.pieceA >= 0 && (travel !== null || best < 0 || !((s >= 0 && b.facts[FACTS * j + RECTANGULAR] === 1) || (t >= 0 && a.facts[FACTS * i + RECTANGULAR] === 1)))) {
    // The direction of the best pair so far, as a guess of what parts this one too (or leaves it less deep): any slab
    // bounds the signed distance from below. It prunes, it never decides.
    const gap = slabAlong(a, i, b, j, travel, DIRECTION[0]!, DIRECTION[1]!, DIRECTION[2]!);
    if (gap > enough) return best;
  }
  if (!plainSegments) core = pairDistance(a, i, b, j, travel, enough);
  if (core === Infinity) return best;
  // Grown cores that all but touch have a depth, and a way out that two points so near each other cannot tell.
  if (core > (ra + rb > 0 ? ALL_BUT_TOUCHING : 0)) {
    const distance = core - ra - rb;
    if (distance > best || (distance === best && out.pieceA >= 0 && !earlier(i, j, out))) return best;
    out.distance = distance;
    out.pieceA = i;
    out.pieceB = j;
    out.depthIsEstimate = false;
    coresOverlap = false;
    for (let k = 0; k < 3; k++) {
      const n = (closestB[k]! - closestA[k]!) / core;
      DIRECTION[k] = -n;
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
  for (let k = 0; k < 3; k++) DIRECTION[k] = -separatingNormal[k]!;
  coresOverlap = true;
  return distance;
}

/** Where the overlap of the governing pieces is met: b parted along the least way out by one millimetre more, then put back. */
function writeOverlapPoints(a: Body, b: Body, travel: Float64Array | null, out: Measure): void {
  const ra = a.sizes[SIZES * out.pieceA]!;
  const rb = b.sizes[SIZES * out.pieceB]!;
  const way = -out.distance - ra - rb + 1;
  for (let k = 0; k < 3; k++) {
    const step = -way * DIRECTION[k]!;
    PARTED[k] = (travel === null ? 0 : travel[k]!) + step;
    PARTED[3 + k] = (travel === null ? 0 : travel[3 + k]!) + step;
  }
  coreDistance(a, out.pieceA, b, out.pieceB, PARTED, Infinity);
  // The two points are moved onto one line along the way out: the closest points are less exact than its direction.
  for (let k = 0; k < 3; k++) {
    const n = -DIRECTION[k]!;
    const middle = (closestA[k]! + closestB[k]! + (ra - rb - way) * n) / 2;
    out.pointA[k] = middle - (out.distance / 2) * n;
    out.pointB[k] = middle + (out.distance / 2) * n;
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
  searchTrees(a, b, move, best, out, doneA, doneB);
  if (cache !== undefined) {
    cache.pieceA[slot] = out.pieceA;
    cache.pieceB[slot] = out.pieceB;
  }
  if (out.pieceA < 0) return;
  if (coresOverlap) writeOverlapPoints(a, b, move, out);
  out.overlapping = out.distance <= 0;
  if (out.overlapping && out.distance < 0 && (a.count > 1 || b.count > 1)) out.depthIsEstimate = true;
}

/** Branch and bound over the two trees, nearer boxes first. */
function searchTrees(
  a: Body,
  b: Body,
  travel: Float64Array | null,
  bound: number,
  out: Measure,
  doneA: number,
  doneB: number,
): void {
  const p = a.middles;
  const q = b.middles;
  const treeA = a.tree;
  const treeB = b.tree;
  let best = bound;
  let limit = best + SLACK;
  let m = 0;
  let n = 0;
  let top = 0;
  const whole = travel === null ? nodeDistance(p, 0, q, 0) : movingNodeDistance(p, 0, q, 0, travel);
  if (whole > limit) return;
  for (;;) {
    const mRight = treeA[2 * m]!;
    const nRight = treeB[2 * n]!;
    if (mRight === 0 && nRight === 0) {
      const i = treeA[2 * m + 1]!;
      const j = treeB[2 * n + 1]!;
      if (i !== doneA || j !== doneB) {
        best = measurePair(a, i, b, j, travel, best, out);
        limit = best + SLACK;
      }
    } else {
      let m1 = m;
      let m2 = m;
      let n1 = n;
      let n2 = n;
      if (nRight === 0 || (mRight !== 0 && p[NODE * m + 6]! >= q[NODE * n + 6]!)) {
        m1 = m + 1;
        m2 = mRight;
      } else {
        n1 = n + 1;
        n2 = nRight;
      }
      let first: number;
      let second: number;
      if (travel === null) {
        first = nodeDistance(p, NODE * m1, q, NODE * n1);
        second = nodeDistance(p, NODE * m2, q, NODE * n2);
      } else {
        first = movingNodeDistance(p, NODE * m1, q, NODE * n1, travel);
        second = movingNodeDistance(p, NODE * m2, q, NODE * n2, travel);
      }
      if (first <= limit) {
        if (second <= limit) {
          // The nearer one is taken at once, the other waits.
          if (top === stackBound.length) growStack();
          if (first <= second) {
            stack[2 * top] = m2;
            stack[2 * top + 1] = n2;
            stackBound[top++] = second;
            m = m1;
            n = n1;
          } else {
            stack[2 * top] = m1;
            stack[2 * top + 1] = n1;
            stackBound[top++] = first;
            m = m2;
            n = n2;
          }
        } else {
          m = m1;
          n = n1;
        }
        continue;
      }
      if (second <= limit) {
        m = m2;
        n = n2;
        continue;
      }
    }
    do {
      if (top === 0) return;
      top--;
    } while (stackBound[top]! > limit);
    m = stack[2 * top]!;
    n = stack[2 * top + 1]!;
  }
}

function growStack(): void {
  const wider = new Int32Array(2 * stack.length);
  wider.set(stack);
  stack = wider;
  const bounds = new Float64Array(2 * stackBound.length);
  bounds.set(stackBound);
  stackBound = bounds;
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
