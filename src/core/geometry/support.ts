import type { Body } from "./body.ts";
import { CORE, CORE_BOX, CORE_DISCS, CORE_POINTS, CORE_PRISM, CORE_RING, CORNERS, DISCS, FACTS, START } from "./compile.ts";

/** Below this a length squared has lost its digits: a disc seen so nearly square on is met at its centre. */
export const NOTHING = 1e-140;

/**
 * The farthest point of a piece's core along a direction (not its ball radius), world coordinates, mm.
 * Writes it to out[at … at + 2] and returns a number that names the corner it is, or -1 for a point of a round edge.
 * Of several equally far corners the first in the piece's own order is taken, so the answer depends on nothing but its arguments.
 */
export function supportPoint(
  body: Body,
  piece: number,
  dx: number,
  dy: number,
  dz: number,
  out: Float64Array,
  at: number,
): number {
  return supportAt(
    body.world,
    body.facts[FACTS * piece + START]!,
    body.facts[FACTS * piece + CORE]!,
    body.facts[FACTS * piece + CORNERS]!,
    body.facts[FACTS * piece + DISCS]!,
    dx,
    dy,
    dz,
    out,
    at,
  );
}

/** The same, for a caller that asks one piece many times and has read its place and kind. */
export function supportAt(
  world: Float64Array,
  s: number,
  core: number,
  corners: number,
  discs: number,
  dx: number,
  dy: number,
  dz: number,
  out: Float64Array,
  at: number,
): number {
  if (core === CORE_BOX) {
    let x = world[s]!;
    let y = world[s + 1]!;
    let z = world[s + 2]!;
    let name = 0;
    const ax = world[s + 3]!;
    const ay = world[s + 4]!;
    const az = world[s + 5]!;
    if (ax * dx + ay * dy + az * dz < 0) {
      x -= ax;
      y -= ay;
      z -= az;
    } else {
      x += ax;
      y += ay;
      z += az;
      name = 1;
    }
    const bx = world[s + 6]!;
    const by = world[s + 7]!;
    const bz = world[s + 8]!;
    if (bx * dx + by * dy + bz * dz < 0) {
      x -= bx;
      y -= by;
      z -= bz;
    } else {
      x += bx;
      y += by;
      z += bz;
      name |= 2;
    }
    const cx = world[s + 9]!;
    const cy = world[s + 10]!;
    const cz = world[s + 11]!;
    if (cx * dx + cy * dy + cz * dz < 0) {
      x -= cx;
      y -= cy;
      z -= cz;
    } else {
      x += cx;
      y += cy;
      z += cz;
      name |= 4;
    }
    out[at] = x;
    out[at + 1] = y;
    out[at + 2] = z;
    return name;
  }
  if (core === CORE_POINTS || core === CORE_PRISM) {
    const n = corners;
    let best = s;
    let most = world[s]! * dx + world[s + 1]! * dy + world[s + 2]! * dz;
    const end = s + 3 * n;
    for (let p = s + 3; p < end; p += 3) {
      const along = world[p]! * dx + world[p + 1]! * dy + world[p + 2]! * dz;
      if (along > most) {
        most = along;
        best = p;
      }
    }
    if (core === CORE_PRISM) {
      const ox = world[end]!;
      const oy = world[end + 1]!;
      const oz = world[end + 2]!;
      if (ox * dx + oy * dy + oz * dz > 0) {
        out[at] = world[best]! + ox;
        out[at + 1] = world[best + 1]! + oy;
        out[at + 2] = world[best + 2]! + oz;
        return best - s + 1;
      }
    }
    out[at] = world[best]!;
    out[at + 1] = world[best + 1]!;
    out[at + 2] = world[best + 2]!;
    return best - s;
  }
  if (core === CORE_RING) return supportOfRing(world, s, corners, dx, dy, dz, out, at);
  if (core === CORE_DISCS) return supportOfDiscs(world, s, corners, discs, dx, dy, dz, out, at);
  // A cylinder: the end that faces the direction, and the farthest point of its rim.
  const hx = world[s + 3]!;
  const hy = world[s + 4]!;
  const hz = world[s + 5]!;
  const side = hx * dx + hy * dy + hz * dz < 0 ? -1 : 1;
  const ux = world[s + 6]!;
  const uy = world[s + 7]!;
  const uz = world[s + 8]!;
  const vx = world[s + 9]!;
  const vy = world[s + 10]!;
  const vz = world[s + 11]!;
  let p = ux * dx + uy * dy + uz * dz;
  let q = vx * dx + vy * dy + vz * dz;
  const reach = Math.sqrt(p * p + q * q);
  if (reach > NOTHING) {
    p /= reach;
    q /= reach;
  }
  out[at] = world[s]! + side * hx + p * ux + q * vx;
  out[at + 1] = world[s + 1]! + side * hy + p * uy + q * vy;
  out[at + 2] = world[s + 2]! + side * hz + p * uz + q * vz;
  return -1;
}

