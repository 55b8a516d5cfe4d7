import type { Vec3 } from "../frames.ts";
import { groundAt } from "../frames.ts";
import type { Piece } from "../geometry/piece.ts";
import type { Chassis } from "../layout/schema.ts";

/** A named thing of the stance: its pieces in the car frame, or bare points for a body line. */
export interface StanceItem {
  readonly key: string;
  readonly pieces: readonly Piece[];
}

/** A place on the ground-based side view: along = mm rearward from the front contact point, up = mm square to the ground. */
export interface Standing {
  readonly along: number;
  readonly up: number;
}

/** The tilted ground of a standing car: where its frame lies in the car frame's x-z plane. */
export interface GroundFrame {
  /** Height of the ground at x = 0, mm. */
  readonly z0: number;
  readonly cos: number;
  readonly sin: number;
  readonly front: { readonly centre: Standing; readonly radius: number };
  readonly rear: { readonly centre: Standing; readonly radius: number };
}

/** @returns the ground's frame: origin under the front axle line, `along` rearward on the ground, `up` square to it. */
export function groundFrame(chassis: Chassis): GroundFrame {
  const z0 = groundAt(chassis, 0);
  const rise = groundAt(chassis, chassis.wheelbase) - z0;
  const slope = Math.hypot(chassis.wheelbase, rise);
  const cos = chassis.wheelbase / slope;
  const sin = rise / slope;
  const stand = (x: number, z: number): Standing => ({ along: x * cos + (z - z0) * sin, up: -x * sin + (z - z0) * cos });
  const wheel = (x: number, radius: number) => ({ centre: stand(x, groundAt(chassis, x) + radius), radius });
  return {
    z0, cos, sin,
    front: wheel(0, chassis.front.tyre.loadedRadius),
    rear: wheel(chassis.wheelbase, chassis.rear.tyre.loadedRadius),
  };
}

/** Scratch result of `lowest`, reused: no allocation in loops. */
export interface Lowest {
  value: number;
  x: number;
  y: number;
  z: number;
}

/**
 * Least value of d.p over a piece, and where. Exact: a disc's least is at centre - (u (u.d) + v (v.d)) / |(u.d, v.d)|.
 * d = (dx, 0, dz) lies in the side view's plane; mm times |d|.
 */
export function lowest(piece: Piece, dx: number, dz: number, out: Lowest): void {
  out.value = Infinity;
  for (const p of piece.points) {
    const value = dx * p[0] + dz * p[2];
    if (value < out.value) {
      out.value = value; out.x = p[0]; out.y = p[1]; out.z = p[2];
    }
  }
  for (const disc of piece.discs) {
    const ud = dx * disc.u[0] + dz * disc.u[2];
    const vd = dx * disc.v[0] + dz * disc.v[2];
    const reach = Math.hypot(ud, vd);
    const value = dx * disc.centre[0] + dz * disc.centre[2] - reach;
    if (value < out.value) {
      const a = reach > 0 ? ud / reach : 0;
      const b = reach > 0 ? vd / reach : 0;
      out.value = value;
      out.x = disc.centre[0] - a * disc.u[0] - b * disc.v[0];
      out.y = disc.centre[1] - a * disc.u[1] - b * disc.v[1];
      out.z = disc.centre[2] - a * disc.u[2] - b * disc.v[2];
    }
  }
  if (piece.radius > 0) {
    const length = Math.hypot(dx, dz);
    out.value -= piece.radius * length;
    out.x -= (piece.radius * dx) / length;
    out.z -= (piece.radius * dz) / length;
  }
}

/** The point that governs a stance number, car frame. */
export interface Governor {
  readonly key: string;
  readonly point: Vec3;
}

/** Steps of the quarter turn in which a round piece is looked at, so that nothing hides below the tyre's own arc. */
const QUARTER_STEPS = 90;

