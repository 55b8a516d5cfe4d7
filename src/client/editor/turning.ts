import type { Vec3, View } from "#core/frames.ts";
import { multiplyPose, poseOf, turnOf } from "#core/geometry/turn.ts";
import type { Command } from "#core/layout/commands.ts";
import type { Part } from "#core/layout/schema.ts";

/** Turning a part in a view by an angle seen on the paper, anticlockwise: about the axis toward the reader, through a pivot in the car frame (its own origin where none is given). */
export function turnInView(part: Part, view: View, anticlockwise: number, pivot: Vec3 = part.at): Command {
  // seen from above and from behind, anticlockwise on paper is right-handed about up and rearward; from the left it is the other way about y
  const turn: Vec3 = view === "plan" ? [0, 0, anticlockwise] : view === "side" ? [0, -anticlockwise, 0] : [anticlockwise, 0, 0];
  const by = poseOf({ at: [0, 0, 0], turn }).rotation;
  const rotation = multiplyPose({ rotation: by, at: [0, 0, 0] }, { rotation: poseOf(part).rotation, at: [0, 0, 0] }).rotation;
  const arm = part.at.map((value, k) => value - pivot[k]!) as unknown as Vec3;
  const swung = [0, 1, 2].map((row) => pivot[row]! + by[3 * row]! * arm[0] + by[3 * row + 1]! * arm[1] + by[3 * row + 2]! * arm[2]);
  const round = (value: number) => Math.round(value * 1000) / 1000 + 0;
  return { kind: "place", key: part.key, at: swung.map(round) as [number, number, number], turn: turnOf(rotation).map(round) as [number, number, number] };
}

/**
 * What the trade calls it, for an angle seen anticlockwise in a view: lean forward or back (from the side), lean out or in (from behind; left or right on the centre
 * plane), turn left or right (from above, as a car turns).
 * @param y where the part stands across the car, mm, right positive
 */
export function turnWords(view: View, y: number, anticlockwise: number): string {
  const angle = `${Math.abs(anticlockwise).toFixed(1)}°`;
  if (view === "plan") return `turn ${anticlockwise >= 0 ? "left" : "right"} ${angle}`;
  if (view === "side") return `lean ${anticlockwise >= 0 ? "forward" : "back"} ${angle}`;
  // seen from behind, anticlockwise takes the top to the left
  if (Math.abs(y) < 1) return `lean ${anticlockwise >= 0 ? "left" : "right"} ${angle}`;
  return `lean ${anticlockwise >= 0 === y < 0 ? "out" : "in"} ${angle}`;
}
