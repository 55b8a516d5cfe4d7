import type { Vec2 } from "../frames.ts";

/** Half a unit in the last place of 1. */
const EPSILON = 2 ** -53;
/** Rounding of the plain formula, relative to its two products (Shewchuk 1997, orient2d stage A). */
const PLAIN_ERROR = (3 + 16 * EPSILON) * EPSILON;
/** Splits a double into two halves of 26 bits (Dekker 1971, Veltkamp). */
const SPLITTER = 2 ** 27 + 1;

/**
 * Twice the signed area of the triangle o, a, b, mm2: positive where o -> a -> b turns left. The sign is always right, also for corners that all but
 * line up; the size is good to rounding.
 * Method: the plain formula where its error bound decides, else the exact sum of its six products (Shewchuk 1997, Adaptive precision floating-point
 * arithmetic and fast robust geometric predicates). Exact for coordinates from 1e-140 to 1e140.
 * @example turnAt([0, 0], [1, 0], [0, 1]) is 1
 */
export function turnAt(o: Vec2, a: Vec2, b: Vec2): number {
  const left = (a[0] - o[0]) * (b[1] - o[1]);
  const right = (a[1] - o[1]) * (b[0] - o[0]);
  const turn = left - right;
  if (Math.abs(turn) >= PLAIN_ERROR * (Math.abs(left) + Math.abs(right)) && turn !== 0) return turn;
  if (left === 0 && right === 0 && sameAlong(o, a, b)) return 0;
  return exactTurn(o, a, b);
}

/** Three points on one line along an axis, or two of them the same: nothing to compute. */
function sameAlong(o: Vec2, a: Vec2, b: Vec2): boolean {
  return (o[0] === a[0] && (o[0] === b[0] || o[1] === a[1])) || (o[1] === a[1] && o[1] === b[1]) || (o[0] === b[0] && o[1] === b[1]) || (a[0] === b[0] && a[1] === b[1]);
}

function exactTurn(o: Vec2, a: Vec2, b: Vec2): number {
  // (a - o) x (b - o) = a x b - a x o - o x b, each cross product two exact products
  const parts: number[] = [];
  addProduct(parts, a[0], b[1]);
  addProduct(parts, -a[1], b[0]);
  addProduct(parts, -a[0], o[1]);
  addProduct(parts, a[1], o[0]);
  addProduct(parts, -o[0], b[1]);
  addProduct(parts, o[1], b[0]);
  return parts.length === 0 ? 0 : parts[parts.length - 1]!;
}

/** Adds p q exactly to an expansion: components that do not overlap, least first, so that the last has the sign of the sum. */
function addProduct(parts: number[], p: number, q: number): void {
  const product = p * q;
  const [ph, pl] = halves(p);
  const [qh, ql] = halves(q);
  grow(parts, pl * ql - (product - ph * qh - pl * qh - ph * ql));
  grow(parts, product);
}

function halves(x: number): [number, number] {
  const big = SPLITTER * x;
  const high = big - (big - x);
  return [high, x - high];
}

function grow(parts: number[], x: number): void {
  let sum = x;
  let count = 0;
  for (const part of parts) {
    const total = sum + part;
    const virtual = total - sum;
    const rest = sum - (total - virtual) + (part - virtual);
    sum = total;
    if (rest !== 0) parts[count++] = rest;
  }
  parts.length = count;
  if (sum !== 0) parts.push(sum);
}
