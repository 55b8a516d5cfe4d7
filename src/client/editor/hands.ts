import { AXES, DIRECTION_WORDS, PROJECTION, type Vec3, type View } from "#core/frames.ts";
import type { Command, ListName } from "#core/layout/commands.ts";
import type { Layout } from "#core/layout/schema.ts";
import { formatLengthWithUnit } from "#core/units/format-length.ts";
import { parseLength, type LengthUnit } from "#core/units/parse-length.ts";
import { shapesOf } from "./shapes.ts";

/** Moves in the hand of the trade: a number, then an arrow. Pure: all of it is tested without a canvas. */

export function listOf(layout: Layout, key: string): ListName | null {
  for (const list of ["parts", "runs", "shafts", "spaces", "glass", "eyes"] as const) if (layout[list].some((item) => item.key === key)) return list;
  return null;
}

/** Items of a selection that have a place to move, with their lists; locked ones left out. */
export function movable(layout: Layout, keys: readonly string[]): { list: ListName; key: string }[] {
  return keys.flatMap((key) => {
    const list = listOf(layout, key);
    const item = list && (layout[list] as readonly { key: string; locked?: boolean }[]).find((one) => one.key === key);
    return list && item && !item.locked ? [{ list, key }] : [];
  });
}

export type Arrow = "ArrowLeft" | "ArrowRight" | "ArrowUp" | "ArrowDown" | "PageUp" | "PageDown";

/** The car direction of a key in a view: arrows along the paper, Page Up and Down toward and away from the reader. */
export function directionOf(view: View, key: Arrow): Vec3 {
  const { u, v, depth, toward } = PROJECTION[view];
  const unit = (axis: 0 | 1 | 2, sign: number): Vec3 => [0, 1, 2].map((k) => (k === axis ? sign : 0)) as unknown as Vec3;
  switch (key) {
    case "ArrowLeft": return unit(u, -1);
    case "ArrowRight": return unit(u, 1);
    case "ArrowUp": return unit(v, 1);
    case "ArrowDown": return unit(v, -1);
    case "PageUp": return unit(depth, toward);
    case "PageDown": return unit(depth, -toward);
  }
}

/** "rear", "left", "up" … of a unit direction. */
export function wordOf(direction: Vec3): string {
  const axis = direction.findIndex((value) => value !== 0) as 0 | 1 | 2;
  return DIRECTION_WORDS[AXES[axis]!][direction[axis]! < 0 ? 0 : 1];
}

/** A displacement in the person's units: "rear 12.0 mm, up 4.0 mm". */
export function moveWords(by: Vec3, units: LengthUnit): string {
  const words = AXES.flatMap((axis, i) => (Math.abs(by[i]!) < 0.01 ? [] : [`${DIRECTION_WORDS[axis][by[i]! < 0 ? 0 : 1]} ${formatLengthWithUnit(Math.abs(by[i]!), units)}`]));
  return words.length > 0 ? words.join(", ") : "where it was";
}

/** How far a key moves: what is typed, or one tape step. Null where what is typed is no length. */
export function distanceOf(typed: string, unit: LengthUnit, step: number): number | null {
  if (typed.trim() === "") return step;
  const read = parseLength(typed, unit);
  return read.ok ? read.mm : null;
}

/** The command that moves what is chosen (or one node of it) by a vector; null where nothing of it can move. */
export function moveCommand(layout: Layout, selection: readonly string[], node: string | null, by: Vec3): Command | null {
  if (node !== null) {
    const run = layout.runs.find((one) => one.key === selection[0]);
    const at = run?.locked ? undefined : run?.nodes.find((one) => one.key === node)?.at;
    return run && at ? { kind: "move-node", run: run.key, node, at: [at[0] + by[0], at[1] + by[1], at[2] + by[2]] } : null;
  }
  const items = movable(layout, selection);
  return items.length > 0 ? { kind: "move", items, by: [by[0], by[1], by[2]] } : null;
}

