import type { Vec3 } from "../frames.ts";
import type { Piece } from "../geometry/piece.ts";
import type { Layout } from "../layout/schema.ts";
import { breakoverAngle, groundFrame, lowest, tangentAngle, type Governor, type GroundFrame, type Lowest, type StanceItem } from "./stance-geometry.ts";
import { standingItems } from "./standing-items.ts";

/** mm: what lies in the ground by less stands on it. */
const SLACK = 1e-6;

export interface BodyFinding {
  readonly code: "over-limit" | "no-limit-known" | "below-ground" | "nothing-to-measure" | "shape";
  readonly message: string;
  readonly key?: string;
}

/** The `body` section of the report: mm and degrees; null where it cannot be computed, with a finding that says why. */
export interface BodyReport {
  readonly wheelbase: number;
  readonly length: number | null;
  readonly frontOverhang: number | null;
  readonly rearOverhang: number | null;
  readonly rearOverhangShare: number | null;
  readonly approachAngle: number | null;
  readonly departureAngle: number | null;
  readonly breakoverAngle: number | null;
  readonly groundClearance: number | null;
  /** Keys of what governs each number: a part, run or shaft, or "body" for a body line. */
  readonly governs: Readonly<Partial<Record<GovernedNumber, string>>>;
  readonly findings: readonly BodyFinding[];
}
export type GovernedNumber = "frontOverhang" | "rearOverhang" | "approachAngle" | "departureAngle" | "breakoverAngle" | "groundClearance";

/** What the views draw beside the numbers: the point that governs each, car frame. */
export interface Stance {
  readonly report: BodyReport;
  readonly ground: GroundFrame;
  readonly points: Readonly<Partial<Record<GovernedNumber, Vec3>>>;
}

/**
 * The `body` section: lengths, overhangs, angles, ground clearance, from the layout as drawn.
 * Lengths along x over all parts, runs and body lines; angles and clearance against the tilted ground, tyres and brakes left out.
 * @example an empty layout gives wheelbase only, with the finding "nothing-to-measure"
 */
export function bodyReport(layout: Layout): BodyReport {
  return measureStance(layout).report;
}

/** As `bodyReport`, with the governing points and the ground's frame for drawing. */
export function measureStance(layout: Layout): Stance {
  const { rigid, low, unreadable } = standingItems(layout);
  const ground = groundFrame(layout.chassis);
  const findings: BodyFinding[] = unreadable.map(({ key, message }) => ({ code: "shape", key, message }));
  const wheelbase = layout.chassis.wheelbase;

  const front = farthest(rigid, -1);
  const rear = farthest(rigid, 1);
  if (!front || !rear) findings.push({ code: "nothing-to-measure", message: "No part, run or body line is drawn yet: lengths and angles cannot be computed." });
  const rearOverhang = rear ? rear.point[0] - wheelbase : null;
  const rearOverhangShare = rearOverhang === null ? null : rearOverhang / wheelbase;

  const clearance = leastClearance(low, ground);
  const sunk = clearance !== null && clearance.height < -SLACK;
  // no car stands with a part in the ground: a line from the ground clears nothing then
  const approach = sunk ? null : tangentAngle(low, ground, -1);
  const departure = sunk ? null : tangentAngle(low, ground, 1);
  const breakover = sunk ? null : breakoverAngle(low, ground);
  if (front && !approach && !sunk) findings.push({ code: "no-limit-known", message: "Nothing reaches ahead of the front tyres: no approach angle is limited." });
  if (rear && !departure && !sunk) findings.push({ code: "no-limit-known", message: "Nothing reaches behind the rear tyres: no departure angle is limited." });
  if (sunk) {
    findings.push({ code: "below-ground", key: clearance.governs.key, message: `${clearance.governs.key} lies ${(-clearance.height).toFixed(1)} mm below the ground: angles cannot be computed.` });
  }
  const limit = layout.body.overhangLimit;
  if (limit && rearOverhang !== null && rearOverhang > limit.share * wheelbase + 1e-9) {
    const over = rearOverhang - limit.share * wheelbase;
    findings.push({
      code: "over-limit", key: rear!.key,
      message: `Rear overhang ${rearOverhang.toFixed(1)} mm is ${over.toFixed(1)} mm more than the limit of ${limit.share} of the wheelbase (${(limit.share * wheelbase).toFixed(1)} mm)${limit.why ? `: ${limit.why}` : ""}. Informative: check your authority.`,
    });
  }

  const governing: [GovernedNumber, Governor | null | undefined][] = [
    ["frontOverhang", front], ["rearOverhang", rear], ["approachAngle", approach?.governs], ["departureAngle", departure?.governs],
    ["breakoverAngle", breakover?.governs], ["groundClearance", clearance?.governs],
  ];
  const known = governing.filter((entry): entry is [GovernedNumber, Governor] => !!entry[1]);
  return {
    report: {
      wheelbase,
      length: front && rear ? rear.point[0] - front.point[0] : null,
      frontOverhang: front ? -front.point[0] : null,
      rearOverhang, rearOverhangShare,
      approachAngle: approach?.angle ?? null,
      departureAngle: departure?.angle ?? null,
      breakoverAngle: breakover?.angle ?? null,
      groundClearance: clearance?.height ?? null,
      governs: Object.fromEntries(known.map(([name, governor]) => [name, governor.key])),
      findings,
    },
    ground,
    points: Object.fromEntries(known.map(([name, governor]) => [name, governor.point])),
  };
}

function extreme(items: readonly StanceItem[], dx: number, dz: number): { value: number; governs: Governor } | null {
  const scratch: Lowest = { value: 0, x: 0, y: 0, z: 0 };
  let best: { value: number; governs: Governor } | null = null;
  for (const item of items) {
    for (const piece of item.pieces as readonly Piece[]) {
      lowest(piece, dx, dz, scratch);
      if (!best || scratch.value < best.value) best = { value: scratch.value, governs: { key: item.key, point: [scratch.x, scratch.y, scratch.z] } };
    }
  }
  return best;
}

function farthest(items: readonly StanceItem[], sign: 1 | -1): Governor | null {
  return extreme(items, -sign, 0)?.governs ?? null;
}

function leastClearance(items: readonly StanceItem[], ground: GroundFrame): { height: number; governs: Governor } | null {
  const found = extreme(items, -ground.sin, ground.cos);
  return found && { height: found.value - ground.z0 * ground.cos, governs: found.governs };
}
