import { PROJECTION, VIEWS, type Vec3, type View } from "#core/frames.ts";
import { outlineOfPiece } from "#core/geometry/outline-of-piece.ts";
import type { Piece } from "#core/geometry/piece.ts";
import { pieceSection } from "#core/geometry/section.ts";
import { nearnessOf, silhouette } from "#core/geometry/silhouette.ts";
import { GeometryError, partPieces, solidPieces } from "#core/geometry/solids.ts";
import { tubePath, tubePieces } from "#core/geometry/tubes.ts";
import { placePiece, poseOf } from "#core/geometry/turn.ts";
import type { ListName } from "#core/layout/commands.ts";
import { generatedTyres } from "#core/layout/generated.ts";
import type { Layout, Part, Run, Shaft } from "#core/layout/schema.ts";

/** A closed loop as flat numbers: u, v, u, v … mm in a view. */
export type FlatLoop = Float64Array;

/** Outlines before they are shifted to their place: they change when a thing turns, not when it moves along. */
interface Flat {
  readonly loops: readonly FlatLoop[];
  /** Runs and shafts have no loops: centre lines through the bends, legs of one thickness in one, drawn as wide as they are. */
  readonly lines: readonly FlatLoop[];
  /** Outer diameter of each line, mm. */
  readonly widths: readonly number[];
  /** Outlines of room that must stay free. */
  readonly rooms: readonly FlatLoop[];
  readonly nearness: number;
  /** Low u, low v, high u, high v. */
  readonly box: readonly [number, number, number, number];
}

/** One thing as a view shows it: outlines of its convex pieces, drawn as one by stroking all and then filling all. */
export interface Shape extends Flat {
  readonly key: string;
  readonly name: string;
  readonly list: ListName | "tyres";
  readonly kind: string;
  /** Where its loops, lines and rooms are moved to, mm in the view. Box and nearness are in place already. */
  readonly shift: readonly [number, number];
  readonly area: number;
  readonly hot: boolean;
  /** Size is a guess: drawn dashed. */
  readonly guessed: boolean;
  /** Travel drawn as the extreme positions: shifts of the outline. */
  readonly extremes: readonly (readonly [number, number])[];
}

const TUBE_ERROR = 0.6;
const CURVE_ERROR = 0.4;
const flat = (loop: readonly (readonly [number, number])[]): FlatLoop => Float64Array.from(loop.flatMap((p) => [p[0], p[1]]));

interface Solid {
  readonly pieces: readonly Piece[];
  readonly rooms: readonly Piece[];
  readonly lines: readonly (readonly Vec3[])[];
  readonly widths: readonly number[];
  readonly views: Partial<Record<View, Flat>>;
  readonly roomFor?: Part["roomFor"];
}

const partSolids = new WeakMap<object, Map<string, Solid>>();
const tubeSolids = new WeakMap<object, Solid>();

/** A part's pieces turned as it is turned, about its own origin: kept by what makes the shape, so that a drag costs nothing. */
function partSolid(part: Part): Solid {
  let byTurn = partSolids.get(part.solids);
  if (!byTurn) partSolids.set(part.solids, (byTurn = new Map()));
  const id = part.turn.join();
  const known = byTurn.get(id);
  if (known && known.roomFor === part.roomFor) return known;
  if (byTurn.size > 60) byTurn.clear();
  const pose = poseOf({ at: [0, 0, 0], turn: part.turn });
  let made: Solid = { pieces: [], rooms: [], lines: [], widths: [], views: {}, roomFor: part.roomFor };
  try {
    made = { ...made, pieces: partPieces(part).map((piece) => placePiece(piece, pose)), rooms: part.roomFor.flatMap((room) => room.solids.flatMap(solidPieces)).map((piece) => placePiece(piece, pose)) };
  } catch (error) {
    if (!(error instanceof GeometryError)) throw error;
  }
  byTurn.set(id, made);
  return made;
}

function tubeSolid(item: Run | Shaft): Solid {
  const known = tubeSolids.get(item);
  if (known) return known;
  const input = "nodes" in item ? item : { diameter: item.diameter ?? 1, bendRadius: 0, nodes: [{ key: "a", at: item.inboard }, { key: "b", at: item.outboard }], legs: [] };
  const path = tubePath(input);
  const tubes = tubePieces(path, TUBE_ERROR);
  const { lines, widths } = chains(path.legs.map((leg, i) => {
    const own = tubes.filter((tube) => tube.leg === i);
    return { line: own.length === 0 ? [] : [own[0]!.line[0], ...own.map((tube) => tube.line[1])], width: leg.diameter };
  }));
  const made = { pieces: tubes.map((tube) => tube.piece), rooms: [], lines, widths, views: {} };
  tubeSolids.set(item, made);
  return made;
}

