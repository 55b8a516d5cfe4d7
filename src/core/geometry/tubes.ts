import type { Vec3 } from "../frames.ts";
import type { Disc, Piece } from "./piece.ts";
import { crossAxes } from "./solids.ts";

/**
 * Pipes, hoses and looms: the path along nodes with its bends, and the convex pieces of the tube around it.
 * An arc is cut into chords that stay within 0.02 mm of it, as far inside as outside; neighbouring chords meet in mitre planes, so the
 * tube has no gaps and no steps.
 */
export const CHORD_ERROR = 0.02;

export interface TubeInput {
  readonly diameter: number;
  readonly bendRadius: number;
  readonly nodes: readonly { readonly key: string; readonly at: Vec3; readonly bend?: number | undefined }[];
  readonly legs: readonly { readonly from: string; readonly to: string; readonly diameter?: number | undefined; readonly flex?: boolean }[];
}

export interface TubeLeg {
  readonly from: string;
  readonly to: string;
  readonly diameter: number;
  readonly flex: boolean;
  /** Straight distance between its nodes, mm. */
  readonly span: number;
  /** Developed length, mm: half of the arc at either end and the straight between. */
  readonly length: number;
  readonly straight: number;
  readonly direction: Vec3;
}

export interface TubeBend {
  readonly node: string;
  /** Turn of the path, degrees. */
  readonly angle: number;
  /** To the centre line, mm: as asked, or less where tangents do not fit; 0 is a mitre. */
  readonly radius: number;
  readonly asked: number;
  /** Numbers of the legs before and after. */
  readonly legs: readonly [number, number];
  /** Tangent length, mm. */
  readonly tangent: number;
}

export interface TubeFinding {
  readonly code: "bend-does-not-fit" | "reversal" | "bend-too-tight" | "no-length";
  readonly node: string;
  readonly message: string;
  /** With bend-does-not-fit: the largest radius that does. */
  readonly largest?: number;
}

export interface TubePath {
  readonly legs: readonly TubeLeg[];
  readonly bends: readonly TubeBend[];
  readonly findings: readonly TubeFinding[];
  /** Developed length of all legs, mm. */
  readonly length: number;
  readonly nodes: ReadonlyMap<string, { readonly at: Vec3; readonly legs: readonly number[] }>;
}

const sub = (a: Vec3, b: Vec3): Vec3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: Vec3, b: Vec3) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const move = (a: Vec3, d: Vec3, s: number): Vec3 => [a[0] + d[0] * s, a[1] + d[1] * s, a[2] + d[2] * s];
const unit = (a: Vec3): Vec3 => {
  const l = Math.hypot(a[0], a[1], a[2]);
  return l > 0 ? [a[0] / l, a[1] / l, a[2] / l] : [0, 0, 0];
};

/** Legs in order; the chain of the nodes where none are given. */
export function legsOf(input: TubeInput): readonly { readonly from: string; readonly to: string; readonly diameter?: number | undefined; readonly flex?: boolean }[] {
  if (input.legs.length > 0) return input.legs;
  return input.nodes.slice(1).map((node, i) => ({ from: input.nodes[i]!.key, to: node.key }));
}

/**
 * The path of a run: straights, bends and developed lengths, mm and degrees. Where the tangents of two bends do not fit a leg they are scaled by one
 * factor and each node takes the smaller of its two, radius = t / tan(theta / 2); a finding names the largest radius.
 * Expects legs that name existing nodes and form a tree (the document's invariants). Lengths exact to rounding.
 * @example one 90 degree bend of radius 95.25 between legs of 300 and 400: 659.12 (facts.md section 6)
 */
