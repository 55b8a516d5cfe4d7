import type { Body } from "./body.ts";

/**
 * Which bodies are near enough to be measured: their boxes kept sorted along x, so that a moved body costs a few swaps.
 * Boxes may be inflated body by body (`margins`, mm: half of what the pair may gain through movement, tolerance or growth).
 */
export interface Sweep {
  readonly bodies: readonly Body[];
  readonly margins: Float64Array;
  /** Bodies by the low end of their inflated box along x, ties by index. */
  readonly order: Int32Array;
  readonly rank: Int32Array;
  /** Inflated world boxes, six doubles a body. */
  readonly boxes: Float64Array;
}

export function createSweep(bodies: readonly Body[], margins?: ArrayLike<number>): Sweep {
  const n = bodies.length;
  const sweep: Sweep = {
    bodies,
    margins: margins ? Float64Array.from(margins) : new Float64Array(n),
    order: Int32Array.from({ length: n }, (_, i) => i),
    rank: new Int32Array(n),
    boxes: new Float64Array(6 * n),
  };
  for (let i = 0; i < n; i++) readBox(sweep, i);
  const { boxes } = sweep;
  sweep.order.sort((i, j) => boxes[6 * i]! - boxes[6 * j]! || i - j);
  for (let r = 0; r < n; r++) sweep.rank[sweep.order[r]!] = r;
  return sweep;
}

function readBox(sweep: Sweep, i: number): void {
  const from = sweep.bodies[i]!.boxes;
  const margin = sweep.margins[i]!;
  for (let k = 0; k < 3; k++) {
    sweep.boxes[6 * i + k] = from[k]! - margin;
    sweep.boxes[6 * i + 3 + k] = from[3 + k]! + margin;
  }
}

/** Takes up the new pose (and, if given, the new margin) of one body. */
export function updateSweep(sweep: Sweep, index: number, margin = sweep.margins[index]!): void {
  sweep.margins[index] = margin;
  readBox(sweep, index);
  const { order, rank, boxes } = sweep;
  const before = (i: number, j: number): boolean =>
    boxes[6 * i]! < boxes[6 * j]! || (boxes[6 * i]! === boxes[6 * j]! && i < j);
  let r = rank[index]!;
  while (r > 0 && before(index, order[r - 1]!)) {
    order[r] = order[r - 1]!;
    rank[order[r]!] = r;
    r--;
  }
  while (r + 1 < order.length && before(order[r + 1]!, index)) {
    order[r] = order[r + 1]!;
    rank[order[r]!] = r;
    r++;
  }
  order[r] = index;
  rank[index] = r;
}

function boxesWithin(boxes: Float64Array, i: number, j: number, reach: number): boolean {
  const p = 6 * i;
  const q = 6 * j;
  let square = 0;
  for (let k = 0; k < 3; k++) {
    const apart = Math.max(boxes[q + k]! - boxes[p + 3 + k]!, boxes[p + k]! - boxes[q + 3 + k]!);
    if (apart > 0) square += apart * apart;
  }
  return square <= reach * reach;
}

/**
 * Calls `visit(i, j)`, i < j, once for every pair of bodies whose inflated boxes are within `reach` mm of each other.
 * The order depends only on the boxes and indices, not on the updates that led to them. `visit` must not move bodies.
 */
export function candidatePairs(sweep: Sweep, reach: number, visit: (i: number, j: number) => void): void {
  const { order, boxes } = sweep;
  for (let r = 0; r < order.length; r++) {
    const i = order[r]!;
    const end = boxes[6 * i + 3]! + reach;
    for (let s = r + 1; s < order.length; s++) {
      const j = order[s]!;
      if (boxes[6 * j]! > end) break;
      if (boxesWithin(boxes, i, j, reach)) {
        if (i < j) visit(i, j);
        else visit(j, i);
      }
    }
  }
}

/** Calls `visit(other)` for every other body whose inflated box is within `reach` mm of that of `index`, in index order. */
export function candidatesOf(sweep: Sweep, index: number, reach: number, visit: (other: number) => void): void {
  const { boxes } = sweep;
  const n = sweep.order.length;
  for (let j = 0; j < n; j++) if (j !== index && boxesWithin(boxes, index, j, reach)) visit(j);
}