/**
 * Least tangent angle, degrees, from the ground at a wheel to anything beyond it, and what governs.
 *
 * Every point beyond the wheel centre and outside the circle has its angle, also one low down between the tyre's foot and its farthest point: the line that is
 * tilted up meets it before the arc hides it. Over a convex piece the least is at a corner, or on a round edge, where it is found by moving the line.
 *
 * @param outward +1 behind the rear wheel (departure), -1 ahead of the front wheel (approach)
 * @returns null where nothing reaches beyond the tyre's own circle: no angle is limited. Expects nothing below the ground (`bodyReport` sees to it)
 * Accuracy 1e-10 degrees; a round edge that is below the tyre's own arc by less than 0.01 mm may be missed. Source: definition 49 CFR 523.2 / ISO 612 6.10, 6.11;
 * closed form for one point in facts (tangent from a point to a circle), tested against it.
 */
export function tangentAngle(items: readonly StanceItem[], ground: GroundFrame, outward: 1 | -1): { angle: number; governs: Governor } | null {
  const { centre, radius } = outward === 1 ? ground.rear : ground.front;
  const found: Lowest = { value: 0, x: 0, y: 0, z: 0 };
  let best = Math.PI / 2;
  let governs: Governor | null = null;
  /** Takes the point that was found, where its angle is less than the best so far. */
  const take = (key: string): boolean => {
    const along = outward * (found.x * ground.cos + (found.z - ground.z0) * ground.sin - centre.along);
    const up = -found.x * ground.sin + (found.z - ground.z0) * ground.cos - centre.up;
    const distance = Math.hypot(along, up);
    if (along <= 0 || distance <= radius) return false;
    const angle = Math.atan2(up, along) + Math.asin(radius / distance);
    if (!(angle < best - 1e-15)) return false;
    best = angle;
    governs = { key, point: [found.x, found.y, found.z] };
    return true;
  };
  /** The point of a piece that a line at this angle cuts most deeply: n = (-sin, cos) in (outward along, up), written in car axes. */
  const deepest = (piece: Piece, angle: number) => {
    const na = -Math.sin(angle) * outward;
    const nu = Math.cos(angle);
    lowest(piece, na * ground.cos - nu * ground.sin, na * ground.sin + nu * ground.cos, found);
  };
  for (const item of items) {
    for (const piece of item.pieces) {
      if (piece.radius === 0) {
        for (const p of piece.points) {
          found.x = p[0]; found.y = p[1]; found.z = p[2];
          take(item.key);
        }
        if (piece.discs.length === 0) continue;
      }
      if (isUnderArc(piece, ground, outward)) {
        for (let step = 0; step <= QUARTER_STEPS; step++) {
          deepest(piece, ((Math.PI / 2) * step) / QUARTER_STEPS);
          take(item.key);
        }
      }
      for (let step = 0; step < 100; step++) {
        deepest(piece, best);
        if (!take(item.key)) break;
      }
    }
  }
  return governs === null ? null : { angle: (best * 180) / Math.PI, governs };
}

/** True where a piece may have something below the wheel centre and no farther out than the tyre's own circle. */
function isUnderArc(piece: Piece, ground: GroundFrame, outward: 1 | -1): boolean {
  const { centre, radius } = outward === 1 ? ground.rear : ground.front;
  const least: Lowest = { value: 0, x: 0, y: 0, z: 0 };
  lowest(piece, -ground.sin, ground.cos, least);
  if (least.value - ground.z0 * ground.cos >= centre.up) return false;
  lowest(piece, outward * ground.cos, outward * ground.sin, least);
  return least.value - outward * ground.z0 * ground.sin - outward * centre.along < radius;
}

/** Sum of the tangent angles to both wheels at a place between them, radians; Infinity inside a tyre's circle or beyond the wheels. */
function breakoverAt(along: number, up: number, ground: GroundFrame): number {
  const xf = along - ground.front.centre.along;
  const xr = ground.rear.centre.along - along;
  if (xf <= 0 || xr <= 0) return Infinity;
  const zf = up - ground.front.centre.up;
  const zr = up - ground.rear.centre.up;
  const df = Math.hypot(xf, zf);
  const dr = Math.hypot(xr, zr);
  if (df <= ground.front.radius || dr <= ground.rear.radius) return Infinity;
  return Math.atan2(zf, xf) + Math.asin(ground.front.radius / df) + Math.atan2(zr, xr) + Math.asin(ground.rear.radius / dr);
}

