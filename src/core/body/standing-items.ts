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
  const body = bodyPoints(layout);
  if (body) {
    rigid.push(body.lengths);
    if (body.standing.pieces.length > 0) low.push(body.standing);
  }
  return { rigid, low, unreadable };
}

/** Body lines as points: the plan outline knows no height, so it counts for lengths only; the rear outline no station, so for clearance only. */
function bodyPoints(layout: Layout): { lengths: StanceItem; standing: StanceItem } | null {
  const point = (x: number, y: number, z: number): Piece => ({ points: [[x, y, z]], discs: [], radius: 0, form: "polytope" });
  const { side, top, sections } = layout.body;
  // a side outline is a flat polygon on the centre plane: edge by edge, so that the middle of a long sill counts too
  const edges: Piece[] = (side ?? []).map((p, i) => {
    const q = side![(i + 1) % side!.length]!;
    return { points: [[p[0], 0, p[1]], [q[0], 0, q[1]]], discs: [], radius: 0, form: "polytope" };
  });
  const stations = sections.flatMap((section) => section.line.map((p) => point(section.x, p[0], p[1])));
  const standing = [...edges, ...stations];
  const lengths = [...standing, ...(top ?? []).map((p) => point(p[0], p[1], 0))];
  return lengths.length > 0 ? { lengths: { key: "body", pieces: lengths }, standing: { key: "body", pieces: standing } } : null;
}
