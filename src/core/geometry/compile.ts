import type { Vec3 } from "../frames.ts";
import type { Disc, Piece } from "./piece.ts";

/**
 * A piece as the numbers the kernel keeps: which of five kinds of core it is, its points and vectors, and the spine of round
 * tubes and bars. Shapes are recognised from their numbers, never from `form`, so a wrong hint cannot make a wrong distance.
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
/** A prism on a convex ring of ten corners or more, walked round rather than searched: ring, offset, two directions of its plane. */
export const CORE_RING = 5;

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

/**
 * Two directions of a ring's plane, the first toward its first corner, the second a quarter on in the order of the ring;
 * undefined when the ring is not flat or does not turn one way at every corner.
 */
function ringPlane(ring: readonly Vec3[]): [Vec3, Vec3] | undefined {
  const n = ring.length;
  const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
  const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
  const centre: Vec3 = [0, 1, 2].map((k) => ring.reduce((sum, p) => sum + p[k]!, 0) / n) as unknown as Vec3;
  let area: Vec3 = [0, 0, 0];
  ring.forEach((p, i) => {
    const c = cross(minus(p, centre), minus(ring[(i + 1) % n]!, centre));
    area = [area[0] + c[0], area[1] + c[1], area[2] + c[2]];
  });
  const size = Math.sqrt(squared(area));
  if (size === 0) return undefined;
  const normal: Vec3 = [area[0] / size, area[1] / size, area[2] / size];
  let turned = 0;
  for (let i = 0; i < n; i++) {
    if (Math.abs(dot(minus(ring[i]!, centre), normal)) > 1e-12 * Math.sqrt(size)) return undefined;
    const before = minus(ring[i]!, ring[(i + n - 1) % n]!);
    const after = minus(ring[(i + 1) % n]!, ring[i]!);
    const lengths = Math.sqrt(squared(before) * squared(after));
    const sine = dot(cross(before, after), normal) / lengths;
    if (!(sine > 1e-9)) return undefined;
    turned += Math.atan2(sine, dot(before, after) / lengths);
  }
  // Once round, not twice.
  if (Math.abs(turned - 2 * Math.PI) > 1e-6) return undefined;
  const first = minus(ring[0]!, centre);
  const length = Math.sqrt(squared(first));
  const u: Vec3 = [first[0] / length, first[1] / length, first[2] / length];
  return [u, cross(normal, u)];
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

/** Whether half axis and half diameters are those of a right circular cylinder. */
export function isRightCircular([axis, u, v]: readonly Vec3[]): boolean {
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
export function halfOf(edges: readonly Vec3[]): number[] {
  const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
  const sizes = edges.map((e) => Math.sqrt(squared(e)));
  const square = [0, 1, 2].every((k) => {
    const other = (k + 1) % 3;
    return Math.abs(dot(edges[k]!, edges[other]!)) <= RECOGNISED * sizes[k]! * sizes[other]!;
  });
  return square ? sizes : [0, 0, 0];
}

/**
 * What the kernel knows of a piece in whole numbers, `FACTS` of them together, so that a piece is one line of memory: its
 * kind of core, where its numbers begin in `world`, its points (corners, or the ring of a prism) and discs; where its spine
 * begins (-1 without one) and of how many points; both ends of the segment that its core or spine is (a point has one
 * end twice, anything else -1); the leaf of the tree it is in; whether it is a rectangular box, and a right circular cylinder.
 */
export const FACTS = 16;
export const CORE = 0;
export const START = 1;
export const CORNERS = 2;
export const DISCS = 3;
export const SPINE = 4;
export const SPINE_POINTS = 5;
export const SEGMENT_FROM = 6;
export const SEGMENT_TO = 7;
export const LEAF = 8;
export const RECTANGULAR = 9;
export const CIRCULAR = 10;

/** Lengths of a piece, mm: ball radius, spine radius, and from `HALF` the three half edges of a rectangular box, then one over each. */
export const SIZES = 8;
export const HALF = 2;

/**
 * Numbers of a node: middle x, y, z and half extents x, y, z of a box that, grown by a ball of the radius at `RADIUS`, holds
 * its pieces; and at 6 the size of its world box where the pieces were made. The radius is the least of its pieces': a chain
 * of capsules is held far closer so than by a box with corners.
 */
export const NODE = 8;
export const RADIUS = 7;

/**
 * Round tubes and bars: points whose hull grown by `radius` holds the piece, and whose surface is that of the piece between
 * two end planes.
 */
export interface Spine {
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

export interface Compiled {
  core: number;
  placed: Vec3[];
  vectors: Vec3[];
  corners: number;
  discs: number;
  spine?: Spine | undefined;
  /** Of the ball that the core is grown by. */
  radius: number;
}

/** Pieces never change, and a pipe's are built into several bodies: one for each part that some of it is left out against. */
const known = new WeakMap<Piece, Compiled>();

/** @throws RangeError for a piece without points and discs, with a number that is not finite, or with a negative radius. */
export function compilePiece(piece: Piece): Compiled {
  let compiled = known.get(piece);
  if (compiled === undefined) known.set(piece, (compiled = { ...compileCore(piece), radius: piece.radius }));
  return compiled;
}

function requireFinite(v: Vec3): void {
  if (!Number.isFinite(v[0]) || !Number.isFinite(v[1]) || !Number.isFinite(v[2])) {
    throw new RangeError(`a piece has a coordinate that is not a finite number: ${v.join(", ")}`);
  }
}

function compileCore(piece: Piece): Omit<Compiled, "radius"> {
  const flat = piece.discs.some(point);
  const discs = flat ? piece.discs.filter((d) => !point(d)) : piece.discs;
  const points = flat ? [...piece.points, ...piece.discs.filter(point).map((d) => d.centre)] : [...piece.points];
  if (points.length + discs.length === 0) throw new RangeError("a piece needs at least one point or disc");
  for (const p of points) requireFinite(p);
  for (const d of discs) {
    requireFinite(d.centre);
    requireFinite(d.u);
    requireFinite(d.v);
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
      const plane = ring.length >= 10 ? ringPlane(ring) : undefined;
      if (plane) return { core: CORE_RING, placed: ring, vectors: [offset, ...plane], corners: ring.length, discs: 0 };
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

