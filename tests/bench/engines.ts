import type { Body } from "#core/geometry/body.ts";
import { NODE, RADIUS } from "#core/geometry/compile.ts";
import type { Rival } from "./rivals.ts";
import type { Workload } from "./workloads.ts";

/**
 * The same search as the kernel's (its trees and bounds, nearer first, the best so far as limit), with another engine
 * answering for the pairs of pieces: so that engines are compared, not searches.
 */
export function rivalSearch(rival: Rival, workload: Workload, bodies: readonly Body[]): (i: number, j: number, cutoff: number) => number {
  const ready = workload.parts.map((part) => part.pieces.map((piece) => rival.place(piece, part.pose)));
  const stack: number[] = [];
  const bounds: number[] = [];
  return (i, j, cutoff) => {
    const a = bodies[i]!;
    const b = bodies[j]!;
    const placesA = ready[i]!;
    const placesB = ready[j]!;
    let best = cutoff;
    let found = Infinity;
    stack.length = 0;
    bounds.length = 0;
    stack.push(0, 0);
    bounds.push(nodeDistance(a.middles, 0, b.middles, 0));
    while (bounds.length > 0) {
      const bound = bounds.pop()!;
      const n = stack.pop()!;
      const m = stack.pop()!;
      if (bound > best) continue;
      const right = a.tree[2 * m]!;
      const left = b.tree[2 * n]!;
      if (right === 0 && left === 0) {
        const d = rival.distance(placesA[a.tree[2 * m + 1]!], placesB[b.tree[2 * n + 1]!], Math.max(best, 0));
        if (d < found && d <= best) {
          found = d;
          best = d;
        }
        continue;
      }
      const splitA = left === 0 || (right !== 0 && a.middles[NODE * m + 6]! >= b.middles[NODE * n + 6]!);
      const m1 = splitA ? m + 1 : m;
      const m2 = splitA ? right : m;
      const n1 = splitA ? n : n + 1;
      const n2 = splitA ? n : left;
      const first = nodeDistance(a.middles, NODE * m1, b.middles, NODE * n1);
      const second = nodeDistance(a.middles, NODE * m2, b.middles, NODE * n2);
      if (first <= second) {
        if (second <= best) {
          stack.push(m2, n2);
          bounds.push(second);
        }
        if (first <= best) {
          stack.push(m1, n1);
          bounds.push(first);
        }
      } else {
        if (first <= best) {
          stack.push(m1, n1);
          bounds.push(first);
        }
        if (second <= best) {
          stack.push(m2, n2);
          bounds.push(second);
        }
      }
    }
    return found;
  };
}

/** How near two nodes (boxes grown by a ball) can be, signed like a distance, as the kernel's own search has it. */
function nodeDistance(p: Float64Array, i: number, q: Float64Array, j: number): number {
  const x = Math.abs(p[i]! - q[j]!) - (p[i + 3]! + q[j + 3]!);
  const y = Math.abs(p[i + 1]! - q[j + 1]!) - (p[i + 4]! + q[j + 4]!);
  const z = Math.abs(p[i + 2]! - q[j + 2]!) - (p[i + 5]! + q[j + 5]!);
  const most = Math.max(x, y, z);
  const parted = most <= 0 ? most : Math.sqrt((x > 0 ? x * x : 0) + (y > 0 ? y * y : 0) + (z > 0 ? z * z : 0));
  return parted - p[i + RADIUS]! - q[j + RADIUS]!;
}
