import fc from "fast-check";
import type { Vec3 } from "#core/frames.ts";
import type { Disc, Piece, Pose } from "#core/geometry/piece.ts";

/** Pieces, poses and slow independent formulas for the kernel's tests. Nothing here uses the kernel. */

export const add = (a: Vec3, b: Vec3): Vec3 => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
export const sub = (a: Vec3, b: Vec3): Vec3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
export const times = (s: number, a: Vec3): Vec3 => [s * a[0], s * a[1], s * a[2]];
export const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
export const norm = (a: Vec3): number => Math.sqrt(dot(a, a));
export const unit = (a: Vec3): Vec3 => times(1 / norm(a), a);
export const vec = (a: ArrayLike<number>): Vec3 => [a[0]!, a[1]!, a[2]!];

export const at = (x: number, y: number, z: number): Pose => ({ rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1], at: [x, y, z] });
export const turned = (axis: Vec3, angle: number, where: Vec3): Pose => {
  const [x, y, z] = unit(axis);
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const d = 1 - c;
  return {
    rotation: [
      c + x * x * d, x * y * d - z * s, x * z * d + y * s,
      y * x * d + z * s, c + y * y * d, y * z * d - x * s,
      z * x * d - y * s, z * y * d + x * s, c + z * z * d,
    ],
    at: where,
  };
};
export const spin = (m: readonly number[], p: Vec3): Vec3 => [
  m[0]! * p[0] + m[1]! * p[1] + m[2]! * p[2],
  m[3]! * p[0] + m[4]! * p[1] + m[5]! * p[2],
  m[6]! * p[0] + m[7]! * p[1] + m[8]! * p[2],
];
export const place = (pose: Pose, p: Vec3): Vec3 => add(spin(pose.rotation, p), pose.at);
/** First inner, then outer. */
export const compose = (outer: Pose, inner: Pose): Pose => {
  const columns = [0, 1, 2].map((k) => spin(outer.rotation, [inner.rotation[k]!, inner.rotation[3 + k]!, inner.rotation[6 + k]!]));
  return {
    rotation: [0, 1, 2].flatMap((row) => columns.map((column) => column[row]!)),
    at: place(outer, inner.at),
  };
};

export const ball = (d: number): Piece => ({ points: [[0, 0, 0]], discs: [], radius: d / 2, form: "ball" });
export const capsule = (p: Vec3, q: Vec3, d: number): Piece => ({ points: [p, q], discs: [], radius: d / 2, form: "capsule" });
export const box = (x: number, y: number, z: number): Piece => ({
  points: [-1, 1].flatMap((i) =>
    [-1, 1].flatMap((j) => [-1, 1].map((k): Vec3 => [(i * x) / 2, (j * y) / 2, (k * z) / 2])),
  ),
  discs: [],
  radius: 0,
  form: "box",
});
export const cone = (d0: number, d1: number, length: number): Piece => ({
  points: [],
  discs: [d0, d1].map((d, i): Disc => ({ centre: [0, 0, (i - 0.5) * length], u: [d / 2, 0, 0], v: [0, d / 2, 0] })),
  radius: 0,
  form: "cone",
});
export const cylinder = (d: number, length: number): Piece => ({ ...cone(d, d, length), form: "cylinder" });
export const oval = (width: number, height: number, length: number): Piece => ({
  points: [],
  discs: [-1, 1].flatMap((x) =>
    [-1, 1].map(
      (z): Disc => ({
        centre: [(x * (width - height)) / 2, 0, (z * length) / 2],
        u: [height / 2, 0, 0],
        v: [0, height / 2, 0],
      }),
    ),
  ),
  radius: 0,
  form: "oval",
});
/** A round tube about z from z = 0 to `length`, its ends cut by planes leaning by two slopes each (dz/dx, dz/dy). */
export const tube = (d: number, length: number, low: readonly [number, number], high: readonly [number, number]): Piece => ({
  points: [],
  discs: [low, high].map(([sx, sy], i): Disc => ({
    centre: [0, 0, i * length],
    u: [d / 2, 0, (sx * d) / 2],
    v: [0, d / 2, (sy * d) / 2],
  })),
  radius: 0,
  form: "tube",
});
export const prism = (sides: number, d: number, length: number): Piece => ({
  points: [-1, 1].flatMap((s) =>
    Array.from({ length: sides }, (_, i): Vec3 => {
      const t = (2 * Math.PI * i) / sides;
      return [(d / 2) * Math.cos(t), (d / 2) * Math.sin(t), (s * length) / 2];
    }),
  ),
  discs: [],
  radius: 0,
  form: "polytope",
});
export const hull = (points: readonly Vec3[], radius = 0): Piece => ({ points, discs: [], radius, form: "polytope" });
export const triangle = (points: readonly Vec3[], thickness: number): Piece => ({ points, discs: [], radius: thickness / 2, form: "triangle" });

/** h(n) of a piece in its pose, from the definition: exact for points and discs alike. */
export function supportHeight(piece: Piece, pose: Pose, n: Vec3): number {
  let most = -Infinity;
  for (const p of piece.points) most = Math.max(most, dot(place(pose, p), n));
  for (const d of piece.discs) {
    const reach = Math.hypot(dot(spin(pose.rotation, d.u), n), dot(spin(pose.rotation, d.v), n));
    most = Math.max(most, dot(place(pose, d.centre), n) + reach);
  }
  return most + piece.radius * norm(n);
}

