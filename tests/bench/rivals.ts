import RAPIER from "@dimforge/rapier3d-compat";
import {
  box as crashBox,
  capsule as crashCapsule,
  convexHull as crashHull,
  createGjkClosestPoints,
  createSupport,
  cylinder as crashCylinder,
  gjkClosestPoints,
  setBoxSupport,
  setCapsuleSupport,
  setCylinderSupport,
  setHullSupport,
  SupportFunctionMode,
  type Support,
} from "crashcat";
import type { Vec3 } from "#core/frames.ts";
import type { Piece, Pose } from "#core/geometry/piece.ts";

/**
 * Other engines on the same pieces. Each gives the distance of two placed pieces, at most `most`, or Infinity; overlapping
 * is zero or less. The engines' own shapes are used (box, capsule, cylinder, hull of points), built before the clock starts.
 */
export interface Rival {
  readonly name: string;
  place(piece: Piece, pose: Pose): unknown;
  distance(a: unknown, b: unknown, most: number): number;
  /** Points of the last distance, world coordinates. */
  readonly pointA: [number, number, number];
  readonly pointB: [number, number, number];
}

interface Frame {
  centre: Vec3;
  /** Columns: the piece's own x, y, z in the body's frame. */
  axes: [Vec3, Vec3, Vec3];
}

const sub = (a: Vec3, b: Vec3): Vec3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const mid = (a: Vec3, b: Vec3): Vec3 => [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2, (a[2] + b[2]) / 2];
const unit = (a: Vec3): Vec3 => {
  const l = Math.hypot(...a);
  return [a[0] / l, a[1] / l, a[2] / l];
};
const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];

/** A frame with y along `axis`, as both engines' capsules and cylinders have it. */
function frameAlong(centre: Vec3, axis: Vec3): Frame {
  const y = unit(axis);
  const other: Vec3 = Math.abs(y[0]) < 0.6 ? [1, 0, 0] : [0, 0, 1];
  const z = unit(cross(other, y));
  return { centre, axes: [cross(y, z), y, z] };
}

interface Placed {
  x: number;
  y: number;
  z: number;
  rotation: number[];
  quaternion: { x: number; y: number; z: number; w: number };
}

function placed(frame: Frame, pose: Pose): Placed {
  const m = pose.rotation;
  const spin = (p: Vec3): Vec3 => [
    m[0]! * p[0] + m[1]! * p[1] + m[2]! * p[2],
    m[3]! * p[0] + m[4]! * p[1] + m[5]! * p[2],
    m[6]! * p[0] + m[7]! * p[1] + m[8]! * p[2],
  ];
  const c = spin(frame.centre);
  const [x, y, z] = frame.axes.map(spin) as [Vec3, Vec3, Vec3];
  const r = [x[0], y[0], z[0], x[1], y[1], z[1], x[2], y[2], z[2]];
  return {
    x: c[0] + pose.at[0],
    y: c[1] + pose.at[1],
    z: c[2] + pose.at[2],
    rotation: r,
    quaternion: quaternionOf(r),
  };
}

function quaternionOf(m: readonly number[]): { x: number; y: number; z: number; w: number } {
  const [a, b, c] = [m[0]!, m[4]!, m[8]!];
  if (a + b + c > 0) {
    const s = 2 * Math.sqrt(1 + a + b + c);
    return { w: s / 4, x: (m[7]! - m[5]!) / s, y: (m[2]! - m[6]!) / s, z: (m[3]! - m[1]!) / s };
  }
  if (a >= b && a >= c) {
    const s = 2 * Math.sqrt(1 + a - b - c);
    return { w: (m[7]! - m[5]!) / s, x: s / 4, y: (m[1]! + m[3]!) / s, z: (m[2]! + m[6]!) / s };
  }
  if (b >= c) {
    const s = 2 * Math.sqrt(1 - a + b - c);
    return { w: (m[2]! - m[6]!) / s, x: (m[1]! + m[3]!) / s, y: s / 4, z: (m[5]! + m[7]!) / s };
  }
  const s = 2 * Math.sqrt(1 - a - b + c);
  return { w: (m[3]! - m[1]!) / s, x: (m[2]! + m[6]!) / s, y: (m[5]! + m[7]!) / s, z: s / 4 };
}

