import { distanceToSegment, matchPorts, portsBetween, type Matched, type RingPort } from "./balloon-ring.ts";
import { textWidth } from "./lettering.ts";
import { INK, PAPER_WHITE, PENCIL, type Hand } from "./paper.ts";
import type { Paper, Pen } from "./pen.ts";
import { stroke } from "./pen.ts";

/** A number that wants to stand on or beside the thing it names. */
export interface Tag {
  readonly text: string;
  readonly of: string;
  /** Discs name parts and runs, squares gaps. */
  readonly shape: "disc" | "square";
  readonly ink: string;
  /** Places it may point at, best first: paper coordinates, and how much of the thing is around, mm of paper. */
  readonly spots: readonly { readonly at: Paper; readonly depth: number }[];
  /** When there is no room for all, the weightier stay. */
  readonly weight: number;
}

/** One row (or two) of numbers along an edge of a view. */
export interface Ring {
  /** Paper y where the leaders end and the row's zone begins. */
  readonly edge: number;
  /** -1: the row stands above the edge, 1: below. */
  readonly out: -1 | 1;
  readonly rows: 1 | 2;
}

export interface TagPlan {
  readonly inside: readonly { readonly tag: Tag; readonly at: Paper }[];
  readonly outside: readonly { readonly tag: Tag; readonly matched: Matched; readonly ring: Ring }[];
  readonly missed: readonly Tag[];
}

/** Radius that holds two characters, mm of paper; longer labels get longer discs. */
export const balloonRadius = (hand: Hand): number => Math.max(textWidth("00", hand.letters.table) / 2 + 0.7, 0.9 * hand.letters.table);
const STUB = 1.2;
/** Height of a ring of so many rows with its leaders' stubs, mm of paper. */
export const ringHeight = (rows: 0 | 1 | 2, radius: number): number => (rows === 0 ? 0 : STUB + 2 * radius + (rows === 2 ? 2 * radius + 0.5 : 0));

/** Ports along a ring: two rows share them alternately, one row takes whole balloons. */
export function ringPorts(ring: Ring, low: number, high: number, radius: number, taken: readonly number[]): RingPort[] {
  if (ring.rows === 2) return portsBetween(low, high, radius, taken);
  const step = 2 * radius + 0.7;
  const count = Math.max(0, Math.floor((high - low) / step));
  return Array.from({ length: count + 1 }, (_, i): RingPort => ({ x: low + i * step, row: 0 })).filter((port) => taken.every((line) => Math.abs(line - port.x) >= radius + 0.4));
}

/**
 * Numbers inside what they name where it is large enough, the rest in rings around the view with leaders that cross neither each other nor any number.
 * @param lines vertical lines that pass through the view and its rings, paper x
 * @param busy how many drawn lines a disc at a place would hide
 */
export function planTags(tags: readonly Tag[], rings: readonly Ring[], low: number, high: number, lines: readonly number[], radius: number, busy: (at: Paper) => number): TagPlan {
  let inside = placeInside(tags, lines, radius, busy);
  for (;;) {
    const within = new Set(inside.map((one) => one.tag));
    const wanted = tags.filter((tag) => !within.has(tag));
    const { outside, missed } = placeOutside(wanted, rings, low, high, lines, radius);
    const struck = inside.find((one) => outside.some(({ matched, ring }) => distanceToSegment(one.at, [matched.site.x, matched.site.y], [matched.port.x, ring.edge]) < radius + 0.3));
    if (!struck) return { inside, outside, missed };
    inside = inside.filter((one) => one !== struck);
  }
}