export function tubePath(input: TubeInput): TubePath {
  const places = new Map(input.nodes.map((node) => [node.key, node]));
  const ends = legsOf(input);
  const findings: TubeFinding[] = [];
  const spans = ends.map((leg) => sub(places.get(leg.to)!.at, places.get(leg.from)!.at));
  const lengths = spans.map((s) => Math.hypot(s[0], s[1], s[2]));
  const directions = spans.map(unit);
  const nodes = new Map<string, { at: Vec3; legs: number[] }>(input.nodes.map((node) => [node.key, { at: node.at, legs: [] }]));
  ends.forEach((leg, i) => {
    nodes.get(leg.from)!.legs.push(i);
    nodes.get(leg.to)!.legs.push(i);
    if (!(lengths[i]! > 0)) findings.push({ code: "no-length", node: leg.to, message: `${leg.from} and ${leg.to} are at the same place` });
  });

  interface Corner { node: string; legs: [number, number]; angleRad: number; asked: number; tangent: number }
  const corners: Corner[] = [];
  const tangentAt = new Map<number, [number, number]>(ends.map((_, i) => [i, [0, 0]]));
  for (const [key, node] of nodes) {
    if (node.legs.length !== 2) continue;
    // travel in along the first leg of the list, out along the second
    const [i, j] = node.legs as [number, number];
    if (!(lengths[i]! > 0) || !(lengths[j]! > 0)) continue;
    const into = ends[i]!.to === key ? directions[i]! : scale(directions[i]!, -1);
    const out = ends[j]!.from === key ? directions[j]! : scale(directions[j]!, -1);
    const angleRad = angleBetween(into, out);
    if (angleRad < 1e-9) continue;
    if (angleRad > Math.PI - 1e-6) {
      findings.push({ code: "reversal", node: key, message: `the path turns straight back at ${key}` });
      continue;
    }
    const asked = places.get(key)!.bend ?? input.bendRadius;
    corners.push({ node: key, legs: [i, j], angleRad, asked, tangent: asked * Math.tan(angleRad / 2) });
  }
  const endOf = (leg: number, node: string): 0 | 1 => (ends[leg]!.from === node ? 0 : 1);
  for (const corner of corners) for (const leg of corner.legs) tangentAt.get(leg)![endOf(leg, corner.node)] = corner.tangent;
  const factor = ends.map((_, i) => {
    const [a, b] = tangentAt.get(i)!;
    return a + b > lengths[i]! ? lengths[i]! / (a + b) : 1;
  });
  const bends: TubeBend[] = corners.map((corner) => {
    const fits = Math.min(factor[corner.legs[0]]!, factor[corner.legs[1]]!);
    const tangent = corner.tangent * fits;
    const radius = fits === 1 ? corner.asked : tangent / Math.tan(corner.angleRad / 2);
    const diameter = Math.max(...corner.legs.map((leg) => ends[leg]!.diameter ?? input.diameter));
    if (fits < 1) {
      findings.push({ code: "bend-does-not-fit", node: corner.node, largest: radius, message: `a bend of radius ${corner.asked} does not fit at ${corner.node}: at most ${radius.toFixed(1)}` });
    }
    if (radius > 0 && radius < diameter / 2) {
      findings.push({ code: "bend-too-tight", node: corner.node, message: `radius ${radius.toFixed(1)} at ${corner.node} is under half the diameter of ${diameter}` });
    }
    return { node: corner.node, legs: corner.legs, angle: (corner.angleRad * 180) / Math.PI, radius, asked: corner.asked, tangent };
  });
  const cut = ends.map(() => [0, 0] as [number, number]);
  const arc = ends.map(() => [0, 0] as [number, number]);
  for (const bend of bends) {
    for (const leg of bend.legs) {
      cut[leg]![endOf(leg, bend.node)] = bend.tangent;
      arc[leg]![endOf(leg, bend.node)] = (bend.radius * bend.angle * Math.PI) / 360;
    }
  }
  const legs: TubeLeg[] = ends.map((leg, i) => {
    const straight = Math.max(0, lengths[i]! - cut[i]![0] - cut[i]![1]);
    return {
      from: leg.from, to: leg.to, diameter: leg.diameter ?? input.diameter, flex: leg.flex ?? false, span: lengths[i]!, straight,
      length: straight + arc[i]![0] + arc[i]![1], direction: directions[i]!,
    };
  });
  return { legs, bends, findings, nodes, length: legs.reduce((sum, leg) => sum + leg.length, 0) };
}

