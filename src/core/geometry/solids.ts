import { axisIndex, type Axis, type Vec2, type Vec3 } from "../frames.ts";
import type { Part, Solid } from "../layout/schema.ts";
import { convexPartsOf } from "./decompose.ts";
import type { Disc, Piece } from "./piece.ts";
import { findOutlineFault, type Outline } from "./polygons.ts";
import { cornersOf, cutPolyhedron, prismOf, volumeOf, type Polyhedron } from "./polyhedron.ts";
import { placePiece, poseOf } from "./turn.ts";

/** A shape that cannot be: where in the solid, and why. */
export class GeometryError extends Error {
  override readonly name = "GeometryError";
  readonly path: string;
  constructor(path: string, message: string) {
    super(message);
    this.path = path;
  }
}

export const MOST_PIECES = 200;
export const MOST_SHEET_PIECES = 2000;

/** The two axes a section of something along `axis` lies in, in the order x, y, z. */
const others = (axis: Axis): [0 | 1 | 2, 0 | 1 | 2] => (axis === "x" ? [1, 2] : axis === "y" ? [0, 2] : [0, 1]);
const along = (axis: 0 | 1 | 2, value: number): Vec3 => (axis === 0 ? [value, 0, 0] : axis === 1 ? [0, value, 0] : [0, 0, value]);
const PLANES: Readonly<Record<"xy" | "xz" | "yz", readonly [0 | 1 | 2, 0 | 1 | 2, 0 | 1 | 2]>> = { xy: [0, 1, 2], xz: [0, 2, 1], yz: [1, 2, 0] };

/** A point with named coordinates. */
function at3(a: 0 | 1 | 2, va: number, b: 0 | 1 | 2, vb: number, c: 0 | 1 | 2, vc: number): Vec3 {
  const p: [number, number, number] = [0, 0, 0];
  p[a] = va;
  p[b] = vb;
  p[c] = vc;
  return p;
}

/**
 * The convex pieces of a solid, in its part's local coordinates (the solid's own turn and at applied). Round things are discs with
 * exact radii, never facets. Non-convex outlines are cut from a canonical start.
 *
 * @throws GeometryError with the path inside the solid: outlines that cross, no common volume, more than 200 pieces (a sheet 2000)
 */
export function solidPieces(solid: Solid): Piece[] {
  const pieces = localPieces(solid);
  const most = solid.type === "sheet" ? MOST_SHEET_PIECES : MOST_PIECES;
  if (pieces.length > most) throw new GeometryError("", `cut into ${pieces.length} convex pieces, at most ${most} are allowed: use fewer corners`);
  const still = solid.turn.every((t) => t === 0) && solid.at.every((t) => t === 0);
  return still ? pieces : pieces.map((piece) => placePiece(piece, poseOf(solid)));
}

/** Pieces of all of a part's solids, local. @throws GeometryError, path `solids[i]…` */
export function partPieces(part: Pick<Part, "solids">): Piece[] {
  return part.solids.flatMap((solid, index) => {
    try {
      return solidPieces(solid);
    } catch (error) {
      if (error instanceof GeometryError) throw new GeometryError(`solids[${index}]${error.path && `.${error.path}`}`, error.message);
      throw error;
    }
  });
}

function localPieces(solid: Solid): Piece[] {
  switch (solid.type) {
    case "box": {
      const [x, y, z] = [solid.size[0] / 2, solid.size[1] / 2, solid.size[2] / 2];
      return [{ points: [-1, 1].flatMap((i) => [-1, 1].flatMap((j) => [-1, 1].map((k): Vec3 => [i * x, j * y, k * z]))), discs: [], radius: 0, form: "box" }];
    }
    case "round":
      return [roundPiece(solid.axis, solid.diameter / 2, solid.diameter / 2, solid.length, "cylinder")];
    case "cone":
      return [roundPiece(solid.axis, solid.diameters[0] / 2, solid.diameters[1] / 2, solid.length, "cone")];
    case "oval":
      return [ovalPiece(solid)];
    case "ball":
      return [{ points: [[0, 0, 0]], discs: [], radius: solid.diameter / 2, form: "ball" }];
    case "prism":
      return prismPieces(solid);
    case "outlines":
      return outlinePieces(solid);
    case "bar":
      return [barPiece(solid)];
    case "sheet":
      return sheetPieces(solid);
  }
}

