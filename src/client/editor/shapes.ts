import { PROJECTION, VIEWS, type Vec3, type View } from "#core/frames.ts";
import { outlineOfPiece } from "#core/geometry/outline-of-piece.ts";
import type { Piece } from "#core/geometry/piece.ts";
import { pieceSection } from "#core/geometry/section.ts";
import { nearnessOf } from "#core/geometry/silhouette.ts";
import { GeometryError, partPieces, solidPieces } from "#core/geometry/solids.ts";
import { tubePath, tubePieces } from "#core/geometry/tubes.ts";
import { placePiece, poseOf } from "#core/geometry/turn.ts";
import type { ListName } from "#core/layout/commands.ts";
import { generatedTyres } from "#core/layout/generated.ts";
import type { Layout, Part, Run, Shaft } from "#core/layout/schema.ts";

/** A closed loop as flat numbers: u, v, u, v … mm in a view. */
export type FlatLoop = Float64Array;

/** One thing as a view shows it: outlines of its convex pieces, drawn as one by stroking all and then filling all. */
export interface Shape {
  readonly key: string;
  readonly list: ListName | "tyres";
  readonly kind: string;
  readonly loops: readonly FlatLoop[];
  /** Runs and shafts: centre line through the bends, u, v …, one for each leg. */
  readonly lines: readonly FlatLoop[];
  readonly nearness: number;
  readonly area: number;
  /** Low u, low v, high u, high v. */
  readonly box: readonly [number, number, number, number];
  readonly hot: boolean;
  /** Size is a guess: drawn dashed. */
  readonly guessed: boolean;
  /** Outlines of room that must stay free. */
  readonly rooms: readonly FlatLoop[];
  /** Travel drawn as the extreme positions: tyres. */
  readonly extremes: readonly FlatLoop[];
}

const TUBE_ERROR = 0.6;
const flat = (loop: readonly (readonly [number, number])[]): FlatLoop => Float64Array.from(loop.flatMap((p) => [p[0], p[1]]));

interface Solid {
  readonly pieces: readonly Piece[];
  readonly rooms: readonly Piece[];
  readonly lines: readonly (readonly Vec3[])[];
  readonly travel: readonly Vec3[];
}

const solids = new WeakMap<object, Solid>();

function solidOf(item: Part | Run | Shaft, list: Shape["list"]): Solid {
  const known = solids.get(item);
  if (known) return known;
  const made = list === "runs" ? tubeSolid(item as Run) : list === "shafts" ? shaftSolid(item as Shaft) : partSolid(item as Part);
  solids.set(item, made);
  return made;
}

function partSolid(part: Part): Solid {
  try {
    const pose = poseOf(part);
    const travel: Vec3[] = part.kind === "tyre" ? [[0, 0, part.movement.z[0]], [0, 0, part.movement.z[1]]] : [];
    return {
      pieces: partPieces(part).map((piece) => placePiece(piece, pose)),
      rooms: part.roomFor.flatMap((room) => room.solids.flatMap(solidPieces)).map((piece) => placePiece(piece, pose)), lines: [], travel,
    };
  } catch (error) {
    if (error instanceof GeometryError) return { pieces: [], rooms: [], lines: [], travel: [] };
    throw error;
  }
}

function tubeSolid(run: Pick<Run, "diameter" | "bendRadius" | "nodes" | "legs">): Solid {
  const path = tubePath(run);
  const tubes = tubePieces(path, TUBE_ERROR);
  const lines = path.legs.map((_, leg) => {
    const own = tubes.filter((tube) => tube.leg === leg);
    return own.length === 0 ? [] : [own[0]!.line[0], ...own.map((tube) => tube.line[1])];
  });
  return { pieces: tubes.map((tube) => tube.piece), rooms: [], lines, travel: [] };
}

function shaftSolid(shaft: Shaft): Solid {
  return tubeSolid({ diameter: shaft.diameter ?? 1, bendRadius: 0, nodes: [{ key: "a", at: shaft.inboard }, { key: "b", at: shaft.outboard }], legs: [] });
}

const shapes = new WeakMap<object, Partial<Record<View, Shape>>>();

function shapeOf(item: Part | Run | Shaft, list: Shape["list"], view: View): Shape {
  const cached = shapes.get(item) ?? {};
  const known = cached[view];
  if (known) return known;
  const solid = solidOf(item, list);
  const { u, v } = PROJECTION[view];
  const loops = solid.pieces.map((piece) => flat(outlineOfPiece(piece, view, 0.4))).filter((loop) => loop.length >= 6);
  const lines = solid.lines.map((line) => flat(line.map((p) => [p[u], p[v]] as const)));
  const box: [number, number, number, number] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const loop of loops) {
    for (let i = 0; i < loop.length; i += 2) {
      box[0] = Math.min(box[0], loop[i]!);
      box[1] = Math.min(box[1], loop[i + 1]!);
      box[2] = Math.max(box[2], loop[i]!);
      box[3] = Math.max(box[3], loop[i + 1]!);
    }
  }
  const part = item as Part;
  const shape: Shape = {
    key: item.key, list, kind: list === "shafts" ? "shaft" : part.kind, loops, lines, nearness: nearnessOf(solid.pieces, view), box, area: (box[2] - box[0]) * (box[3] - box[1]),
    hot: list !== "shafts" && part.heat?.surface !== undefined, guessed: list === "parts" && (part.source.how === "estimate" || part.source.how === "reserved"),
    rooms: solid.rooms.map((piece) => flat(outlineOfPiece(piece, view, 1))),
    extremes: view === "plan" ? [] : solid.travel.flatMap((by) => solid.pieces.map((piece) => flat(outlineOfPiece(piece, view, 1).map((p): [number, number] => [p[0] + by[u], p[1] + by[v]])))),
  };
  shapes.set(item, { ...cached, [view]: shape });
  return shape;
}

