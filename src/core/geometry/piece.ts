import type { Vec3 } from "../frames.ts";

/**
 * What every solid becomes: convex pieces, each the convex hull of discs and points, grown by a radius (Minkowski sum with a
 * ball). Round things stay round: a cylinder is the hull of two discs, a frustum of two unlike discs, an oval of four, a tube
 * cut by mitre planes of two ellipses, a ball one point with a radius, a capsule two points with a radius.
 */
export interface Disc {
  readonly centre: Vec3;
  /** Conjugate half-axes of the ellipse {centre + cos t u + sin t v}; both zero-length for a point. A circle has |u| = |v|, u.v = 0. */
  readonly u: Vec3;
  readonly v: Vec3;
}

export interface Piece {
  /** Corner points, mm, in the frame of the body that owns the piece. */
  readonly points: readonly Vec3[];
  /** Flat round edges. */
  readonly discs: readonly Disc[];
  /** Radius of the ball the hull is grown by; 0 for sharp pieces. */
  readonly radius: number;
  /**
   * What the maker knows about the shape, so that the kernel can choose a closed form; never needed for correctness.
   * box: 8 points, radius 0. cylinder: two equal circles square to the line between their centres.
   */
  readonly form: "ball" | "capsule" | "box" | "polytope" | "cylinder" | "cone" | "oval" | "tube" | "triangle" | "grown";
}

/** A rigid placement: p = rotation p_local + at; rotation row-major, nine numbers. */
export interface Pose {
  readonly rotation: readonly number[];
  readonly at: Vec3;
}

export const IDENTITY: Pose = { rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1], at: [0, 0, 0] };

/** A box of translations: low <= 0 <= high on each axis, car frame, mm. */
export interface TravelBox {
  readonly low: Vec3;
  readonly high: Vec3;
}
