import { IDENTITY, type Disc, type Piece, type Pose } from "./piece.ts";
import type { Facets } from "./facets.ts";
import type { Vec3 } from "../frames.ts";

/**
 * Convex pieces as flat numbers, local and world, with a tree of boxes over them: what the distance kernel reads.
 * A body is mutable in one way only: `setPose` moves it.
 */

/** How the support point of a piece's core is found. The core is the piece without its ball radius. */
export const CORE_POINTS = 0;
/** Centre and three half edges: support by signs. Any parallelepiped. */
export const CORE_BOX = 1;
/** Ring of points and one vector: the ring and its copy moved by that vector. */
export const CORE_PRISM = 2;
/** Centre, half axis, and two half diameters: a circular or elliptic cylinder, its ends parallel. */
export const CORE_ROUND = 3;
/** Points and discs in any number. */
export const CORE_DISCS = 4;

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
  /** 1 for a right circular cylinder. */
  readonly circular: Uint8Array;
  /**
   * Where the spine of a round piece begins in `world`, -1 without one: points whose hull grown by `spineRadius` holds the
   * piece, and whose surface is that of the piece between two end planes (a point and an outward normal each).
   */
  readonly spine: Int32Array;
  readonly spinePoints: Int32Array;
  readonly spineRadius: Float64Array;
  /** Half edge lengths of a rectangular box, three a piece; zero for anything else. */
  readonly boxHalf: Float64Array;
  /** Facets of a piece's core, local, made when its depth is first asked for; null where it has none. */
  readonly facets: (Facets | null | undefined)[];
  pose: Pose;
}

const squared = (a: Vec3): number => a[0] * a[0] + a[1] * a[1] + a[2] * a[2];
const minus = (a: Vec3, b: Vec3): Vec3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const near = (a: Vec3, b: Vec3, slack: number): boolean => squared(minus(a, b)) <= slack * slack;
const point = (disc: Disc): boolean => squared(disc.u) === 0 && squared(disc.v) === 0;

/** Slack under which a shape counts as the special one it nearly is, as a share of its size: far below what is measured. */
const RECOGNISED = 1e-13;

function extentOf(points: readonly Vec3[]): number {
  let most = 0;
  for (const p of points) most = Math.max(most, Math.abs(p[0]), Math.abs(p[1]), Math.abs(p[2]));
  return most;
}

/** Centre and half edges of the eight corners of a parallelepiped, in any order; undefined for any other eight points. */
function boxOf(points: readonly Vec3[]): Vec3[] | undefined {
  if (points.length !== 8) return undefined;
  const slack = 4 * RECOGNISED * extentOf(points);
  const origin = points[0]!;
  const edges = points.slice(1).map((p) => minus(p, origin));
  for (let i = 0; i < 5; i++) {
    for (let j = i + 1; j < 6; j++) {
      for (let k = j + 1; k < 7; k++) {
        const [a, b, c] = [edges[i]!, edges[j]!, edges[k]!];
        const volume = Math.abs(
          a[0] * (b[1] * c[2] - b[2] * c[1]) + a[1] * (b[2] * c[0] - b[0] * c[2]) + a[2] * (b[0] * c[1] - b[1] * c[0]),
        );
        if (!(volume > 1e-6 * Math.sqrt(squared(a) * squared(b) * squared(c)))) continue;
        const sums = [1, 2, 3, 4, 5, 6, 7].map((bits): Vec3 => {
          const [p, q, r] = [bits & 1, (bits >> 1) & 1, bits >> 2];
          return [p * a[0] + q * b[0] + r * c[0], p * a[1] + q * b[1] + r * c[1], p * a[2] + q * b[2] + r * c[2]];
        });
        // Every corner is such a sum and every such sum is a corner.
        if (!edges.every((e) => sums.some((s) => near(e, s, slack)))) continue;
        if (!sums.every((s) => edges.some((e) => near(e, s, slack)))) continue;
        const half = (e: Vec3): Vec3 => [e[0] / 2, e[1] / 2, e[2] / 2];
        const all = sums[6]!;
        return [[origin[0] + all[0] / 2, origin[1] + all[1] / 2, origin[2] + all[2] / 2], half(a), half(b), half(c)];
      }
    }
  }
  return undefined;
}

