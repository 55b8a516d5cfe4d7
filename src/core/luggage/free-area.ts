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
 * which the order of the boundaries changes is halved until it does not, at most 14 times). Cost about corners x obstacles.
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
  breaks.sort((a, b) => a - b);
  let area = 0;
  for (let i = 1; i < breaks.length; i++) {
    const a = breaks[i - 1]!;
    const b = breaks[i]!;
    if (b - a > 1e-9) area += strip(region, chains, a, b, 0);
  }
  return area;
}

/** One end of a strip: what lies free there, and a signature of the order of the boundaries. */
function freeAt(region: ScanRegion, chains: readonly Chains[], middle: number, u: number, side: 1 | -1): { free: number; order: string } {
  const open = region.stretchesAt(u, side);
  const marks: { v: number; id: number }[] = [];
  for (let i = 0; i < open.length; i++) marks.push({ v: open[i]!, id: i });
  const blocks: [number, number][] = [];
  chains.forEach((chain, index) => {
    if (chain.from >= middle || chain.to <= middle) return;
    const low = chainAt(chain.lower, middle, u);
    const high = chainAt(chain.upper, middle, u);
    blocks.push([low, high]);
    marks.push({ v: low, id: 1000 + 2 * index }, { v: high, id: 1001 + 2 * index });
  });
  blocks.sort((a, b) => a[0] - b[0]);
  let free = 0;
  for (let i = 0; i + 1 < open.length; i += 2) {
    let at = open[i]!;
    const end = open[i + 1]!;
    for (const [low, high] of blocks) {
      if (low >= end) break;
      if (high <= at) continue;
      if (low > at) free += low - at;
      at = Math.max(at, high);
      if (at >= end) break;
    }
    if (at < end) free += end - at;
  }
  // boundaries within 1e-7 mm of each other count as level: coincident edges must not look like crossings
  marks.sort((a, b) => Math.round(a.v * 1e7) - Math.round(b.v * 1e7) || a.id - b.id);
  return { free, order: marks.map((m) => m.id).join() };
}

function strip(region: ScanRegion, chains: readonly Chains[], a: number, b: number, depth: number): number {
  const middle = (a + b) / 2;
  const at = freeAt(region, chains, middle, a, 1);
  const to = freeAt(region, chains, middle, b, -1);
  if (at.order === to.order || depth >= 14) return ((at.free + to.free) / 2) * (b - a);
  return strip(region, chains, a, middle, depth + 1) + strip(region, chains, middle, b, depth + 1);
}
