import { closestA, closestB } from "./gjk.ts";

/** Under this share of the product of their squares two segments count as parallel: sine of the angle 3e-8. */
const PARALLEL = 1e-15;

/**
 * Squared distance of two segments p p' and q q' given in flat arrays (a segment of no length is a point), mm2; writes
 * the closest points. Closed form: the free optimum along both lines, clamped, each end then put where the other wants it
 * (the derivation is in kernel.reference.test.ts). Accuracy: rounding of the coordinates.
 */
export function segmentSquare(
  p: Float64Array,
  at: number,
  to: number,
  q: Float64Array,
  from: number,
  till: number,
): number {
  const px = p[at]!;
  const py = p[at + 1]!;
  const pz = p[at + 2]!;
  const qx = q[from]!;
  const qy = q[from + 1]!;
  const qz = q[from + 2]!;
  const ux = p[to]! - px;
  const uy = p[to + 1]! - py;
  const uz = p[to + 2]! - pz;
  const vx = q[till]! - qx;
  const vy = q[till + 1]! - qy;
  const vz = q[till + 2]! - qz;
  const wx = px - qx;
  const wy = py - qy;
  const wz = pz - qz;
  const uu = ux * ux + uy * uy + uz * uz;
  const vv = vx * vx + vy * vy + vz * vz;
  const uv = ux * vx + uy * vy + uz * vz;
  const uw = ux * wx + uy * wy + uz * wz;
  const vw = vx * wx + vy * wy + vz * wz;
  let s = 0;
  let t = 0;
  if (vv > 0) {
    const spread = uu * vv - uv * uv;
    if (spread > PARALLEL * uu * vv) {
      s = (uv * vw - vv * uw) / spread;
      s = s > 0 ? (s < 1 ? s : 1) : 0;
    }
    t = (uv * s + vw) / vv;
    t = t > 0 ? (t < 1 ? t : 1) : 0;
  }
  if (uu > 0) {
    s = (uv * t - uw) / uu;
    s = s > 0 ? (s < 1 ? s : 1) : 0;
  }
  const ax = px + s * ux;
  const ay = py + s * uy;
  const az = pz + s * uz;
  const bx = qx + t * vx;
  const by = qy + t * vy;
  const bz = qz + t * vz;
  closestA[0] = ax;
  closestA[1] = ay;
  closestA[2] = az;
  closestB[0] = bx;
  closestB[1] = by;
  closestB[2] = bz;
  const dx = ax - bx;
  const dy = ay - by;
  const dz = az - bz;
  return dx * dx + dy * dy + dz * dz;
}
