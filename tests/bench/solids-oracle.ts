import Module, { type Manifold, type ManifoldToplevel, type Vec3 as V } from "manifold-3d";
import type { Vec3 } from "#core/frames.ts";
import type { Piece, Pose } from "#core/geometry/piece.ts";

/** Parts as triangle solids of manifold-3d, round things of `segments` sides: its `minGap` is exact on flat faces. */
export async function loadSolids(): Promise<ManifoldToplevel> {
  const module = await Module();
  module.setup();
  return module;
}

const place = (pose: Pose, p: Vec3): V => {
  const m = pose.rotation;
  return [
    m[0]! * p[0] + m[1]! * p[1] + m[2]! * p[2] + pose.at[0],
    m[3]! * p[0] + m[4]! * p[1] + m[5]! * p[2] + pose.at[1],
    m[6]! * p[0] + m[7]! * p[1] + m[8]! * p[2] + pose.at[2],
  ];
};

export function solidOf(module: ManifoldToplevel, pieces: readonly Piece[], pose: Pose, segments = 48): Manifold {
  const { Manifold } = module;
  const solids = pieces.map((piece) => {
    const points: V[] = piece.points.map((p) => place(pose, p));
    for (const d of piece.discs) {
      for (let i = 0; i < segments; i++) {
        const t = (2 * Math.PI * i) / segments;
        const [c, s] = [Math.cos(t), Math.sin(t)];
        points.push(
          place(pose, [
            d.centre[0] + c * d.u[0] + s * d.v[0],
            d.centre[1] + c * d.u[1] + s * d.v[1],
            d.centre[2] + c * d.u[2] + s * d.v[2],
          ]),
        );
      }
    }
    if (piece.radius === 0) return Manifold.hull(points);
    const ball = Manifold.sphere(piece.radius, segments);
    return Manifold.hull(points.map((p) => ball.translate(p)));
  });
  return solids.length === 1 ? solids[0]! : Manifold.union(solids);
}
