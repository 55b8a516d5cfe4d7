import type { Vec3 } from "../frames.ts";
import { IDENTITY, type Piece, type Pose } from "./piece.ts";

/** [roll, pitch, yaw] in degrees: right-hand turns about x, then y, then z. */
export type Turn = readonly [number, number, number];

/** Sine and cosine of degrees, exact at quarter turns: a part turned 90 stays square to the axes. */
function sinCos(degrees: number): [number, number] {
  const turn = ((degrees % 360) + 360) % 360;
  if (turn % 90 === 0) return ([[0, 1], [1, 0], [0, -1], [-1, 0]] as [number, number][])[turn / 90]!;
  const angleRad = (degrees * Math.PI) / 180;
  return [Math.sin(angleRad), Math.cos(angleRad)];
}

/** Rotation matrix Rz(yaw) Ry(pitch) Rx(roll), row-major. @example turnMatrix([0, 0, 90]) sends x to y */
export function turnMatrix(turn: Turn): number[] {
  const [sr, cr] = sinCos(turn[0]);
  const [sp, cp] = sinCos(turn[1]);
  const [sy, cy] = sinCos(turn[2]);
  return [
    cy * cp, cy * sp * sr - sy * cr, cy * sp * cr + sy * sr,
    sy * cp, sy * sp * sr + cy * cr, sy * sp * cr - cy * sr,
    -sp, cp * sr, cp * cr,
  ];
}

export function poseOf(placed: { readonly at: Vec3; readonly turn: Turn }): Pose {
  return { rotation: turnMatrix(placed.turn), at: placed.at };
}

export function rotate(m: readonly number[], p: Vec3): [number, number, number] {
  return [
    m[0]! * p[0] + m[1]! * p[1] + m[2]! * p[2],
    m[3]! * p[0] + m[4]! * p[1] + m[5]! * p[2],
    m[6]! * p[0] + m[7]! * p[1] + m[8]! * p[2],
  ];
}

export function applyPose(pose: Pose, p: Vec3): [number, number, number] {
  const r = rotate(pose.rotation, p);
  return [r[0] + pose.at[0], r[1] + pose.at[1], r[2] + pose.at[2]];
}

/** Inner first, then outer. */
export function multiplyPose(outer: Pose, inner: Pose): Pose {
  const a = outer.rotation;
  const b = inner.rotation;
  const rotation: number[] = [];
  for (let row = 0; row < 3; row++) {
    for (let column = 0; column < 3; column++) {
      rotation.push(a[3 * row]! * b[column]! + a[3 * row + 1]! * b[3 + column]! + a[3 * row + 2]! * b[6 + column]!);
    }
  }
  return { rotation, at: applyPose(outer, inner.at) };
}

export function inversePose(pose: Pose): Pose {
  const m = pose.rotation;
  const rotation = [m[0]!, m[3]!, m[6]!, m[1]!, m[4]!, m[7]!, m[2]!, m[5]!, m[8]!];
  const [x, y, z] = rotate(rotation, pose.at);
  return { rotation, at: [-x, -y, -z] };
}

/**
 * [roll, pitch, yaw] of a rotation matrix: the inverse of turnMatrix. Pitch within -90..90; at a pitch of +-90, where roll and yaw
 * turn about one line, roll is 0.
 */
export function turnOf(rotation: readonly number[]): [number, number, number] {
  const toDegrees = 180 / Math.PI;
  const sp = Math.max(-1, Math.min(1, -rotation[6]!));
  if (Math.abs(sp) > 1 - 1e-12) return [0, 90 * Math.sign(sp), Math.atan2(-rotation[1]!, rotation[4]!) * toDegrees];
  return [Math.atan2(rotation[7]!, rotation[8]!) * toDegrees, Math.asin(sp) * toDegrees, Math.atan2(rotation[3]!, rotation[0]!) * toDegrees];
}

/** The turn of the mirror image on the other side of the car: with at.y and local y negated as well. */
export function mirrorTurn(turn: Turn): [number, number, number] {
  return [-turn[0] + 0, turn[1], -turn[2] + 0];
}

/** A piece placed by a pose. */
export function placePiece(piece: Piece, pose: Pose): Piece {
  if (pose === IDENTITY) return piece;
  return {
    ...piece,
    points: piece.points.map((p) => applyPose(pose, p)),
    discs: piece.discs.map((d) => ({ centre: applyPose(pose, d.centre), u: rotate(pose.rotation, d.u), v: rotate(pose.rotation, d.v) })),
  };
}
