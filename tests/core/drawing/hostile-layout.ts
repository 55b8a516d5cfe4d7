import fc from "fast-check";
import { VERDICTS, type Gap } from "#core/gaps/gap.ts";
import { layoutSchema, PART_KINDS, RUN_KINDS, type Layout, type LayoutInput } from "#core/layout/schema.ts";

/** Layouts nobody would draw, for sheets that must still be legible: long and foreign names, crowds at one place, things far away. */
const name = fc.oneof(
  fc.constantFrom("Engine", "Left muffler", "Radiator fan (not here yet)", "Clutch slave cylinder"),
  fc.string({ minLength: 1, maxLength: 120, unit: "binary" }),
  fc.string({ minLength: 60, maxLength: 120, unit: fc.constantFrom("W", "i", "Ø", "ß", "ж", "Ω", " ", "⅜", "→", "-", ">") }),
).map((text) => (text.trim() === "" ? "x" : text));
const place = (far: number) => fc.integer({ min: -Math.round(far), max: Math.round(far) }).map((v) => v / 10);
const size = fc.oneof({ weight: 6, arbitrary: fc.integer({ min: 10, max: 900 }) }, { weight: 1, arbitrary: fc.integer({ min: 1, max: 4000 }) });

const solid = fc.oneof(
  fc.tuple(size, size, size).map(([x, y, z]) => ({ type: "box" as const, size: [x, y, z] as [number, number, number] })),
  fc.tuple(size, size, fc.constantFrom("x" as const, "y" as const, "z" as const)).map(([diameter, length, axis]) => ({ type: "round" as const, diameter, length, axis })),
  size.map((diameter) => ({ type: "ball" as const, diameter })),
);

export interface HostileLayout {
  readonly layout: Layout;
  readonly gaps: readonly Gap[];
}

export function hostileLayout(most: { parts: number; gaps: number }): fc.Arbitrary<HostileLayout> {
  return fc.integer({ min: 0, max: 9 }).chain((kind) => {
    const far = kind === 0 ? 900_000 : kind === 1 ? 300 : 35_000;
    const at = fc.tuple(place(far), place(far / 3), place(far / 4));
    const part = fc.record({
      name, kind: fc.constantFrom(...PART_KINDS), solids: fc.array(solid, { minLength: 1, maxLength: 3 }), at, turn: fc.tuple(fc.integer({ min: -180, max: 180 }), fc.constantFrom(0, 12, 90), fc.constantFrom(0, -30, 180)),
      source: fc.record({ how: fc.constantFrom("measured" as const, "drawing" as const, "estimate" as const, "reserved" as const), plusMinus: fc.oneof(fc.constantFrom(0, 2, 12.5), fc.constant({ x: [-2, 30] as [number, number], y: [0, 0] as [number, number], z: [-1, 1.5] as [number, number] })) }),
    });
    const run = fc.record({ name, kind: fc.constantFrom(...RUN_KINDS), diameter: fc.integer({ min: 2, max: 80 }), bendRadius: fc.constantFrom(0, 20, 90), points: fc.array(at, { minLength: 2, maxLength: 6 }) });
    const datum = fc.record({ name, axis: fc.constantFrom("x" as const, "y" as const, "z" as const), at: place(far) });
    const gap = fc.record({ a: fc.nat(), b: fc.nat(), distance: place(3000), worst: place(3000), required: fc.integer({ min: 0, max: 200 }), verdict: fc.constantFrom(...VERDICTS), why: name, pointA: at, pointB: at, provisional: fc.boolean() });
    return fc
      .record({ name, parts: fc.array(part, { maxLength: most.parts }), runs: fc.array(run, { maxLength: 8 }), datums: fc.array(datum, { maxLength: kind === 2 ? 60 : 8 }), gaps: fc.array(gap, { maxLength: most.gaps }), wheelbase: fc.integer({ min: 1800, max: 3200 }), body: fc.boolean() })
      .map((made): HostileLayout => {
        const input: LayoutInput = {
          format: "handbreadth-layout", version: 1, name: made.name,
          chassis: {
            wheelbase: made.wheelbase,
            front: { track: 1480, rideHeight: 120, bump: 60, droop: 65, tyre: { diameter: 612, width: 205, loadedRadius: 292 } },
            rear: { track: 1500, rideHeight: 128, bump: 65, droop: 0, tyre: { diameter: 632, width: 225, loadedRadius: 302 } },
            datums: made.datums.map((one, i) => ({ key: `d-${i}`, ...one })),
          },
          parts: made.parts.map((one, i) => ({ key: `p-${i}`, ...one })),
          runs: made.runs.map(({ points, ...one }, i) => ({ key: `r-${i}`, ...one, nodes: points.map((p, n) => ({ key: `n${n}`, at: p })) })),
          body: made.body ? { side: [[-700, 100], [3300, 100], [3000, 1100], [900, 1150], [-500, 500]], top: [[-700, -800], [3300, -800], [3300, 800], [-700, 800]], rear: [[-800, 100], [800, 100], [500, 1100], [-500, 1100]], overhangLimit: { share: 0.4, why: "" } } : {},
        };
        const layout = layoutSchema.parse(input);
        const keys = [...layout.parts.map((p) => p.key), ...layout.runs.map((r) => r.key), "tyre-front-left", "gone"];
        const gaps = made.gaps.map(({ a, b, ...rest }): Gap => ({ ...rest, a: keys[a % keys.length]!, b: keys[b % keys.length]!, margin: rest.worst - rest.required, shares: { movement: 3, plusMinus: 0, growth: 1.25 } }));
        return { layout, gaps };
      });
  });
}
