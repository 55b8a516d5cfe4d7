import type { Vec2 } from "../frames.ts";
import { signedArea, turnAt, type Outline } from "./polygons.ts";

/**
 * Cuts a simple polygon into few convex ones: ear clipping, then triangles joined again across every cut that leaves both corners
 * convex (Hertel and Mehlhorn 1983: at most four times the least number). The start is canonical (least corner, anticlockwise), so the
 * result does not depend on where the list begins or which way it runs. Corners on straight edges are dropped first.
 *
 * @param outline simple polygon, either winding (`findOutlineFault` has said so), mm
 * @returns convex polygons, anticlockwise, that tile it exactly: corners are the given ones, nothing is rounded
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

function withoutStraightCorners(ring: readonly Vec2[]): Vec2[] {
  return ring.filter((p, i) => {
    const before = ring[(i + ring.length - 1) % ring.length]!;
    const after = ring[(i + 1) % ring.length]!;
    return turnAt(before, p, after) !== 0;
  });
}

function isConvex(ring: readonly Vec2[]): boolean {
  return ring.every((p, i) => turnAt(p, ring[(i + 1) % ring.length]!, ring[(i + 2) % ring.length]!) > 0);
}

function clipEars(corners: readonly Vec2[]): [number, number, number][] {
  const n = corners.length;
  const next = Array.from({ length: n }, (_, i) => (i + 1) % n);
  const before = Array.from({ length: n }, (_, i) => (i + n - 1) % n);
  const triangles: [number, number, number][] = [];
  const isEar = (i: number) => {
    const a = corners[before[i]!]!;
    const b = corners[i]!;
    const c = corners[next[i]!]!;
    if (turnAt(a, b, c) <= 0) return false;
    for (let k = next[next[i]!]!; k !== before[i]; k = next[k]!) {
      const p = corners[k]!;
      if (turnAt(a, b, p) >= 0 && turnAt(b, c, p) >= 0 && turnAt(c, a, p) >= 0) return false;
    }
    return true;
  };
  let left = n;
  let at = 0;
  let tried = 0;
  while (left > 3) {
    if (isEar(at) || tried > left) {
      // `tried > left` only by rounding on a needle: cutting the corner anyway keeps the tiling whole
      triangles.push([before[at]!, at, next[at]!]);
      next[before[at]!] = next[at]!;
      before[next[at]!] = before[at]!;
      at = before[at]!;
      left--;
      tried = 0;
    } else {
      at = next[at]!;
      tried++;
    }
  }
  triangles.push([before[at]!, at, next[at]!]);
  return triangles;
}

/** Joins across a shared edge while the joined polygon stays convex. */
function joinTriangles(corners: readonly Vec2[], triangles: readonly (readonly number[])[]): number[][] {
  const parts: (number[] | null)[] = triangles.filter(([a, b, c]) => turnAt(corners[a!]!, corners[b!]!, corners[c!]!) !== 0).map((t) => [...t]);
  const owner = new Map<string, number>();
  parts.forEach((part, index) => part!.forEach((a, i) => owner.set(`${a},${part![(i + 1) % 3]}`, index)));
  for (let index = 0; index < parts.length; index++) {
    let joined = true;
    while (joined && parts[index]) {
      joined = false;
      const part = parts[index]!;
      for (let i = 0; i < part.length; i++) {
        const a = part[i]!;
        const b = part[(i + 1) % part.length]!;
        const other = owner.get(`${b},${a}`);
        if (other === undefined || other === index || !parts[other]) continue;
        const merged = mergeAcross(part, i, parts[other]!, b, a);
        const convex = merged.every((_, k) => turnAt(corners[merged[k]!]!, corners[merged[(k + 1) % merged.length]!]!, corners[merged[(k + 2) % merged.length]!]!) >= 0);
        if (!convex) continue;
        parts[other] = null;
        parts[index] = merged;
        owner.delete(`${a},${b}`);
        owner.delete(`${b},${a}`);
        merged.forEach((p, k) => owner.set(`${p},${merged[(k + 1) % merged.length]}`, index));
        joined = true;
        break;
      }
    }
  }
  return parts.filter((part): part is number[] => part !== null);
}

/** Two rings that share the edge part[i] -> part[i + 1], which the other walks as b -> a. */
function mergeAcross(part: readonly number[], i: number, other: readonly number[], b: number, a: number): number[] {
  const from = other.indexOf(a);
  const between: number[] = [];
  for (let k = (from + 1) % other.length; other[k] !== b; k = (k + 1) % other.length) between.push(other[k]!);
  return [...part.slice(0, i + 1), ...between, ...part.slice(i + 1)];
}
