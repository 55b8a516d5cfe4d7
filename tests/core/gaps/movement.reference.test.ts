import { describe, expect, it } from "vitest";
import { expansionCoefficient, growthOf, lengthening } from "../../../src/core/gaps/growth.ts";
import { chainOf, hullOfMovements, outboardChain, relativeMovement, type Chain } from "../../../src/core/gaps/movement.ts";
import { verdictOf } from "../../../src/core/gaps/verdict.ts";
import { tubePath } from "../../../src/core/geometry/tubes.ts";
import { chassisSchema, partSchema, runSchema } from "../../../src/core/layout/schema.ts";

const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const chassis = chassisSchema.parse({ wheelbase: 2500, front: { track: 1500, rideHeight: 115, steer: 30, tyre }, rear: { track: 1500, rideHeight: 115, tyre } });
const part = (key: string, carriedBy: string | null, y: [number, number], rest: object = {}) =>
  partSchema.parse({ key, name: key, kind: "other", solids: [{ type: "ball", diameter: 10 }], at: [0, 0, 0], carriedBy, movement: { y }, ...rest });
const tree = new Map([
  part("engine", null, [-8, 6]), part("turbo", "engine", [-1, 2]), part("actuator", "turbo", [0, 3]), part("pump", "engine", [-4, 0]), part("frame", null, [0, 0]), part("seat", null, [-5, 10]),
].map((p) => [p.key, p]));
const chain = (key: string) => chainOf(tree.get(key)!, tree, chassis);
const across = (a: string, b: string) => {
  const { travel } = relativeMovement(chain(a), chain(b));
  return [travel.low[1], travel.high[1]];
};

describe("relativeMovement", () => {
  it("of two parts of one engine is their own alone", () => expect(across("turbo", "pump")).toEqual([-4 - 2, 0 + 1]));
  it("of a part and its carrier is the part's own", () => {
    expect(across("engine", "turbo")).toEqual([-1, 2]);
    expect(across("turbo", "engine")).toEqual([-2, 1]);
  });
  it("of a part and its carrier's carrier adds up along the chain", () => expect(across("engine", "actuator")).toEqual([-1, 5]));
  it("of things that only the chassis joins adds up along both chains", () => {
    expect(across("frame", "actuator")).toEqual([-8 - 1, 6 + 2 + 3]);
    expect(across("seat", "actuator")).toEqual([-9 - 10, 11 + 5]);
  });
  it("stops at the first link both share, however deep", () => expect(across("actuator", "pump")).toEqual([-4 - 2 - 3, 0 + 1 + 0]));
  it("is taken back by exchanging the two", () => {
    for (const a of tree.keys()) for (const b of tree.keys()) {
      const [low, high] = across(a, b);
      const [backLow, backHigh] = across(b, a);
      expect([backLow, backHigh]).toEqual([-high! + 0, -low! + 0]);
    }
  });
  it("of a thing and itself is nothing", () => expect(relativeMovement(chain("turbo"), chain("turbo"))).toMatchObject({ still: true, notCovered: [] }));
  it("names turning and steering that it leaves out, but only where the two do not share them", () => {
    const rocking = new Map([part("mill", null, [0, 0], { rock: [{ about: [0, 0, 0], axis: [1, 0, 0], angle: [-3, 3] }] }), part("carb", "mill", [0, 0]), part("horn", "mill", [0, 0]), part("tyre-front-left", null, [0, 0]), part("still", null, [0, 0], { rock: [{ about: [0, 0, 0], axis: [1, 0, 0], angle: [0, 0] }] })].map((p) => [p.key, p]));
    const of = (a: string, b: string) => relativeMovement(chainOf(rocking.get(a)!, rocking, chassis), chainOf(rocking.get(b)!, rocking, chassis)).notCovered;
    expect(of("carb", "tyre-front-left")).toEqual(["rock", "steer"]);
    expect(of("carb", "horn")).toEqual([]);
    expect(of("mill", "carb")).toEqual([]);
    expect(of("still", "still")).toEqual([]);
    expect(of("still", "carb")).toEqual(["rock"]);
  });
  it("of two ends is the box hull of both", () => {
    const hull = hullOfMovements([relativeMovement([], chain("turbo")), relativeMovement([], chain("seat"))]);
    expect([hull.travel.low[1], hull.travel.high[1]]).toEqual([-9, 10]);
  });
});