/** The offset between two like halves of a point list (ring, then the same ring moved), if it is one. */
function prismOffset(points: readonly Vec3[]): Vec3 | undefined {
  const n = points.length / 2;
  if (!Number.isInteger(n) || n < 3) return undefined;
  const offset = minus(points[n]!, points[0]!);
  const slack = 4 * RECOGNISED * extentOf(points);
  for (let i = 1; i < n; i++) if (!near(minus(points[n + i]!, points[i]!), offset, slack)) return undefined;
  return offset;
}

/** Two like discs facing each other: a cylinder, straight or slanted, circular or elliptic. */
function roundOf(discs: readonly Disc[]): Vec3[] | undefined {
  if (discs.length !== 2) return undefined;
  const [a, b] = [discs[0]!, discs[1]!];
  const slack = RECOGNISED * Math.max(extentOf([a.u, a.v]), extentOf([a.centre, b.centre]) * 1e-3);
  if (!near(a.u, b.u, slack) || !near(a.v, b.v, slack)) return undefined;
  const middle: Vec3 = [
    (a.centre[0] + b.centre[0]) / 2,
    (a.centre[1] + b.centre[1]) / 2,
    (a.centre[2] + b.centre[2]) / 2,
  ];
  const half = minus(b.centre, a.centre);
  return [middle, [half[0] / 2, half[1] / 2, half[2] / 2], a.u, a.v];
}

function isRightCircular([axis, u, v]: readonly Vec3[]): boolean {
  const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
  const r = squared(u!);
  const h = Math.sqrt(squared(axis!) * r);
  return (
    Math.abs(squared(v!) - r) <= 1e-13 * r &&
    Math.abs(dot(u!, v!)) <= 1e-13 * r &&
    h > 0 &&
    Math.abs(dot(axis!, u!)) <= 1e-13 * h &&
    Math.abs(dot(axis!, v!)) <= 1e-13 * h
  );
}

/** Lengths of the half edges of a box; zeros when they are not square to each other. */
function halfOf(edges: readonly Vec3[]): number[] {
  const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
  const sizes = edges.map((e) => Math.sqrt(squared(e)));
  const square = [0, 1, 2].every((k) => {
    const other = (k + 1) % 3;
    return Math.abs(dot(edges[k]!, edges[other]!)) <= RECOGNISED * sizes[k]! * sizes[other]!;
  });
  return square ? sizes : [0, 0, 0];
}

interface Spine {
  /** The spine's points, then a point of either end plane. */
  points: Vec3[];
  /** Outward normals of the end planes. */
  normals: Vec3[];
  radius: number;
}

/**
 * The spine of round tubes and bars: discs of one radius seen along one axis, half of them (one or more) on either end
 * plane. The discs may lean (mitred ends); the points are then moved out along the axis to where the longest side ends.
 */
function spineOf(piece: Piece): Spine | undefined {
  const discs = piece.discs;
  if (piece.points.length > 0 || discs.length < 2 || discs.length > 8 || discs.length % 2 === 1) return undefined;
  const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
  const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
  const along = (a: Vec3, t: number, b: Vec3): Vec3 => [a[0] + t * b[0], a[1] + t * b[1], a[2] + t * b[2]];
  const plane = cross(discs[0]!.u, discs[0]!.v);
  if (squared(plane) === 0) return undefined;
  // The discs of the first one's end plane, and the others.
  const size = extentOf(discs.flatMap((d) => [d.centre, d.u, d.v]));
  const ends: Disc[][] = [[], []];
  const unit = along([0, 0, 0], 1 / Math.sqrt(squared(plane)), plane);
  for (const d of discs) ends[Math.abs(dot(minus(d.centre, discs[0]!.centre), unit)) <= 1e-12 * size ? 0 : 1]!.push(d);
  if (ends[0]!.length !== ends[1]!.length) return undefined;
  // Each disc has its partner straight across; the axis leads from one to the other.
  const far = ends[1]!;
  const partner = far.find((f) => {
    const step = minus(f.centre, discs[0]!.centre);
    return ends[0]!.every((d) => far.some((g) => squared(cross(minus(g.centre, d.centre), step)) <= 1e-20 * squared(step) * size * size));
  });
  if (!partner) return undefined;
  const whole = minus(partner.centre, discs[0]!.centre);
  const axis = along([0, 0, 0], 1 / Math.sqrt(squared(whole)), whole);
  let radius = 0;
  const points: Vec3[] = [];
  const normals: Vec3[] = [];
  for (const [side, list] of ends.entries()) {
    for (const d of list) {
      const p = along(d.u, -dot(d.u, axis), axis);
      const q = along(d.v, -dot(d.v, axis), axis);
      const r = Math.sqrt(squared(p));
      if (radius === 0) radius = r;
      const slack = 1e-12 * radius;
      if (r === 0 || Math.abs(r - radius) > slack || Math.abs(Math.sqrt(squared(q)) - radius) > slack) return undefined;
      if (Math.abs(dot(p, q)) > slack * radius) return undefined;
      const lean = Math.hypot(dot(d.u, axis), dot(d.v, axis));
      points.push(along(d.centre, side === 0 ? -lean : lean, axis));
    }
    const n = cross(list[0]!.u, list[0]!.v);
    const outward = (side === 0 ? -1 : 1) * Math.sign(dot(n, axis));
    normals.push(along([0, 0, 0], outward / Math.sqrt(squared(n)), n));
  }
  return { points: [...points, ends[0]![0]!.centre, far[0]!.centre], normals, radius };
}

