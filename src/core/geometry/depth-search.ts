import type { Body } from "./body.ts";
import { supportPoint } from "./support.ts";

/**
 * Overlap depth of any two convex cores: the least of the support width over all directions, found by branch and bound on
 * the sphere of directions, so that no basin is missed. With D = A - B - T (T the travel box of B) and p(n) the support
 * point of D, the width is h(n) = p(n).n; moving B by h(n) n separates the two.
 *
 * Bound: for a spherical triangle with corners n1, n2, n3 and any point q of D, h(n) >= q.n >= min q.ni inside it (q.ni >= 0,
 * because n is a positive combination of weight at least one). q is sought in the triangle p(n1), p(n2), p(n3); for a small
 * triangle the bound misses by the square of its size. The normal of that triangle of support points is where the width
 * has its kink, so it is tried as a direction: flat facets are met exactly.
 */

/**
 * mm: the search ends when no direction can be better by more than this; where many directions are as good (a valley: two
 * cones on one axis), the wish is lowered as the work grows, and the local descent at the end makes up for it.
 */
const CERTAIN = 1e-9;
const CERTAIN_ENOUGH = 1e-6;
const CERTAIN_AT_LEAST = 1e-4;
/** Expansions (four triangles each) before the search gives up its certainty. */
const MOST_EXPANSIONS = 3000;

const VERTICES = 3 * MOST_EXPANSIONS + 6;
const TRIANGLES = 4 * MOST_EXPANSIONS + 8;
/** Directions and support points of D. */
const N = new Float64Array(3 * VERTICES);
const P = new Float64Array(3 * VERTICES);
const CORNER = new Int32Array(3 * TRIANGLES);
const BOUND = new Float64Array(TRIANGLES);
const HEAP = new Int32Array(TRIANGLES);
const SA = new Float64Array(3);
const SB = new Float64Array(3);
const BEST = new Float64Array(7);
const SCRATCH = new Float64Array(6);

/** Witness of the last depth: points of A and of B (moved by its travel) with (pointA - pointB).n = depth, and that n. */
export const deepestA = new Float64Array(3);
export const deepestB = new Float64Array(3);
export const separatingNormal = new Float64Array(3);

/** Width of D along a unit direction; writes the support points SA and SB. */
export function widthAlong(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  x: number,
  y: number,
  z: number,
): number {
  supportPoint(a, pieceA, x, y, z, SA, 0);
  supportPoint(b, pieceB, -x, -y, -z, SB, 0);
  if (travel !== null) {
    SB[0] = SB[0]! + (x > 0 ? travel[0]! : travel[3]!);
    SB[1] = SB[1]! + (y > 0 ? travel[1]! : travel[4]!);
    SB[2] = SB[2]! + (z > 0 ? travel[2]! : travel[5]!);
  }
  return (SA[0]! - SB[0]!) * x + (SA[1]! - SB[1]!) * y + (SA[2]! - SB[2]!) * z;
}

/** Tries a unit direction: keeps it when its width is the least so far, and returns the width. */
export function tryDirection(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  x: number,
  y: number,
  z: number,
): number {
  const width = widthAlong(a, pieceA, b, pieceB, travel, x, y, z);
  if (width < BEST[0]!) {
    BEST[0] = width;
    separatingNormal[0] = x;
    separatingNormal[1] = y;
    separatingNormal[2] = z;
    deepestA.set(SA);
    deepestB.set(SB);
  }
  return width;
}

export function startSearch(): void {
  BEST[0] = Infinity;
}

export function leastWidth(): number {
  return BEST[0]!;
}

let vertices = 0;
let triangles = 0;
let heap = 0;

function addVertex(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  x: number,
  y: number,
  z: number,
): number {
  const length = Math.sqrt(x * x + y * y + z * z);
  const v = 3 * vertices;
  N[v] = x / length;
  N[v + 1] = y / length;
  N[v + 2] = z / length;
  tryDirection(a, pieceA, b, pieceB, travel, N[v]!, N[v + 1]!, N[v + 2]!);
  P[v] = SA[0]! - SB[0]!;
  P[v + 1] = SA[1]! - SB[1]!;
  P[v + 2] = SA[2]! - SB[2]!;
  return vertices++;
}