function roundPiece(axis: Axis, lowRadius: number, highRadius: number, length: number, form: "cylinder" | "cone"): Piece {
  const [a, b] = others(axis);
  const c = axisIndex(axis);
  const disc = (radius: number, where: number): Disc => ({ centre: along(c, where), u: along(a, radius), v: along(b, radius) });
  return { points: [], discs: [disc(lowRadius, -length / 2), disc(highRadius, length / 2)], radius: 0, form };
}

function ovalPiece(solid: Extract<Solid, { type: "oval" }>): Piece {
  if (solid.width === solid.height) return roundPiece(solid.axis, solid.width / 2, solid.width / 2, solid.length, "cylinder");
  const [a, b] = others(solid.axis);
  const c = axisIndex(solid.axis);
  const wide = solid.width > solid.height;
  const radius = Math.min(solid.width, solid.height) / 2;
  const half = Math.abs(solid.width - solid.height) / 2;
  const long = wide ? a : b;
  const short = wide ? b : a;
  const discs = [-1, 1].flatMap((end) => [-1, 1].map((side): Disc => ({
    centre: at3(c, (end * solid.length) / 2, long, side * half, short, 0), u: along(a, radius), v: along(b, radius),
  })));
  return { points: [], discs, radius: 0, form: "oval" };
}

function checkOutline(path: string, outline: Outline): void {
  const fault = findOutlineFault(outline);
  if (fault) throw new GeometryError(path, fault.message);
}

function prismPieces(solid: Extract<Solid, { type: "prism" }>): Piece[] {
  checkOutline("outline", solid.outline);
  if (solid.from === solid.to) throw new GeometryError("to", "a prism needs a thickness: from and to are equal");
  const [a, b, c] = PLANES[solid.plane];
  return convexPartsOf(solid.outline).map((ring) => {
    const low = ring.map((p) => at3(a, p[0], b, p[1], c, solid.from));
    const high = ring.map((p) => at3(a, p[0], b, p[1], c, solid.to));
    return { points: [...low, ...high], discs: [], radius: 0, form: "polytope" };
  });
}

type ViewOutline = { readonly name: "top" | "side" | "rear"; readonly outline: Outline; readonly axes: readonly [0 | 1 | 2, 0 | 1 | 2]; readonly hidden: 0 | 1 | 2 };

function viewOutlines(solid: Outlines): ViewOutline[] {
  const views: ViewOutline[] = [];
  if (solid.top) views.push({ name: "top", outline: solid.top, axes: [0, 1], hidden: 2 });
  if (solid.side) views.push({ name: "side", outline: solid.side, axes: [0, 2], hidden: 1 });
  if (solid.rear) views.push({ name: "rear", outline: solid.rear, axes: [1, 2], hidden: 0 });
  return views;
}

type Outlines = { readonly top?: Outline | undefined; readonly side?: Outline | undefined; readonly rear?: Outline | undefined };

/** Cuts that are tried before an intricate solid is refused: about half a second's worth. */
const MOST_CUTS = 10_000;

/**
 * Convex pieces of the common volume of two or three outlines pushed through: polyhedra with exact corners. Slivers thinner than rounding
 * are left out; their volume is below 1e-9 of the whole.
 * @throws GeometryError for crossing outlines, fewer than two, nothing in common, or far too many pieces
 */
export function outlinePolyhedra(solid: Outlines): Polyhedron[] {
  const pieces: Polyhedron[] = [];
  for (const piece of commonPieces(solid)) {
    pieces.push(piece);
    if (pieces.length > 5 * MOST_PIECES) throw tooIntricate(`more than ${5 * MOST_PIECES}`);
  }
  const whole = pieces.reduce((sum, piece) => sum + volumeOf(piece), 0);
  const kept = pieces.filter((piece) => volumeOf(piece) > 1e-9 * whole);
  if (kept.length === 0) throw new GeometryError("", "the outlines have no volume in common: do they share one local origin?");
  return kept;
}

const tooIntricate = (found: string) => new GeometryError("", `cut into ${found} convex pieces, at most ${MOST_PIECES} are allowed: use fewer corners`);

