import { groundAt } from "../frames.ts";
import { partSchema, type Layout, type Part, WHEEL_NAMES } from "./schema.ts";

export type WheelName = (typeof WHEEL_NAMES)[number];
/** Key of the tyre that the chassis implies at a wheel. */
export const tyreKey = (wheel: WheelName): string => `tyre-${wheel}`;
export const GENERATED_KEYS: ReadonlySet<string> = new Set(WHEEL_NAMES.map(tyreKey));

/** Centre of a wheel as it stands, car frame, mm: z is the ground there and the loaded radius. */
export function wheelCentre(layout: Pick<Layout, "chassis">, wheel: WheelName): [number, number, number] {
  const axle = wheel.startsWith("front") ? layout.chassis.front : layout.chassis.rear;
  const x = wheel.startsWith("front") ? 0 : layout.chassis.wheelbase;
  const side = wheel.endsWith("left") ? -1 : 1;
  return [x, (side * axle.track) / 2, groundAt(layout.chassis, x) + axle.tyre.loadedRadius];
}

/**
 * The four tyres that the chassis implies, less those the document lists itself: cylinders of the free diameter about y, moving by bump and
 * droop. Never exported, without mass.
 */
export function generatedTyres(layout: Pick<Layout, "chassis" | "parts">): Part[] {
  const listed = new Set(layout.parts.map((part) => part.key));
  return WHEEL_NAMES.filter((wheel) => !listed.has(tyreKey(wheel))).map((wheel) => {
    const axle = wheel.startsWith("front") ? layout.chassis.front : layout.chassis.rear;
    return partSchema.parse({
      key: tyreKey(wheel),
      name: `${wheel.startsWith("front") ? "Front" : "Rear"} ${wheel.endsWith("left") ? "left" : "right"} tyre`,
      kind: "tyre",
      solids: [{ type: "round", diameter: axle.tyre.diameter, length: axle.tyre.width, axis: "y" }],
      at: wheelCentre(layout, wheel),
      movement: { z: [-axle.droop + 0, axle.bump] },
    });
  });
}
