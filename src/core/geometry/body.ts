import {
  CIRCULAR,
  compilePiece,
  CORE,
  CORE_BOX,
  CORE_DISCS,
  CORE_POINTS,
  CORE_PRISM,
  CORE_RING,
  CORE_ROUND,
  CORNERS,
  DISCS,
  FACTS,
  HALF,
  halfOf,
  isRightCircular,
  LEAF,
  NODE,
  RADIUS,
  RECTANGULAR,
  SEGMENT_FROM,
  SEGMENT_TO,
  SIZES,
  SPINE,
  SPINE_POINTS,
  START,
  type Compiled,
} from "./compile.ts";
import type { Vec3 } from "../frames.ts";
import { IDENTITY, type Piece, type Pose } from "./piece.ts";
import type { Facets } from "./facets.ts";

/**
 * Convex pieces as flat numbers, local and world, with a tree of boxes over them: what the distance kernel reads.
 * A body is mutable in one way only: `setPose` moves it.
 */

/** Few arrays, each with all of one piece or node side by side: a pair of bodies is measured in the time of a few cache misses. */
export interface Body {
  /** Number of pieces. */
  readonly count: number;
  readonly pieces: readonly Piece[];
  /** `FACTS` whole numbers a piece: see compile.ts. */
  readonly facts: Int32Array;
  /** `SIZES` lengths a piece: see compile.ts. */
  readonly sizes: Float64Array;
  readonly local: Float64Array;
  readonly world: Float64Array;
  /** One entry for each triple of `local`: 1 a point, 0 a vector that turns but does not move. */
  readonly placed: Uint8Array;
  /** Tree in pre-order, two numbers a node: its second child (the first is the next node; 0 marks a leaf), the piece of a leaf. */
  readonly tree: Int32Array;
  /** World box of each node, grown by the ball radius: low x, y, z, high x, y, z. */
  readonly boxes: Float64Array;
  /** The same, `NODE` numbers a node: see compile.ts. */
  readonly middles: Float64Array;
  /** Facets of a piece's core, local, made when its depth is first asked for; null where it has none. */
  readonly facets: (Facets | null | undefined)[];
  pose: Pose;
}

/**
 * Pieces in the form the kernel reads, at the identity pose.
 * @throws RangeError for a piece without points and discs, with a number that is not finite, or with a negative radius.
 */
export function buildBody(pieces: readonly Piece[]): Body {
  if (pieces.length === 0) throw new RangeError("a body needs at least one piece");
  const count = pieces.length;
  const compiled = pieces.map(compilePiece);
  const triples = compiled.reduce(
    (n, c) => n + c.placed.length + c.vectors.length + (c.spine ? c.spine.points.length + 2 : 0),
    0,
  );
  const nodes = 2 * count - 1;
  const body: Body = {
    count,
    pieces,
    facts: new Int32Array(FACTS * count),
    sizes: new Float64Array(SIZES * count),
    local: new Float64Array(3 * triples),
    world: new Float64Array(3 * triples),
    placed: new Uint8Array(triples),
    tree: new Int32Array(2 * nodes),
    boxes: new Float64Array(6 * nodes),
    middles: new Float64Array(NODE * nodes),
    facets: new Array<Facets | null | undefined>(count).fill(undefined),
    pose: IDENTITY,
  };
  let at = 0;
  compiled.forEach((c, i) => {
    at = writePiece(body, i, c, at);
  });
  // Boxes of the pieces where they were made decide how the tree is split; any pose may use it.
  body.world.set(body.local);
  const boxes = new Float64Array(6 * count);
  for (let i = 0; i < count; i++) pieceBox(body, i, boxes, 6 * i);
  growTree(body, boxes, Int32Array.from({ length: count }, (_, i) => i), 0, count, 0);
  for (let node = nodes - 1; node >= 0; node--) {
    const right = body.tree[2 * node]!;
    body.middles[NODE * node + RADIUS] =
      right === 0
        ? body.sizes[SIZES * body.tree[2 * node + 1]!]!
        : Math.min(body.middles[NODE * (node + 1) + RADIUS]!, body.middles[NODE * right + RADIUS]!);
  }
  setPose(body, IDENTITY);
  for (let node = 0; node < nodes; node++) {
    const o = 6 * node;
    body.middles[NODE * node + 6] = Math.hypot(...[0, 1, 2].map((k) => body.boxes[o + 3 + k]! - body.boxes[o + k]!));
  }
  return body;
}

