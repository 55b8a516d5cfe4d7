import type { Vec2 } from "../frames.ts";
import type { Facet } from "./covered-edges.ts";

/**
 * Hatching of a union of convex polygons: parallel strokes at an angle, cut to what is inside. All in one plane's units.
 * @param pitch distance of the strokes, @param angle degrees from the horizontal, anticlockwise
 */
export function hatchOf(facets: readonly Facet[], pitch: number, angle: number): [Vec2, Vec2][] {
  const angleRad = (angle * Math.PI) / 180;
  const [s, c] = [Math.sin(angleRad), Math.cos(angleRad)];
  const spans = new Map<number, [number, number][]>();
  for (const facet of facets) {
    const turned = facet.points.map(([x, y]): Vec2 => [x * c + y * s, y * c - x * s]);
    const low = Math.min(...turned.map((p) => p[1]));
    const high = Math.max(...turned.map((p) => p[1]));
    for (let row = Math.ceil(low / pitch); row * pitch <= high; row++) {
      let [from, to] = [Infinity, -Infinity];
      turned.forEach((p, i) => {
        const q = turned[i + 1 === turned.length ? 0 : i + 1]!;
        const [a, b] = [p[1] - row * pitch, q[1] - row * pitch];
        if (a * b > 0 || a === b) return;
        const x = p[0] + ((q[0] - p[0]) * a) / (a - b);
        from = Math.min(from, x);
        to = Math.max(to, x);
      });
      if (to > from) spans.set(row, [...(spans.get(row) ?? []), [from, to]]);
    }
  }
  const out: [Vec2, Vec2][] = [];
  for (const [row, list] of [...spans].sort((a, b) => a[0] - b[0])) {
    list.sort((a, b) => a[0] - b[0]);
    const back = (x: number): Vec2 => [x * c - row * pitch * s, x * s + row * pitch * c];
    let [from, to] = list[0]!;
    for (const [a, b] of list.slice(1)) {
      if (a <= to) to = Math.max(to, b);
      else {
        out.push([back(from), back(to)]);
        [from, to] = [a, b];
      }
    }
    out.push([back(from), back(to)]);
  }
  return out;
}