describe("outboardChain", () => {
  const wheel: Chain = [{ key: "tyre-rear-left", movement: { x: [0, 0], y: [0, 0], z: [-75, 75] }, notCovered: ["steer"] }];
  const shaft = { key: "s", inboard: [2500, -200, 190], outboard: [2500, -650, 190] };
  it("goes with the wheel and does not steer", () => expect(relativeMovement([], outboardChain(shaft, wheel))).toMatchObject({ travel: { low: [0, 0, -75], high: [0, 0, 75] }, notCovered: [] }));
  it("swings inward by R - sqrt(R^2 - t^2) with an arm: 350 at 75 is 8.13 (facts.md section 5)", () => {
    const left = relativeMovement([], outboardChain({ ...shaft, arm: 350 }, wheel)).travel;
    expect(left.low[1]).toBe(0);
    expect(left.high[1]).toBeCloseTo(350 - Math.sqrt(350 ** 2 - 75 ** 2), 12);
    expect(left.high[1]).toBeCloseTo(8.13, 2);
    const right = relativeMovement([], outboardChain({ key: "s", inboard: [2500, 200, 190], outboard: [2500, 650, 190], arm: 350 }, wheel)).travel;
    expect([right.low[1], right.high[1]]).toEqual([-left.high[1], 0]);
  });
  it("gives a number also for an arm shorter than the travel", () => expect(relativeMovement([], outboardChain({ ...shaft, arm: 50 }, wheel)).travel.high[1]).toBe(50));
});

describe("growth of a pipe", () => {
  // facts-checks.json cte-1 to cte-4
  it("is 1.376 mm a metre of 304 over 80 K, 0.936 of mild steel (published property tables, second-hand)", () => {
    expect(Math.abs(lengthening("304", 100, 1000) - 1.376)).toBeLessThan(0.005);
    expect(Math.abs(lengthening("steel", 100, 1000) - 0.936)).toBeLessThan(0.005);
  });
  it("is 11.2 mm a metre of 304 from 20 to 620, 2.9 more than 409 over 0.8 m (facts.md section 3; coefficients from memory)", () => {
    expect(Math.abs(lengthening("304", 620, 1000) - 11.2)).toBeLessThan(0.05);
    expect(Math.abs(lengthening("304", 620, 800) - lengthening("409", 620, 800) - 2.928)).toBeLessThan(0.02);
    expect(1000 * 600 * expansionCoefficient("304", 650)).toBeCloseTo(11.22, 2);
  });
  it("never has a coefficient that falls with temperature", () => {
    for (const material of ["304", "321", "409", "steel", "titanium"] as const) {
      for (let t = 20; t < 1000; t += 5) expect(expansionCoefficient(material, t + 5)).toBeGreaterThanOrEqual(expansionCoefficient(material, t));
    }
  });
  const run = (rest: object) => runSchema.parse({ key: "p", name: "p", kind: "exhaust", diameter: 50, material: "304", anchor: "b", heat: { surface: 620 }, nodes: [{ key: "a", at: [0, 0, 0] }, { key: "b", at: [1000, 0, 0] }, { key: "c", at: [1000, 500, 0] }, { key: "d", at: [1000, 500, 200] }], ...rest });
  const at = (rest: object) => Object.fromEntries([...growthOf(run(rest), tubePath(run(rest))).atNode].map(([key, value]) => [key, Math.round(value * 1000) / 1000]));
  it("adds up along the path both ways from the anchor", () => expect(at({})).toEqual({ a: 11.171, b: 0, c: 5.585, d: 7.82 }));
  it("takes each leg at its hotter node, which comes before the run's own surface", () => expect(at({ nodes: run({}).nodes.map((node) => (node.key === "d" ? { ...node, surface: 100 } : node.key === "c" ? { ...node, surface: 100 } : node)) })).toEqual({ a: 11.171, b: 0, c: 5.585, d: 5.861 }));
  it("is nothing without a surface, and unknown with one but no material or anchor", () => {
    const { heat: _, ...cold } = run({});
    expect(growthOf(cold, tubePath(cold))).toMatchObject({ unknown: false, any: false });
    for (const missing of ["material", "anchor"] as const) {
      const less = { ...run({}), [missing]: undefined };
      expect(growthOf(less, tubePath(less))).toMatchObject({ unknown: true, any: false });
    }
  });
  it("counts shrinking by its size", () => expect(at({ heat: { surface: -30 } })["a"]).toBe(0.86));
});

describe("verdictOf", () => {
  it.each([
    [0, 0, -10, "touch"], [1e-6, 1e-6, -10, "touch"], [-5, -9, -19, "touch"], [2e-6, 1e-6, -10, "rub"], [5, -1, -11, "rub"], [5, 2e-6, -10, "short"], [20, 10, -2e-6, "short"], [20, 10, -1e-6, "tight"],
    [20, 10, 0, "tight"], [20, 15, 5 - 2e-6, "tight"], [20, 15, 5 - 1e-6, "clear"], [40, 40, 30, "clear"],
  ])("drawn %d, worst %d, margin %d is %s (band 5)", (distance, worst, margin, verdict) => expect(verdictOf(distance, worst, margin, 5, true)).toBe(verdict));
  it("is never better than tight where something is not covered, and never hides what is worse", () => {
    expect(verdictOf(40, 40, 30, 5, false)).toBe("tight");
    expect(verdictOf(5, 5, -5, 5, false)).toBe("short");
  });
});