function boxSize(piece: Piece): { half: Vec3; frame: Frame } {
  // Boxes of the workloads lie square in their body.
  const low = [0, 1, 2].map((k) => Math.min(...piece.points.map((p) => p[k]!)));
  const high = [0, 1, 2].map((k) => Math.max(...piece.points.map((p) => p[k]!)));
  const half: Vec3 = [(high[0]! - low[0]!) / 2, (high[1]! - low[1]!) / 2, (high[2]! - low[2]!) / 2];
  const centre: Vec3 = [(high[0]! + low[0]!) / 2, (high[1]! + low[1]!) / 2, (high[2]! + low[2]!) / 2];
  return { half, frame: { centre, axes: [[1, 0, 0], [0, 1, 0], [0, 0, 1]] } };
}

const SQUARE: Frame = { centre: [0, 0, 0], axes: [[1, 0, 0], [0, 1, 0], [0, 0, 1]] };

export async function rapierRival(): Promise<Rival> {
  await RAPIER.init();
  // Colliders of a world, so that its shapes are built once and not at every question.
  const world = new RAPIER.World({ x: 0, y: 0, z: 0 });
  const shapeOf = (piece: Piece): { shape: RAPIER.ColliderDesc; frame: Frame } => {
    if (piece.form === "box") {
      const { half, frame } = boxSize(piece);
      return { shape: RAPIER.ColliderDesc.cuboid(...half), frame };
    }
    if (piece.form === "ball") return { shape: RAPIER.ColliderDesc.ball(piece.radius), frame: { ...SQUARE, centre: piece.points[0]! } };
    if (piece.form === "capsule") {
      const [p, q] = [piece.points[0]!, piece.points[1]!];
      return { shape: RAPIER.ColliderDesc.capsule(Math.hypot(...sub(q, p)) / 2, piece.radius), frame: frameAlong(mid(p, q), sub(q, p)) };
    }
    if (piece.form === "cylinder") {
      const [p, q] = [piece.discs[0]!, piece.discs[1]!];
      const axis = sub(q.centre, p.centre);
      return { shape: RAPIER.ColliderDesc.cylinder(Math.hypot(...axis) / 2, Math.hypot(...p.u)), frame: frameAlong(mid(p.centre, q.centre), axis) };
    }
    const hull = RAPIER.ColliderDesc.convexHull(Float32Array.from(piece.points.flat()));
    if (!hull) throw new Error("no hull");
    return { shape: hull, frame: SQUARE };
  };
  const pointA: [number, number, number] = [0, 0, 0];
  const pointB: [number, number, number] = [0, 0, 0];
  return {
    name: "rapier",
    pointA,
    pointB,
    place(piece, pose): RAPIER.Collider {
      const { shape, frame } = shapeOf(piece);
      const p = placed(frame, pose);
      return world.createCollider(shape.setTranslation(p.x, p.y, p.z).setRotation(p.quaternion));
    },
    distance(a, b, most) {
      const contact = (a as RAPIER.Collider).contactCollider(b as RAPIER.Collider, Math.min(most, 1e6));
      if (!contact) return Infinity;
      pointA[0] = contact.point1.x;
      pointA[1] = contact.point1.y;
      pointA[2] = contact.point1.z;
      pointB[0] = contact.point2.x;
      pointB[1] = contact.point2.y;
      pointB[2] = contact.point2.z;
      return contact.distance;
    },
  };
}

