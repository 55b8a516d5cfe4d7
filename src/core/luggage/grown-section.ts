import type { Vec2, Vec3 } from "../frames.ts";
import type { Disc, Piece } from "../geometry/piece.ts";
import { convexHull } from "../geometry/polygons.ts";
import { pieceSection } from "../geometry/section.ts";

/**
 * Sections square to x of a piece grown by a gap, many times over: what the free volume is integrated from. The surface is faceted once, so that a section is
 * a few hundred crossings. Facets keep area: radii of polygons that stand for circles are scaled so that the polygon has the circle's area, so volumes do not shrink.
 */
export interface GrownPiece {
  readonly low: Vec3;
  readonly high: Vec3;
  /** Convex polygon in (y, z); empty where the plane misses. */
  readonly sectionAt: (x: number) => Vec2[];
}

const AROUND = 48;
/** Steps of a rounded edge, a quarter turn. */
const ROUNDING = 4;
/** Radius of a regular n-gon with the area of a unit circle. */
const sameArea = (n: number) => Math.sqrt((2 * Math.PI) / n / Math.sin((2 * Math.PI) / n));
const AROUND_SCALE = sameArea(AROUND);
const ROUNDING_SCALE = sameArea(4 * ROUNDING);

const sub = (a: Vec3, b: Vec3): Vec3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: Vec3, b: Vec3) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
const unit = (a: Vec3): Vec3 => {
  const l = Math.hypot(a[0], a[1], a[2]) || 1;
  return [a[0] / l, a[1] / l, a[2] / l];
};

/** @param gap mm, added all round (a ball about every point of the piece) */
export function growPiece(piece: Piece, gap: number): GrownPiece {
  const radius = piece.radius + gap;
  const box = boxOf(piece, radius);
  const rounds = piece.points.length === 0 && (piece.discs.length === 2 || piece.discs.length === 4);
  const make = () => (rounds ? roundSection(piece.discs, radius) : piece.discs.length === 0 ? cornerSection(piece.points, radius) : (x: number) => pieceSection({ ...piece, radius }, "x", x, 0.05));
  // most pieces of a car are nowhere near the space: the facets are made when they are first asked for
  let made: ((x: number) => Vec2[]) | null = null;
  return { ...box, sectionAt: (x) => (made ??= make())(x) };
}

/** Cylinders, cones, tubes (two discs) and ovals (four: two at either end): rings about each end, rounded outward by the radius. */
function roundSection(discs: readonly Disc[], radius: number): (x: number) => Vec2[] {
  const half = discs.length / 2;
  const shells: Vec3[][][] = [];
  for (let i = 0; i < half; i++) shells.push(ringsOf(discs[i]!, discs[i + half]!, radius));
  return (x) => {
    const out: Vec2[] = [];
    for (const rings of shells) {
      for (let r = 0; r < rings.length; r++) {
        const ring = rings[r]!;
        const next = rings[r + 1];
        for (let k = 0; k < AROUND; k++) {
          crossing(ring[k]!, ring[(k + 1) % AROUND]!, x, out);
          if (next) crossing(ring[k]!, next[k]!, x, out);
        }
      }
    }
    if (half === 2) shells[0]!.forEach((ring, r) => ring.forEach((p, k) => crossing(p, shells[1]![r]![k]!, x, out)));
    return convexHull(out);
  };
}

/** Rings of the surface from the middle of one end's rounding to the other's. */
function ringsOf(a: Disc, b: Disc, radius: number): Vec3[][] {
  const axis = unit(sub(b.centre, a.centre));
  const rings: Vec3[][] = [];
  const steps = radius > 0 ? ROUNDING : 0;
  for (const [disc, outward] of [[a, -1], [b, 1]] as const) {
    const flat = cross(disc.u, disc.v);
    const normal = dot(flat, axis) * outward > 0 ? unit(flat) : unit([-flat[0], -flat[1], -flat[2]]);
    const end = Math.hypot(flat[0], flat[1], flat[2]) > 1e-12 ? normal : ([axis[0] * outward, axis[1] * outward, axis[2] * outward] as Vec3);
    const own: Vec3[][] = [];
    for (let j = 0; j <= steps; j++) {
      const beta = steps === 0 ? 0 : (Math.PI / 2) * (j / steps);
      const ring: Vec3[] = [];
      for (let k = 0; k < AROUND; k++) {
        const [s, c] = [Math.sin((2 * Math.PI * k) / AROUND), Math.cos((2 * Math.PI * k) / AROUND)];
        const at = (d: Disc, m: 0 | 1 | 2, scale: number) => d.centre[m] + (c * d.u[m] + s * d.v[m]) * scale;
        const side = lateral(a, b, s, c, axis);
        // from the side's normal round to the end's
        const turn = unit([side[0] * Math.cos(beta) + end[0] * Math.sin(beta), side[1] * Math.cos(beta) + end[1] * Math.sin(beta), side[2] * Math.cos(beta) + end[2] * Math.sin(beta)]);
        const out = radius * (j === 0 || j === steps ? 1 : ROUNDING_SCALE);
        const lift = (m: 0 | 1 | 2) => at(disc, m, AROUND_SCALE) + turn[m] * out + side[m] * Math.cos(beta) * radius * (AROUND_SCALE - 1);
        ring.push([lift(0), lift(1), lift(2)]);
      }
      own.push(ring);
    }
    rings.push(...(outward === -1 ? own.reverse() : own));
  }
  return rings;
}

