import type { Solid } from "#core/layout/schema.ts";

export type SolidType = Solid["type"];

/** Every solid: its word, and when one takes it. */
export const SOLID_WORDS: Readonly<Record<SolidType, { readonly word: string; readonly when: string }>> = {
  box: { word: "box", when: "square on all sides: a battery, a computer" },
  round: { word: "round", when: "a cylinder: a canister, a can, a wheel" },
  cone: { word: "cone", when: "a cylinder that narrows: a funnel, a collector" },
  oval: { word: "oval", when: "flat-sided with round ends: a flat muffler" },
  ball: { word: "ball", when: "a sphere: a joint, a knob" },
  prism: { word: "outline pushed straight", when: "one outline and a thickness: a bracket, a plate" },
  outlines: { word: "two or three outlines", when: "top, side and rear drawings of one thing: an engine" },
  bar: { word: "bar or tube", when: "from point to point: a frame tube" },
  sheet: { word: "sheet from points", when: "a curved panel or glass, measured on a grid" },
};
export const SOLID_TYPES = Object.keys(SOLID_WORDS) as SolidType[];

/** A solid to begin with: small, whole, to be typed over. */
export function newSolid(type: SolidType): Solid {
  const place = { at: [0, 0, 0] as [number, number, number], turn: [0, 0, 0] as [number, number, number] };
  switch (type) {
    case "box": return { type, size: [200, 150, 100], ...place };
    case "round": return { type, diameter: 120, length: 250, axis: "x", ...place };
    case "cone": return { type, diameters: [120, 60], length: 150, axis: "x", ...place };
    case "oval": return { type, width: 270, height: 120, length: 500, axis: "x", ...place };
    case "ball": return { type, diameter: 80, ...place };
    case "prism": return { type, plane: "xz", outline: [[0, 0], [200, 0], [200, 80], [60, 140], [0, 140]], from: -20, to: 20, ...place };
    case "outlines": return { type, top: [[-200, -150], [200, -150], [200, 150], [-200, 150]], side: [[-200, 0], [200, 0], [140, 260], [-200, 260]], ...place };
    case "bar": return { type, from: [0, 0, 0], to: [500, 0, 0], diameter: 40, roll: 0, ...place };
    case "sheet": return { type, rows: [[[0, -300, 0], [0, 0, 30], [0, 300, 0]], [[400, -280, -120], [400, 0, -90], [400, 280, -120]]], thickness: 5, ...place };
  }
}

/** A solid in a few words and numbers, in mm: "round 120 x 250 along x". */
export function solidText(solid: Solid, length: (mm: number) => string): string {
  switch (solid.type) {
    case "box": return `box ${solid.size.map(length).join(" x ")}`;
    case "round": return `round ${length(solid.diameter)}, ${length(solid.length)} long`;
    case "cone": return `cone ${solid.diameters.map(length).join(" to ")}, ${length(solid.length)} long`;
    case "oval": return `oval ${length(solid.width)} x ${length(solid.height)}, ${length(solid.length)} long`;
    case "ball": return `ball ${length(solid.diameter)}`;
    case "prism": return `outline of ${solid.outline.length} points, ${length(Math.abs(solid.to - solid.from))} thick`;
    case "outlines": return `outlines: ${[solid.top && "top", solid.side && "side", solid.rear && "rear"].filter(Boolean).join(", ")}`;
    case "bar": return solid.diameter !== undefined ? `tube ${length(solid.diameter)}` : `bar ${solid.size?.map(length).join(" x ") ?? ""}`;
    case "sheet": return `sheet of ${solid.rows.length} x ${solid.rows[0]?.length ?? 0} points, ${length(solid.thickness)} thick`;
  }
}