/** Writes what is known of a piece, its numbers from `at` on; returns where the next begin. */
function writePiece(body: Body, i: number, c: Compiled, at: number): number {
  const { facts, sizes, local, placed } = body;
  const put = (list: readonly Vec3[], point: 0 | 1): void => {
    placed.fill(point, at / 3, at / 3 + list.length);
    for (const v of list) {
      local.set(v, at);
      at += 3;
    }
  };
  const f = FACTS * i;
  const from = at;
  facts[f + CORE] = c.core;
  facts[f + START] = from;
  facts[f + CORNERS] = c.corners;
  facts[f + DISCS] = c.discs;
  facts[f + SPINE] = -1;
  facts[f + SEGMENT_FROM] = -1;
  facts[f + SEGMENT_TO] = -1;
  facts[f + CIRCULAR] = c.core === CORE_ROUND && isRightCircular(c.vectors) ? 1 : 0;
  sizes[SIZES * i] = c.radius;
  put(c.placed, 1);
  put(c.vectors, 0);
  if (c.core === CORE_POINTS && c.corners <= 2) {
    facts[f + SEGMENT_FROM] = from;
    facts[f + SEGMENT_TO] = from + 3 * (c.corners - 1);
  }
  const half = c.core === CORE_BOX ? halfOf(c.vectors) : [0, 0, 0];
  sizes.set(half, SIZES * i + HALF);
  if (half[0]! > 0) sizes.set(half.map((h) => 1 / h), SIZES * i + HALF + 3);
  facts[f + RECTANGULAR] = half[0]! > 0 ? 1 : 0;
  if (!c.spine) return at;
  facts[f + SPINE] = at;
  facts[f + SPINE_POINTS] = c.spine.points.length - 2;
  sizes[SIZES * i + 1] = c.spine.radius;
  if (c.spine.points.length === 4) {
    facts[f + SEGMENT_FROM] = at;
    facts[f + SEGMENT_TO] = at + 3;
  }
  put(c.spine.points, 1);
  put(c.spine.normals, 0);
  return at;
}

/** Splits the pieces at the median of the widest spread of centres; returns the node after the subtree. */
function growTree(body: Body, boxes: Float64Array, order: Int32Array, from: number, to: number, node: number): number {
  if (to - from === 1) {
    body.tree[2 * node + 1] = order[from]!;
    body.facts[FACTS * order[from]! + LEAF] = node;
    return node + 1;
  }
  let axis = 0;
  let widest = -1;
  for (let k = 0; k < 3; k++) {
    let low = Infinity;
    let high = -Infinity;
    for (let i = from; i < to; i++) {
      const middle = boxes[6 * order[i]! + k]! + boxes[6 * order[i]! + k + 3]!;
      if (middle < low) low = middle;
      if (middle > high) high = middle;
    }
    if (high - low > widest) {
      widest = high - low;
      axis = k;
    }
  }
  const middle = (i: number): number => boxes[6 * i + axis]! + boxes[6 * i + axis + 3]!;
  order.subarray(from, to).sort((i, j) => middle(i) - middle(j) || i - j);
  const half = (from + to) >> 1;
  const second = growTree(body, boxes, order, from, half, node + 1);
  body.tree[2 * node] = second;
  return growTree(body, boxes, order, half, to, second);
}