function middle(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  i: number,
  j: number,
): number {
  return addVertex(
    a,
    pieceA,
    b,
    pieceB,
    travel,
    N[3 * i]! + N[3 * j]!,
    N[3 * i + 1]! + N[3 * j + 1]!,
    N[3 * i + 2]! + N[3 * j + 2]!,
  );
}

const M = new Float64Array(9);

/** Best of min over the corners of q.n for q on the edge between support points k and l. */
function edgeBound(k: number, l: number): number {
  let best = -Infinity;
  for (let i = 0; i < 3; i++) {
    const j = i === 2 ? 0 : i + 1;
    const f = M[3 * k + i]! - M[3 * k + j]!;
    const g = M[3 * l + i]! - M[3 * l + j]!;
    // The two lines M[k,i] + s (M[l,i] - M[k,i]) cross where f + s (g - f) = 0.
    const s = f / (f - g);
    if (!(s > 0 && s < 1)) continue;
    const m0 = M[3 * k]! + s * (M[3 * l]! - M[3 * k]!);
    const m1 = M[3 * k + 1]! + s * (M[3 * l + 1]! - M[3 * k + 1]!);
    const m2 = M[3 * k + 2]! + s * (M[3 * l + 2]! - M[3 * k + 2]!);
    const least = Math.min(m0, m1, m2);
    if (least > best) best = least;
  }
  return best;
}

/** Lower bound of the width inside a triangle; tries the normal of its support points as a direction. */
function boundTriangle(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  i: number,
  j: number,
  k: number,
): number {
  const vi = 3 * i;
  const vj = 3 * j;
  const vk = 3 * k;
  for (let r = 0; r < 3; r++) {
    const v = r === 0 ? vi : r === 1 ? vj : vk;
    const x = P[v]!;
    const y = P[v + 1]!;
    const z = P[v + 2]!;
    M[3 * r] = x * N[vi]! + y * N[vi + 1]! + z * N[vi + 2]!;
    M[3 * r + 1] = x * N[vj]! + y * N[vj + 1]! + z * N[vj + 2]!;
    M[3 * r + 2] = x * N[vk]! + y * N[vk + 1]! + z * N[vk + 2]!;
  }
  let bound = Math.max(
    0,
    Math.min(M[0]!, M[1]!, M[2]!),
    Math.min(M[3]!, M[4]!, M[5]!),
    Math.min(M[6]!, M[7]!, M[8]!),
  );
  const enough = BEST[0]! - CERTAIN;
  if (bound >= enough) return bound;
  bound = Math.max(bound, edgeBound(0, 1), edgeBound(1, 2), edgeBound(0, 2));
  if (bound >= enough) return bound;
  // q where the axis of the three corner directions meets the triangle of support points: there all q.ni are equal.
  const ax = N[vj]! - N[vi]!;
  const ay = N[vj + 1]! - N[vi + 1]!;
  const az = N[vj + 2]! - N[vi + 2]!;
  const bx = N[vk]! - N[vi]!;
  const by = N[vk + 1]! - N[vi + 1]!;
  const bz = N[vk + 2]! - N[vi + 2]!;
  const cx = ay * bz - az * by;
  const cy = az * bx - ax * bz;
  const cz = ax * by - ay * bx;
  const ux = P[vj]! - P[vi]!;
  const uy = P[vj + 1]! - P[vi + 1]!;
  const uz = P[vj + 2]! - P[vi + 2]!;
  const wx = P[vk]! - P[vi]!;
  const wy = P[vk + 1]! - P[vi + 1]!;
  const wz = P[vk + 2]! - P[vi + 2]!;
  const mx = uy * wz - uz * wy;
  const my = uz * wx - ux * wz;
  const mz = ux * wy - uy * wx;
  const length = Math.sqrt(mx * mx + my * my + mz * mz);
  if (!(length > 0)) return bound;
  const facing = mx * cx + my * cy + mz * cz;
  if (facing !== 0) {
    const t = (mx * P[vi]! + my * P[vi + 1]! + mz * P[vi + 2]!) / facing;
    const qx = t * cx - P[vi]!;
    const qy = t * cy - P[vi + 1]!;
    const qz = t * cz - P[vi + 2]!;
    // Weights of the second and third support point, by areas along the normal.
    const square = length * length;
    const l1 = ((qy * wz - qz * wy) * mx + (qz * wx - qx * wz) * my + (qx * wy - qy * wx) * mz) / square;
    const l2 = ((uy * qz - uz * qy) * mx + (uz * qx - ux * qz) * my + (ux * qy - uy * qx) * mz) / square;
    if (l1 >= 0 && l2 >= 0 && l1 + l2 <= 1) {
      const l0 = 1 - l1 - l2;
      const least = Math.min(
        l0 * M[0]! + l1 * M[3]! + l2 * M[6]!,
        l0 * M[1]! + l1 * M[4]! + l2 * M[7]!,
        l0 * M[2]! + l1 * M[5]! + l2 * M[8]!,
      );
      if (least > bound) bound = least;
    }
  }
  tryKink(a, pieceA, b, pieceB, travel, vi, vj, vk);
  return bound;
}

