import type { Vec3 } from "../frames.ts";
import { applyPose, poseOf } from "../geometry/turn.ts";
import type { Layout } from "../layout/schema.ts";

/** The `mass` section of the report: kg and mm. */
export interface MassReport {
  /** Sum of the masses that are given. */
  readonly total: number;
  /** Centre of mass, car frame; null while no mass is given. */
  readonly centre: Vec3 | null;
  readonly frontAxle: number;
  readonly rearAxle: number;
  /** Keys of parts without a mass: until they have one, everything above is too little. */
  readonly missing: readonly string[];
}

/**
 * Total, centre and axle loads by moments along x about the front axle line: rear = sum(m x) / wheelbase, front = total - rear.
 * Parts without a mass are named, never guessed; generated tyres have none and are not named. Exact to rounding.
 * Source: statics; worked example in facts.md section 8 (1200 kg at 1500 of 2500: 480 / 720).
 */
export function massReport(layout: Layout): MassReport {
  let total = 0;
  let mx = 0;
  let my = 0;
  let mz = 0;
  const missing: string[] = [];
  for (const part of layout.parts) {
    if (part.mass === undefined) {
      missing.push(part.key);
      continue;
    }
    const [x, y, z] = applyPose(poseOf(part), part.massAt);
    total += part.mass;
    mx += part.mass * x;
    my += part.mass * y;
    mz += part.mass * z;
  }
  const rearAxle = mx / layout.chassis.wheelbase;
  return { total, centre: total > 0 ? [mx / total, my / total, mz / total] : null, frontAxle: total - rearAxle, rearAxle, missing };
}