/** Box of one thing in the car frame, from its outlines. */
export function boxesOf(layout: Layout): Map<string, { low: Vec3; high: Vec3 }> {
  const boxes = new Map<string, { low: Vec3; high: Vec3 }>();
  const side = new Map(shapesOf(layout, "side").map((shape) => [shape.key, shape.box]));
  for (const { key, box } of shapesOf(layout, "plan")) {
    const z = side.get(key)!;
    boxes.set(key, { low: [box[0], box[1], z[1]], high: [box[2], box[3], z[3]] });
  }
  return boxes;
}

/**
 * How far to the next face of anything whose box overlaps across, along a direction: the moving things' leading face comes to lie on it. Null where there is
 * none.
 */
export function nextFace(layout: Layout, keys: readonly string[], direction: Vec3): number | null {
  const boxes = boxesOf(layout);
  const axis = direction.findIndex((value) => value !== 0) as 0 | 1 | 2;
  const sign = direction[axis]!;
  const mine = keys.flatMap((key) => boxes.get(key) ?? []);
  if (mine.length === 0) return null;
  const low = [0, 1, 2].map((k) => Math.min(...mine.map((box) => box.low[k]!)));
  const high = [0, 1, 2].map((k) => Math.max(...mine.map((box) => box.high[k]!)));
  const lead = sign > 0 ? high[axis]! : -low[axis]!;
  let best: number | null = null;
  for (const [key, box] of boxes) {
    if (keys.includes(key)) continue;
    const beside = [0, 1, 2].some((k) => k !== axis && (box.low[k]! >= high[k]! || box.high[k]! <= low[k]!));
    if (beside) continue;
    for (const face of [box.low[axis]!, box.high[axis]!]) {
      const ahead = sign * face - lead;
      if (ahead > 1e-6 && (best === null || ahead < best)) best = ahead;
    }
  }
  return best;
}

/** A free key like another: muffler-left-2, -3 … */
export function freeKey(layout: Layout, like: string): string {
  const taken = new Set([...layout.parts, ...layout.runs, ...layout.spaces, ...layout.luggage, ...layout.glass, ...layout.eyes, ...layout.shafts, ...layout.chassis.datums].map((item) => item.key));
  const base = like.toLowerCase().replace(/[^a-z0-9]+/g, "-").replace(/^-+|-+$/g, "").slice(0, 50) || "item";
  if (!taken.has(base)) return base;
  const stem = base.replace(/-\d+$/, "");
  for (let n = 2; ; n++) if (!taken.has(`${stem}-${n}`)) return `${stem}-${n}`;
}

/** A copy of things beside themselves: parts and runs one width further, others in place. */
export function twinCommand(layout: Layout, keys: readonly string[]): { command: Command; keys: string[] } | null {
  const boxes = boxesOf(layout);
  let current = layout;
  const made: string[] = [];
  const commands = keys.flatMap((key) => {
    const list = listOf(layout, key);
    const item = list && (layout[list] as readonly { key: string; name: string }[]).find((one) => one.key === key);
    if (!list || !item) return [];
    const box = boxes.get(key);
    const aside = box ? Math.ceil(box.high[1] - box.low[1]) + 20 : 0;
    const copy = structuredClone(item) as { key: string; name: string; at?: [number, number, number]; nodes?: { at: [number, number, number]; on?: string }[]; mirrorOf?: string | null };
    copy.key = freeKey(current, key);
    copy.name = `${item.name} (twin)`;
    if (copy.at) copy.at[1] += aside;
    for (const node of copy.nodes ?? []) {
      node.at[1] += aside;
      delete node.on;
    }
    made.push(copy.key);
    current = { ...current, [list]: [...(current[list] as unknown[]), copy] };
    return [{ kind: "add", list, item: copy } as unknown as Extract<Command, { kind: "add" }>];
  });
  if (commands.length === 0) return null;
  return { command: commands.length === 1 ? commands[0]! : { kind: "together", label: `Twin ${commands.length} things`, commands }, keys: made };
}
