import { PROJECTION, type Vec2 } from "../frames.ts";
import { distanceToSegment } from "./balloon-ring.ts";
import { depthInside, isInside } from "./covered-edges.ts";
import type { Look } from "./drawn-items.ts";
import type { Paper } from "./pen.ts";
import { onPaper, type ViewFrame } from "./view-lines.ts";

export interface Spot {
  readonly at: Paper;
  /** How far the thing's own outline is away, mm of paper (of the convex piece it lies in: no more than that). */
  readonly depth: number;
  /** Nothing nearer to the reader covers it. */
  readonly seen: boolean;
}

const GRID = 9;
const MOST_SPOTS = 40;

/** Places inside a thing that a number may stand on or point at: seen ones first, then the deepest. */
export function spotsOf(look: Look, all: readonly Look[], frame: ViewFrame): Spot[] {
  const places: Vec2[] = [];
  const { box } = look;
  for (const line of look.item.centreLines) {
    const { u, v } = PROJECTION[frame.view];
    line.slice(1).forEach((b, i) => {
      const a = line[i]!;
      for (const t of [0.25, 0.5, 0.75]) places.push([a[u] + (b[u] - a[u]) * t, a[v] + (b[v] - a[v]) * t]);
    });
  }
  for (const facet of look.facets) {
    const n = facet.points.length;
    places.push([facet.points.reduce((s, p) => s + p[0], 0) / n, facet.points.reduce((s, p) => s + p[1], 0) / n]);
  }
  if (look.item.centreLines.length === 0) {
    for (let i = 0; i < GRID; i++) for (let j = 0; j < GRID; j++) places.push([box.left + ((box.right - box.left) * (i + 0.5)) / GRID, box.low + ((box.high - box.low) * (j + 0.5)) / GRID]);
  }
  const nearer = all.filter((other) => other !== look && other.item.kind !== "glass" && other.item.kind !== "tyre" && other.box.left < box.right && other.box.right > box.left && other.box.low < box.high && other.box.high > box.low);
  const spots: Spot[] = [];
  for (const place of places) {
    let depth = -Infinity;
    let near = -Infinity;
    for (const facet of look.facets) {
      const own = facet.points.length < 3 ? 0 : depthInside(place, facet);
      if (own > depth) {
        depth = own;
        near = facet.near;
      }
    }
    if (depth < -1e-6) continue;
    const seen = !nearer.some((other) => place[0] > other.box.left && place[0] < other.box.right && place[1] > other.box.low && place[1] < other.box.high && other.facets.some((facet) => facet.near > near && isInside(place, facet)));
    spots.push({ at: onPaper(frame, place), depth: depth / frame.scale, seen });
  }
  spots.sort((a, b) => Number(b.seen) - Number(a.seen) || b.depth - a.depth);
  return spots.slice(0, MOST_SPOTS);
}

/** Every outline of a view as paper segments. */
export function linesOf(looks: readonly Look[], frame: ViewFrame): (readonly [Paper, Paper])[] {
  return looks.flatMap((look) => look.edges.map((edge) => [onPaper(frame, edge.from), onPaper(frame, edge.to)] as const));
}

/** How much drawn line a disc at a place would hide, in radii; segments are sorted into cells so that a question is quick. */
export function busyness(lines: readonly (readonly [Paper, Paper])[], radius: number): (at: Paper) => number {
  const cell = 4 * radius;
  const cells = new Map<string, number[]>();
  lines.forEach(([a, b], i) => {
    for (let x = Math.floor((Math.min(a[0], b[0]) - radius) / cell); x <= Math.floor((Math.max(a[0], b[0]) + radius) / cell); x++) {
      for (let y = Math.floor((Math.min(a[1], b[1]) - radius) / cell); y <= Math.floor((Math.max(a[1], b[1]) + radius) / cell); y++) {
        const key = `${x},${y}`;
        const list = cells.get(key);
        if (list) list.push(i);
        else cells.set(key, [i]);
      }
    }
  });
  return (at) => {
    let hidden = 0;
    for (const i of cells.get(`${Math.floor(at[0] / cell)},${Math.floor(at[1] / cell)}`) ?? []) {
      const [a, b] = lines[i]!;
      const distance = distanceToSegment(at, a, b);
      if (distance < radius) hidden += Math.min(Math.hypot(b[0] - a[0], b[1] - a[1]), 2 * Math.sqrt(radius * radius - distance * distance)) / radius;
    }
    return hidden;
  };
}