export function crashcatRival(): Rival {
  interface Ready {
    fill(support: Support): void;
    radius: number;
    at: Placed;
  }
  const one: [number, number, number] = [1, 1, 1];
  const exclude = SupportFunctionMode.EXCLUDE_CONVEX_RADIUS;
  const supportA = createSupport();
  const supportB = createSupport();
  const out = createGjkClosestPoints();
  const start: [number, number, number] = [1, 0, 0];
  const pointA: [number, number, number] = [0, 0, 0];
  const pointB: [number, number, number] = [0, 0, 0];
  return {
    name: "crashcat",
    pointA,
    pointB,
    place(piece, pose): Ready {
      if (piece.form === "box") {
        const { half, frame } = boxSize(piece);
        const shape = crashBox.create({ halfExtents: [...half], convexRadius: 0 });
        return { fill: (s) => setBoxSupport(s, shape, exclude, one), radius: 0, at: placed(frame, pose) };
      }
      if (piece.form === "capsule") {
        const [p, q] = [piece.points[0]!, piece.points[1]!];
        const shape = crashCapsule.create({ halfHeightOfCylinder: Math.hypot(...sub(q, p)) / 2, radius: piece.radius });
        return { fill: (s) => setCapsuleSupport(s, shape, exclude, one), radius: piece.radius, at: placed(frameAlong(mid(p, q), sub(q, p)), pose) };
      }
      if (piece.form === "cylinder") {
        const [p, q] = [piece.discs[0]!, piece.discs[1]!];
        const axis = sub(q.centre, p.centre);
        const shape = crashCylinder.create({ halfHeight: Math.hypot(...axis) / 2, radius: Math.hypot(...p.u), convexRadius: 0 });
        return { fill: (s) => setCylinderSupport(s, shape, exclude, one), radius: 0, at: placed(frameAlong(mid(p.centre, q.centre), axis), pose) };
      }
      const shape = crashHull.create({ positions: piece.points.flat(), convexRadius: 0 });
      return { fill: (s) => setHullSupport(s, shape, exclude, one), radius: 0, at: placed(SQUARE, pose) };
    },
    distance(a, b, most) {
      const [p, q] = [a as Ready, b as Ready];
      p.fill(supportA);
      q.fill(supportB);
      supportA.hasTransform = false;
      supportB.hasTransform = true;
      // B in A's frame: R = Ra^T Rb, t = Ra^T (tb - ta); column-major.
      const r = p.at.rotation;
      const s = q.at.rotation;
      const m = supportB.transform;
      for (let row = 0; row < 3; row++) {
        for (let column = 0; column < 3; column++) {
          m[4 * column + row] = r[row]! * s[column]! + r[3 + row]! * s[3 + column]! + r[6 + row]! * s[6 + column]!;
        }
        m[12 + row] = r[row]! * (q.at.x - p.at.x) + r[3 + row]! * (q.at.y - p.at.y) + r[6 + row]! * (q.at.z - p.at.z);
      }
      start[0] = -m[12]!;
      start[1] = -m[13]!;
      start[2] = -m[14]!;
      const grown = p.radius + q.radius;
      const limit = most + grown;
      gjkClosestPoints(out, supportA, supportB, 1e-6, start, limit * limit);
      if (out.squaredDistance === Number.MAX_VALUE) return Infinity;
      for (let row = 0; row < 3; row++) {
        pointA[row] = r[3 * row]! * out.pointA[0]! + r[3 * row + 1]! * out.pointA[1]! + r[3 * row + 2]! * out.pointA[2]!;
        pointB[row] = r[3 * row]! * out.pointB[0]! + r[3 * row + 1]! * out.pointB[1]! + r[3 * row + 2]! * out.pointB[2]!;
      }
      pointA[0] += p.at.x;
      pointA[1] += p.at.y;
      pointA[2] += p.at.z;
      pointB[0] += p.at.x;
      pointB[1] += p.at.y;
      pointB[2] += p.at.z;
      return Math.sqrt(out.squaredDistance) - grown;
    },
  };
}
