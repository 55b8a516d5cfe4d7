import { PROJECTION, type View } from "#core/frames.ts";
import type { ListName } from "#core/layout/commands.ts";
import type { Layout } from "#core/layout/schema.ts";
import { allUnder, insideLoop, onOutline } from "./hit.ts";
import { glassOutline, spaceOutline } from "./paint-lines.ts";
import { cutsAt, shapesOf } from "./shapes.ts";

export interface Under {
  readonly key: string;
  readonly name: string;
  readonly list: ListName | "tyres";
}

/**
 * Everything under a place of a view, what a pointer means first: eyes, then runs, parts from small to large, then the edges of spaces and glass, tyres last. In the section
 * only what it cuts, and what else is chosen.
 */
export function thingsUnder(layout: Layout, view: View, u: number, v: number, slack: number, station: number, hidden: ReadonlySet<string>, chosen: ReadonlySet<string>): Under[] {
  const axes = PROJECTION[view];
  const out: Under[] = [];
  for (const eye of layout.eyes) if (Math.hypot(eye.at[axes.u] - u, eye.at[axes.v] - v) < slack * 2) out.push({ key: eye.key, name: eye.name, list: "eyes" });
  if (view === "rear") {
    const near = cutsAt(layout, station).filter((cut) => cut.loops.some((loop) => insideLoop(loop, u - cut.shift[0], v - cut.shift[1])) || (cut.list !== "parts" && closeTo(cut, u, v, slack)));
    const names = new Map([...layout.parts, ...layout.runs, ...layout.shafts].map((item) => [item.key, item.name]));
    out.push(...near.sort((a, b) => rank(a.list) - rank(b.list)).map((cut) => ({ key: cut.key, list: cut.list, name: names.get(cut.key) ?? cut.key })));
    out.push(...allUnder(shapesOf(layout, view).filter((shape) => chosen.has(shape.key)), u, v, slack));
  } else out.push(...allUnder(shapesOf(layout, view), u, v, slack).filter((shape) => shape.list !== "tyres"));
  for (const space of layout.spaces) {
    const outline = spaceOutline(space, view);
    if (outline && onOutline(outline, u, v, slack)) out.push({ key: space.key, name: space.name, list: "spaces" });
  }
  for (const glass of layout.glass) if (onOutline(glassOutline(glass, view), u, v, slack)) out.push({ key: glass.key, name: glass.name, list: "glass" });
  // a dotted edge is thin: it comes before a part that it crosses
  out.sort((a, b) => Number(b.list === "spaces") - Number(a.list === "spaces"));
  const seen = new Set<string>();
  return out.filter((one) => !hidden.has(one.key) && !seen.has(one.key) && seen.add(one.key));
}

const rank = (list: string): number => (list === "runs" || list === "shafts" ? 0 : 1);

function closeTo(cut: { readonly loops: readonly Float64Array[]; readonly shift: readonly [number, number] }, u: number, v: number, slack: number): boolean {
  return cut.loops.some((loop) => {
    for (let i = 0; i < loop.length; i += 2) if (Math.hypot(loop[i]! + cut.shift[0] - u, loop[i + 1]! + cut.shift[1] - v) < slack) return true;
    return false;
  });
}
