import { groundAt, type Axis, type Vec3 } from "../frames.ts";
import { bodyBox, buildBody, setPose } from "../geometry/body.ts";
import type { Piece } from "../geometry/piece.ts";
import { partPieces, solidPieces } from "../geometry/solids.ts";
import { placePiece, poseOf } from "../geometry/turn.ts";
import type { Chassis, Part, Solid } from "../layout/schema.ts";
import { lowest, type Lowest } from "./stance-geometry.ts";

/**
 * Where a part stands as a tape would say it: its faces against a datum, its lowest point above the ground, and its turning in the trade's words. Everything here is
 * read from the part's exact convex pieces in the car frame, mm and degrees.
 */
export interface Faces {
  readonly low: Vec3;
  readonly high: Vec3;
}

/** A place that lengths are read from: a plane square to an axis, or the ground, which may lean. */
export interface TapeDatum {
  readonly key: string;
  readonly name: string;
  readonly axis: Axis;
  readonly at: number;
  /** Heights are read from the ground under each point. */
  readonly ground?: true;
}

/**
 * Least and greatest x, y and z of a part as drawn; exact for round parts too.
 * @throws GeometryError where a solid has no shape
 * @example a box of 580 x 270 x 120 at [2850, 565, 178] reaches from 2560 to 3140 along x
 */
export function facesOf(part: Pick<Part, "solids" | "at" | "turn">): Faces {
  const body = buildBody(partPieces(part as Part));
  setPose(body, poseOf(part));
  const box = bodyBox(body);
  return { low: [box[0]!, box[1]!, box[2]!], high: [box[3]!, box[4]!, box[5]!] };
}

/** Size of one solid as it lies in its part, mm. */
export function sizeOf(solid: Solid): Vec3 {
  const box = bodyBox(buildBody(solidPieces(solid)));
  return [box[3]! - box[0]!, box[4]! - box[1]!, box[5]! - box[2]!];
}

/**
 * Height of a part's lowest point above the ground straight under that point, mm; negative below it. Least of z - ground(x) over all pieces: exact, the ground being a plane.
 */
export function heightAboveGround(part: Pick<Part, "solids" | "at" | "turn">, chassis: Chassis): number {
  const slope = (groundAt(chassis, chassis.wheelbase) - groundAt(chassis, 0)) / chassis.wheelbase;
  const pose = poseOf(part);
  const scratch: Lowest = { value: 0, x: 0, y: 0, z: 0 };
  let least = Infinity;
  for (const piece of partPieces(part as Part) as readonly Piece[]) {
    lowest(placePiece(piece, pose), -slope, 1, scratch);
    least = Math.min(least, scratch.value);
  }
  return least - groundAt(chassis, 0);
}

/** What lengths along an axis may be read from: the chassis's own planes first, then the document's datums. */
export function datumsAlong(axis: Axis, chassis: Chassis): TapeDatum[] {
  const own: TapeDatum[] =
    axis === "x"
      ? [{ key: "front-axle", name: "Front axle", axis, at: 0 }, { key: "rear-axle", name: "Rear axle", axis, at: chassis.wheelbase }]
      : axis === "y"
        ? [{ key: "centre", name: "centre", axis, at: 0 }]
        : [{ key: "ground", name: "ground", axis, at: 0, ground: true }, { key: "zero-plane", name: "chassis zero plane", axis, at: 0 }];
  const taken = new Set(own.map((datum) => datum.key));
  return [...own, ...chassis.datums.filter((datum) => datum.axis === axis && !taken.has(datum.key)).map(({ key, name, at }) => ({ key, name, axis, at }))];
}

/** Which side of the car a part is on; middle where it reaches across the centre plane. */
export type Side = "left" | "right" | "middle";
/** By the faces: a part that ends on the centre plane is on its own side. */
export const sideOf = (faces: Faces): Side => (faces.low[1] >= 0 ? "right" : faces.high[1] <= 0 ? "left" : "middle");

/** A turn in the trade's words, degrees. On the middle "out" is to the right. */
export interface Lean {
  /** Its top leans away from the car's centre plane. */
  readonly out: number;
  /** Its top leans rearward. */
  readonly back: number;
  /** Its rear end swings away from the centre plane. */
  readonly swing: number;
}

/**
 * [roll, pitch, yaw] as lean out, lean back, swing. The words are exact one at a time; together they apply in this order, as the turn does.
 * @example leanOf([-9.5, 0, 0], "right") leans out by 9.5; on the left that is roll +9.5
 */
export function leanOf(turn: Vec3, side: Side): Lean {
  const out = side === "left" ? 1 : -1;
  return { out: out * turn[0] + 0, back: turn[1], swing: -out * turn[2] + 0 };
}

/** The inverse of `leanOf`. */
export function turnOfLean(lean: Lean, side: Side): [number, number, number] {
  const out = side === "left" ? 1 : -1;
  return [out * lean.out + 0, lean.back, -out * lean.swing + 0];
}