const tyreCache = new WeakMap<object, Part[]>();
function tyresOf(layout: Layout): Part[] {
  const known = tyreCache.get(layout.chassis);
  if (known && known.every((tyre) => !layout.parts.some((part) => part.key === tyre.key))) return known;
  const made = generatedTyres(layout);
  tyreCache.set(layout.chassis, made);
  return made;
}

/** Everything solid in a view, farthest first. Unchanged items cost nothing. */
export function shapesOf(layout: Layout, view: View): Shape[] {
  const all = [
    ...tyresOf(layout).map((tyre) => shapeOf(tyre, "tyres", view)),
    ...layout.parts.map((part) => shapeOf(part, "parts", view)),
    ...layout.runs.map((run) => shapeOf(run, "runs", view)),
    ...layout.shafts.map((shaft) => shapeOf(shaft, "shafts", view)),
  ];
  return all.sort((a, b) => a.nearness - b.nearness);
}

export interface Cut {
  readonly key: string;
  readonly kind: string;
  readonly list: Shape["list"];
  readonly hot: boolean;
  readonly loops: readonly FlatLoop[];
}

/** The true section square to x: what each thing shows where it is cut. */
export function cutsAt(layout: Layout, station: number): Cut[] {
  const cuts: Cut[] = [];
  const add = (item: Part | Run | Shaft, list: Shape["list"]) => {
    const side = shapeOf(item, list, "side");
    if (station < side.box[0] || station > side.box[2]) return;
    const loops = solidOf(item, list).pieces.map((piece) => flat(pieceSection(piece, "x", station, 0.4))).filter((loop) => loop.length >= 6);
    if (loops.length > 0) cuts.push({ key: item.key, kind: side.kind, list, hot: side.hot, loops });
  };
  for (const tyre of tyresOf(layout)) add(tyre, "tyres");
  for (const part of layout.parts) add(part, "parts");
  for (const run of layout.runs) add(run, "runs");
  for (const shaft of layout.shafts) add(shaft, "shafts");
  return cuts;
}

/** Reach of everything drawn, mm. */
export function extentOf(layout: Layout): { low: [number, number, number]; high: [number, number, number] } {
  const low: [number, number, number] = [Infinity, Infinity, Infinity];
  const high: [number, number, number] = [-Infinity, -Infinity, -Infinity];
  const take = (axis: 0 | 1 | 2, value: number) => {
    if (!Number.isFinite(value)) return;
    low[axis] = Math.min(low[axis], value);
    high[axis] = Math.max(high[axis], value);
  };
  for (const view of VIEWS) {
    if (view === "rear") continue;
    const { u, v } = PROJECTION[view];
    for (const shape of shapesOf(layout, view)) {
      take(u, shape.box[0]);
      take(u, shape.box[2]);
      take(v, shape.box[1]);
      take(v, shape.box[3]);
    }
  }
  for (const p of layout.body.side ?? []) { take(0, p[0]); take(2, p[1]); }
  for (const p of layout.body.top ?? []) { take(0, p[0]); take(1, p[1]); }
  take(2, -layout.chassis.front.rideHeight);
  take(2, -layout.chassis.rear.rideHeight);
  return { low, high };
}

/** Insides by the even-odd rule. */
export function insideLoop(loop: FlatLoop, u: number, v: number): boolean {
  let inside = false;
  for (let i = 0, j = loop.length - 2; i < loop.length; j = i, i += 2) {
    const [ui, vi, uj, vj] = [loop[i]!, loop[i + 1]!, loop[j]!, loop[j + 1]!];
    if (vi > v !== vj > v && u < ((uj - ui) * (v - vi)) / (vj - vi) + ui) inside = !inside;
  }
  return inside;
}

/** Squared distance from a point to a chain of segments. */
export function nearLine(line: FlatLoop, u: number, v: number): number {
  let least = Infinity;
  for (let i = 0; i + 3 < line.length; i += 2) {
    const [a, b, c, d] = [line[i]!, line[i + 1]!, line[i + 2]!, line[i + 3]!];
    const length = (c - a) ** 2 + (d - b) ** 2;
    const t = length === 0 ? 0 : Math.max(0, Math.min(1, ((u - a) * (c - a) + (v - b) * (d - b)) / length));
    least = Math.min(least, (u - a - t * (c - a)) ** 2 + (v - b - t * (d - b)) ** 2);
  }
  return least;
}

/**
 * What a pointer means: of everything under it the smallest thing, runs before parts (they are thin and lie on top of much). `slack` mm around runs.
 */
export function pick(all: readonly Shape[], u: number, v: number, slack: number): Shape | null {
  let best: Shape | null = null;
  let bestSize = Infinity;
  for (const shape of all) {
    if (u < shape.box[0] - slack || u > shape.box[2] + slack || v < shape.box[1] - slack || v > shape.box[3] + slack) continue;
    const thin = shape.list === "runs" || shape.list === "shafts";
    const hit = shape.loops.some((loop) => insideLoop(loop, u, v)) || (thin && shape.lines.some((line) => nearLine(line, u, v) < slack * slack));
    if (!hit) continue;
    const size = (thin ? 0 : shape.list === "tyres" ? 1e12 : 0) + shape.area * (thin ? 1e-3 : 1);
    if (size <= bestSize) {
      best = shape;
      bestSize = size;
    }
  }
  return best;
}
