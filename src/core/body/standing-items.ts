import type { Vec3 } from "../frames.ts";
import type { Piece } from "../geometry/piece.ts";
import { GeometryError, partPieces } from "../geometry/solids.ts";
import { tubePath, tubePieces } from "../geometry/tubes.ts";
import { placePiece, poseOf } from "../geometry/turn.ts";
import type { Layout } from "../layout/schema.ts";
import type { StanceItem } from "./stance-geometry.ts";

/** Everything that stands on the ground with the car, in the car frame, as drawn. */
export interface StandingItems {
  /** For lengths: all parts but tyres, runs, body lines. */
  readonly rigid: readonly StanceItem[];
  /** For angles and clearance: everything but tyres and brakes. */
  readonly low: readonly StanceItem[];
  readonly unreadable: readonly { readonly key: string; readonly message: string }[];
}

/** Exact convex pieces at their poses, mm, car frame; a thing without a shape is named in `unreadable`, never left out silently. */
export function standingItems(layout: Layout): StandingItems {
  const rigid: StanceItem[] = [];
  const low: StanceItem[] = [];
  const unreadable: { key: string; message: string }[] = [];
  for (const part of layout.parts) {
    if (part.kind === "tyre") continue;
    try {
      const pose = poseOf(part);
      const item = { key: part.key, pieces: partPieces(part).map((piece) => placePiece(piece, pose)) };
      rigid.push(item);
      if (part.kind !== "brake") low.push(item);
    } catch (error) {
      if (!(error instanceof GeometryError)) throw error;
      unreadable.push({ key: part.key, message: `${part.name} is left out: ${error.message}` });
    }
  }
  for (const run of layout.runs) {
    const item = { key: run.key, pieces: tubePieces(tubePath(run)).map((tube) => tube.piece) };
    rigid.push(item);
    low.push(item);
  }
  for (const shaft of layout.shafts) {
    if (shaft.diameter === undefined) continue;
    const nodes = [{ key: "inboard", at: shaft.inboard }, { key: "outboard", at: shaft.outboard }];
    low.push({ key: shaft.key, pieces: tubePieces(tubePath({ diameter: shaft.diameter, bendRadius: 0, nodes, legs: [] })).map((tube) => tube.piece) });
  }
  const body = bodyLines(layout);
  if (body) {
    rigid.push(body.lengths);
    if (body.standing.pieces.length > 0) low.push(body.standing);
  }
  return { rigid, low, unreadable };
}

/**
 * Body lines edge by edge, so that the middle of a long sill counts too. The plan outline knows no height, so it counts for lengths only; the rear outline knows no
 * station, so over a leaning ground it counts for nothing here.
 */
function bodyLines(layout: Layout): { lengths: StanceItem; standing: StanceItem } | null {
  const edge = (...points: Vec3[]): Piece => ({ points, discs: [], radius: 0, form: "polytope" });
  const { side, top, sections } = layout.body;
  // a side outline is a flat polygon on the centre plane
  const edges = (side ?? []).map((p, i) => {
    const q = side![(i + 1) % side!.length]!;
    return edge([p[0], 0, p[1]], [q[0], 0, q[1]]);
  });
  const stations = sections.flatMap(({ x, line }) => line.slice(1).map((q, i) => edge([x, line[i]![0], line[i]![1]], [x, q[0], q[1]])));
  const standing = [...edges, ...stations];
  const lengths = [...standing, ...(top ?? []).map((p) => edge([p[0], p[1], 0]))];
  return lengths.length > 0 ? { lengths: { key: "body", pieces: lengths }, standing: { key: "body", pieces: standing } } : null;
}
