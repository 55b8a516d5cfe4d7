import type { Vec2 } from "../frames.ts";
import { turnAt } from "./orientation.ts";
import { signedArea, type Outline } from "./polygons.ts";

/**
 * Cuts a simple polygon into few convex ones: ear clipping, then every cut that both its corners can do without is taken out again (Hertel
 * and Mehlhorn 1983: at most four times the least number). The start is canonical (least corner, anticlockwise), so the
 * result does not depend on where the list begins or which way it runs. Corners on straight edges are dropped first.
 *
 * @param outline simple polygon, either winding (`findOutlineFault` has said so), mm
 * @returns convex polygons, anticlockwise, that tile it exactly: corners are the given ones, nothing is rounded
 * Cost: corners times inward corners; a jagged outline of 2 000 corners takes some 20 ms.
 */
export function convexPartsOf(outline: Outline): Vec2[][] {
  const corners = withoutStraightCorners(canonical(outline));
  if (corners.length < 3) return [];
  if (isConvex(corners)) return [corners];
  return joinTriangles(corners, clipEars(corners)).map((part) => part.map((i) => corners[i]!));
}

/** Anticlockwise, beginning at the least corner (by first, then second coordinate). */
function canonical(outline: Outline): Vec2[] {
  const ring = signedArea(outline) < 0 ? [...outline].reverse() : [...outline];
  let start = 0;
  ring.forEach((p, i) => {
    const s = ring[start]!;
    if (p[0] < s[0] || (p[0] === s[0] && p[1] < s[1])) start = i;
  });
  return [...ring.slice(start), ...ring.slice(0, start)];
}

/** Corners that turn by no more than the rounding of their own coordinates are straight: 0.1, 0.2, 0.3 do not quite line up as doubles. */
function withoutStraightCorners(ring: readonly Vec2[]): Vec2[] {
  let farthest = 0;
  for (const p of ring) farthest = Math.max(farthest, Math.abs(p[0]), Math.abs(p[1]));
  const slack = 4 * 2 ** -52 * farthest;
  const kept: Vec2[] = [];
  ring.forEach((p, i) => {
    const before = kept[kept.length - 1] ?? ring[ring.length - 1]!;
    const after = ring[(i + 1) % ring.length]!;
    if (Math.abs(turnAt(before, p, after)) > slack * Math.hypot(after[0] - before[0], after[1] - before[1])) kept.push(p);
  });
  return kept;
}

function isConvex(ring: readonly Vec2[]): boolean {
  return ring.every((p, i) => turnAt(p, ring[(i + 1) % ring.length]!, ring[(i + 2) % ring.length]!) > 0);
}

/**
 * Ear clipping. Only corners that turn inward can lie in an ear, and a cut changes only its two neighbours. With exact turns a simple polygon always
 * has an ear.
 */
function clipEars(corners: readonly Vec2[]): [number, number, number][] {
  const n = corners.length;
  const next = Array.from({ length: n }, (_, i) => (i + 1) % n);
  const before = Array.from({ length: n }, (_, i) => (i + n - 1) % n);
  const inward = (i: number) => turnAt(corners[before[i]!]!, corners[i]!, corners[next[i]!]!) <= 0;
  let notches: number[] = [];
  for (let i = 0; i < n; i++) if (inward(i)) notches.push(i);
  const isNotch = new Uint8Array(n);
  for (const i of notches) isNotch[i] = 1;

  const isEar = (i: number) => {
    if (isNotch[i]) return false;
    const [ia, ic] = [before[i]!, next[i]!];
    const a = corners[ia]!;
    const b = corners[i]!;
    const c = corners[ic]!;
    const [left, right] = [Math.min(a[0], b[0], c[0]), Math.max(a[0], b[0], c[0])];
    const [low, high] = [Math.min(a[1], b[1], c[1]), Math.max(a[1], b[1], c[1])];
    for (const k of notches) {
      if (k === ia || k === ic || !isNotch[k]) continue;
      const p = corners[k]!;
      if (p[0] < left || p[0] > right || p[1] < low || p[1] > high) continue;
      if (turnAt(a, b, p) >= 0 && turnAt(b, c, p) >= 0 && turnAt(c, a, p) >= 0) return false;
    }
    return true;
  };

  const triangles: [number, number, number][] = [];
  let left = n;
  let at = 0;
  let tried = 0;
  let stale = 0;
  while (left > 3) {
    // `tried > left` never happens to a simple polygon; where edges run within rounding of each other the tiling stays whole all the same
    if (!isEar(at) && tried <= left) {
      at = next[at]!;
      tried++;
      continue;
    }
    const [a, c] = [before[at]!, next[at]!];
    triangles.push([a, at, c]);
    next[a] = c;
    before[c] = a;
    left--;
    tried = 0;
    for (const k of [a, c]) {
      if (isNotch[k] && !inward(k)) {
        isNotch[k] = 0;
        stale++;
      }
    }
    if (2 * stale > notches.length) {
      notches = notches.filter((k) => isNotch[k]);
      stale = 0;
    }
    // on beyond the cut: fans from one corner would make needles
    at = next[c]!;
  }
  triangles.push([before[at]!, at, next[at]!]);
  return triangles;
}

/** Takes out every cut whose two corners stay convex without it. A cut once needed stays needed, so each is looked at once. */
function joinTriangles(corners: readonly Vec2[], triangles: readonly (readonly [number, number, number])[]): number[][] {
  // half-edge 3t + k runs from corner k of triangle t to the next
  const from = triangles.flat();
  const count = from.length;
  const next = Array.from({ length: count }, (_, e) => (e % 3 === 2 ? e - 2 : e + 1));
  const before = Array.from({ length: count }, (_, e) => (e % 3 === 0 ? e + 2 : e - 1));
  const byEnds = new Map<number, number>();
  const n = corners.length;
  for (let e = 0; e < count; e++) byEnds.set(from[e]! * n + from[next[e]!]!, e);
  const gone = new Uint8Array(count);
  const convex = (a: number, b: number, c: number) => turnAt(corners[from[a]!]!, corners[from[b]!]!, corners[from[c]!]!) >= 0;
  for (let e = 0; e < count; e++) {
    const twin = byEnds.get(from[next[e]!]! * n + from[e]!);
    if (twin === undefined || twin < e) continue;
    // without the cut, before[e] goes on to next[twin] at the cut's start, before[twin] to next[e] at its end
    if (!convex(before[e]!, e, next[next[twin]!]!) || !convex(before[twin]!, twin, next[next[e]!]!)) continue;
    gone[e] = gone[twin] = 1;
    next[before[e]!] = next[twin]!;
    before[next[twin]!] = before[e]!;
    next[before[twin]!] = next[e]!;
    before[next[e]!] = before[twin]!;
  }
  const parts: number[][] = [];
  for (let e = 0; e < count; e++) {
    if (gone[e]) continue;
    const ring: number[] = [];
    for (let k = e; !gone[k]; k = next[k]!) {
      ring.push(from[k]!);
      gone[k] = 1;
    }
    // cuts that lie in one line leave straight corners
    const part = ring.filter((k, i) => turnAt(corners[ring[(i + ring.length - 1) % ring.length]!]!, corners[k]!, corners[ring[(i + 1) % ring.length]!]!) !== 0);
    if (part.length >= 3) parts.push(part);
  }
  return parts;
}