function placeInside(tags: readonly Tag[], lines: readonly number[], radius: number, busy: (at: Paper) => number): { tag: Tag; at: Paper }[] {
  const placed: { tag: Tag; at: Paper }[] = [];
  const scarce = [...tags].filter((tag) => tag.shape === "disc").sort((a, b) => (a.spots[0]?.depth ?? 0) - (b.spots[0]?.depth ?? 0));
  for (const tag of scarce) {
    let best: { at: Paper; cost: number } | null = null;
    for (const { at, depth } of tag.spots) {
      if (depth < radius + 0.3) continue;
      if (lines.some((x) => Math.abs(x - at[0]) < radius + 0.3)) continue;
      if (placed.some((other) => Math.hypot(other.at[0] - at[0], other.at[1] - at[1]) < 2 * radius + 0.8)) continue;
      const cost = busy(at) - Math.min(2, (depth - radius) / radius);
      if (cost <= 2 && (!best || cost < best.cost)) best = { at, cost };
    }
    if (best) placed.push({ tag, at: best.at });
  }
  return placed;
}

function placeOutside(tags: readonly Tag[], rings: readonly Ring[], low: number, high: number, lines: readonly number[], radius: number): Pick<TagPlan, "outside" | "missed"> {
  const ports = rings.map((ring) => ringPorts(ring, low, high, radius, lines));
  const room = ports.map((p) => p.length);
  const pointed = tags.filter((tag) => tag.spots.length > 0);
  const missed = tags.filter((tag) => tag.spots.length === 0);
  const groups: Tag[][] = rings.map(() => []);
  // the weightiest first: each to the nearer ring that still has a port
  for (const tag of [...pointed].sort((a, b) => b.weight - a.weight)) {
    const y = tag.spots[0]!.at[1];
    const order = rings.map((_, i) => i).sort((a, b) => Math.abs(rings[a]!.edge - y) - Math.abs(rings[b]!.edge - y));
    const free = order.find((i) => groups[i]!.length < room[i]!);
    if (free === undefined) missed.push(tag);
    else groups[free]!.push(tag);
  }
  const outside = rings.flatMap((ring, i) => {
    const group = groups[i]!;
    return matchPorts(group.map((tag, id) => ({ id, x: tag.spots[0]!.at[0], y: tag.spots[0]!.at[1] })), ports[i]!, ring.edge).map((matched) => ({ tag: group[matched.site.id]!, matched, ring }));
  });
  return { outside, missed };
}

/** Centre of the balloon of a port. */
export function portCentre(port: RingPort, ring: Ring, radius: number): Paper {
  return [port.x, ring.edge + ring.out * (STUB + radius + (port.row === 1 ? 2 * radius + 0.5 : 0))];
}

/** Inks a plan's leaders, then the numbers over them. Paper. */
export function drawTags(pen: Pen, plan: TagPlan, radius: number, hand: Hand): void {
  const leader = stroke(hand.pens.hair, PENCIL);
  for (const { tag, matched, ring } of plan.outside) {
    const { site, port } = matched;
    const centre = portCentre(port, ring, radius);
    pen.polyline("balloons", [[site.x, site.y], [port.x, ring.edge], [port.x, centre[1] - ring.out * radius]], false, leader, null, tag.of);
    pen.arc("balloons", [site.x, site.y], 0.35, null, tag.shape === "disc" ? PENCIL : tag.ink, tag.of);
  }
  for (const { tag, at } of plan.inside) drawTag(pen, tag, at, radius, hand);
  for (const { tag, matched, ring } of plan.outside) drawTag(pen, tag, portCentre(matched.port, ring, radius), radius, hand);
}

function drawTag(pen: Pen, tag: Tag, at: Paper, radius: number, hand: Hand): void {
  const line = stroke(hand.pens.thin, tag.ink);
  if (tag.shape === "disc") pen.arc("balloons", at, radius, line, PAPER_WHITE, tag.of);
  else pen.polyline("balloons", [[at[0] - radius, at[1] - radius], [at[0] + radius, at[1] - radius], [at[0] + radius, at[1] + radius], [at[0] - radius, at[1] + radius]], true, line, PAPER_WHITE, tag.of);
  const half = 0.3 * [...tag.text].length;
  // the text's corners stay inside the line
  const size = Math.min(hand.letters.table, tag.shape === "disc" ? (radius - 0.25) / Math.hypot(half, 0.59) : (radius - 0.3) / half);
  pen.text("balloons", [at[0], at[1] + 0.365 * size], tag.text, size, { align: "centre", ink: tag.shape === "disc" ? INK : tag.ink, of: tag.of });
}