/** Evenly spread directions (golden angle spiral). */
export function sphereOf(count: number): Vec3[] {
  const golden = Math.PI * (3 - Math.sqrt(5));
  return Array.from({ length: count }, (_, i): Vec3 => {
    const z = 1 - (2 * i + 1) / count;
    const r = Math.sqrt(1 - z * z);
    return [r * Math.cos(golden * i), r * Math.sin(golden * i), z];
  });
}
const SPHERE = sphereOf(6000);
const COARSE = sphereOf(1500);

export interface Box {
  readonly low: Vec3;
  readonly high: Vec3;
}

/** Width of A - B - travel along n: what b must move along n to be free of a. */
export const widthOf = (a: Piece, poseA: Pose, b: Piece, poseB: Pose, travel: Box | null, n: Vec3): number =>
  supportHeight(a, poseA, n) +
  supportHeight(b, poseB, times(-1, n)) -
  (travel ? n.reduce((sum, c, k) => sum + Math.min(c * travel.low[k]!, c * travel.high[k]!), 0) : 0);

/**
 * Least width over all directions, by a fine sphere and then a shrinking search around its best places: never under the
 * true least, and close to it. Independent of the kernel, slow.
 */
export function leastWidthBySphere(a: Piece, poseA: Pose, b: Piece, poseB: Pose, travel: Box | null = null, starts = 12, fine = false): number {
  const width = (n: Vec3): number => widthOf(a, poseA, b, poseB, travel, n);
  const ranked = (fine ? SPHERE : COARSE).map((n) => ({ n, w: width(n) })).sort((p, q) => p.w - q.w);
  let least = Infinity;
  for (const start of ranked.slice(0, starts)) {
    let { n, w } = start;
    let step = fine ? 0.05 : 0.1;
    let turn = 0;
    while (step > 1e-10) {
      const u = unit(Math.abs(n[0]) < 0.6 ? [0, n[2], -n[1]] : [-n[2], 0, n[0]]);
      const v: Vec3 = [n[1] * u[2] - n[2] * u[1], n[2] * u[0] - n[0] * u[2], n[0] * u[1] - n[1] * u[0]];
      let better = false;
      for (let i = 0; i < 12; i++) {
        const t = turn + (i * Math.PI) / 6;
        const m = unit(add(n, add(times(step * Math.cos(t), u), times(step * Math.sin(t), v))));
        const value = width(m);
        if (value < w - 1e-13) {
          w = value;
          n = m;
          better = true;
          break;
        }
      }
      turn += 0.37;
      if (!better) step *= 0.6;
    }
    least = Math.min(least, w);
  }
  return least;
}

const size = fc.double({ min: Math.log(2), max: Math.log(600), noNaN: true }).map(Math.exp);
const share = fc.double({ min: -1, max: 1, noNaN: true });
const point = (reach: number): fc.Arbitrary<Vec3> => fc.tuple(share, share, share).map(([x, y, z]): Vec3 => [x * reach, y * reach, z * reach]);

export const polytopes: fc.Arbitrary<Piece> = fc.oneof(
  fc.tuple(size, size, size).map(([x, y, z]) => box(x, y, z)),
  fc.tuple(fc.integer({ min: 3, max: 24 }), size, size).map(([n, d, l]) => prism(n, d, l)),
  fc.tuple(size, fc.array(point(1), { minLength: 4, maxLength: 14 })).map(([s, ps]) => hull(ps.map((p) => times(s, p)))),
);
export const thin: fc.Arbitrary<Piece> = fc.oneof(
  size.map(ball),
  fc.tuple(size, size).map(([l, d]) => capsule([0, 0, -l / 2], [0, 0, l / 2], d / 2)),
  fc.tuple(size, point(1), point(1), point(1), fc.double({ min: 0.5, max: 8, noNaN: true })).map(([s, p, q, r, t]) =>
    triangle([times(s, p), times(s, q), times(s, r)], t),
  ),
);
const slope = fc.double({ min: -1.5, max: 1.5, noNaN: true });
export const rounds: fc.Arbitrary<Piece> = fc.oneof(
  fc.tuple(size, size).map(([d, l]) => cylinder(d, l)),
  fc.tuple(size, size, size).map(([d, e, l]) => cone(d, e, l)),
  fc.tuple(size, size).map(([d, l]) => cone(0, d, l)),
  fc.tuple(size, size, size).map(([w, h, l]) => oval(Math.max(w, h), Math.min(w, h), l)),
  fc
    .tuple(size, size, slope, slope, slope, slope)
    .map(([d, l, a, b, c, e]) => tube(d, l + d * (Math.abs(a) + Math.abs(b) + Math.abs(c) + Math.abs(e)), [a, b], [c, e])),
  fc.tuple(size, size, fc.double({ min: 0.5, max: 20, noNaN: true })).map(([d, l, r]): Piece => ({ ...cylinder(d, l), radius: r, form: "grown" })),
);
export const anyPiece = fc.oneof(polytopes, thin, rounds);

export const poses = (reach: number): fc.Arbitrary<Pose> =>
  fc
    .tuple(point(1), fc.double({ min: -3.1, max: 3.1, noNaN: true }), point(reach), fc.boolean())
    .map(([axis, angle, where, square]) =>
      square || norm(axis) < 1e-3 ? turned([0, 0, 1], (Math.round(angle) * Math.PI) / 2, where) : turned(axis, angle, where),
    );
export const travels: fc.Arbitrary<Box | null> = fc.option(
  fc.tuple(point(1), point(1), fc.double({ min: 0, max: 60, noNaN: true })).map(
    ([p, q, s]): Box => ({
      low: [-Math.abs(p[0]) * s, -Math.abs(p[1]) * s, -Math.abs(p[2]) * s],
      high: [Math.abs(q[0]) * s, Math.abs(q[1]) * s, Math.abs(q[2]) * s],
    }),
  ),
);