/** Legs that go on where the one before ended, at the same thickness, become one line: its corners are mitres. */
function chains(legs: readonly { readonly line: readonly Vec3[]; readonly width: number }[]): { lines: Vec3[][]; widths: number[] } {
  const lines: Vec3[][] = [];
  const widths: number[] = [];
  for (const { line, width } of legs) {
    const before = lines[lines.length - 1];
    const end = before?.[before.length - 1];
    const start = line[0];
    if (!start) continue;
    if (before && end && widths[widths.length - 1] === width && Math.hypot(end[0] - start[0], end[1] - start[1], end[2] - start[2]) < 0.5) before.push(...line.slice(1));
    else {
      lines.push([...line]);
      widths.push(width);
    }
  }
  return { lines, widths };
}

function flatOf(solid: Solid, view: View, joined: boolean): Flat {
  const known = solid.views[view];
  if (known) return known;
  const { u, v } = PROJECTION[view];
  const thin = solid.lines.length > 0;
  const outlines = thin ? [] : joined && solid.pieces.length > 1 ? silhouette(solid.pieces, view, CURVE_ERROR) : solid.pieces.map((piece) => outlineOfPiece(piece, view, CURVE_ERROR));
  const loops = outlines.map(flat).filter((loop) => loop.length >= 6);
  const lines = solid.lines.map((line) => flat(line.map((p) => [p[u], p[v]] as const)));
  const box: [number, number, number, number] = [Infinity, Infinity, -Infinity, -Infinity];
  const take = (loop: FlatLoop, radius: number) => {
    for (let i = 0; i < loop.length; i += 2) {
      box[0] = Math.min(box[0], loop[i]! - radius);
      box[1] = Math.min(box[1], loop[i + 1]! - radius);
      box[2] = Math.max(box[2], loop[i]! + radius);
      box[3] = Math.max(box[3], loop[i + 1]! + radius);
    }
  };
  for (const loop of loops) take(loop, 0);
  lines.forEach((line, i) => take(line, solid.widths[i]! / 2));
  const made: Flat = {
    loops, box, lines, widths: solid.widths, nearness: nearnessOf(solid.pieces, view),
    rooms: (solid.rooms.length > 1 ? silhouette(solid.rooms, view, 1) : solid.rooms.map((piece) => outlineOfPiece(piece, view, 1))).map(flat),
  };
  solid.views[view] = made;
  return made;
}

const shapes = new WeakMap<object, Partial<Record<View, Shape>>>();

function shapeOf(item: Part | Run | Shaft, list: Shape["list"], view: View): Shape {
  let cached = shapes.get(item);
  if (!cached) shapes.set(item, (cached = {}));
  return (cached[view] ??= makeShape(item, list, view));
}

function makeShape(item: Part | Run | Shaft, list: Shape["list"], view: View): Shape {
  const { u, v, depth, toward } = PROJECTION[view];
  const part = list === "parts" || list === "tyres" ? (item as Part) : null;
  const at: Vec3 = part ? part.at : [0, 0, 0];
  const form = flatOf(part ? partSolid(part) : tubeSolid(item as Run | Shaft), view, part?.kind === "glass");
  const box = [form.box[0] + at[u], form.box[1] + at[v], form.box[2] + at[u], form.box[3] + at[v]] as const;
  const travel = part?.kind === "tyre" && view !== "plan" ? part.movement.z : null;
  return {
    ...form, key: item.key, name: item.name, list, kind: list === "shafts" ? "shaft" : (item as Part | Run).kind, box, nearness: form.nearness + toward * at[depth], shift: [at[u], at[v]],
    area: Math.max(0, (box[2] - box[0]) * (box[3] - box[1])), hot: list !== "shafts" && (item as Part | Run).heat?.surface !== undefined,
    guessed: part !== null && (part.source.how === "estimate" || part.source.how === "reserved"),
    extremes: travel ? travel.map((dz) => [0, dz] as const) : [],
  };
}

const tyreCache = new WeakMap<object, Part[]>();
function tyresOf(layout: Layout): Part[] {
  const known = tyreCache.get(layout.chassis);
  if (known && known.every((tyre) => !layout.parts.some((part) => part.key === tyre.key))) return known;
  const made = generatedTyres(layout);
  tyreCache.set(layout.chassis, made);
  return made;
}

