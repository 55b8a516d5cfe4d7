import { compilePiece, CORE_BOX, CORE_DISCS, CORE_POINTS, CORE_PRISM, CORE_RING, CORE_ROUND, halfOf, isRightCircular } from "./compile.ts";
import { IDENTITY, type Piece, type Pose } from "./piece.ts";
import type { Facets } from "./facets.ts";

/**
 * Convex pieces as flat numbers, local and world, with a tree of boxes over them: what the distance kernel reads.
 * A body is mutable in one way only: `setPose` moves it.
 */

export interface Body {
  /** Number of pieces. */
  readonly count: number;
  readonly pieces: readonly Piece[];
  /** CORE_… of each piece. */
  readonly core: Uint8Array;
  /** Where the piece's numbers begin in `local` and `world`. */
  readonly start: Int32Array;
  /** Points of the piece: corners, or points in the ring of a prism. */
  readonly corners: Int32Array;
  readonly discs: Int32Array;
  readonly radius: Float64Array;
  readonly local: Float64Array;
  readonly world: Float64Array;
  /** One entry for each triple of `local`: 1 a point, 0 a vector that turns but does not move. */
  readonly placed: Uint8Array;
  /** Tree in pre-order: the first child of node n is n + 1, the second is `second[n]`; 0 marks a leaf. */
  readonly second: Int32Array;
  /** Piece of a leaf. */
  readonly leafPiece: Int32Array;
  readonly leafOf: Int32Array;
  /** Size of each node where the pieces were made, mm: the larger of two nodes is split first. */
  readonly spread: Float64Array;
  /** World box of each node, grown by the ball radius: low x, y, z, high x, y, z. */
  readonly boxes: Float64Array;
  /** The same boxes as middle x, y, z and half extents x, y, z. */
  readonly middles: Float64Array;
  /** 1 for a right circular cylinder. */
  readonly circular: Uint8Array;
  /**
   * Where the spine of a round piece begins in `world`, -1 without one: points whose hull grown by `spineRadius` holds the
   * piece, and whose surface is that of the piece between two end planes (a point and an outward normal each).
   */
  readonly spine: Int32Array;
  readonly spinePoints: Int32Array;
  readonly spineRadius: Float64Array;
  /** Both ends, in `world`, of the segment that a piece's core or spine is (a point has one end twice); -1 for anything else. */
  readonly segmentFrom: Int32Array;
  readonly segmentTo: Int32Array;
  /** Half edge lengths of a rectangular box, three a piece; zero for anything else. */
  readonly boxHalf: Float64Array;
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
    core: Uint8Array.from(compiled, (c) => c.core),
    start: new Int32Array(count),
    corners: Int32Array.from(compiled, (c) => c.corners),
    discs: Int32Array.from(compiled, (c) => c.discs),
    radius: Float64Array.from(pieces, (p) => p.radius),
    local: new Float64Array(3 * triples),
    world: new Float64Array(3 * triples),
    placed: new Uint8Array(triples),
    second: new Int32Array(nodes),
    leafPiece: new Int32Array(nodes).fill(-1),
    leafOf: new Int32Array(count),
    spread: new Float64Array(nodes),
    boxes: new Float64Array(6 * nodes),
    middles: new Float64Array(6 * nodes),
    circular: Uint8Array.from(compiled, (c) => (c.core === CORE_ROUND && isRightCircular(c.vectors) ? 1 : 0)),
    spine: new Int32Array(count).fill(-1),
    spinePoints: Int32Array.from(compiled, (c) => (c.spine ? c.spine.points.length - 2 : 0)),
    spineRadius: Float64Array.from(compiled, (c) => c.spine?.radius ?? 0),
    segmentFrom: new Int32Array(count).fill(-1),
    segmentTo: new Int32Array(count).fill(-1),
    boxHalf: Float64Array.from(compiled.flatMap((c) => (c.core === CORE_BOX ? halfOf(c.vectors) : [0, 0, 0]))),
    facets: new Array<Facets | null | undefined>(count).fill(undefined),
    pose: IDENTITY,
  };
  let at = 0;
  compiled.forEach((c, i) => {
    body.start[i] = at;
    body.placed.fill(1, at / 3, at / 3 + c.placed.length);
    for (const v of [...c.placed, ...c.vectors]) {
      body.local.set(v, at);
      at += 3;
    }
    if (c.core === CORE_POINTS && c.corners <= 2) {
      body.segmentFrom[i] = body.start[i]!;
      body.segmentTo[i] = body.start[i]! + 3 * (c.corners - 1);
    }
    if (!c.spine) return;
    body.spine[i] = at;
    if (body.spinePoints[i] === 2) {
      body.segmentFrom[i] = at;
      body.segmentTo[i] = at + 3;
    }
    body.placed.fill(1, at / 3, at / 3 + c.spine.points.length);
    for (const v of [...c.spine.points, ...c.spine.normals]) {
      body.local.set(v, at);
      at += 3;
    }
  });
  // Boxes of the pieces where they were made decide how the tree is split; any pose may use it.
  body.world.set(body.local);
  const boxes = new Float64Array(6 * count);
  for (let i = 0; i < count; i++) pieceBox(body, i, boxes, 6 * i);
  growTree(body, boxes, Int32Array.from({ length: count }, (_, i) => i), 0, count, 0);
  setPose(body, IDENTITY);
  for (let node = 0; node < nodes; node++) {
    const o = 6 * node;
    const size = [0, 1, 2].map((k) => body.boxes[o + 3 + k]! - body.boxes[o + k]!);
    body.spread[node] = Math.hypot(...size);
  }
  return body;
}

/** Splits the pieces at the median of the widest spread of centres; returns the node after the subtree. */
function growTree(body: Body, boxes: Float64Array, order: Int32Array, from: number, to: number, node: number): number {
  if (to - from === 1) {
    body.leafPiece[node] = order[from]!;
    body.leafOf[order[from]!] = node;
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
  body.second[node] = second;
  return growTree(body, boxes, order, half, to, second);
}

/** Writes the world box of one piece's core grown by its radius: exact, also for discs. */
function pieceBox(body: Body, piece: number, out: Float64Array, at: number): void {
  const { world } = body;
  const s = body.start[piece]!;
  const r = body.radius[piece]!;
  const core = body.core[piece]!;
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
      const n = body.corners[piece]!;
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
        const discs = body.discs[piece]!;
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
  const { local, world, placed, boxes, middles, second, leafPiece } = body;
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
  for (let node = second.length - 1; node >= 0; node--) {
    const right = second[node]!;
    const o = 6 * node;
    if (right === 0) pieceBox(body, leafPiece[node]!, boxes, o);
    else {
      const l = o + 6;
      const r = 6 * right;
      for (let k = 0; k < 3; k++) {
        boxes[o + k] = Math.min(boxes[l + k]!, boxes[r + k]!);
        boxes[o + 3 + k] = Math.max(boxes[l + 3 + k]!, boxes[r + 3 + k]!);
      }
    }
    for (let k = 0; k < 3; k++) {
      const low = boxes[o + k]!;
      const high = boxes[o + 3 + k]!;
      middles[o + k] = (low + high) / 2;
      middles[o + 3 + k] = (high - low) / 2;
    }
  }
}

/** World box of the body: low x, y, z, high x, y, z, mm. A view of the body's own numbers: copy it to keep it. */
export function bodyBox(body: Body): Float64Array {
  return body.boxes.subarray(0, 6);
}
