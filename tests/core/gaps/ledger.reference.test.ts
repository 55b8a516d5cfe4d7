import { describe, expect, it } from "vitest";
import { checkGaps } from "../../../src/core/gaps/scene.ts";
import { layoutSchema, type Layout, type LayoutInput } from "../../../src/core/layout/schema.ts";

type PartInput = NonNullable<LayoutInput["parts"]>[number];
const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const layoutOf = (rest: Partial<LayoutInput>): Layout =>
  layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name: "t",
    chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } }, ...rest,
  });
const cube = (key: string, x: number, rest: Partial<PartInput> = {}): PartInput => ({ key, name: key, kind: "other", solids: [{ type: "box", size: [100, 100, 100] }], at: [x, 0, 1500], ...rest });
const only = (layout: Layout) => {
  const { gaps } = checkGaps(layout);
  expect(gaps).toHaveLength(1);
  return gaps[0]!;
};

describe("checkGaps", () => {
  it("measures two cubes: drawn 40, need 10, margin 30, clear, closest points on the facing sides", () => {
    const gap = only(layoutOf({ parts: [cube("a", 1000), cube("b", 1140)] }));
    expect(gap).toMatchObject({ a: "a", b: "b", distance: 40, worst: 40, required: 10, margin: 30, verdict: "clear", provisional: false });
    expect(gap.pointA[0]).toBe(1050);
    expect(gap.pointB[0]).toBe(1090);
  });

  it.each([
    [100, "touch"], [99, "touch"], [100.0000005, "touch"], [105, "short"], [109.9, "short"], [110, "tight"], [114.9, "tight"], [115, "clear"],
  ])("at %d mm between centres says %s (band 5, need 10)", (distance, verdict) => {
    expect(only(layoutOf({ parts: [cube("a", 1000), cube("b", 1000 + distance)] })).verdict).toBe(verdict);
  });

  it("takes movement and plus-minus off, itemised: 40 - 8 - 5 - 2 - 3 = 22", () => {
    const gap = only(layoutOf({ parts: [
      cube("a", 1000, { movement: { x: [-4, 8] }, source: { plusMinus: 2 } }),
      cube("b", 1140, { movement: { x: [-5, 4], y: [-3, 3] }, source: { how: "estimate", plusMinus: 3 } }),
    ] }));
    expect(gap.worst).toBeCloseTo(22, 9);
    expect(gap.shares.movement).toBeCloseTo(13, 9);
    expect(gap.shares).toMatchObject({ plusMinus: 5, growth: 0 });
    expect(gap.provisional).toBe(true);
  });

  it("says rub where they touch only when moved", () => {
    expect(only(layoutOf({ parts: [cube("a", 1000, { movement: { x: [0, 40] } }), cube("b", 1140)] })).verdict).toBe("rub");
  });

  it("does not move two parts of one engine against each other, nor a part against its carrier but by its own movement", () => {
    const engine = cube("engine", 1000, { movement: { x: [-20, 20] } });
    const onEngine = (key: string, x: number, movement = {}) => cube(key, x, { carriedBy: "engine", movement });
    const layout = layoutOf({ parts: [engine, onEngine("pump", 1140, { x: [-3, 3] }), onEngine("sender", 1280), cube("rail", 1420)] });
    const { gaps } = checkGaps(layout);
    const worst = (a: string, b: string) => gaps.find((gap) => gap.a === a && gap.b === b)!.worst;
    expect(worst("engine", "pump")).toBeCloseTo(37, 9);
    expect(worst("pump", "sender")).toBeCloseTo(37, 9);
    expect(worst("sender", "rail")).toBeCloseTo(20, 9);
  });

  it("grows a box plus-minus each way by its own amount", () => {
    const gap = only(layoutOf({ parts: [cube("a", 1000, { source: { how: "estimate", plusMinus: { x: [0, 30], y: [-2, 2] } } }), cube("b", 1140)] }));
    expect(gap.worst).toBeCloseTo(10, 9);
    expect(gap.shares.plusMinus).toBeCloseTo(30, 9);
  });

  it("turns the plus-minus box with its part", () => {
    const gap = only(layoutOf({ parts: [cube("a", 1000, { turn: [0, 0, 90], source: { plusMinus: { y: [-30, 0] } } }), cube("b", 1140)] }));
    // yaw 90 sends local -y to +x
    expect(gap.worst).toBeCloseTo(10, 9);
  });

  it("sweeps a tyre through bump and droop: 25 above it is rubbed by 60 of bump", () => {
    const layout = layoutOf({ parts: [cube("arch", 0, { at: [0, -750, -115 + 305 + 320 + 25 + 50] })] });
    layout.chassis.front.bump = 60;
    const gap = checkGaps(layout).gaps.find((g) => g.b === "tyre-front-left")!;
    expect(gap.distance).toBeCloseTo(25, 6);
    expect(gap.worst).toBeLessThan(0);
    expect(gap.verdict).toBe("rub");
  });

  it("is never better than tight where steering is not covered, and says so", () => {
    const layout = layoutOf({ parts: [cube("arch", 0, { at: [0, -750, -115 + 305 + 320 + 100 + 50] })] });
    layout.chassis.front.steer = 30;
    const gap = checkGaps(layout).gaps.find((g) => g.b === "tyre-front-left")!;
    expect(gap.notCovered).toEqual(["steer"]);
    expect(gap.verdict).toBe("tight");
  });

  it("grows a hot pipe away from its anchor: 1 m of 304 from 20 to 620 degC is 11.2 mm (facts.md section 3; coefficients from memory)", () => {
    const layout = layoutOf({
      parts: [cube("wall", 2000, { at: [2090, 0, 1500] })],
      runs: [{ key: "pipe", name: "pipe", kind: "exhaust", diameter: 63.5, material: "304", anchor: "a", heat: { surface: 620 }, nodes: [{ key: "a", at: [1000, 0, 1500] }, { key: "b", at: [2000, 0, 1500] }] }],
      rules: { gap: 10 },
    });
    const gap = only(layout);
    expect(gap.distance).toBeCloseTo(40, 6);
    expect(Math.abs(gap.shares.growth - 11.2)).toBeLessThan(0.05);
    expect(gap.worst).toBeCloseTo(gap.distance - gap.shares.growth, 9);
  });

  it("does not guess growth: a hot run without material is named, and never better than tight", () => {
    const layout = layoutOf({
      parts: [cube("wall", 0, { at: [2150, 0, 1500] })],
      runs: [{ key: "pipe", name: "pipe", kind: "exhaust", diameter: 63.5, heat: { surface: 620 }, nodes: [{ key: "a", at: [1000, 0, 1500] }, { key: "b", at: [2000, 0, 1500] }] }],
    });
    expect(only(layout)).toMatchObject({ notCovered: ["growth"], verdict: "tight", shares: { growth: 0 } });
  });

  it("measures pipes and looms from their surfaces (facts-checks gap-1: capsules 72.053; here flat ends, whose side faces are as near)", () => {
    const layout = layoutOf({ runs: [
      { key: "pipe", name: "pipe", kind: "exhaust", diameter: 63.5, nodes: [{ key: "a", at: [0, 0, 1500] }, { key: "b", at: [1000, 0, 1500] }] },
      { key: "loom", name: "loom", kind: "harness", diameter: 16, nodes: [{ key: "a", at: [500, 100, 1600] }, { key: "b", at: [900, 100, 1600] }] },
    ] });
    // parallel: sqrt(100^2 + 100^2) - 31.75 - 8
    expect(only(layout).distance).toBeCloseTo(Math.hypot(100, 100) - 39.75, 9);
  });

  it("leaves out a loom within 50 mm of its clip and two diameters of its plug, against that part only", () => {
    const ecu = cube("ecu", 1000, { ports: [{ key: "plug", at: [50, 0, 0], kind: "plug" }] });
    const rail = cube("rail", 1400, { solids: [{ type: "box", size: [1000, 20, 20] }], at: [1400, 0, 1470] });
    const layout = layoutOf({ parts: [ecu, rail], contacts: [{ between: ["ecu", "rail"] }], runs: [
      { key: "loom", name: "loom", kind: "harness", diameter: 20, nodes: [{ key: "plug", at: [1050, 0, 1500], on: "ecu.plug" }, { key: "mid", at: [1300, 0, 1500], clip: "rail" }, { key: "end", at: [1600, 0, 1530] }] },
    ] });
    const { gaps } = checkGaps(layout);
    // two diameters = 40 mm from the plug: the square cut at x = 1090 is 40 from the ecu's face
    expect(gaps.find((g) => g.a === "ecu" && g.b === "loom")!.distance).toBeCloseTo(40, 6);
    const clipped = gaps.find((g) => g.a === "rail" && g.b === "loom")!;
    // level stretch 10 above the rail's top (1480): 1500 - 10 - 1480
    expect(clipped.distance).toBeCloseTo(10, 6);
    expect(Math.abs(clipped.pointB[0] - 1300)).toBeGreaterThan(49.9);
  });

  it("keeps contacts out of the ledger but shows their distance", () => {
    const { gaps, trusted } = checkGaps(layoutOf({ parts: [cube("a", 1000), cube("b", 1100)], contacts: [{ between: ["b", "a"], why: "welded" }] }));
    expect(gaps).toEqual([]);
    expect(trusted).toMatchObject([{ a: "a", b: "b", why: "welded" }]);
    expect(trusted[0]!.distance).toBeCloseTo(0, 9);
  });

  it("asks that room stays free: need 0, not against its own part", () => {
    const withRoom = cube("battery", 1000, { roomFor: [{ key: "lift", name: "Room to lift it", solids: [{ type: "box", size: [100, 100, 200], at: [0, 0, 100] }] }] });
    const { gaps } = checkGaps(layoutOf({ parts: [withRoom, cube("strut", 1000, { at: [1000, 0, 1640] })], rules: { gap: 3 } }));
    const room = gaps.find((g) => g.b === "battery.lift" || g.a === "battery.lift")!;
    expect(room).toMatchObject({ required: 0, verdict: "touch" });
    expect(room.why).toMatch(/stay free/);
    expect(gaps.some((g) => g.a === "battery" && g.b === "battery.lift")).toBe(false);
  });

  it("sweeps a half-shaft's outboard end with its wheel and trusts that wheel's tyre", () => {
    const layout = layoutOf({ parts: [cube("rail", 2500, { at: [2500, -600, 190 + 15 + 40 + 50] })], shafts: [
      { key: "shaft", name: "shaft", inboard: [2500, -200, 190], outboard: [2500, -650, 190], diameter: 30, wheel: "rear-left" },
    ] });
    layout.chassis.rear.bump = 30;
    const report = checkGaps(layout);
    const gap = report.gaps.find((g) => g.b === "shaft")!;
    expect(gap.distance).toBeCloseTo(40, 6);
    expect(gap.worst).toBeCloseTo(10, 6);
    expect(report.trusted.some((t) => t.a === "tyre-rear-left" && t.b === "shaft")).toBe(true);
  });

  it("lists a pair only when its worst is within near, or within its rule and band", () => {
    const far = layoutOf({ parts: [cube("a", 1000), cube("b", 1300)] });
    expect(checkGaps(far).gaps).toHaveLength(0);
    expect(checkGaps({ ...far, rules: { ...far.rules, pairs: [{ between: ["any", "any"], gap: 196, why: "" }] } }).gaps).toHaveLength(1);
    expect(checkGaps({ ...far, rules: { ...far.rules, pairs: [{ between: ["any", "any"], gap: 194, why: "" }] } }).gaps).toHaveLength(0);
  });
});
