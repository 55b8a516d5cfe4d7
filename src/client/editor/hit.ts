import type { FlatLoop, Shape } from "./shapes.ts";

/** Which thing a pointer means. Pure: plain numbers in a view, mm. */

/** Insides by the even-odd rule. */
export function insideLoop(loop: ArrayLike<number>, u: number, v: number): boolean {
  let inside = false;
  for (let i = 0, j = loop.length - 2; i < loop.length; j = i, i += 2) {
    const [ui, vi, uj, vj] = [loop[i]!, loop[i + 1]!, loop[j]!, loop[j + 1]!];
    if (vi > v !== vj > v && u < ((uj - ui) * (v - vi)) / (vj - vi) + ui) inside = !inside;
  }
  return inside;
}

/** Squared distance from a point to a chain of segments. */
export function nearLine(line: ArrayLike<number>, u: number, v: number): number {
  let least = Infinity;
  for (let i = 0; i + 3 < line.length; i += 2) {
    const [a, b, c, d] = [line[i]!, line[i + 1]!, line[i + 2]!, line[i + 3]!];
    const length = (c - a) ** 2 + (d - b) ** 2;
    const t = length === 0 ? 0 : Math.max(0, Math.min(1, ((u - a) * (c - a) + (v - b) * (d - b)) / length));
    least = Math.min(least, (u - a - t * (c - a)) ** 2 + (v - b - t * (d - b)) ** 2);
  }
  return least;
}

const isTube = (shape: Shape) => shape.list === "runs" || shape.list === "shafts";

/** Is a place on a thing? A run's line is as thick as the run, and never thinner than `slack` mm to either side. */
export function hits(shape: Shape, u: number, v: number, slack: number): boolean {
  const { box } = shape;
  if (u < box[0] - slack || u > box[2] + slack || v < box[1] - slack || v > box[3] + slack) return false;
  const [du, dv] = shape.shift;
  return shape.loops.some((loop) => insideLoop(loop, u - du, v - dv)) || shape.lines.some((line, i) => nearLine(line, u - du, v - dv) <= Math.max(slack, shape.widths[i]! / 2) ** 2);
}

/** Everything under a place, what a pointer means first: runs before parts (they are thin and lie on top of much), then the smaller, then the nearer. */
export function allUnder(all: readonly Shape[], u: number, v: number, slack: number): Shape[] {
  const size = (shape: Shape) => (isTube(shape) ? 0 : shape.list === "tyres" || shape.kind === "glass" ? 1e12 : 0) + shape.area * (isTube(shape) ? 1e-3 : 1);
  return all.filter((shape) => hits(shape, u, v, slack)).sort((a, b) => size(a) - size(b) || b.nearness - a.nearness);
}

export function pick(all: readonly Shape[], u: number, v: number, slack: number): Shape | null {
  return allUnder(all, u, v, slack)[0] ?? null;
}

/** Is a place within `slack` of a closed outline? */
export function onOutline(outline: readonly (readonly [number, number])[], u: number, v: number, slack: number): boolean {
  const loop: number[] = outline.flatMap((p) => [p[0], p[1]]);
  loop.push(outline[0]![0], outline[0]![1]);
  return nearLine(loop, u, v) < slack * slack;
}

export type { FlatLoop };
