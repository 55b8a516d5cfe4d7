import type { Body } from "./body.ts";
import { FACTS, START } from "./compile.ts";
import { tryDirection } from "./depth-search.ts";
import { NOTHING } from "./support.ts";
import { addGenerators, addTravel, CENTRE, GENERATORS } from "./depth-zonotope.ts";

/** Depth of a circular cylinder against a box, a segment or a point, with any travel. Exact to 1e-11 mm. */

/** The disc of `discDepth`: its radius times two unit directions in it. */
const DISC = new Float64Array(6);

/** Width of disc and zonotope along a unit direction. */
function discWidth(count: number, x: number, y: number, z: number): number {
  const p = DISC[0]! * x + DISC[1]! * y + DISC[2]! * z;
  const q = DISC[3]! * x + DISC[4]! * y + DISC[5]! * z;
  let width = Math.sqrt(p * p + q * q) + CENTRE[0]! * x + CENTRE[1]! * y + CENTRE[2]! * z;
  for (let k = 0; k < 3 * count; k += 3) {
    width += Math.abs(GENERATORS[k]! * x + GENERATORS[k + 1]! * y + GENERATORS[k + 2]! * z);
  }
  return width;
}

const FOUND = new Float64Array(4);
function offerWidth(width: number, x: number, y: number, z: number): void {
  if (width >= FOUND[0]!) return;
  FOUND[0] = width;
  FOUND[1] = x;
  FOUND[2] = y;
  FOUND[3] = z;
}

/**
 * A circular cylinder against a box, a segment or a point, with any travel: A - B - T is a disc plus a zonotope. Its surface
 * near the origin is flat (square to two generators, or to the disc) or swept by an edge of the zonotope (a direction square
 * to one generator); where only a corner meets the rim the surface is an edge, from which no shortest way leads. So the
 * directions square to each generator are searched, one circle at a time: there the width is the support function of a
 * convex figure in the plane, an ellipse about a corner between two breaks set by the other generators, and its least is
 * found by cutting (see `cutArc`).
 */
export function discDepth(
  round: Body,
  piece: number,
  sign: number,
  other: Body,
  otherPiece: number,
  a: Body,
  pieceA: number,
  b: Body,
  pieceB: number,
  travel: Float64Array | null,
): number {
  const { world } = round;
  const s = round.facts[FACTS * piece + START]!;
  CENTRE.fill(0);
  for (let k = 0; k < 3; k++) {
    CENTRE[k] = sign * world[s + k]!;
    GENERATORS[k] = world[s + 3 + k]!;
    DISC[k] = world[s + 6 + k]!;
    DISC[3 + k] = world[s + 9 + k]!;
  }
  let count = addGenerators(other, otherPiece, -sign, 1);
  if (travel !== null) count = addTravel(travel, count);
  FOUND[0] = Infinity;
  cuts = 0;
  for (let i = 0; i < count; i++) circleOf(i, count);
  const ax = GENERATORS[0]!;
  const ay = GENERATORS[1]!;
  const az = GENERATORS[2]!;
  const half = Math.sqrt(ax * ax + ay * ay + az * az);
  offerWidth(discWidth(count, ax / half, ay / half, az / half), ax / half, ay / half, az / half);
  offerWidth(discWidth(count, -ax / half, -ay / half, -az / half), -ax / half, -ay / half, -az / half);
  return tryDirection(a, pieceA, b, pieceB, travel, FOUND[1]!, FOUND[2]!, FOUND[3]!);
}

/** Unit directions of the breaks on one half of the circle, in its plane, sorted: two doubles each. */
const BREAKS = new Float64Array(48);
/** Two unit directions that span the circle. */
const CIRCLE = new Float64Array(6);
/** What the fixed part, and the disc's two half diameters, have along those two. */
const FLAT = new Float64Array(6);
/** Support point of the figure for the last direction asked. */
const TOUCH = new Float64Array(2);
/**
 * mm: cutting ends when nothing better by this can be left. A figure that is nearly round about the origin (a pin in the
 * middle of its hole) has no single best direction, so the more cuts were made, the less is asked; the best direction is
 * then settled by its slope.
 */
const CLOSE = 1e-11;
const CLOSE_LATER = 1e-8;
const CLOSE_LAST = 1e-4;
let cuts = 0;

