import type { Piece } from "../geometry/piece.ts";
import { GeometryError, outlineFindings, partPieces } from "../geometry/solids.ts";
import { tubePath, tubePieces } from "../geometry/tubes.ts";
import { placePiece, poseOf } from "../geometry/turn.ts";
import { generatedTyres } from "../layout/generated.ts";
import { hasCommonVolume } from "../layout/invariants.ts";
import type { Layout } from "../layout/schema.ts";
import { measureSpace } from "./free-volume.ts";

/** One row of the `spaces` section. */
export interface SpaceReport {
  readonly key: string;
  readonly grossLitres: number;
  readonly freeLitres: number;
  /** Present where something is to be said: outlines that disagree or have nothing in common. */
  readonly findings?: readonly string[];
}

/** Litres of every luggage space: outlines alone, and less wall gap, parts, runs, shafts and tyres as drawn grown by its part gap. */
export function spacesReport(layout: Layout): SpaceReport[] {
  if (layout.spaces.length === 0) return [];
  const obstacles = obstaclesOf(layout);
  return layout.spaces.map((space) => {
    if (!hasCommonVolume(space)) return { key: space.key, grossLitres: 0, freeLitres: 0, findings: ["The outlines have no volume in common."] };
    const findings = outlineFindings(space);
    return { key: space.key, ...measureSpace(space, obstacles), ...(findings.length > 0 ? { findings } : {}) };
  });
}

/** Chords of a bent pipe lie within this of its arcs, as far inside as outside, mm: its volume stays, its pieces are few. */
const TUBE_ERROR = 0.5;

/** Everything that takes room, in the car frame, as drawn. */
export function obstaclesOf(layout: Layout): Piece[] {
  const pieces: Piece[] = [];
  for (const part of [...layout.parts, ...generatedTyres(layout)]) {
    try {
      const pose = poseOf(part);
      pieces.push(...partPieces(part).map((piece) => placePiece(piece, pose)));
    } catch (error) {
      if (!(error instanceof GeometryError)) throw error; // named in the body section
    }
  }
  const tube = (input: Parameters<typeof tubePath>[0]) => pieces.push(...tubePieces(tubePath(input), TUBE_ERROR).map((t) => t.piece));
  for (const run of layout.runs) tube(run);
  for (const shaft of layout.shafts) {
    if (shaft.diameter !== undefined) tube({ diameter: shaft.diameter, bendRadius: 0, nodes: [{ key: "a", at: shaft.inboard }, { key: "b", at: shaft.outboard }], legs: [] });
  }
  return pieces;
}