const drawn = new WeakMap<Layout, Partial<Record<View, readonly Shape[]>>>();

/** Everything solid in a view, farthest first. Unchanged items cost nothing. */
export function shapesOf(layout: Layout, view: View): readonly Shape[] {
  let views = drawn.get(layout);
  if (!views) drawn.set(layout, (views = {}));
  return (views[view] ??= allShapes(layout, view));
}

function allShapes(layout: Layout, view: View): Shape[] {
  const all = [
    ...tyresOf(layout).map((tyre) => shapeOf(tyre, "tyres", view)),
    ...layout.parts.map((part) => shapeOf(part, "parts", view)),
    ...layout.runs.map((run) => shapeOf(run, "runs", view)),
    ...layout.shafts.map((shaft) => shapeOf(shaft, "shafts", view)),
  ];
  return all.sort((a, b) => a.nearness - b.nearness);
}

const reaches = new WeakMap<Solid, Float64Array>();

/** From where to where each piece reaches along x, mm: two numbers a piece, a little generous. */
function reachesOf(solid: Solid): Float64Array {
  const known = reaches.get(solid);
  if (known) return known;
  const out = new Float64Array(2 * solid.pieces.length);
  solid.pieces.forEach((piece, i) => {
    let [low, high] = [Infinity, -Infinity];
    for (const point of piece.points) [low, high] = [Math.min(low, point[0]), Math.max(high, point[0])];
    for (const disc of piece.discs) {
      const arm = Math.hypot(disc.u[0], disc.v[0]);
      [low, high] = [Math.min(low, disc.centre[0] - arm), Math.max(high, disc.centre[0] + arm)];
    }
    out[2 * i] = low - piece.radius - 0.01;
    out[2 * i + 1] = high + piece.radius + 0.01;
  });
  reaches.set(solid, out);
  return out;
}

export interface Cut {
  readonly key: string;
  readonly kind: string;
  readonly list: Shape["list"];
  readonly hot: boolean;
  readonly loops: readonly FlatLoop[];
  readonly shift: readonly [number, number];
}

/** The true section square to x: what each thing shows where it is cut. */
export function cutsAt(layout: Layout, station: number): Cut[] {
  const cuts: Cut[] = [];
  const add = (item: Part | Run | Shaft, list: Shape["list"]) => {
    const side = shapeOf(item, list, "side");
    if (station < side.box[0] || station > side.box[2]) return;
    const part = list === "parts" || list === "tyres" ? (item as Part) : null;
    const solid = part ? partSolid(part) : tubeSolid(item as Run | Shaft);
    const local = station - (part ? part.at[0] : 0);
    const reach = reachesOf(solid);
    const loops = solid.pieces.flatMap((piece, i) => {
      if (local < reach[2 * i]! || local > reach[2 * i + 1]!) return [];
      const loop = flat(pieceSection(piece, "x", local, CURVE_ERROR));
      return loop.length >= 6 ? [loop] : [];
    });
    if (loops.length > 0) cuts.push({ key: item.key, kind: side.kind, list, hot: side.hot, loops, shift: part ? [part.at[1], part.at[2]] : [0, 0] });
  };
  for (const tyre of tyresOf(layout)) add(tyre, "tyres");
  for (const part of layout.parts) add(part, "parts");
  for (const run of layout.runs) add(run, "runs");
  for (const shaft of layout.shafts) add(shaft, "shafts");
  return cuts;
}

export interface Extent {
  readonly low: [number, number, number];
  readonly high: [number, number, number];
}

/** Reach of everything drawn, or of some things, mm. */
export function extentOf(layout: Layout, only?: ReadonlySet<string>): Extent {
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
      if (only && !only.has(shape.key)) continue;
      take(u, shape.box[0]);
      take(u, shape.box[2]);
      take(v, shape.box[1]);
      take(v, shape.box[3]);
    }
  }
  for (const space of layout.spaces) {
    if (only && !only.has(space.key)) continue;
    for (const p of space.top ?? []) { take(0, p[0]); take(1, p[1]); }
    for (const p of space.side ?? []) { take(0, p[0]); take(2, p[1]); }
  }
  if (only) return { low, high };
  for (const p of layout.body.side ?? []) { take(0, p[0]); take(2, p[1]); }
  for (const p of layout.body.top ?? []) { take(0, p[0]); take(1, p[1]); }
  take(2, -layout.chassis.front.rideHeight);
  take(2, -layout.chassis.rear.rideHeight);
  return { low, high };
}