/** Writes the world box of one piece's core grown by its radius: exact, also for discs. */
function pieceBox(body: Body, piece: number, out: Float64Array, at: number): void {
  const { world } = body;
  const s = body.facts[FACTS * piece + START]!;
  const r = body.sizes[SIZES * piece]!;
  const core = body.facts[FACTS * piece + CORE]!;
  for (let k = 0; k < 3; k++) {
    let low = Infinity;
    let high = -Infinity;
    if (core === CORE_BOX) {
      const c = world[s + k]!;
      const reach = Math.abs(world[s + 3 + k]!) + Math.abs(world[s + 6 + k]!) + Math.abs(world[s + 9 + k]!);
      low = c - reach;
      high = c + reach;
    } else if (core === CORE_ROUND) {
      const c = world[s + k]!;
      const u = world[s + 6 + k]!;
      const v = world[s + 9 + k]!;
      const reach = Math.abs(world[s + 3 + k]!) + Math.sqrt(u * u + v * v);
      low = c - reach;
      high = c + reach;
    } else {
      const n = body.facts[FACTS * piece + CORNERS]!;
      for (let i = 0, p = s + k; i < n; i++, p += 3) {
        const c = world[p]!;
        if (c < low) low = c;
        if (c > high) high = c;
      }
      if (core === CORE_PRISM || core === CORE_RING) {
        const offset = world[s + 3 * n + k]!;
        if (offset < 0) low += offset;
        else high += offset;
      } else if (core === CORE_DISCS) {
        const discs = body.facts[FACTS * piece + DISCS]!;
        const vectors = s + 3 * (n + discs);
        for (let d = 0; d < discs; d++) {
          const c = world[s + 3 * (n + d) + k]!;
          const u = world[vectors + 6 * d + k]!;
          const v = world[vectors + 6 * d + 3 + k]!;
          const reach = Math.sqrt(u * u + v * v);
          if (c - reach < low) low = c - reach;
          if (c + reach > high) high = c + reach;
        }
      }
    }
    out[at + k] = low - r;
    out[at + 3 + k] = high + r;
  }
}

/**
 * Moves a body: writes its world numbers and refits its boxes. p = rotation p_local + at, mm, car frame.
 * Costs as much as the body has numbers; allocates nothing.
 */
export function setPose(body: Body, pose: Pose): void {
  body.pose = pose;
  const { local, world, placed, boxes, middles, tree } = body;
  const m = pose.rotation;
  const [m0, m1, m2, m3, m4, m5, m6, m7, m8] = [m[0]!, m[1]!, m[2]!, m[3]!, m[4]!, m[5]!, m[6]!, m[7]!, m[8]!];
  const [ax, ay, az] = pose.at;
  for (let t = 0, i = 0; t < placed.length; t++, i += 3) {
    const x = local[i]!;
    const y = local[i + 1]!;
    const z = local[i + 2]!;
    const p = placed[t]!;
    world[i] = m0 * x + m1 * y + m2 * z + p * ax;
    world[i + 1] = m3 * x + m4 * y + m5 * z + p * ay;
    world[i + 2] = m6 * x + m7 * y + m8 * z + p * az;
  }
  for (let node = tree.length / 2 - 1; node >= 0; node--) {
    const right = tree[2 * node]!;
    const o = 6 * node;
    if (right === 0) pieceBox(body, tree[2 * node + 1]!, boxes, o);
    else {
      const l = o + 6;
      const r = 6 * right;
      for (let k = 0; k < 3; k++) {
        boxes[o + k] = Math.min(boxes[l + k]!, boxes[r + k]!);
        boxes[o + 3 + k] = Math.max(boxes[l + 3 + k]!, boxes[r + 3 + k]!);
      }
    }
    const radius = middles[NODE * node + RADIUS]!;
    for (let k = 0; k < 3; k++) {
      const low = boxes[o + k]!;
      const high = boxes[o + 3 + k]!;
      middles[NODE * node + k] = (low + high) / 2;
      middles[NODE * node + 3 + k] = (high - low) / 2 - radius;
    }
  }
}

/** World box of the body: low x, y, z, high x, y, z, mm. A view of the body's own numbers: copy it to keep it. */
export function bodyBox(body: Body): Float64Array {
  return body.boxes.subarray(0, 6);
}