/** Tries the normal of the plane through three support points, on the side of their directions. */
function tryKink(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  vi: number,
  vj: number,
  vk: number,
): void {
  const ux = P[vj]! - P[vi]!;
  const uy = P[vj + 1]! - P[vi + 1]!;
  const uz = P[vj + 2]! - P[vi + 2]!;
  const wx = P[vk]! - P[vi]!;
  const wy = P[vk + 1]! - P[vi + 1]!;
  const wz = P[vk + 2]! - P[vi + 2]!;
  const x = uy * wz - uz * wy;
  const y = uz * wx - ux * wz;
  const z = ux * wy - uy * wx;
  const length = Math.sqrt(x * x + y * y + z * z);
  if (!(length > 0)) return;
  const side =
    x * (N[vi]! + N[vj]! + N[vk]!) +
    y * (N[vi + 1]! + N[vj + 1]! + N[vk + 1]!) +
    z * (N[vi + 2]! + N[vj + 2]! + N[vk + 2]!);
  const sign = side < 0 ? -1 : 1;
  tryDirection(a, pieceA, b, pieceB, travel, (sign * x) / length, (sign * y) / length, (sign * z) / length);
}

function pushTriangle(t: number): void {
  let at = heap++;
  const key = BOUND[t]!;
  while (at > 0) {
    const up = (at - 1) >> 1;
    if (BOUND[HEAP[up]!]! <= key) break;
    HEAP[at] = HEAP[up]!;
    at = up;
  }
  HEAP[at] = t;
}

function popTriangle(): number {
  const top = HEAP[0]!;
  const last = HEAP[--heap]!;
  const key = BOUND[last]!;
  let at = 0;
  for (;;) {
    let down = 2 * at + 1;
    if (down >= heap) break;
    if (down + 1 < heap && BOUND[HEAP[down + 1]!]! < BOUND[HEAP[down]!]!) down++;
    if (BOUND[HEAP[down]!]! >= key) break;
    HEAP[at] = HEAP[down]!;
    at = down;
  }
  HEAP[at] = last;
  return top;
}

