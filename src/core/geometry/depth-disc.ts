import type { Body } from "./body.ts";
import { tryDirection } from "./depth-search.ts";
import { addGenerators, addTravel, CENTRE, GENERATORS } from "./depth-zonotope.ts";

/** Depth of a circular cylinder against a box, a segment or a point, with any travel. Exact to rounding. */

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

/** Samples between two breaks of a circle of directions. */
const SAMPLES = 10;
const BREAKS = new Float64Array(24);
/** Two unit directions that span the circle; what the fixed part, and the disc's two half diameters, have along them. */
const CIRCLE = new Float64Array(6);
const FLAT = new Float64Array(6);
/** Slope of the width at the last angle asked for. */
const SLOPE = new Float64Array(1);

/**
 * A circular cylinder against a box, a segment or a point, with any travel: A - B - T is a disc plus a zonotope. Its surface
 * near the origin is flat (square to two generators, or to the disc) or swept by an edge of the zonotope (a direction square
 * to one generator); where only a corner meets the rim the surface is an edge, from which no shortest way leads. So the
 * directions square to each generator are searched, one circle at a time: between the breaks set by the others the width is
 * smooth: the support of a point and an ellipse in the plane. Where its slope turns from falling to rising it is narrowed.
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
  const s = round.start[piece]!;
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
  for (let i = 0; i < count; i++) circleOf(i, count);
  const ax = GENERATORS[0]!;
  const ay = GENERATORS[1]!;
  const az = GENERATORS[2]!;
  const half = Math.sqrt(ax * ax + ay * ay + az * az);
  offerWidth(discWidth(count, ax / half, ay / half, az / half), ax / half, ay / half, az / half);
  offerWidth(discWidth(count, -ax / half, -ay / half, -az / half), -ax / half, -ay / half, -az / half);
  return tryDirection(a, pieceA, b, pieceB, travel, FOUND[1]!, FOUND[2]!, FOUND[3]!);
}

/** The least width over the directions square to generator i. */
function circleOf(i: number, count: number): void {
  const gx = GENERATORS[3 * i]!;
  const gy = GENERATORS[3 * i + 1]!;
  const gz = GENERATORS[3 * i + 2]!;
  const length = Math.sqrt(gx * gx + gy * gy + gz * gz);
  if (!(length > 0)) return;
  const x = gx / length;
  const y = gy / length;
  const z = gz / length;
  const [mx, my, mz] = [Math.abs(x), Math.abs(y), Math.abs(z)];
  let ux = mx <= my && mx <= mz ? 0 : my <= mz ? -z : y;
  let uy = mx <= my && mx <= mz ? z : my <= mz ? 0 : -x;
  let uz = mx <= my && mx <= mz ? -y : my <= mz ? x : 0;
  const across = Math.sqrt(ux * ux + uy * uy + uz * uz);
  ux /= across;
  uy /= across;
  uz /= across;
  CIRCLE[0] = ux;
  CIRCLE[1] = uy;
  CIRCLE[2] = uz;
  CIRCLE[3] = y * uz - z * uy;
  CIRCLE[4] = z * ux - x * uz;
  CIRCLE[5] = x * uy - y * ux;
  // Breaks: the directions square to another generator too, and that in which the disc is seen nearest to edge on.
  let breaks = 0;
  for (let k = 0; k < count; k++) {
    if (k === i) continue;
    const p = GENERATORS[3 * k]! * ux + GENERATORS[3 * k + 1]! * uy + GENERATORS[3 * k + 2]! * uz;
    const q = GENERATORS[3 * k]! * CIRCLE[3]! + GENERATORS[3 * k + 1]! * CIRCLE[4]! + GENERATORS[3 * k + 2]! * CIRCLE[5]!;
    if (p * p + q * q > 0) breaks = addBreak(Math.atan2(-p, q), breaks);
  }
  for (let k = 0; k < 2; k++) {
    const o = 3 * k;
    FLAT[2 + k] = DISC[o]! * ux + DISC[o + 1]! * uy + DISC[o + 2]! * uz;
    FLAT[4 + k] = DISC[o]! * CIRCLE[3]! + DISC[o + 1]! * CIRCLE[4]! + DISC[o + 2]! * CIRCLE[5]!;
  }
  const cc = FLAT[2]! * FLAT[2]! + FLAT[3]! * FLAT[3]!;
  const ss = FLAT[4]! * FLAT[4]! + FLAT[5]! * FLAT[5]!;
  const cs = FLAT[2]! * FLAT[4]! + FLAT[3]! * FLAT[5]!;
  breaks = addBreak(Math.atan2(2 * cs, cc - ss) / 2 + Math.PI / 2, breaks);
  for (let turn = 0; turn < 2; turn++) {
    for (let k = 0; k < breaks; k++) {
      const from = BREAKS[k]! + turn * Math.PI;
      const to = k + 1 < breaks ? BREAKS[k + 1]! + turn * Math.PI : BREAKS[0]! + (turn + 1) * Math.PI;
      arcMinimum(i, count, from, to);
    }
  }
}

