import type { Vec2 } from "../frames.ts";

/** A closed loop of a drawing, mm at full size, the first point not repeated: outer ones anticlockwise, holes clockwise. */
export type Loop = readonly Vec2[];

/** Grid steps that fit either side of the middle (half of them are used): differences fit 26 bits, products 52, so turns are exact. */
const HALF_STEPS = 2 ** 25;
const MOST_ROUNDS = 30;

/** The plane cut up by edges: grid points, and edges from the lesser to the greater end (by x, then y) with what they add on their left. */
interface Arrangement {
  readonly x: number[];
  readonly y: number[];
  readonly given: (Vec2 | null)[];
  readonly byPlace: Map<number, number>;
}

interface Edge {
  /** Lesser end, greater end. */
  readonly a: number;
  readonly b: number;
  /** Added to the count of areas on passing to its left. */
  adds: number;
  fresh: boolean;
}

/**
 * Union of areas bounded by loops, which may overlap.
 *
 * Method: corners are moved to a fine grid (2^-25 to 2^-24 of the extent: 0.03 micrometres on a metre), where the turn of three points is exact in doubles.
 * Edges are cut where they meet until none cross any more; a sweep then counts how often each side of each edge is covered, and the edges that are
 * covered on one side only are walked into loops. The counts fit each other exactly, so every loop closes: touching, overlapping and
 * repeated edges need no special case.
 * Accuracy: given corners come back as they were given; crossings are good to the grid. Nearly-linear for outlines of parts: 100 overlapping
 * rectangles take about 2 ms.
 */
export function uniteLoops(loops: readonly Loop[]): Loop[] {
  let [left, right, low, high] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const loop of loops) {
    for (const [u, v] of loop) {
      if (u < left) left = u;
      if (u > right) right = u;
      if (v < low) low = v;
      if (v > high) high = v;
    }
  }
  const half = Math.max(right - left, high - low) / 2;
  if (!(half > 0) || !Number.isFinite(half)) return [];
  const unit = 2 ** (Math.ceil(Math.log2(half)) - 24);
  const [cu, cv] = [Math.round((left + right) / 2 / unit) * unit, Math.round((low + high) / 2 / unit) * unit];

  const plane: Arrangement = { x: [], y: [], given: [], byPlace: new Map() };
  let edges: Edge[] = [];
  for (const loop of loops) {
    const ids = loop.map((p) => placeOf(plane, Math.round((p[0] - cu) / unit), Math.round((p[1] - cv) / unit), p));
    ids.forEach((from, i) => addEdge(plane, edges, from, ids[(i + 1) % ids.length]!, 1));
  }
  edges = merged(plane, edges);
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const cuts = findCuts(plane, edges);
    if (cuts.size === 0) break;
    edges = merged(plane, cutEdges(plane, edges, cuts));
  }
  const border = borderOf(plane, edges);
  return walk(plane, border).map((ids) => ids.map((id): Vec2 => plane.given[id] ?? [cu + plane.x[id]! * unit, cv + plane.y[id]! * unit]));
}

function placeOf(plane: Arrangement, x: number, y: number, given: Vec2 | null): number {
  const key = (x + HALF_STEPS) * (2 * HALF_STEPS + 1) + (y + HALF_STEPS);
  const known = plane.byPlace.get(key);
  if (known !== undefined) return known;
  const id = plane.x.length;
  plane.x.push(x);
  plane.y.push(y);
  plane.given.push(given);
  plane.byPlace.set(key, id);
  return id;
}

const isBefore = (plane: Arrangement, a: number, b: number) => plane.x[a]! < plane.x[b]! || (plane.x[a] === plane.x[b] && plane.y[a]! < plane.y[b]!);

/** Adds an edge that runs from `from` to `to` with its area on the left. */
function addEdge(plane: Arrangement, edges: Edge[], from: number, to: number, adds: number): void {
  if (from === to) return;
  if (isBefore(plane, from, to)) edges.push({ a: from, b: to, adds, fresh: true });
  else edges.push({ a: to, b: from, adds: -adds, fresh: true });
}

