import type { Stretches } from "./free-area.ts";

type Outline = readonly (readonly [number, number])[];

/** Stretches inside a simple polygon over one u: where the upright line u = const runs inside it. */
export function insideStretches(outline: Outline, u: number): Stretches {
  const crossings: number[] = [];
  for (let i = 0; i < outline.length; i++) {
    const a = outline[i]!;
    const b = outline[(i + 1) % outline.length]!;
    // half-open rule: each corner belongs to one of its two edges
    if ((a[0] <= u) === (b[0] <= u)) continue;
    crossings.push(a[1] + ((b[1] - a[1]) * (u - a[0])) / (b[0] - a[0]));
  }
  return crossings.sort((x, y) => x - y);
}

/**
 * As above for the polygon shrunk by `gap`: the points at least `gap` from every edge. Exact: less the stretch that each edge's stadium
 * (the edge grown by a disc of radius gap) covers.
 */
export function insetStretches(outline: Outline, u: number, gap: number): Stretches {
  let open = insideStretches(outline, u);
  if (gap <= 0 || open.length === 0) return open;
  for (let i = 0; i < outline.length && open.length > 0; i++) {
    const covered = stadiumStretch(outline[i]!, outline[(i + 1) % outline.length]!, u, gap);
    if (covered) open = cutStretch(open, covered[0], covered[1]);
  }
  return open;
}

/** What a segment grown by a disc covers of the upright line over u. */
function stadiumStretch(a: readonly [number, number], b: readonly [number, number], u: number, radius: number): [number, number] | null {
  let low = Infinity;
  let high = -Infinity;
  for (const end of [a, b]) {
    const off = u - end[0];
    if (Math.abs(off) > radius) continue;
    const reach = Math.sqrt(radius * radius - off * off);
    low = Math.min(low, end[1] - reach);
    high = Math.max(high, end[1] + reach);
  }
  const du = b[0] - a[0];
  const dv = b[1] - a[1];
  const length = Math.hypot(du, dv);
  if (length > 0) {
    for (const side of [1, -1]) {
      // the straight flank: the segment moved square to itself
      const ou = (-dv / length) * radius * side;
      const ov = (du / length) * radius * side;
      const along = du === 0 ? NaN : (u - a[0] - ou) / du;
      if (along >= 0 && along <= 1) {
        const v = a[1] + ov + along * dv;
        low = Math.min(low, v);
        high = Math.max(high, v);
      }
    }
    if (du === 0 && Math.abs(u - a[0]) < radius) {
      low = Math.min(low, a[1], b[1]);
      high = Math.max(high, a[1], b[1]);
    }
  }
  return high > low ? [low, high] : null;
}

function cutStretch(open: Stretches, low: number, high: number): Stretches {
  const out: Stretches = [];
  for (let i = 0; i + 1 < open.length; i += 2) {
    const from = open[i]!;
    const to = open[i + 1]!;
    if (high <= from || low >= to) {
      out.push(from, to);
      continue;
    }
    if (low > from) out.push(from, low);
    if (high < to) out.push(high, to);
  }
  return out;
}

/** What two sets of stretches have in common. */
export function overlapStretches(a: Stretches, b: Stretches): Stretches {
  const out: Stretches = [];
  for (let i = 0; i + 1 < a.length; i += 2) {
    for (let j = 0; j + 1 < b.length; j += 2) {
      const low = Math.max(a[i]!, b[j]!);
      const high = Math.min(a[i + 1]!, b[j + 1]!);
      if (high > low) out.push(low, high);
    }
  }
  return out;
}