/** The least width over the directions square to generator i. */
function circleOf(i: number, count: number): void {
  const gx = GENERATORS[3 * i]!;
  const gy = GENERATORS[3 * i + 1]!;
  const gz = GENERATORS[3 * i + 2]!;
  const length = Math.sqrt(gx * gx + gy * gy + gz * gz);
  if (!(length > NOTHING)) return;
  const x = gx / length;
  const y = gy / length;
  const z = gz / length;
  const mx = Math.abs(x);
  const my = Math.abs(y);
  const mz = Math.abs(z);
  let ux = mx <= my && mx <= mz ? 0 : my <= mz ? -z : y;
  let uy = mx <= my && mx <= mz ? z : my <= mz ? 0 : -x;
  let uz = mx <= my && mx <= mz ? -y : my <= mz ? x : 0;
  const across = Math.sqrt(ux * ux + uy * uy + uz * uz);
  ux /= across;
  uy /= across;
  uz /= across;
  const vx = y * uz - z * uy;
  const vy = z * ux - x * uz;
  const vz = x * uy - y * ux;
  CIRCLE[0] = ux;
  CIRCLE[1] = uy;
  CIRCLE[2] = uz;
  CIRCLE[3] = vx;
  CIRCLE[4] = vy;
  CIRCLE[5] = vz;
  FLAT[2] = DISC[0]! * ux + DISC[1]! * uy + DISC[2]! * uz;
  FLAT[3] = DISC[3]! * ux + DISC[4]! * uy + DISC[5]! * uz;
  FLAT[4] = DISC[0]! * vx + DISC[1]! * vy + DISC[2]! * vz;
  FLAT[5] = DISC[3]! * vx + DISC[4]! * vy + DISC[5]! * vz;
  // Breaks: the directions square to another generator too.
  let breaks = 0;
  for (let k = 0; k < count; k++) {
    if (k === i) continue;
    const p = GENERATORS[3 * k]! * ux + GENERATORS[3 * k + 1]! * uy + GENERATORS[3 * k + 2]! * uz;
    const q = GENERATORS[3 * k]! * vx + GENERATORS[3 * k + 1]! * vy + GENERATORS[3 * k + 2]! * vz;
    const size = Math.sqrt(p * p + q * q);
    if (size > 1e-14 * length) breaks = addBreak(-q / size, p / size, breaks);
  }
  if (breaks < 2) breaks = addBreak(breaks === 0 ? 1 : -BREAKS[1]!, breaks === 0 ? 0 : BREAKS[0]!, breaks);
  if (breaks < 2) breaks = addBreak(-BREAKS[1]!, BREAKS[0]!, breaks);
  for (let turn = 1; turn >= -1; turn -= 2) {
    for (let k = 0; k < breaks; k++) {
      const last = k + 1 === breaks;
      const end = last ? 0 : 2 * k + 2;
      const flip = last ? -turn : turn;
      arcMinimum(i, count, turn * BREAKS[2 * k]!, turn * BREAKS[2 * k + 1]!, flip * BREAKS[end]!, flip * BREAKS[end + 1]!);
    }
  }
}

/** Sorts a direction, turned into the half plane above, in among the breaks; returns how many there are then. */
function addBreak(givenX: number, givenY: number, breaks: number): number {
  const sign = givenY < 0 || (givenY === 0 && givenX < 0) ? -1 : 1;
  const x = sign * givenX;
  const y = sign * givenY;
  let at = breaks;
  while (at > 0 && BREAKS[2 * at - 2]! < x) {
    BREAKS[2 * at] = BREAKS[2 * at - 2]!;
    BREAKS[2 * at + 1] = BREAKS[2 * at - 1]!;
    at--;
  }
  BREAKS[2 * at] = x;
  BREAKS[2 * at + 1] = y;
  return breaks + 1;
}

/** Width along a direction of the circle's plane while no generator changes sides; keeps it if it is the least. */
function arcWidth(c: number, s: number): number {
  const p = FLAT[2]! * c + FLAT[4]! * s;
  const q = FLAT[3]! * c + FLAT[5]! * s;
  const reach = Math.sqrt(p * p + q * q);
  const a = reach > NOTHING ? p / reach : 0;
  const b = reach > NOTHING ? q / reach : 0;
  TOUCH[0] = FLAT[0]! + a * FLAT[2]! + b * FLAT[3]!;
  TOUCH[1] = FLAT[1]! + a * FLAT[4]! + b * FLAT[5]!;
  const width = FLAT[0]! * c + FLAT[1]! * s + reach;
  if (width < FOUND[0]!) {
    FOUND[0] = width;
    FOUND[1] = c * CIRCLE[0]! + s * CIRCLE[3]!;
    FOUND[2] = c * CIRCLE[1]! + s * CIRCLE[4]!;
    FOUND[3] = c * CIRCLE[2]! + s * CIRCLE[5]!;
  }
  return width;
}