/** Edges on one another become one; those that cancel out go. In order of their lesser ends. */
function merged(plane: Arrangement, edges: readonly Edge[]): Edge[] {
  const byEnds = new Map<number, Edge>();
  const count = plane.x.length;
  for (const edge of edges) {
    const key = edge.a * count + edge.b;
    const known = byEnds.get(key);
    if (known) {
      known.adds += edge.adds;
      known.fresh ||= edge.fresh;
    } else byEnds.set(key, { ...edge });
  }
  return [...byEnds.values()].filter((edge) => edge.adds !== 0).sort((e, f) => plane.x[e.a]! - plane.x[f.a]!);
}

/** Twice the area of a, b, p in grid steps: exact. Positive where p lies left of a -> b. */
function sideOf(plane: Arrangement, a: number, b: number, p: number): number {
  const { x, y } = plane;
  return (x[b]! - x[a]!) * (y[p]! - y[a]!) - (y[b]! - y[a]!) * (x[p]! - x[a]!);
}

/** Where edges must be cut: at crossings (moved to the grid) and at points that lie on them. Only pairs with a fresh edge are looked at. */
function findCuts(plane: Arrangement, edges: readonly Edge[]): Map<Edge, number[]> {
  const { x, y } = plane;
  const cuts = new Map<Edge, number[]>();
  const cut = (edge: Edge, at: number) => {
    if (at === edge.a || at === edge.b) return;
    const known = cuts.get(edge);
    if (known) known.push(at);
    else cuts.set(edge, [at]);
  };
  const onIt = (edge: Edge, p: number) => {
    if (p === edge.a || p === edge.b || x[p]! < x[edge.a]! || x[p]! > x[edge.b]!) return;
    const [low, high] = y[edge.a]! < y[edge.b]! ? [y[edge.a]!, y[edge.b]!] : [y[edge.b]!, y[edge.a]!];
    if (y[p]! >= low && y[p]! <= high) cut(edge, p);
  };
  const open: Edge[] = [];
  for (const edge of edges) {
    const from = x[edge.a]!;
    const [low, high] = y[edge.a]! < y[edge.b]! ? [y[edge.a]!, y[edge.b]!] : [y[edge.b]!, y[edge.a]!];
    let kept = 0;
    for (const other of open) {
      if (x[other.b]! < from) continue;
      open[kept++] = other;
      if (!edge.fresh && !other.fresh) continue;
      const [oa, ob] = [y[other.a]!, y[other.b]!];
      if ((oa < low && ob < low) || (oa > high && ob > high)) continue;
      const a = sideOf(plane, other.a, other.b, edge.a);
      const b = sideOf(plane, other.a, other.b, edge.b);
      if ((a > 0 && b > 0) || (a < 0 && b < 0)) continue;
      const c = sideOf(plane, edge.a, edge.b, other.a);
      const d = sideOf(plane, edge.a, edge.b, other.b);
      if ((c > 0 && d > 0) || (c < 0 && d < 0)) continue;
      if (a !== 0 && b !== 0 && c !== 0 && d !== 0) {
        const t = c / (c - d);
        const at = placeOf(plane, Math.round(x[other.a]! + t * (x[other.b]! - x[other.a]!)), Math.round(oa + t * (ob - oa)), null);
        cut(edge, at);
        cut(other, at);
        continue;
      }
      if (a === 0) onIt(other, edge.a);
      if (b === 0) onIt(other, edge.b);
      if (c === 0) onIt(edge, other.a);
      if (d === 0) onIt(edge, other.b);
    }
    open.length = kept;
    open.push(edge);
  }
  return cuts;
}

function cutEdges(plane: Arrangement, edges: readonly Edge[], cuts: ReadonlyMap<Edge, number[]>): Edge[] {
  const { x, y } = plane;
  const out: Edge[] = [];
  for (const edge of edges) {
    const at = cuts.get(edge);
    if (!at) {
      edge.fresh = false;
      out.push(edge);
      continue;
    }
    const [dx, dy] = [x[edge.b]! - x[edge.a]!, y[edge.b]! - y[edge.a]!];
    const along = (p: number) => (x[p]! - x[edge.a]!) * dx + (y[p]! - y[edge.a]!) * dy;
    const stops = [edge.a, ...at.sort((p, q) => along(p) - along(q)), edge.b];
    for (let i = 0; i + 1 < stops.length; i++) addEdge(plane, out, stops[i]!, stops[i + 1]!, edge.adds);
  }
  return out;
}