/** Sorts an angle, brought into [0, pi), in among the breaks; returns how many there are then. */
function addBreak(given: number, breaks: number): number {
  const angle = given < 0 ? given + Math.PI : given >= Math.PI ? given - Math.PI : given;
  let at = breaks;
  while (at > 0 && BREAKS[at - 1]! > angle) {
    BREAKS[at] = BREAKS[at - 1]!;
    at--;
  }
  BREAKS[at] = angle;
  return breaks + 1;
}

/** Width at an angle of the current arc, and its slope. */
function arcWidth(angle: number): number {
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  const p = FLAT[2]! * c + FLAT[4]! * s;
  const q = FLAT[3]! * c + FLAT[5]! * s;
  const reach = Math.sqrt(p * p + q * q);
  const turn = p * (FLAT[4]! * c - FLAT[2]! * s) + q * (FLAT[5]! * c - FLAT[3]! * s);
  SLOPE[0] = FLAT[1]! * c - FLAT[0]! * s + (reach > 0 ? turn / reach : 0);
  return FLAT[0]! * c + FLAT[1]! * s + reach;
}

function keepAngle(width: number, angle: number): void {
  if (width >= FOUND[0]!) return;
  const c = Math.cos(angle);
  const s = Math.sin(angle);
  offerWidth(
    width,
    c * CIRCLE[0]! + s * CIRCLE[3]!,
    c * CIRCLE[1]! + s * CIRCLE[4]!,
    c * CIRCLE[2]! + s * CIRCLE[5]!,
  );
}

/** The least width on an arc of the circle on which no generator changes sides. */
function arcMinimum(skip: number, count: number, from: number, to: number): void {
  const middle = (from + to) / 2;
  const c = Math.cos(middle);
  const s = Math.sin(middle);
  let px = CENTRE[0]!;
  let py = CENTRE[1]!;
  let pz = CENTRE[2]!;
  for (let k = 0; k < count; k++) {
    if (k === skip) continue;
    const gx = GENERATORS[3 * k]!;
    const gy = GENERATORS[3 * k + 1]!;
    const gz = GENERATORS[3 * k + 2]!;
    const along =
      c * (gx * CIRCLE[0]! + gy * CIRCLE[1]! + gz * CIRCLE[2]!) + s * (gx * CIRCLE[3]! + gy * CIRCLE[4]! + gz * CIRCLE[5]!);
    const side = along < 0 ? -1 : 1;
    px += side * gx;
    py += side * gy;
    pz += side * gz;
  }
  FLAT[0] = px * CIRCLE[0]! + py * CIRCLE[1]! + pz * CIRCLE[2]!;
  FLAT[1] = px * CIRCLE[3]! + py * CIRCLE[4]! + pz * CIRCLE[5]!;
  keepAngle(arcWidth(from), from);
  let slope = SLOPE[0]!;
  let angle = from;
  const step = (to - from) / SAMPLES;
  if (!(step > 1e-12)) return;
  for (let k = 1; k <= SAMPLES; k++) {
    const next = from + k * step;
    const width = arcWidth(next);
    const slopeNext = SLOPE[0]!;
    if (slope < 0 && slopeNext > 0) narrow(angle, slope, next, slopeNext);
    else keepAngle(width, next);
    slope = slopeNext;
    angle = next;
  }
}

/** Where the slope turns from falling to rising: regula falsi (Illinois), then halving if it should stall. */
function narrow(a: number, slopeA: number, b: number, slopeB: number): void {
  let low = a;
  let high = b;
  let f = slopeA;
  let g = slopeB;
  for (let k = 0; k < 60 && high - low > 1e-12; k++) {
    let t = k < 20 ? (low * g - high * f) / (g - f) : (low + high) / 2;
    if (!(t > low && t < high)) t = (low + high) / 2;
    keepAngle(arcWidth(t), t);
    const slope = SLOPE[0]!;
    if (Math.abs(slope) < 1e-9) return;
    if (slope < 0) {
      low = t;
      f = slope;
      g /= 2;
    } else {
      high = t;
      g = slope;
      f /= 2;
    }
  }
}