function* commonPieces(solid: Outlines): Generator<Polyhedron> {
  const views = viewOutlines(solid);
  if (views.length < 2) throw new GeometryError("", "outlines need at least two of top, side and rear");
  for (const view of views) checkOutline(view.name, view.outline);
  const first = views[0]!;
  const extent = reachAlong(views, first.hidden);
  if (!(extent[1] > extent[0])) return;
  const size = Math.max(...views.flatMap((view) => [0, 1].map((k) => reach(view.outline, k as 0 | 1)[1] - reach(view.outline, k as 0 | 1)[0])));
  const slack = 1e-10 * size;
  const tools = views.slice(1).map((view) => ({
    view, rings: convexPartsOf(view.outline).map((ring) => ({ ring, reach: [reach(ring, 0), reach(ring, 1)] as const })),
  }));
  let cuts = 0;
  function* cutOn(piece: Polyhedron, stage: number): Generator<Polyhedron> {
    const tool = tools[stage];
    if (!tool) {
      yield piece;
      return;
    }
    const [a, b] = tool.view.axes.map((axis) => reachOf(piece, axis)) as [[number, number], [number, number]];
    for (const { ring, reach: [u, v] } of tool.rings) {
      if (u[0] >= a[1] || u[1] <= a[0] || v[0] >= b[1] || v[1] <= b[0]) continue;
      if (++cuts > MOST_CUTS) throw tooIntricate("far too many");
      const common = cutByRing(piece, ring, tool.view, slack);
      if (common.length > 0) yield* cutOn(common, stage + 1);
    }
  }
  for (const ring of convexPartsOf(first.outline)) {
    const at = (p: Vec2, depth: number) => at3(first.axes[0], p[0], first.axes[1], p[1], first.hidden, depth);
    yield* cutOn(prismOf(ring.map((p) => at(p, extent[0])), ring.map((p) => at(p, extent[1]))), 0);
  }
}

function reachOf(piece: Polyhedron, axis: 0 | 1 | 2): [number, number] {
  let [low, high] = [Infinity, -Infinity];
  for (const face of piece) {
    for (const p of face) {
      low = Math.min(low, p[axis]);
      high = Math.max(high, p[axis]);
    }
  }
  return [low, high];
}

function cutByRing(solid: Polyhedron, ring: readonly Vec2[], view: ViewOutline, slack: number): Polyhedron {
  let piece = solid;
  for (let i = 0; i < ring.length && piece.length > 0; i++) {
    const a = ring[i]!;
    const b = ring[(i + 1) % ring.length]!;
    const length = Math.hypot(b[0] - a[0], b[1] - a[1]);
    const n: [number, number, number] = [0, 0, 0];
    n[view.axes[0]] = (b[1] - a[1]) / length;
    n[view.axes[1]] = -(b[0] - a[0]) / length;
    piece = cutPolyhedron(piece, { n, d: n[view.axes[0]]! * a[0] + n[view.axes[1]]! * a[1] }, slack);
  }
  return piece;
}

function reach(outline: Outline, coordinate: 0 | 1): [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const p of outline) {
    low = Math.min(low, p[coordinate]);
    high = Math.max(high, p[coordinate]);
  }
  return [low, high];
}

/** What all outlines that show an axis leave of it. */
function reachAlong(views: readonly ViewOutline[], axis: 0 | 1 | 2): [number, number] {
  let low = -Infinity;
  let high = Infinity;
  for (const view of views) {
    const k = view.axes.indexOf(axis);
    if (k < 0) continue;
    const [from, to] = reach(view.outline, k as 0 | 1);
    low = Math.max(low, from);
    high = Math.min(high, to);
  }
  return [low, high];
}

function outlinePieces(solid: Extract<Solid, { type: "outlines" }>): Piece[] {
  const slack = 1e-9;
  return outlinePolyhedra(solid).map((polyhedron) => ({ points: cornersOf(polyhedron, slack), discs: [], radius: 0, form: "polytope" }));
}

/** Outlines that do not agree: shared extents that differ by more than 1 mm. Findings in words, none when they agree. */
export function outlineFindings(solid: Outlines): string[] {
  const views = viewOutlines(solid);
  const findings: string[] = [];
  const names = ["length (x)", "width (y)", "height (z)"];
  views.forEach((one, i) => views.slice(i + 1).forEach((other) => {
    for (const axis of [0, 1, 2] as const) {
      const a = one.axes.indexOf(axis);
      const b = other.axes.indexOf(axis);
      if (a < 0 || b < 0) continue;
      const [from, to] = reach(one.outline, a as 0 | 1);
      const [low, high] = reach(other.outline, b as 0 | 1);
      const off = Math.max(Math.abs(from - low), Math.abs(to - high));
      if (off > 1) findings.push(`${one.name} and ${other.name} disagree on the ${names[axis]} by ${off.toFixed(1)} mm: ${from} to ${to} against ${low} to ${high}`);
    }
  }));
  return findings;
}

