/**
 * Axes, origin, ground plane and the three projections: the one place where directions get their meaning.
 *
 * Car frame (ISO 4130 / SAE J182 directions): right-handed, x rearward from the front axle line, y to the car's right from
 * the centre plane, z up from the chassis zero plane. Everything stored and computed is in this frame, in millimetres.
 */

export type Vec3 = readonly [number, number, number];
export type Vec2 = readonly [number, number];

declare const frame: unique symbol;
/** A point in the car frame. Brands exist so that a point of one frame cannot be handed to a function of another. */
export type CarPoint = Vec3 & { readonly [frame]?: "car" };
/** A point of a flat view, mm at full size: u along the paper's horizontal, v up the paper. */
export type ViewPoint = Vec2 & { readonly [frame]?: "view" };
/** A point on a screen: CSS pixels, v down. */
export type ScreenPoint = Vec2 & { readonly [frame]?: "screen" };

export type Axis = "x" | "y" | "z";
export const AXES: readonly Axis[] = ["x", "y", "z"];
export const axisIndex = (axis: Axis): 0 | 1 | 2 => (axis === "x" ? 0 : axis === "y" ? 1 : 2);

/** The three views of a sheet in third-angle arrangement. */
export type View = "plan" | "side" | "rear";
export const VIEWS: readonly View[] = ["plan", "side", "rear"];

/**
 * What each view shows. u is the car axis to the right of the paper, v the one up the paper, depth the hidden one;
 * `toward` is the sign of depth that comes toward the reader (plan is seen from above: +z; side from the car's left: -y;
 * rear from behind: +x).
 */
export const PROJECTION: Readonly<Record<View, { u: 0 | 1 | 2; v: 0 | 1 | 2; depth: 0 | 1 | 2; toward: 1 | -1 }>> = {
  plan: { u: 0, v: 1, depth: 2, toward: 1 },
  side: { u: 0, v: 2, depth: 1, toward: -1 },
  rear: { u: 1, v: 2, depth: 0, toward: 1 },
};

/** Drops the hidden axis. @example project("side", [3010, -420, 210]) is [3010, 210] */
export function project(view: View, point: Vec3): ViewPoint {
  const p = PROJECTION[view];
  return [point[p.u], point[p.v]];
}

/** What the trade calls one step along an axis. */
export const DIRECTION_WORDS: Readonly<Record<Axis, readonly [negative: string, positive: string]>> = {
  x: ["forward", "rear"],
  y: ["left", "right"],
  z: ["down", "up"],
};

/**
 * Height of the ground plane under station x, mm in the car frame: the plane through z = -front.rideHeight at x = 0 and
 * z = -rear.rideHeight at x = wheelbase, level across the car.
 */
export function groundAt(
  chassis: { wheelbase: number; front: { rideHeight: number }; rear: { rideHeight: number } },
  x: number,
): number {
  return -chassis.front.rideHeight - ((chassis.rear.rideHeight - chassis.front.rideHeight) * x) / chassis.wheelbase;
}