/**
 * The foremost corner of a convex ring is where a walk from any corner ends; it starts where the direction's angle about the
 * ring says, as if the corners were spread evenly.
 */
function supportOfRing(
  world: Float64Array,
  s: number,
  n: number,
  dx: number,
  dy: number,
  dz: number,
  out: Float64Array,
  at: number,
): number {
  const o = s + 3 * n;
  const x = world[o + 3]! * dx + world[o + 4]! * dy + world[o + 5]! * dz;
  const y = world[o + 6]! * dx + world[o + 7]! * dy + world[o + 8]! * dz;
  const whole = Math.abs(x) + Math.abs(y);
  // Quarters of a turn, 0 … 4, by the rhombus rather than the circle: close enough to start from.
  let turn = 0;
  if (whole > NOTHING) {
    turn = y / whole;
    turn = x < 0 ? 2 - turn : y < 0 ? 4 + turn : turn;
  }
  let i = Math.round((turn * n) / 4);
  if (i >= n) i -= n;
  let p = s + 3 * i;
  let most = world[p]! * dx + world[p + 1]! * dy + world[p + 2]! * dz;
  let walked = 0;
  for (; walked < n; walked++) {
    const next = p + 3 === o ? s : p + 3;
    const along = world[next]! * dx + world[next + 1]! * dy + world[next + 2]! * dz;
    if (!(along > most)) break;
    most = along;
    p = next;
  }
  if (walked === 0) {
    for (; walked < n; walked++) {
      const next = p === s ? o - 3 : p - 3;
      const along = world[next]! * dx + world[next + 1]! * dy + world[next + 2]! * dz;
      if (!(along > most)) break;
      most = along;
      p = next;
    }
  }
  const ox = world[o]!;
  const oy = world[o + 1]!;
  const oz = world[o + 2]!;
  if (ox * dx + oy * dy + oz * dz > 0) {
    out[at] = world[p]! + ox;
    out[at + 1] = world[p + 1]! + oy;
    out[at + 2] = world[p + 2]! + oz;
    return p - s + 1;
  }
  out[at] = world[p]!;
  out[at + 1] = world[p + 1]!;
  out[at + 2] = world[p + 2]!;
  return p - s;
}

function supportOfDiscs(
  world: Float64Array,
  s: number,
  n: number,
  discs: number,
  dx: number,
  dy: number,
  dz: number,
  out: Float64Array,
  at: number,
): number {
  let most = -Infinity;
  let name = -1;
  for (let i = 0, p = s; i < n; i++, p += 3) {
    const along = world[p]! * dx + world[p + 1]! * dy + world[p + 2]! * dz;
    if (along > most) {
      most = along;
      name = p - s;
      out[at] = world[p]!;
      out[at + 1] = world[p + 1]!;
      out[at + 2] = world[p + 2]!;
    }
  }
  let c = s + 3 * n;
  let w = c + 3 * discs;
  for (let d = 0; d < discs; d++, c += 3, w += 6) {
    const p = world[w]! * dx + world[w + 1]! * dy + world[w + 2]! * dz;
    const q = world[w + 3]! * dx + world[w + 4]! * dy + world[w + 5]! * dz;
    const reach = Math.sqrt(p * p + q * q);
    const along = world[c]! * dx + world[c + 1]! * dy + world[c + 2]! * dz + reach;
    if (along > most) {
      most = along;
      name = -1;
      const a = reach > NOTHING ? p / reach : 0;
      const b = reach > NOTHING ? q / reach : 0;
      out[at] = world[c]! + a * world[w]! + b * world[w + 3]!;
      out[at + 1] = world[c + 1]! + a * world[w + 1]! + b * world[w + 4]!;
      out[at + 2] = world[c + 2]! + a * world[w + 2]! + b * world[w + 5]!;
    }
  }
  return name;
}