function scale(a: Vec3, s: number): Vec3 {
  return [a[0] * s, a[1] * s, a[2] * s];
}

/** Exact near 0 and pi, unlike acos of the dot product. */
function angleBetween(a: Vec3, b: Vec3): number {
  const cross: Vec3 = [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
  return Math.atan2(Math.hypot(cross[0], cross[1], cross[2]), dot(a, b));
}

/** One convex piece of a tube and where it lies along its leg. */
export interface TubePiece {
  readonly piece: Piece;
  /** Number of the leg; -1 for the ball at a branch. */
  readonly leg: number;
  /** Nodes at the leg's ends (twice the same for a branch ball). */
  readonly nodes: readonly [string, string];
  /** Stretch of the leg's developed length, mm from its `from` node. */
  readonly from: number;
  readonly to: number;
  /** Centre line, for drawing and for cutting. */
  readonly line: readonly [Vec3, Vec3];
  /** With a chord of a bend: which way the arc itself runs at either end, so that it is cut square to the arc. */
  readonly tangents?: readonly [Vec3, Vec3];
}

/** One vertex of a leg's chord line: place, normal of the plane the tube is cut by there, and place along the leg. */
interface Station {
  readonly at: Vec3;
  readonly normal: Vec3;
  readonly along: number;
  /** Within a bend: the way the arc runs there, in the leg's direction of travel. */
  readonly tangent?: Vec3;
}

/**
 * The tube around a path as convex pieces: straight and mitred cylinders, and a ball at nodes of three or more legs.
 * Surface error: the centre line within `chordError` (mm; 0.02 for gaps, more for pictures and litres) of the true arcs; straight parts exact.
 */
export function tubePieces(path: TubePath, chordError = CHORD_ERROR): TubePiece[] {
  const stations: Station[][] = path.legs.map(() => []);
  const straights: number[] = path.legs.map(() => 0);
  const startCaps = path.legs.map(() => null as Station[] | null);
  const endCaps = path.legs.map(() => null as Station[] | null);
  for (const bend of path.bends) {
    const [first, second] = bendStations(path, bend, chordError);
    const [i, j] = bend.legs;
    (path.legs[i]!.to === bend.node ? endCaps : startCaps)[i] = first;
    (path.legs[j]!.from === bend.node ? startCaps : endCaps)[j] = second;
  }
  path.legs.forEach((leg, i) => {
    const from = path.nodes.get(leg.from)!.at;
    const to = path.nodes.get(leg.to)!.at;
    const start = startCaps[i] ?? [{ at: from, normal: leg.direction, along: 0 }];
    const end = endCaps[i] ?? [{ at: to, normal: leg.direction, along: leg.length }];
    stations[i] = [...start, ...end];
    straights[i] = start.length - 1;
  });
  const out: TubePiece[] = [];
  path.legs.forEach((leg, i) => {
    if (!(leg.span > 0)) return;
    const list = stations[i]!;
    for (let k = 0; k + 1 < list.length; k++) {
      const a = list[k]!;
      const b = list[k + 1]!;
      if (Math.hypot(b.at[0] - a.at[0], b.at[1] - a.at[1], b.at[2] - a.at[2]) < 1e-9) continue;
      const tangents = k !== straights[i] && a.tangent && b.tangent ? { tangents: [a.tangent, b.tangent] as const } : {};
      out.push({ piece: mitredTube(a, b, leg.diameter / 2), leg: i, nodes: [leg.from, leg.to], from: a.along, to: b.along, line: [a.at, b.at], ...tangents });
    }
  });
  for (const [key, node] of path.nodes) {
    if (node.legs.length < 3) continue;
    const radius = Math.max(...node.legs.map((leg) => path.legs[leg]!.diameter)) / 2;
    out.push({ piece: { points: [node.at], discs: [], radius, form: "ball" }, leg: -1, nodes: [key, key], from: 0, to: 0, line: [node.at, node.at] });
  }
  return out;
}

/**
 * Chord vertices of a bend, split at its middle between the two legs, each list in its own leg's direction of travel.
 * Vertices lie on a circle 0.02 mm outside the arc, chords touch one no more than 0.02 mm inside; the first and last vertices lie on the
 * straights' own lines, so straights stay exact.
 */
function bendStations(path: TubePath, bend: TubeBend, chordError: number): [Station[], Station[]] {
  const [i, j] = bend.legs;
  const node = path.nodes.get(bend.node)!.at;
  const forwardIn = path.legs[i]!.to === bend.node;
  const forwardOut = path.legs[j]!.from === bend.node;
  const into = forwardIn ? path.legs[i]!.direction : scale(path.legs[i]!.direction, -1);
  const out = forwardOut ? path.legs[j]!.direction : scale(path.legs[j]!.direction, -1);
  const angle = (bend.angle * Math.PI) / 180;
  const r = bend.radius;
  const placeIn = (fromMiddle: number) => (forwardIn ? path.legs[i]!.length - fromMiddle : fromMiddle);
  const placeOut = (fromMiddle: number) => (forwardOut ? fromMiddle : path.legs[j]!.length - fromMiddle);
  const middleNormal = unit([into[0] + out[0], into[1] + out[1], into[2] + out[2]]);

  const vertices: { at: Vec3; normal: Vec3; angle: number; tangent?: Vec3 }[] = [];
  const lead = r > 0 ? Math.acos(r / (r + chordError)) : Infinity;
  if (2 * lead >= angle) {
    vertices.push({ at: node, normal: middleNormal, angle: angle / 2 });
  } else {
    const widest = 2 * Math.acos((r - Math.min(chordError, r / 2)) / (r + chordError));
    let chords = Math.max(1, Math.ceil((angle - 2 * lead) / widest));
    if (chords % 2 === 1) chords++;
    const tangentPoint = move(node, into, -bend.tangent);
    // unit from the tangent point to the centre of the arc: square to `into`, toward `out`
    const inward = unit([out[0] - into[0] * dot(into, out), out[1] - into[1] * dot(into, out), out[2] - into[2] * dot(into, out)]);
    const centre = move(tangentPoint, inward, r);
    const ring = r + chordError;
    for (let k = 0; k <= chords; k++) {
      const a = lead + ((angle - 2 * lead) * k) / chords;
      const [s, c] = [Math.sin(a), Math.cos(a)];
      const tangent: Vec3 = [c * into[0] + s * inward[0], c * into[1] + s * inward[1], c * into[2] + s * inward[2]];
      const onRing = (m: 0 | 1 | 2): number => centre[m] + ring * (s * into[m] - c * inward[m]);
      vertices.push({ at: [onRing(0), onRing(1), onRing(2)], normal: tangent, tangent, angle: a });
    }
    // the first and last chords meet the straights at an angle of their own: their mitre planes bisect it
    const bisect = (k: number, before: Vec3, after: Vec3) => {
      vertices[k] = { ...vertices[k]!, normal: unit([before[0] + after[0], before[1] + after[1], before[2] + after[2]]) };
    };
    bisect(0, into, unit(sub(vertices[1]!.at, vertices[0]!.at)));
    bisect(chords, unit(sub(vertices[chords]!.at, vertices[chords - 1]!.at)), out);
  }
  const middle = angle / 2;
  // the first vertex lies on the straight, tan(lead) beyond the tangent point: its place along is the straight's own
  const place = (v: { angle: number }, index: number) =>
    vertices.length > 1 && (index === 0 || index === vertices.length - 1) ? r * (middle - Math.tan(lead)) : r * Math.abs(middle - v.angle);
  const placed = vertices.map((v, index) => ({ ...v, fromMiddle: place(v, index) }));
  const station = (v: (typeof placed)[number], along: number): Station => ({ at: v.at, normal: v.normal, along, ...(v.tangent ? { tangent: v.tangent } : {}) });
  const first = placed.filter((v) => v.angle <= middle + 1e-12).map((v) => station(v, placeIn(v.fromMiddle)));
  const second = placed.filter((v) => v.angle >= middle - 1e-12).map((v) => station(v, placeOut(v.fromMiddle)));
  if (!forwardIn) first.reverse();
  if (!forwardOut) second.reverse();
  return [first, second];
}

/** A cylinder between two stations, its ends cut by their planes. */
function mitredTube(a: Station, b: Station, radius: number): Piece {
  const d = unit(sub(b.at, a.at));
  const [u, v] = crossAxes(d, 0);
  const end = (station: Station): Disc => ({ centre: station.at, u: onPlane(scale(u, radius), d, station.normal), v: onPlane(scale(v, radius), d, station.normal) });
  const square = (station: Station) => Math.abs(Math.abs(dot(d, station.normal)) - 1) < 1e-14;
  return { points: [], discs: [end(a), end(b)], radius: 0, form: square(a) && square(b) ? "cylinder" : "tube" };
}

/** Slides a radius along the tube onto a plane through the centre: w + d s with (w + d s) . n = 0. */
function onPlane(w: Vec3, d: Vec3, n: Vec3): Vec3 {
  const across = dot(d, n);
  if (Math.abs(Math.abs(across) - 1) < 1e-14) return w;
  return move(w, d, -dot(w, n) / across);
}

/**
 * Leaves stretches of a path out: pieces that lie wholly inside go, pieces that reach in are cut square. What a clip or a bound end exempts.
 * @param away for each leg, stretches [from, to] of its developed length, mm; a branch ball goes where `balls` names its node
 */
export function cutTube(pieces: readonly TubePiece[], away: readonly { readonly leg: number; readonly from: number; readonly to: number }[], balls: ReadonlySet<string>): TubePiece[] {
  const out: TubePiece[] = [];
  for (const tube of pieces) {
    if (tube.leg < 0) {
      if (!balls.has(tube.nodes[0])) out.push(tube);
      continue;
    }
    let kept: [number, number][] = [[Math.min(tube.from, tube.to), Math.max(tube.from, tube.to)]];
    for (const cut of away) {
      if (cut.leg !== tube.leg) continue;
      kept = kept.flatMap(([low, high]): [number, number][] => [[low, Math.min(high, cut.from)], [Math.max(low, cut.to), high]]).filter(([low, high]) => high - low > 1e-9);
    }
    for (const [low, high] of kept) out.push(low <= tube.from && high >= tube.to ? tube : shortened(tube, low, high));
  }
  return out;
}

function shortened(tube: TubePiece, low: number, high: number): TubePiece {
  const whole = tube.to - tube.from;
  const at = (along: number) => move(tube.line[0], sub(tube.line[1], tube.line[0]), (along - tube.from) / whole);
  const [a, b] = [at(low), at(high)];
  const [d0, d1] = tube.piece.discs as [Disc, Disc];
  const direction = unit(sub(tube.line[1], tube.line[0]));
  // square to the path: to the chord on a straight, to the arc within a bend
  const squareOf = (disc: Disc, centre: Vec3, along: number): Disc => {
    const square = { centre, u: onSquare(disc.u, direction), v: onSquare(disc.v, direction) };
    if (!tube.tangents) return square;
    const share = (along - tube.from) / whole;
    const [t0, t1] = tube.tangents;
    const normal = unit([t0[0] + (t1[0] - t0[0]) * share, t0[1] + (t1[1] - t0[1]) * share, t0[2] + (t1[2] - t0[2]) * share]);
    return { centre, u: onPlane(square.u, direction, normal), v: onPlane(square.v, direction, normal) };
  };
  const start = low <= tube.from + 1e-9 ? d0 : squareOf(d0, a, low);
  const end = high >= tube.to - 1e-9 ? d1 : squareOf(d1, b, high);
  return { ...tube, from: low, to: high, line: [a, b], piece: { ...tube.piece, discs: [start, end], form: "tube" } };
}

/** The radius of a mitred end without its share along the tube. */
function onSquare(w: Vec3, d: Vec3): Vec3 {
  return move(w, d, -dot(w, d));
}