interface Compiled {
  core: number;
  placed: Vec3[];
  vectors: Vec3[];
  corners: number;
  discs: number;
  spine?: Spine | undefined;
}

function compilePiece(piece: Piece): Compiled {
  const discs = piece.discs.filter((d) => !point(d));
  const points = [...piece.points, ...piece.discs.filter(point).map((d) => d.centre)];
  if (points.length + discs.length === 0) throw new RangeError("a piece needs at least one point or disc");
  for (const v of [...points, ...discs.flatMap((d) => [d.centre, d.u, d.v])]) {
    if (!Number.isFinite(v[0]) || !Number.isFinite(v[1]) || !Number.isFinite(v[2])) {
      throw new RangeError(`a piece has a coordinate that is not a finite number: ${v.join(", ")}`);
    }
  }
  if (!(piece.radius >= 0) || !Number.isFinite(piece.radius)) {
    throw new RangeError(`a piece's radius must be zero or more, got ${piece.radius}`);
  }
  if (discs.length === 0) {
    const box = boxOf(points);
    if (box) return { core: CORE_BOX, placed: [box[0]!], vectors: box.slice(1), corners: 8, discs: 0 };
    const offset = points.length > 8 || points.length === 6 ? prismOffset(points) : undefined;
    if (offset) {
      const ring = points.slice(0, points.length / 2);
      return { core: CORE_PRISM, placed: ring, vectors: [offset], corners: ring.length, discs: 0 };
    }
    return { core: CORE_POINTS, placed: points, vectors: [], corners: points.length, discs: 0 };
  }
  const spine = spineOf(piece);
  const round = points.length === 0 ? roundOf(discs) : undefined;
  if (round) return { core: CORE_ROUND, placed: [round[0]!], vectors: round.slice(1), corners: 0, discs: 2, spine };
  return {
    spine,
    core: CORE_DISCS,
    placed: [...points, ...discs.map((d) => d.centre)],
    vectors: discs.flatMap((d) => [d.u, d.v]),
    corners: points.length,
    discs: discs.length,
  };
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
    circular: Uint8Array.from(compiled, (c) => (c.core === CORE_ROUND && isRightCircular(c.vectors) ? 1 : 0)),
    spine: new Int32Array(count).fill(-1),
    spinePoints: Int32Array.from(compiled, (c) => (c.spine ? c.spine.points.length - 2 : 0)),
    spineRadius: Float64Array.from(compiled, (c) => c.spine?.radius ?? 0),
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
    if (!c.spine) return;
    body.spine[i] = at;
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
      if (core === CORE_PRISM) {
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
  const { local, world, placed, boxes, second, leafPiece } = body;
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
    if (right === 0) {
      pieceBox(body, leafPiece[node]!, boxes, 6 * node);
      continue;
    }
    const o = 6 * node;
    const l = o + 6;
    const r = 6 * right;
    for (let k = 0; k < 3; k++) {
      boxes[o + k] = Math.min(boxes[l + k]!, boxes[r + k]!);
      boxes[o + 3 + k] = Math.max(boxes[l + 3 + k]!, boxes[r + 3 + k]!);
    }
  }
}

/** World box of the body: low x, y, z, high x, y, z, mm. A view of the body's own numbers: copy it to keep it. */
export function bodyBox(body: Body): Float64Array {
  return body.boxes.subarray(0, 6);
}
