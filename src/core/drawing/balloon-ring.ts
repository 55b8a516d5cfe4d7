/**
 * Numbers at the edge of a view: each anchor gets a port in a row above or below, and the leaders between do not cross. Paper coordinates.
 */
export interface RingSite {
  readonly id: number;
  readonly x: number;
  readonly y: number;
}
export interface RingPort {
  readonly x: number;
  /** Row 0 lies next to the view, row 1 behind it. */
  readonly row: 0 | 1;
}
export interface Matched {
  readonly site: RingSite;
  readonly port: RingPort;
}

/**
 * Ports of a row: places every half pitch, alternately in row 0 and row 1, none where `taken` lines pass (row 0 needs the balloon's radius of air, row 1
 * only its stub's).
 */
export function portsBetween(low: number, high: number, radius: number, taken: readonly number[]): RingPort[] {
  const step = radius + 0.6;
  const ports: RingPort[] = [];
  const count = Math.max(0, Math.floor((high - low) / step));
  for (let i = 0; i <= count; i++) {
    const x = low + i * step;
    const row = (i % 2) as 0 | 1;
    // a ring of two rows: a line through it must pass both the balloon of its own row and the stub's balloon behind
    if (taken.every((line) => Math.abs(line - x) >= radius + 0.4)) ports.push({ x, row });
  }
  return ports;
}

/**
 * Matches sites to ports of one edge at height `edge`: first in order of x with the least sum of sideways distance (dynamic programming), row 0 preferred;
 * then ends of crossing leaders are exchanged until none cross. Each exchange shortens the sum of lengths, so it ends.
 * Returns fewer than asked when there are fewer ports.
 */
export function matchPorts(sites: readonly RingSite[], ports: readonly RingPort[], edge: number): Matched[] {
  const order = [...sites].sort((a, b) => a.x - b.x || a.id - b.id).slice(0, ports.length);
  const n = order.length;
  const m = ports.length;
  if (n === 0) return [];
  const behind = 4; // mm of detour that a balloon in row 0 is worth
  const cost: Float64Array[] = Array.from({ length: n + 1 }, () => new Float64Array(m + 1).fill(Infinity));
  cost[0]!.fill(0);
  for (let i = 1; i <= n; i++) {
    for (let j = i; j <= m; j++) {
      const port = ports[j - 1]!;
      const here = cost[i - 1]![j - 1]! + Math.abs(order[i - 1]!.x - port.x) + port.row * behind;
      cost[i]![j] = Math.min(cost[i]![j - 1]!, here);
    }
  }
  const matched: { site: RingSite; port: RingPort }[] = [];
  for (let i = n, j = m; i > 0; j--) {
    if (cost[i]![j]! < cost[i]![j - 1]!) {
      matched.push({ site: order[i - 1]!, port: ports[j - 1]! });
      i--;
    }
  }
  uncross(matched, edge);
  return matched.sort((a, b) => a.port.x - b.port.x);
}

function uncross(matched: { site: RingSite; port: RingPort }[], edge: number): void {
  for (let round = 0; round < 200; round++) {
    let changed = false;
    for (let i = 0; i < matched.length; i++) {
      for (let j = i + 1; j < matched.length; j++) {
        const a = matched[i]!;
        const b = matched[j]!;
        if (!leadersCross(a, b, edge)) continue;
        [a.port, b.port] = [b.port, a.port];
        changed = true;
      }
    }
    if (!changed) return;
  }
}

/** Do the straight parts of two leaders meet? */
export function leadersCross(a: Matched, b: Matched, edge: number): boolean {
  return segmentsMeet([a.site.x, a.site.y], [a.port.x, edge], [b.site.x, b.site.y], [b.port.x, edge]);
}

type P = readonly [number, number];
const side = (a: P, b: P, p: P) => (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0]);
/** Do the segments a b and c d cross? Paper; one that only touches the other does not. */
export function segmentsMeet(a: P, b: P, c: P, d: P): boolean {
  return side(a, b, c) * side(a, b, d) < 0 && side(c, d, a) * side(c, d, b) < 0;
}

/** Least distance of a point from the segment a b, mm of paper. */
export function distanceToSegment(p: P, a: P, b: P): number {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  const l2 = dx * dx + dy * dy;
  const t = l2 === 0 ? 0 : Math.max(0, Math.min(1, ((p[0] - a[0]) * dx + (p[1] - a[1]) * dy) / l2));
  return Math.hypot(p[0] - a[0] - t * dx, p[1] - a[1] - t * dy);
}