/** Height of a piece's underside at a station, both in the ground's frame: the greatest over all supporting lines, a concave search. */
function undersideAt(piece: Piece, along: number, ground: GroundFrame, out: Lowest): { up: number; y: number } {
  // line with slope t supports the piece from below: up >= t along + min(up - t along)
  const at = (t: number) => {
    lowest(piece, -t * ground.cos - ground.sin, -t * ground.sin + ground.cos, out);
    return t * along + out.value - ground.z0 * (-t * ground.sin + ground.cos);
  };
  let low = -60;
  let high = 60;
  for (let step = 0; step < 90; step++) {
    const a = low + (high - low) * 0.382;
    const b = low + (high - low) * 0.618;
    if (at(a) < at(b)) low = a;
    else high = b;
  }
  const up = at((low + high) / 2);
  return { up, y: out.y };
}

/**
 * Least breakover angle, degrees, over everything between the axles, and what governs; null where nothing lies between.
 * Points of one angle lie on an arch whose inside is convex, so along the underside of a convex piece the angle falls and
 * then rises: golden-section search per piece, pieces whose box cannot beat the best are skipped. Accuracy 1e-6 degrees.
 */
export function breakoverAngle(items: readonly StanceItem[], ground: GroundFrame): { angle: number; governs: Governor } | null {
  const scratch: Lowest = { value: 0, x: 0, y: 0, z: 0 };
  let best = Infinity;
  let governs: Governor | null = null;
  for (const item of items) {
    for (const piece of item.pieces) {
      lowest(piece, ground.cos, ground.sin, scratch);
      let from = scratch.value - ground.z0 * ground.sin;
      lowest(piece, -ground.cos, -ground.sin, scratch);
      let to = -scratch.value - ground.z0 * ground.sin;
      from = Math.max(from, ground.front.centre.along);
      to = Math.min(to, ground.rear.centre.along);
      if (to < from) continue;
      lowest(piece, -ground.sin, ground.cos, scratch);
      const floor = scratch.value - ground.z0 * ground.cos;
      if (boxCannotBeat(from, to, floor, ground, best)) continue;
      const angleAt = (along: number) => breakoverAt(along, undersideAt(piece, along, ground, scratch).up, ground);
      for (const along of [leastAlong(angleAt, from, to, ground), from, to]) {
        const { up, y } = undersideAt(piece, along, ground, scratch);
        const angle = breakoverAt(along, up, ground);
        if (angle < best) {
          best = angle;
          governs = { key: item.key, point: [along * ground.cos - up * ground.sin, y, ground.z0 + along * ground.sin + up * ground.cos] };
        }
      }
    }
  }
  return governs === null ? null : { angle: (best * 180) / Math.PI, governs };
}

/** Where a function that falls and then rises is least: golden section. Inside a tyre's circle it is Infinity: walk out to the middle. */
function leastAlong(value: (along: number) => number, from: number, to: number, ground: GroundFrame): number {
  const middle = (ground.front.centre.along + ground.rear.centre.along) / 2;
  let low = from;
  let high = to;
  for (let step = 0; step < 80 && high - low > 1e-7; step++) {
    const a = low + (high - low) * 0.382;
    const b = low + (high - low) * 0.618;
    const fa = value(a);
    const fb = value(b);
    if (fa === Infinity && fb === Infinity) {
      if (a < middle) low = a;
      else high = b;
    } else if (fa <= fb) high = b;
    else low = a;
  }
  return (low + high) / 2;
}

/** True where even a level floor at the box's lowest point has no place with a smaller angle than the best so far. */
function boxCannotBeat(from: number, to: number, floor: number, ground: GroundFrame, best: number): boolean {
  if (best === Infinity) return false;
  const angleAt = (along: number) => breakoverAt(along, floor, ground);
  const least = Math.min(angleAt(from), angleAt(to), angleAt(leastAlong(angleAt, from, to, ground)));
  return least > best + 1e-9;
}
