import type { Vec3 } from "#core/frames.ts";
import { tubePath } from "#core/geometry/tubes.ts";
import type { Run } from "#core/layout/schema.ts";

/** Which leg of a run passes nearest a place in a view, and the place on it in the car frame. */
export function legNear(run: Run, u: number, v: number, axes: { readonly u: 0 | 1 | 2; readonly v: 0 | 1 | 2 }): { from: string; to: string; at: Vec3; distance: number } | null {
  const at = new Map(run.nodes.map((node) => [node.key, node.at as Vec3]));
  let best: { from: string; to: string; at: Vec3; distance: number } | null = null;
  for (const leg of tubePath(run).legs) {
    const [a, b] = [at.get(leg.from)!, at.get(leg.to)!];
    const [du, dv] = [b[axes.u] - a[axes.u], b[axes.v] - a[axes.v]];
    const square = du * du + dv * dv;
    const t = square === 0 ? 0.5 : Math.max(0.02, Math.min(0.98, ((u - a[axes.u]) * du + (v - a[axes.v]) * dv) / square));
    const place = [0, 1, 2].map((k) => a[k]! + t * (b[k]! - a[k]!)) as unknown as Vec3;
    const distance = Math.hypot(place[axes.u] - u, place[axes.v] - v);
    if (!best || distance < best.distance) best = { from: leg.from, to: leg.to, at: place, distance };
  }
  return best;
}

/** A run with one more node in one of its legs. */
export function withNode(run: Run, from: string, to: string, at: Vec3): { run: Run; node: string } {
  let n = run.nodes.length + 1;
  while (run.nodes.some((node) => node.key === `n${n}`)) n++;
  const key = `n${n}`;
  const added = { key, at: at.map((value) => Math.round(value * 10) / 10) as [number, number, number] };
  const after = run.nodes.findIndex((node) => node.key === from);
  const before = run.nodes.findIndex((node) => node.key === to);
  const place = Math.max(after, before) - (Math.abs(after - before) === 1 ? 0 : -1);
  const nodes = [...run.nodes.slice(0, place), added, ...run.nodes.slice(place)];
  const legs = run.legs.flatMap((leg) => ((leg.from === from && leg.to === to) || (leg.from === to && leg.to === from) ? [{ ...leg, to: key }, { ...leg, from: key }] : [leg]));
  return { run: { ...run, nodes, legs }, node: key };
}

/** A run without one node: its two legs become one. Null where that leaves no run, or where three legs meet. */
export function withoutNode(run: Run, node: string): Run | null {
  if (run.nodes.length <= 2) return null;
  const nodes = run.nodes.filter((one) => one.key !== node);
  if (run.legs.length === 0) return { ...run, nodes };
  const own = run.legs.filter((leg) => leg.from === node || leg.to === node);
  const others = run.legs.filter((leg) => leg.from !== node && leg.to !== node);
  if (own.length === 1) return { ...run, nodes, legs: others };
  if (own.length !== 2) return null;
  const [first, second] = own as [Run["legs"][number], Run["legs"][number]];
  const far = (leg: Run["legs"][number]) => (leg.from === node ? leg.to : leg.from);
  return { ...run, nodes, legs: [...others, { ...first, from: far(first), to: far(second) }] };
}
