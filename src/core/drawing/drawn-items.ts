import { PROJECTION, type Vec2, type Vec3, type View } from "../frames.ts";
import type { Piece } from "../geometry/piece.ts";
import { outlineOfPiece } from "../geometry/outline-of-piece.ts";
import { pieceSection } from "../geometry/section.ts";
import { nearnessOf } from "../geometry/silhouette.ts";
import { GeometryError, partPieces } from "../geometry/solids.ts";
import { tubePath, tubePieces } from "../geometry/tubes.ts";
import { placePiece, poseOf } from "../geometry/turn.ts";
import { generatedTyres } from "../layout/generated.ts";
import type { Layout } from "../layout/schema.ts";
import { facetOf, outlineEdges, type Edge, type Facet } from "./covered-edges.ts";

/** Least and greatest of x, y, z, car frame, mm. */
export interface Extent {
  readonly low: Vec3;
  readonly high: Vec3;
}

/** One solid thing of the layout as the sheet draws it. */
export interface DrawnItem {
  readonly key: string;
  readonly name: string;
  readonly is: "part" | "tyre" | "run" | "shaft";
  readonly kind: string;
  /** What its balloon says: the part's number in the document's order, R and S before those of runs and shafts; empty for generated tyres. */
  readonly label: string;
  /** Its size is only estimated, or room is only reserved for it. */
  readonly estimated: boolean;
  readonly pieces: readonly Piece[];
  /** Centre lines of what is round and long. */
  readonly centreLines: readonly (readonly Vec3[])[];
  readonly extent: Extent;
}

export interface DrawnItems {
  readonly items: readonly DrawnItem[];
  /** What could not be drawn, in words. */
  readonly remarks: readonly string[];
}

/** Chord error of pipes' bends on a sheet, mm at full size: a fiftieth of a line's width at 1 : 10. */
const PICTURE_CHORD = 0.1;

/** Parts in the document's order, then the tyres the chassis implies, runs and shafts, all as drawn, in the car frame. */
export function drawnItems(layout: Layout): DrawnItems {
  const items: DrawnItem[] = [];
  const remarks: string[] = [];
  const add = (item: Omit<DrawnItem, "extent">) => {
    const extent = extentOf(item.pieces);
    if (extent) items.push({ ...item, extent });
  };
  const tyres = new Set(generatedTyres(layout));
  [...layout.parts, ...tyres].forEach((part, index) => {
    const generated = tyres.has(part);
    try {
      const pose = poseOf(part);
      add({
        key: part.key, name: part.name, is: generated ? "tyre" : "part", kind: part.kind, label: generated ? "" : String(index + 1),
        estimated: part.source.how === "estimate" || part.source.how === "reserved",
        pieces: partPieces(part).map((piece) => placePiece(piece, pose)), centreLines: [],
      });
    } catch (error) {
      if (!(error instanceof GeometryError)) throw error;
      remarks.push(`${part.name} is not drawn: ${error.message}`);
    }
  });
  layout.runs.forEach((run, index) => {
    const tubes = tubePieces(tubePath(run), PICTURE_CHORD);
    add({
      key: run.key, name: run.name, is: "run", kind: run.kind, label: `R${index + 1}`, estimated: run.source.how === "estimate" || run.source.how === "reserved",
      pieces: tubes.map((tube) => tube.piece), centreLines: joinLines(tubes.filter((tube) => tube.leg >= 0).map((tube) => [tube.line[0], tube.line[1]])),
    });
  });
  layout.shafts.forEach((shaft, index) => {
    const nodes = [{ key: "inboard", at: shaft.inboard }, { key: "outboard", at: shaft.outboard }];
    const line = [shaft.inboard, shaft.outboard];
    const pieces: Piece[] = shaft.diameter === undefined
      ? [{ points: line, discs: [], radius: 0, form: "polytope" }]
      : tubePieces(tubePath({ diameter: shaft.diameter, bendRadius: 0, nodes, legs: [] })).map((tube) => tube.piece);
    add({ key: shaft.key, name: shaft.name, is: "shaft", kind: "shaft", label: `S${index + 1}`, estimated: false, pieces, centreLines: [line] });
  });
  return { items, remarks };
}

/** Strings pieces of line together where one ends as the next begins. */
function joinLines(lines: readonly (readonly [Vec3, Vec3])[]): Vec3[][] {
  const out: Vec3[][] = [];
  for (const [a, b] of lines) {
    const last = out.at(-1);
    const end = last?.at(-1);
    if (last && end && Math.hypot(end[0] - a[0], end[1] - a[1], end[2] - a[2]) < 0.1) last.push(b);
    else out.push([a, b]);
  }
  return out;
}

/** Box of pieces by their supports along the axes: exact, also for what is round. */
export function extentOf(pieces: readonly Piece[]): Extent | null {
  if (pieces.length === 0) return null;
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  for (const piece of pieces) {
    for (let c = 0; c < 3; c++) {
      const take = (middle: number, reach: number) => {
        low[c] = Math.min(low[c]!, middle - reach - piece.radius);
        high[c] = Math.max(high[c]!, middle + reach + piece.radius);
      };
      for (const p of piece.points) take(p[c]!, 0);
      for (const d of piece.discs) take(d.centre[c]!, Math.hypot(d.u[c]!, d.v[c]!));
    }
  }
  return { low: low as unknown as Vec3, high: high as unknown as Vec3 };
}

export interface Box2 {
  readonly left: number;
  readonly right: number;
  readonly low: number;
  readonly high: number;
}

/** How an item looks in a view, mm at full size. */
export interface Look {
  readonly item: DrawnItem;
  /** Outline of each convex piece. */
  readonly facets: readonly Facet[];
  /** Outline of them all together. */
  readonly edges: readonly Edge[];
  readonly box: Box2;
}

/** @param tolerance chord error of what is round, mm at full size */
export function lookOf(item: DrawnItem, view: View, tolerance: number): Look {
  const { u, v } = PROJECTION[view];
  const facets = item.pieces.map((piece) => facetOf(piece.discs.length === 0 && piece.points.length === 2 && piece.radius === 0 ? piece.points.map((p): Vec2 => [p[u], p[v]]) : outlineOfPiece(piece, view, tolerance), nearnessOf([piece], view))).filter((facet) => facet.points.length >= 2);
  return { item, facets, edges: outlineEdges(facets, 2 * tolerance), box: boxIn(item.extent, view) };
}

/** What an extent covers of a view, mm at full size. */
export function boxIn(extent: Extent, view: View): Box2 {
  const { u, v } = PROJECTION[view];
  return { left: extent.low[u], right: extent.high[u], low: extent.low[v], high: extent.high[v] };
}

/** What is cut by the plane square to x at a station, seen from behind (y to the right, z up). */
export function cutOf(item: DrawnItem, station: number, tolerance: number): Look | null {
  if (station < item.extent.low[0] || station > item.extent.high[0]) return null;
  const facets = item.pieces.map((piece) => facetOf(pieceSection(piece, "x", station, tolerance))).filter((facet) => facet.points.length >= 3);
  return facets.length === 0 ? null : { item, facets, edges: outlineEdges(facets, 2 * tolerance), box: boxIn(item.extent, "rear") };
}