/** Directed edges with what is kept on their left only: a sweep in x with the edges it crosses, lowest first. */
function borderOf(plane: Arrangement, edges: readonly Edge[]): Map<number, number[]> {
  const starts = new Map<number, Edge[]>();
  const used = new Set<number>();
  for (const edge of edges) {
    const list = starts.get(edge.a);
    if (list) list.push(edge);
    else starts.set(edge.a, [edge]);
    used.add(edge.a).add(edge.b);
  }
  const order = [...used].sort((p, q) => plane.x[p]! - plane.x[q]! || plane.y[p]! - plane.y[q]!);
  /** Edges under the sweep and how often it is covered above each. */
  const status: { edge: Edge; count: number }[] = [];
  const border = new Map<number, number[]>();
  const go = (from: number, to: number) => {
    const list = border.get(from);
    if (list) list.push(to);
    else border.set(from, [to]);
  };
  for (const at of order) {
    let [from, to] = [0, status.length];
    while (from < to) {
      const middle = (from + to) >> 1;
      if (sideOf(plane, status[middle]!.edge.a, status[middle]!.edge.b, at) > 0) from = middle + 1;
      else to = middle;
    }
    let ended = 0;
    while (from + ended < status.length && status[from + ended]!.edge.b === at) ended++;
    let count = status[from - 1]?.count ?? 0;
    const begin = (starts.get(at) ?? []).sort((e, f) => -sideOf(plane, at, e.b, f.b));
    const added = begin.map((edge) => {
      const below = count > 0;
      count += edge.adds;
      const above = count > 0;
      if (above && !below) go(edge.a, edge.b);
      else if (below && !above) go(edge.b, edge.a);
      return { edge, count };
    });
    if (ended > 0 || added.length > 0) status.splice(from, ended, ...added);
  }
  return border;
}

/** Loops from directed edges, kept area on the left; where loops touch they part. Corners that only cutting made, and straight ones, are left out. */
function walk(plane: Arrangement, border: Map<number, number[]>): number[][] {
  const { x, y } = plane;
  const loops: number[][] = [];
  for (const [start, list] of border) {
    while (list.length > 0) {
      const loop = [start];
      let from = start;
      let at = list.pop()!;
      while (at !== start) {
        loop.push(at);
        const onward = border.get(at)!;
        let choice = onward.length - 1;
        if (onward.length > 1) {
          // first clockwise from where we came
          const back = Math.atan2(y[from]! - y[at]!, x[from]! - x[at]!);
          let least = Infinity;
          onward.forEach((to, i) => {
            let turn = back - Math.atan2(y[to]! - y[at]!, x[to]! - x[at]!);
            if (turn <= 0) turn += 2 * Math.PI;
            if (turn < least) {
              least = turn;
              choice = i;
            }
          });
        }
        const to = onward[choice]!;
        onward.splice(choice, 1);
        from = at;
        at = to;
      }
      const clean = withoutStraight(plane, loop);
      if (clean.length >= 3) loops.push(clean);
    }
  }
  return loops;
}

function withoutStraight(plane: Arrangement, loop: readonly number[]): number[] {
  const { x, y, given } = plane;
  const straight = (a: number, p: number, b: number) => {
    const area = Math.abs(sideOf(plane, a, b, p));
    if (area === 0) return true;
    // a cut moved its edge by up to a step
    return given[p] === null && area <= 2 * Math.hypot(x[b]! - x[a]!, y[b]! - y[a]!);
  };
  const kept: number[] = [];
  loop.forEach((p, i) => {
    const a = kept[kept.length - 1] ?? loop[loop.length - 1]!;
    if (!straight(a, p, loop[(i + 1) % loop.length]!)) kept.push(p);
  });
  while (kept.length >= 3 && straight(kept[kept.length - 1]!, kept[0]!, kept[1]!)) kept.shift();
  return kept;
}