/** The least width on an arc of the circle on which no generator changes sides. */
function arcMinimum(skip: number, count: number, c1: number, s1: number, c2: number, s2: number): void {
  let mx = (c1 + c2) * CIRCLE[0]! + (s1 + s2) * CIRCLE[3]!;
  let my = (c1 + c2) * CIRCLE[1]! + (s1 + s2) * CIRCLE[4]!;
  let mz = (c1 + c2) * CIRCLE[2]! + (s1 + s2) * CIRCLE[5]!;
  if (Math.abs(c1 + c2) + Math.abs(s1 + s2) < 1e-12) {
    // A half turn: its middle is a quarter on.
    mx = -s1 * CIRCLE[0]! + c1 * CIRCLE[3]!;
    my = -s1 * CIRCLE[1]! + c1 * CIRCLE[4]!;
    mz = -s1 * CIRCLE[2]! + c1 * CIRCLE[5]!;
  }
  let px = CENTRE[0]!;
  let py = CENTRE[1]!;
  let pz = CENTRE[2]!;
  for (let k = 0; k < count; k++) {
    if (k === skip) continue;
    const gx = GENERATORS[3 * k]!;
    const gy = GENERATORS[3 * k + 1]!;
    const gz = GENERATORS[3 * k + 2]!;
    const side = gx * mx + gy * my + gz * mz < 0 ? -1 : 1;
    px += side * gx;
    py += side * gy;
    pz += side * gz;
  }
  FLAT[0] = px * CIRCLE[0]! + py * CIRCLE[1]! + pz * CIRCLE[2]!;
  FLAT[1] = px * CIRCLE[3]! + py * CIRCLE[4]! + pz * CIRCLE[5]!;
  arcWidth(c1, s1);
  const x1 = TOUCH[0]!;
  const y1 = TOUCH[1]!;
  const before = arcWidth(c2, s2);
  const made = cuts;
  const best = Math.min(FOUND[0]!, before);
  cutArc(x1, y1, TOUCH[0]!, TOUCH[1]!, 0);
  if (cuts > 300 && cuts > made && FOUND[0]! < best) settle();
}

/** From the best direction of this circle to where the slope of the width is nothing: secants, as long as they gain. */
function settle(): void {
  let c = FOUND[1]! * CIRCLE[0]! + FOUND[2]! * CIRCLE[1]! + FOUND[3]! * CIRCLE[2]!;
  let s = FOUND[1]! * CIRCLE[3]! + FOUND[2]! * CIRCLE[4]! + FOUND[3]! * CIRCLE[5]!;
  arcWidth(c, s);
  let slope = TOUCH[1]! * c - TOUCH[0]! * s;
  let step = slope < 0 ? 1e-4 : -1e-4;
  for (let k = 0; k < 30 && Math.abs(step) > 1e-13; k++) {
    const length = Math.sqrt(1 + step * step);
    const next = (c - step * s) / length;
    s = (s + step * c) / length;
    c = next;
    arcWidth(c, s);
    const now = TOUCH[1]! * c - TOUCH[0]! * s;
    if (now === slope) return;
    step = Math.max(-0.1, Math.min(0.1, (-now * step) / (now - slope)));
    slope = now;
  }
}

/**
 * Between two directions with support points 1 and 2 the width is at least that of the chord 1 2 along its own normal (or
 * one of the ends, which are known): if that could be better than the best, the figure is asked along that normal and both
 * halves are cut again.
 */
function cutArc(x1: number, y1: number, x2: number, y2: number, depth: number): void {
  const dx = x2 - x1;
  const dy = y2 - y1;
  const length = Math.sqrt(dx * dx + dy * dy);
  if (!(length > 1e-13) || depth > 40) return;
  const c = dy / length;
  const s = -dx / length;
  const close = cuts < 300 ? CLOSE : cuts < 1000 ? CLOSE_LATER : CLOSE_LAST;
  if (Math.max(0, x1 * c + y1 * s) > FOUND[0]! - close) return;
  cuts++;
  arcWidth(c, s);
  const x = TOUCH[0]!;
  const y = TOUCH[1]!;
  cutArc(x1, y1, x, y, depth + 1);
  cutArc(x, y, x2, y2, depth + 1);
}