/** Outward normal of the side between two discs at an angle. */
function lateral(a: Disc, b: Disc, s: number, c: number, axis: Vec3): Vec3 {
  const big = Math.hypot(...a.u) >= Math.hypot(...b.u) ? a : b;
  const round: Vec3 = [-s * big.u[0] + c * big.v[0], -s * big.u[1] + c * big.v[1], -s * big.u[2] + c * big.v[2]];
  const at = (d: Disc): Vec3 => [d.centre[0] + c * d.u[0] + s * d.v[0], d.centre[1] + c * d.u[1] + s * d.v[1], d.centre[2] + c * d.u[2] + s * d.v[2]];
  const along = sub(at(b), at(a));
  const n = unit(cross(round, Math.hypot(...along) > 1e-9 ? along : axis));
  const radial: Vec3 = [c * big.u[0] + s * big.v[0], c * big.u[1] + s * big.v[1], c * big.u[2] + s * big.v[2]];
  return dot(n, radial) >= 0 ? n : [-n[0], -n[1], -n[2]];
}

const CIRCLE = Array.from({ length: 24 }, (_, i): Vec2 => [Math.cos((Math.PI * i) / 12), Math.sin((Math.PI * i) / 12)]);
const CIRCLE_SCALE = sameArea(24);
const SLICES = Array.from({ length: 11 }, (_, i) => Math.cos((Math.PI * (i + 0.5)) / 11));

/** Polytopes and balls: the union of slices of the core, each grown by what is left of the radius there. */
function cornerSection(points: readonly Vec3[], radius: number): (x: number) => Vec2[] {
  const low = Math.min(...points.map((p) => p[0]));
  const high = Math.max(...points.map((p) => p[0]));
  const levels = [...new Set(points.map((p) => p[0]))];
  return (x) => {
    const out: Vec2[] = [];
    const slice = (at: number) => {
      const h = at - x;
      if (Math.abs(h) > radius || at < low || at > high) return;
      const core: Vec2[] = [];
      for (let i = 0; i < points.length; i++) {
        const p = points[i]!;
        if (p[0] === at) core.push([p[1], p[2]]);
        for (let j = i + 1; j < points.length; j++) crossing(p, points[j]!, at, core);
      }
      const left = Math.sqrt(Math.max(0, radius * radius - h * h)) * CIRCLE_SCALE;
      const hull = core.length > 8 ? convexHull(core) : core;
      if (left === 0) out.push(...hull);
      else for (const [y, z] of hull) for (const [c, s] of CIRCLE) out.push([y + left * c, z + left * s]);
    };
    if (radius === 0) slice(x);
    else {
      for (const share of SLICES) slice(x + share * radius);
      slice(x);
      for (const level of levels) if (Math.abs(level - x) <= radius) slice(level);
    }
    return convexHull(out);
  };
}

function crossing(p: Vec3, q: Vec3, x: number, out: Vec2[]): void {
  const dp = p[0] - x;
  const dq = q[0] - x;
  if (dp < 0 === dq < 0) return;
  const t = dp / (dp - dq);
  out.push([p[1] + t * (q[1] - p[1]), p[2] + t * (q[2] - p[2])]);
}

function boxOf(piece: Piece, radius: number): { low: Vec3; high: Vec3 } {
  const low: [number, number, number] = [Infinity, Infinity, Infinity];
  const high: [number, number, number] = [-Infinity, -Infinity, -Infinity];
  for (const axis of [0, 1, 2] as const) {
    for (const p of piece.points) {
      low[axis] = Math.min(low[axis], p[axis] - radius);
      high[axis] = Math.max(high[axis], p[axis] + radius);
    }
    for (const d of piece.discs) {
      const reach = Math.hypot(d.u[axis], d.v[axis]) + radius;
      low[axis] = Math.min(low[axis], d.centre[axis] - reach);
      high[axis] = Math.max(high[axis], d.centre[axis] + reach);
    }
  }
  return { low, high };
}
