import type { Vec3 } from "../frames.ts";

/** A convex polyhedron as its faces, each a loop of corners. Only what cutting prisms to outlines needs. */
export type Polyhedron = readonly (readonly Vec3[])[];

/** The side of a plane to keep: n . p <= d. */
export interface HalfSpace {
  readonly n: Vec3;
  readonly d: number;
}

const dot = (a: Vec3, b: Vec3) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

/** The prism of a convex ring from `low` to `high` faces: rings must run corner for corner. */
export function prismOf(low: readonly Vec3[], high: readonly Vec3[]): Polyhedron {
  const n = low.length;
  return [low, high, ...low.map((p, i) => [p, low[(i + 1) % n]!, high[(i + 1) % n]!, high[i]!])];
}

/**
 * Cuts a convex polyhedron by a half-space. Corners within `slack` of the plane count as on it. Empty when nothing is kept.
 * Exact to rounding: each new corner lies on the edge it cuts.
 */
export function cutPolyhedron(solid: Polyhedron, half: HalfSpace, slack: number): Polyhedron {
  const faces: Vec3[][] = [];
  const rim: Vec3[] = [];
  let outside = false;
  for (const face of solid) {
    const kept: Vec3[] = [];
    for (let i = 0; i < face.length; i++) {
      const p = face[i]!;
      const q = face[(i + 1) % face.length]!;
      const dp = dot(half.n, p) - half.d;
      const dq = dot(half.n, q) - half.d;
      if (dp > slack) outside = true;
      if (dp <= slack) kept.push(p);
      if (Math.abs(dp) <= slack) rim.push(p);
      if ((dp < -slack && dq > slack) || (dp > slack && dq < -slack)) {
        const t = dp / (dp - dq);
        const cut: Vec3 = [p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1]), p[2] + t * (q[2] - p[2])];
        kept.push(cut);
        rim.push(cut);
      }
    }
    if (kept.length >= 3) faces.push(kept);
  }
  if (!outside) return solid;
  if (faces.length < 3) return [];
  const cap = orderedRing(rim, half.n, slack);
  if (cap.length >= 3) faces.push(cap);
  return faces.length >= 4 ? faces : [];
}

/** Points of one plane in order about their middle, doubles dropped. */
function orderedRing(points: readonly Vec3[], normal: Vec3, slack: number): Vec3[] {
  const apart: Vec3[] = [];
  for (const p of points) if (!apart.some((q) => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]) <= 4 * slack)) apart.push(p);
  if (apart.length < 3) return [];
  const middle: Vec3 = [0, 1, 2].map((k) => apart.reduce((s, p) => s + p[k]!, 0) / apart.length) as unknown as Vec3;
  const least = Math.abs(normal[0]) <= Math.abs(normal[1]) && Math.abs(normal[0]) <= Math.abs(normal[2]) ? 0 : Math.abs(normal[1]) <= Math.abs(normal[2]) ? 1 : 2;
  const axis: Vec3 = least === 0 ? [1, 0, 0] : least === 1 ? [0, 1, 0] : [0, 0, 1];
  const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
  const u = cross(normal, axis);
  const v = cross(normal, u);
  const angle = (p: Vec3) => Math.atan2(dot(v, p) - dot(v, middle), dot(u, p) - dot(u, middle));
  return apart.map((p) => ({ p, a: angle(p) })).sort((x, y) => x.a - y.a).map((x) => x.p);
}

/** Corners, each once. */
export function cornersOf(solid: Polyhedron, slack: number): Vec3[] {
  const apart: Vec3[] = [];
  for (const face of solid) for (const p of face) if (!apart.some((q) => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]) <= slack)) apart.push(p);
  return apart;
}

/** Volume, mm3: fans from an inner point; faces may wind either way. */
export function volumeOf(solid: Polyhedron): number {
  const corner = solid[0]?.[0];
  if (!corner) return 0;
  let six = 0;
  const sub = (a: Vec3): Vec3 => [a[0] - corner[0], a[1] - corner[1], a[2] - corner[2]];
  for (const face of solid) {
    let faceSix = 0;
    const a = sub(face[0]!);
    for (let i = 1; i + 1 < face.length; i++) {
      const b = sub(face[i]!);
      const c = sub(face[i + 1]!);
      faceSix += a[0] * (b[1] * c[2] - b[2] * c[1]) + a[1] * (b[2] * c[0] - b[0] * c[2]) + a[2] * (b[0] * c[1] - b[1] * c[0]);
    }
    six += Math.abs(faceSix);
  }
  return six / 6;
}