/** Settles the best direction: plane normals of three support points about it, on ever smaller triangles. */
function polish(a: Body, pieceA: number, b: Body, pieceB: number, travel: Float64Array | null): void {
  for (let size = 1e-2; size > 1e-9; size /= 8) {
    const before = BEST[0]!;
    const x = separatingNormal[0]!;
    const y = separatingNormal[1]!;
    const z = separatingNormal[2]!;
    // Any two directions square to it.
    const least = Math.abs(x) <= Math.abs(y) && Math.abs(x) <= Math.abs(z) ? 0 : Math.abs(y) <= Math.abs(z) ? 1 : 2;
    let ux = least === 0 ? 0 : least === 1 ? -z : y;
    let uy = least === 0 ? z : least === 1 ? 0 : -x;
    let uz = least === 0 ? -y : least === 1 ? x : 0;
    const length = Math.sqrt(ux * ux + uy * uy + uz * uz);
    ux /= length;
    uy /= length;
    uz /= length;
    const vx = y * uz - z * uy;
    const vy = z * ux - x * uz;
    const vz = x * uy - y * ux;
    for (let turn = 0; turn < 2; turn++) {
      vertices = 0;
      const s = turn === 0 ? size : -size;
      for (let i = 0; i < 3; i++) {
        const c = s * (i === 0 ? 1 : -0.5);
        const d = s * (i === 0 ? 0 : i === 1 ? 0.8660254037844386 : -0.8660254037844386);
        addVertex(a, pieceA, b, pieceB, travel, x + c * ux + d * vx, y + c * uy + d * vy, z + c * uz + d * vz);
      }
      tryKink(a, pieceA, b, pieceB, travel, 0, 3, 6);
    }
    if (BEST[0]! < before) size *= 4;
    SCRATCH[0] = SCRATCH[0]! + 1;
    if (SCRATCH[0]! > 200) break;
  }
}

/**
 * Least width over all directions of two overlapping cores, mm; the searched directions start from what `tryDirection` was
 * given since `startSearch`. Stops early, returning any width not above `enough`, when it finds one.
 * Returns the width; negative when a direction separates the cores after all. Sets `searchWasCertain`.
 */
export function searchDepth(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  enough: number,
): number {
  vertices = 0;
  triangles = 0;
  heap = 0;
  for (let axis = 0; axis < 3; axis++) {
    for (let sign = 1; sign >= -1; sign -= 2) {
      addVertex(a, pieceA, b, pieceB, travel, axis === 0 ? sign : 0, axis === 1 ? sign : 0, axis === 2 ? sign : 0);
    }
  }
  for (let octant = 0; octant < 8; octant++) {
    const x = octant & 1;
    const y = 2 + ((octant >> 1) & 1);
    const z = 4 + (octant >> 2);
    addTriangle(a, pieceA, b, pieceB, travel, x, y, z);
  }
  let expansions = 0;
  searchWasCertain = true;
  while (heap > 0) {
    if (BEST[0]! <= enough) return BEST[0]!;
    const t = popTriangle();
    const open = BEST[0]! - BOUND[t]!;
    if (open <= (expansions < 300 ? CERTAIN : expansions < 900 ? CERTAIN_ENOUGH : CERTAIN_AT_LEAST)) break;
    if (++expansions > MOST_EXPANSIONS) {
      searchWasCertain = false;
      break;
    }
    const i = CORNER[3 * t]!;
    const j = CORNER[3 * t + 1]!;
    const k = CORNER[3 * t + 2]!;
    const ij = middle(a, pieceA, b, pieceB, travel, i, j);
    const jk = middle(a, pieceA, b, pieceB, travel, j, k);
    const ki = middle(a, pieceA, b, pieceB, travel, k, i);
    addTriangle(a, pieceA, b, pieceB, travel, i, ij, ki);
    addTriangle(a, pieceA, b, pieceB, travel, ij, j, jk);
    addTriangle(a, pieceA, b, pieceB, travel, ki, jk, k);
    addTriangle(a, pieceA, b, pieceB, travel, ij, jk, ki);
  }
  SCRATCH[0] = 0;
  polish(a, pieceA, b, pieceB, travel);
  return BEST[0]!;
}

/** Whether the last search ended because no direction can be better, rather than because its budget was spent. */
export let searchWasCertain = true;

function addTriangle(
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
  i: number,
  j: number,
  k: number,
): void {
  const bound = boundTriangle(a, pieceA, b, pieceB, travel, i, j, k);
  if (bound >= BEST[0]! - CERTAIN) return;
  const t = triangles++;
  CORNER[3 * t] = i;
  CORNER[3 * t + 1] = j;
  CORNER[3 * t + 2] = k;
  BOUND[t] = bound;
  pushTriangle(t);
}
