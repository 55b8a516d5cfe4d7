/**
 * Area of a flat region that convex polygons leave free: the heart of the free volume. Everything in one plane (u, v), mm.
 */

/** A convex polygon as a function of u: lower and upper chain, both from least to greatest u. */
interface Chains {
  readonly from: number;
  readonly to: number;
  readonly lower: readonly (readonly [number, number])[];
  readonly upper: readonly (readonly [number, number])[];
}

/** Free stretches of v above one u: flat [low, high, low, high …], ascending, apart. */
export type Stretches = number[];

/** A region given by its stretches over each u; `breaks` are the u where they jump or bend. */
export interface ScanRegion {
  readonly from: number;
  readonly to: number;
  readonly breaks: readonly number[];
  /** `side`: +1 just above u, -1 just below, for regions that jump there. */
  readonly stretchesAt: (u: number, side: 1 | -1) => Stretches;
}

function chainsOf(polygon: readonly (readonly [number, number])[]): Chains | null {
  const n = polygon.length;
  if (n < 3) return null;
  let twice = 0;
  let left = 0;
  let right = 0;
  for (let i = 0; i < n; i++) {
    const p = polygon[i]!;
    const q = polygon[(i + 1) % n]!;
    twice += p[0] * q[1] - q[0] * p[1];
    const l = polygon[left]!;
    const r = polygon[right]!;
    if (p[0] < l[0] || (p[0] === l[0] && p[1] < l[1])) left = i;
    if (p[0] > r[0] || (p[0] === r[0] && p[1] > r[1])) right = i;
  }
  if (twice === 0) return null;
  const step = twice > 0 ? 1 : -1;
  const walk = (from: number, to: number, by: number) => {
    const out: (readonly [number, number])[] = [];
    for (let i = from; ; i = (i + by + n) % n) {
      out.push(polygon[i]!);
      if (i === to) return out;
    }
  };
  return { from: polygon[left]![0], to: polygon[right]![0], lower: walk(left, right, step), upper: walk(left, right, -step) };
}

/** v of a chain at u, taking the edge that spans (u0, u1): exact at both ends even where an edge is upright. */
function chainAt(chain: readonly (readonly [number, number])[], middle: number, u: number): number {
  let low = 0;
  let high = chain.length - 1;
  while (high - low > 1) {
    const i = (low + high) >> 1;
    if (chain[i]![0] <= middle) low = i;
    else high = i;
  }
  const a = chain[low]!;
  const b = chain[high]!;
  return b[0] === a[0] ? a[1] : a[1] + ((b[1] - a[1]) * (u - a[0])) / (b[0] - a[0]);
}

/**
 * Area of `region` less the union of convex `obstacles`, mm2. Exact for straight-sided regions (strips between all corners; a strip in
 * which the order of the boundaries changes is halved until it does not, at most 14 times). Cost about corners x obstacles that overlap there.
 */
export function freeArea(region: ScanRegion, obstacles: readonly (readonly (readonly [number, number])[])[]): number {
  if (!(region.to > region.from)) return 0;
  const chains: Chains[] = [];
  const breaks: number[] = [region.from, region.to];
  for (const u of region.breaks) if (u > region.from && u < region.to) breaks.push(u);
  for (const polygon of obstacles) {
    const c = chainsOf(polygon);
    if (!c || c.to <= region.from || c.from >= region.to) continue;
    chains.push(c);
    for (const p of polygon) if (p[0] > region.from && p[0] < region.to) breaks.push(p[0]);
  }
  breaks.sort((p, q) => p - q);
  chains.sort((p, q) => p.from - q.from);
  let active: Chains[] = [];
  let next = 0;
  let area = 0;
  for (let i = 1; i < breaks.length; i++) {
    const a = breaks[i - 1]!;
    const b = breaks[i]!;
    if (b - a <= 1e-9) continue;
    // no corner lies inside the strip: a chain covers all of it or nothing
    while (next < chains.length && chains[next]!.from < (a + b) / 2) active.push(chains[next++]!);
    active = active.filter((chain) => chain.to > (a + b) / 2);
    area += strip(region, active, a, b, 0);
  }
  return area;
}

/** Boundaries of a strip at one of its ends: the region's own, then low and high of each obstacle. Reused: nothing is allocated in the loop. */
interface End {
  open: Stretches;
  values: Float64Array;
}
const ends: End[] = Array.from({ length: 30 }, () => ({ open: [], values: new Float64Array(64) }));
let order = new Int32Array(64);
let blocks = new Int32Array(64);

function readEnd(end: End, region: ScanRegion, active: readonly Chains[], middle: number, u: number, side: 1 | -1): number {
  end.open = region.stretchesAt(u, side);
  const count = end.open.length + 2 * active.length;
  if (end.values.length < count) end.values = new Float64Array(2 * count);
  const { open, values } = end;
  for (let i = 0; i < open.length; i++) values[i] = open[i]!;
  for (let i = 0; i < active.length; i++) {
    values[open.length + 2 * i] = chainAt(active[i]!.lower, middle, u);
    values[open.length + 2 * i + 1] = chainAt(active[i]!.upper, middle, u);
  }
  return count;
}

/** Free length at one end: the open stretches less the obstacles, taken in order of their low boundary. */
function freeLength(end: End, obstacles: number): number {
  const { open, values } = end;
  const base = open.length;
  if (blocks.length < obstacles) blocks = new Int32Array(2 * obstacles);
  for (let i = 0; i < obstacles; i++) {
    let k = i;
    const low = values[base + 2 * i]!;
    while (k > 0 && values[base + 2 * blocks[k - 1]!]! > low) {
      blocks[k] = blocks[k - 1]!;
      k--;
    }
    blocks[k] = i;
  }
  let free = 0;
  for (let i = 0; i + 1 < base; i += 2) {
    let at = values[i]!;
    const to = values[i + 1]!;
    for (let k = 0; k < obstacles && at < to; k++) {
      const low = values[base + 2 * blocks[k]!]!;
      const high = values[base + 2 * blocks[k]! + 1]!;
      if (low >= to) break;
      if (high <= at) continue;
      if (low > at) free += low - at;
      at = high;
    }
    if (at < to) free += to - at;
  }
  return free;
}

/** True where two boundaries change places between the ends of a strip. Within 1e-7 mm they count as level: coincident edges must not look like crossings. */
function crosses(a: End, b: End, count: number): boolean {
  if (a.open.length !== b.open.length) return true;
  if (order.length < count) order = new Int32Array(2 * count);
  for (let i = 0; i < count; i++) {
    let k = i;
    const v = a.values[i]!;
    const w = b.values[i]!;
    while (k > 0) {
      const other = order[k - 1]!;
      const apart = a.values[other]! - v;
      if (apart < -1e-7 || (apart <= 1e-7 && b.values[other]! <= w)) break;
      order[k] = other;
      k--;
    }
    order[k] = i;
  }
  for (let i = 1; i < count; i++) if (b.values[order[i]!]! < b.values[order[i - 1]!]! - 1e-7) return true;
  return false;
}

function strip(region: ScanRegion, active: readonly Chains[], a: number, b: number, depth: number): number {
  const middle = (a + b) / 2;
  const start = ends[2 * depth]!;
  const end = ends[2 * depth + 1]!;
  const count = readEnd(start, region, active, middle, a, 1);
  readEnd(end, region, active, middle, b, -1);
  if (depth >= 14 || !crosses(start, end, count)) return ((freeLength(start, active.length) + freeLength(end, active.length)) / 2) * (b - a);
  return strip(region, active, a, middle, depth + 1) + strip(region, active, middle, b, depth + 1);
}
