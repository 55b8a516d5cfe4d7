import { closestA, closestB } from "./gjk.ts";

/** Where on the two segments of the last `segmentSquare` the closest points are: 0 … 1. */
export const CLOSEST_AT = new Float64Array(2);

/** How far beyond the faces of the box the segment's point of the last `segmentBoxSquare` is, along its three axes, signed. */
export const BEYOND = new Float64Array(3);

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
  CLOSEST_AT[0] = s;
  CLOSEST_AT[1] = t;
  const dx = ax - bx;
  const dy = ay - by;
  const dz = az - bz;
  return dx * dx + dy * dy + dz * dz;
}

/** How far the stretch from x to x + d is from -h .. h; 0 where they share a place. */
function apartOn(x: number, d: number, h: number): number {
  const gap = Math.abs(x + 0.5 * d) - 0.5 * Math.abs(d) - h;
  return gap > 0 ? gap : 0;
}

/**
 * Squared distance of the segment p p' and a rectangular box given by its centre and three half edges at `box` in q, and
 * their lengths and one over each at `half` in `sizes`; 0 when they meet. mm2; the segment's point goes to `onSegment`, the box's to `onBox`.
 * In the box's own axes the square of the distance along the segment is convex and quadratic between the planes of the faces,
 * so its slope is followed, piece by piece, to where it is nothing. Accuracy: rounding of the coordinates.
 */
export function segmentBoxSquare(
  p: Float64Array,
  at: number,
  to: number,
  q: Float64Array,
  box: number,
  sizes: Float64Array,
  half: number,
  onSegment: Float64Array,
  onBox: Float64Array,
  limit = Infinity,
): number {
  const px = p[at]!;
  const py = p[at + 1]!;
  const pz = p[at + 2]!;
  const ex = p[to]! - px;
  const ey = p[to + 1]! - py;
  const ez = p[to + 2]! - pz;
  const wx = px - q[box]!;
  const wy = py - q[box + 1]!;
  const wz = pz - q[box + 2]!;
  const hx = sizes[half]!;
  const hy = sizes[half + 1]!;
  const hz = sizes[half + 2]!;
  const rx = sizes[half + 3]!;
  const ry = sizes[half + 4]!;
  const rz = sizes[half + 5]!;
  const ax = q[box + 3]! * rx;
  const ay = q[box + 4]! * rx;
  const az = q[box + 5]! * rx;
  const bx = q[box + 6]! * ry;
  const by = q[box + 7]! * ry;
  const bz = q[box + 8]! * ry;
  const cx = q[box + 9]! * rz;
  const cy = q[box + 10]! * rz;
  const cz = q[box + 11]! * rz;
  // Start and course of the segment in the box's axes.
  const x = wx * ax + wy * ay + wz * az;
  const y = wx * bx + wy * by + wz * bz;
  const z = wx * cx + wy * cy + wz * cz;
  const dx = ex * ax + ey * ay + ez * az;
  const dy = ex * bx + ey * by + ez * bz;
  const dz = ex * cx + ey * cy + ez * cz;
  // The segment's own box in these axes is often too far already.
  const gx = apartOn(x, dx, hx);
  const gy = apartOn(y, dy, hy);
  const gz = apartOn(z, dz, hz);
  const square = gx * gx + gy * gy + gz * gz;
  if (square > limit) return square;
  let t = 0;
  let u = beyond(x, hx);
  let v = beyond(y, hy);
  let w = beyond(z, hz);
  if (u * dx + v * dy + w * dz < 0) {
    const u1 = beyond(x + dx, hx);
    const v1 = beyond(y + dy, hy);
    const w1 = beyond(z + dz, hz);
    const slope1 = u1 * dx + v1 * dy + w1 * dz;
    if (slope1 <= 0) {
      t = 1;
      u = u1;
      v = v1;
      w = w1;
    } else {
      let low = 0;
      let high = 1;
      for (let step = 0; step < 40; step++) {
        const slope = u * dx + v * dy + w * dz;
        // Curvature on this piece: the axes on which the point is beyond a face.
        const bend = (u === 0 ? 0 : dx * dx) + (v === 0 ? 0 : dy * dy) + (w === 0 ? 0 : dz * dz);
        if (slope < 0) low = t;
        else if (slope > 0) high = t;
        else break;
        let next = t - slope / bend;
        if (!(next > low && next < high)) next = step === 0 ? 0.5 : (low + high) / 2;
        if (next === t) break;
        const un = beyond(x + next * dx, hx);
        const vn = beyond(y + next * dy, hy);
        const wn = beyond(z + next * dz, hz);
        const same = (un === 0) === (u === 0) && (vn === 0) === (v === 0) && (wn === 0) === (w === 0) && un * u >= 0 && vn * v >= 0 && wn * w >= 0;
        const newton = next === t - slope / bend;
        t = next;
        u = un;
        v = vn;
        w = wn;
        if (same && newton) break;
      }
    }
  }
  BEYOND[0] = u;
  BEYOND[1] = v;
  BEYOND[2] = w;
  const sx = px + t * ex;
  const sy = py + t * ey;
  const sz = pz + t * ez;
  onSegment[0] = sx;
  onSegment[1] = sy;
  onSegment[2] = sz;
  onBox[0] = sx - u * ax - v * bx - w * cx;
  onBox[1] = sy - u * ay - v * by - w * cy;
  onBox[2] = sz - u * az - v * bz - w * cz;
  return u * u + v * v + w * w;
}

/** How far a coordinate is beyond -h … h, signed. */
function beyond(x: number, h: number): number {
  return x > h ? x - h : x < -h ? x + h : 0;
}