/** Volume of two or three outlines' common solid, mm3; exact to rounding. @throws GeometryError as outlinePolyhedra, also where they have nothing in common */
export function outlineVolume(solid: Outlines): number {
  return outlinePolyhedra(solid).reduce((sum, s) => sum + volumeOf(s), 0);
}

function barPiece(solid: Extract<Solid, { type: "bar" }>): Piece {
  const d: Vec3 = [solid.to[0] - solid.from[0], solid.to[1] - solid.from[1], solid.to[2] - solid.from[2]];
  const length = Math.hypot(...d);
  if (!(length > 0)) throw new GeometryError("to", "a bar needs a length: from and to are the same place");
  if ((solid.diameter === undefined) === (solid.size === undefined)) throw new GeometryError("", "a bar has either a diameter or a size, exactly one of the two");
  const [u, v] = crossAxes([d[0] / length, d[1] / length, d[2] / length], solid.roll);
  const times = (p: Vec3, s: number): Vec3 => [p[0] * s, p[1] * s, p[2] * s];
  if (solid.diameter !== undefined) {
    const r = solid.diameter / 2;
    return { points: [], discs: [solid.from, solid.to].map((centre) => ({ centre, u: times(u, r), v: times(v, r) })), radius: 0, form: "cylinder" };
  }
  const [w, h] = solid.size!;
  const points = [solid.from, solid.to].flatMap((end) => [-1, 1].flatMap((i) => [-1, 1].map((j): Vec3 => [
    end[0] + (i * u[0] * w + j * v[0] * h) / 2, end[1] + (i * u[1] * w + j * v[1] * h) / 2, end[2] + (i * u[2] * w + j * v[2] * h) / 2,
  ])));
  return { points, discs: [], radius: 0, form: "box" };
}

/**
 * Two unit directions square to a bar: width level and height upward as far as the bar allows (a bar along z: width along y, height along
 * -x), then turned by `roll` degrees about the bar, right-handed from `from` to `to`.
 */
export function crossAxes(d: Vec3, roll: number): [Vec3, Vec3] {
  const cross = (a: Vec3, b: Vec3): [number, number, number] => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
  const unit = (a: Vec3): Vec3 => {
    const l = Math.hypot(a[0], a[1], a[2]);
    return [a[0] / l + 0, a[1] / l + 0, a[2] / l + 0];
  };
  // level width: z cross d; where the bar is upright: along y
  const level = Math.hypot(d[0], d[1]) < 1e-9 ? ([0, 1, 0] as Vec3) : unit(cross([0, 0, 1], d));
  const u = unit(level);
  const v = unit(cross(d, u));
  if (roll === 0) return [u, v];
  const [s, c] = [Math.sin((roll * Math.PI) / 180), Math.cos((roll * Math.PI) / 180)];
  const mix = (a: Vec3, x: number, b: Vec3, y: number): Vec3 => [a[0] * x + b[0] * y, a[1] * x + b[1] * y, a[2] * x + b[2] * y];
  return [mix(u, c, v, s), mix(v, c, u, -s)];
}

function sheetPieces(solid: Extract<Solid, { type: "sheet" }>): Piece[] {
  const columns = solid.rows[0]!.length;
  const uneven = solid.rows.findIndex((row) => row.length !== columns);
  if (uneven >= 0) throw new GeometryError(`rows[${uneven}]`, `every row needs as many points as the first: expected ${columns}, found ${solid.rows[uneven]!.length}`);
  const pieces: Piece[] = [];
  const triangle = (points: Vec3[]) => pieces.push({ points, discs: [], radius: solid.thickness / 2, form: "triangle" });
  for (let i = 0; i + 1 < solid.rows.length; i++) {
    for (let j = 0; j + 1 < columns; j++) {
      const [a, b, c, d] = [solid.rows[i]![j]!, solid.rows[i + 1]![j]!, solid.rows[i + 1]![j + 1]!, solid.rows[i]![j + 1]!];
      triangle([a, b, c]);
      triangle([a, c, d]);
    }
  }
  return pieces;
}

