import { describe, expect, it } from "vitest";
import { checkGaps } from "../../../src/core/gaps/scene.ts";
import type { Gap } from "../../../src/core/gaps/gap.ts";
import { layoutSchema, type Layout, type LayoutInput } from "../../../src/core/layout/schema.ts";

/** The sentences of the format about gaps that no other test holds, each with numbers worked out by hand. */
type PartInput = NonNullable<LayoutInput["parts"]>[number];
type RunInput = NonNullable<LayoutInput["runs"]>[number];
type P3 = [number, number, number];
const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const layoutOf = (rest: Partial<LayoutInput>, steer = 0): Layout =>
  layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name: "t",
    chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, bump: 60, droop: 70, steer, tyre }, rear: { track: 1500, rideHeight: 115, tyre } }, ...rest,
  });
/** A cube of 100 at x, y, high above the wheels. */
const cube = (key: string, at: P3, rest: Partial<PartInput> = {}): PartInput => ({ key, name: key, kind: "other", solids: [{ type: "box", size: [100, 100, 100] }], at: [at[0], at[1], at[2] + 1500], ...rest });
const pair = (rest: Partial<LayoutInput>, a = "a", b = "b"): Gap => {
  const row = checkGaps(layoutOf(rest)).gaps.find((gap) => gap.a === a && gap.b === b);
  if (!row) throw new Error(`no row of ${a} and ${b}`);
  return row;
};
const rowsOf = (rest: Partial<LayoutInput>) => checkGaps(layoutOf(rest)).gaps.map((gap) => `${gap.a} ${gap.b}`);
const run = (rest: Partial<RunInput> = {}): RunInput => ({ key: "run", name: "run", kind: "harness", diameter: 20, nodes: [{ key: "n1", at: [1000, 0, 1500] }, { key: "n2", at: [2000, 0, 1500] }], ...rest });

describe("verdicts, at their edges", () => {
  // drawn 40 apart; need 10; band 5 by default
  const at = (x: number, rest: Partial<LayoutInput> = {}, b: Partial<PartInput> = {}) => pair({ parts: [cube("a", [1000, 0, 0]), cube("b", [1100 + x, 0, 0], b)], ...rest });
  it.each([
    [-1, "touch"], [0, "touch"], [0.5, "short"], [9.5, "short"], [10, "tight"], [14.5, "tight"], [15, "clear"], [40, "clear"],
  ])("%d mm apart with 10 needed and a band of 5 is %s", (x, verdict) => expect(at(x).verdict).toBe(verdict));
  it("meets its need exactly: margin 0 is tight; a margin of the band exactly is clear", () => {
    expect(at(10)).toMatchObject({ margin: 0, verdict: "tight", required: 10, why: "default gap" });
    expect(at(15)).toMatchObject({ margin: 5, verdict: "clear" });
  });
  it("is rub where the worst is exactly 0, touch where it touches as drawn, whatever is needed", () => {
    const rules = { gap: 0, band: 0 };
    expect(at(8, { rules }, { movement: { x: [-8, 0] } })).toMatchObject({ worst: 0, verdict: "rub" });
    expect(at(8, { rules }, { movement: { x: [-7.5, 0] } })).toMatchObject({ worst: 0.5, verdict: "clear" });
    expect(at(0, { rules })).toMatchObject({ distance: 0, verdict: "touch" });
  });
  it("has points whose distance is the distance", () => {
    const { pointA, pointB, distance } = pair({ parts: [cube("a", [1000, 0, 0]), cube("b", [1130, 140, 0])] });
    expect(distance).toBeCloseTo(50, 9); // 30 along x, 40 along y
    expect(Math.hypot(...pointA.map((v, i) => v - pointB[i]!))).toBeCloseTo(50, 9);
    expect([pointA[0], pointA[1], pointB[0], pointB[1]].map((v) => Math.round(v * 1e6) / 1e6)).toEqual([1050, 50, 1080, 90]);
  });
});

describe("what is listed", () => {
  it("up to near exactly, and beyond it up to need and band", () => {
    const far = (x: number, rules: LayoutInput["rules"] = {}) => rowsOf({ parts: [cube("a", [1000, 0, 0]), cube("b", [1100 + x, 0, 0])], rules });
    expect([far(150).length, far(150.01).length]).toEqual([1, 0]);
    expect([far(205, { gap: 200 }).length, far(205.01, { gap: 200 }).length]).toEqual([1, 0]);
    expect([far(20, { near: 0, gap: 15 }).length, far(20.01, { near: 0, gap: 15 }).length]).toEqual([1, 0]);
  });
  it("by worst, not as drawn: 155 apart is listed where it may come 5 nearer", () => expect(rowsOf({ parts: [cube("a", [1000, 0, 0], { movement: { x: [0, 5] } }), cube("b", [1255, 0, 0])] })).toEqual(["a b"]));
  it("least margin first, with counts of every verdict", () => {
    const report = checkGaps(layoutOf({ parts: [cube("a", [1000, 0, 0]), cube("b", [1140, 0, 0]), cube("c", [1000, 112, 0]), cube("d", [900, 0, 0])] }));
    const margins = report.gaps.map((gap) => gap.margin);
    expect(margins).toEqual([...margins].sort((p, q) => p - q));
    // a b 40, a c 12, a d 0, b c (40, 12), c d (0, 12), b d 140
    expect(report.counts).toEqual({ touch: 1, rub: 0, short: 0, tight: 2, clear: 3 });
  });
  it("never spaces, openings and eyes, and shafts only with a diameter", () => {
    const parts = [cube("a", [1000, 0, 0])];
    const square: [number, number][] = [[900, -50], [1100, -50], [1100, 50], [900, 50]];
    const tall: [number, number][] = [[900, 1400], [1100, 1400], [1100, 1600], [900, 1600]];
    const shaft = { key: "s", name: "s", inboard: [1080, -300, 1500] as P3, outboard: [1080, 300, 1500] as P3 };
    expect(rowsOf({
      parts, spaces: [{ key: "b", name: "b", top: square, side: tall }], glass: [{ key: "g", name: "g", opening: [[900, 0, 1500], [1100, 0, 1500], [1000, 0, 1600]] }],
      eyes: [{ key: "e", name: "e", at: [1000, 0, 1500] }], luggage: [{ key: "l", name: "l", size: [10, 10, 10] }], shafts: [shaft],
    })).toEqual([]);
    expect(pair({ parts, shafts: [{ ...shaft, diameter: 20 }] }, "a", "s").distance).toBeCloseTo(80 - 50 - 10, 9);
  });
});

describe("provisional", () => {
  it.each([["measured", false], ["drawing", false], ["estimate", true], ["reserved", true]] as const)("a side that is %s: %s, whether a part, a run or a room of one", (how, provisional) => {
    expect(pair({ parts: [cube("a", [1000, 0, 0], { source: { how } }), cube("b", [1140, 0, 0])] }).provisional).toBe(provisional);
    expect(pair({ parts: [cube("a", [1500, 80, 0])], runs: [run({ source: { how } })] }, "a", "run").provisional).toBe(provisional);
    const roomFor = [{ key: "top", name: "top", solids: [{ type: "box" as const, size: [50, 50, 50] as P3, at: [0, 0, 100] as P3 }] }];
    expect(pair({ parts: [cube("a", [1000, 0, 0], { source: { how }, roomFor }), cube("b", [1100, 0, 100])] }, "b", "a.top").provisional).toBe(provisional);
  });
});

describe("worst", () => {
  it("adds movements of both sides by Minkowski sum, corner to corner: boxes of 3 and 4 meet a diagonal", () => {
    // 30 along x and 40 along y apart; a comes 12 along x, b 16 along y: 18 and 24 are left, 30 apart
    const gap = pair({ parts: [cube("a", [1000, 0, 0], { movement: { x: [-99, 12] } }), cube("b", [1130, 140, 0], { movement: { y: [-16, 99] } })] });
    expect(gap.distance).toBeCloseTo(50, 9);
    expect(gap.worst).toBeCloseTo(30, 9);
    expect(gap.shares.movement).toBeCloseTo(20, 9);
  });
  it("has shares that add up to drawn less worst: movement, plus-minus of both kinds, growth", () => {
    const parts = [cube("b", [1500, 150, 0], { movement: { y: [-7, 0] }, source: { plusMinus: { y: [-3, 0] } } })];
    // 150 - 50 - 10 = 90 drawn; 7 moved; 3 by the box and 2 by the run's scalar; growth of 304 at 320 degC, at most 1000 mm from its anchor
    const gap = pair({ parts, runs: [run({ source: { plusMinus: 2 }, material: "304", anchor: "n1", heat: { surface: 320 }, kind: "exhaust" })] }, "b", "run");
    expect(gap.distance).toBeCloseTo(90, 9);
    expect(gap.shares.movement).toBeCloseTo(7, 6);
    expect(gap.shares.plusMinus).toBeCloseTo(5, 6);
    expect(gap.distance - gap.worst).toBeCloseTo(gap.shares.movement + gap.shares.plusMinus + gap.shares.growth, 9);
    // mean coefficient at 320 between 17.2 (100) and 18.4 (540): 17.8e-6; the cube ends 550 from the anchor: 2.937 mm, and never less
    expect(gap.shares.growth).toBeGreaterThanOrEqual(17.8e-6 * 300 * 550 - 1e-6);
    expect(gap.shares.growth).toBeLessThanOrEqual(17.8e-6 * 300 * 550 + 0.21);
  });
  it("does not add a carrier's plus-minus, only its movement", () => {
    const parts = [cube("engine", [1000, 0, 1000], { source: { plusMinus: 9 }, movement: { x: [-4, 4] } }), cube("a", [1000, 0, 0], { carriedBy: "engine", source: { plusMinus: 1 } }), cube("b", [1140, 0, 0])];
    expect(pair({ parts }).worst).toBeCloseTo(40 - 4 - 1, 9);
  });
  it("shares a carrier's movement, never its position: a carrier may be anywhere", () => {
    const at = (engine: P3) => pair({ parts: [cube("engine", engine, { movement: { x: [-4, 4] } }), cube("a", [1000, 0, 0], { carriedBy: "engine" }), cube("b", [1140, 0, 0])] }).worst;
    expect(at([0, 0, 5000])).toBe(at([9000, -4000, 5000]));
  });
  it("grows a run by a box plus-minus in the car's axes: upward only what is above comes nearer", () => {
    const source = { plusMinus: { z: [0, 6] as [number, number] } };
    const side = (z: number) => pair({ parts: [cube("a", [1500, 0, z])], runs: [run({ source })] }, "a", "run").worst;
    expect([side(90), side(-90)].map((v) => Math.round(v * 1e6) / 1e6)).toEqual([90 - 60 - 6, 90 - 60]);
  });
  it("names what it does not cover, and then is never better than tight: rock, steer, growth", () => {
    const rock = [{ about: [0, 0, 0] as P3, axis: [1, 0, 0] as P3, angle: [-1, 1] as [number, number] }];
    expect(pair({ parts: [cube("a", [1000, 0, 0], { rock }), cube("b", [1200, 0, 0])] })).toMatchObject({ notCovered: ["rock"], margin: 90, verdict: "tight" });
    const hot = run({ nodes: [{ key: "n1", at: [1000, 0, 1500], surface: 400 }, { key: "n2", at: [2000, 0, 1500] }], anchor: "n1" });
    expect(pair({ parts: [cube("a", [1500, 150, 0])], runs: [hot] }, "a", "run")).toMatchObject({ notCovered: ["growth"], shares: { growth: 0 }, verdict: "tight" });
    // beside the right front tyre, 850 out: 60 more
    const beside = { ...cube("a", [0, 960, 0]), at: [0, 960, 190] as P3 };
    const gap = checkGaps(layoutOf({ parts: [beside] }, 32)).gaps.find(({ b }) => b === "tyre-front-right")!;
    expect(gap).toMatchObject({ notCovered: ["steer"], verdict: "tight" });
    expect(gap.worst).toBeCloseTo(60, 9);
    expect(checkGaps(layoutOf({ parts: [beside] })).gaps[0]).toMatchObject({ verdict: "clear" });
  });
});

describe("rules, seen through the ledger", () => {
  const need = (rest: Partial<LayoutInput>, pairs: [string, string, number][], a = "a", b = "b") => pair({ ...rest, rules: { pairs: pairs.map(([one, other, gap]) => ({ between: [one, other], gap, why: `${one} ${other}` })) } }, a, b).required;
  const parts = (a: Partial<PartInput>, b: Partial<PartInput> = {}) => ({ parts: [cube("a", [1000, 0, 0], a), cube("b", [1140, 0, 0], b)] });
  it("hot has a surface, limited a limit; one with both is both", () => {
    expect(need(parts({ heat: { surface: 300 } }, { heat: { limit: 90 } }), [["hot", "limited", 33]])).toBe(33);
    expect(need(parts({ heat: { limit: 300 } }, { heat: { limit: 90 } }), [["hot", "limited", 33]])).toBe(10);
    expect(need(parts({ heat: { surface: 80, limit: 300 } }, { heat: { surface: 80, limit: 90 } }), [["limited", "hot", 33]])).toBe(33);
  });
  it("moving: against each other, so two parts of one engine are not, and one that only turns is", () => {
    const engine = cube("engine", [0, 0, 5000], { movement: { x: [-1, 1] } });
    const carried = parts({ carriedBy: "engine" }, { carriedBy: "engine" });
    expect(need({ parts: [engine, ...carried.parts] }, [["moving", "any", 22]])).toBe(10);
    expect(need({ parts: [engine, ...parts({ carriedBy: "engine" }).parts] }, [["moving", "any", 22]])).toBe(22);
    expect(need(parts({ rock: [{ about: [0, 0, 0], axis: [0, 1, 0], angle: [0, 2] }] }), [["any", "moving", 22]])).toBe(22);
  });
  it("a weaker rule that asks for more is named in overruled, a stronger one wins though it asks for less", () => {
    const gap = pair({ ...parts({ group: "exhaust", kind: "muffler" }), rules: { pairs: [{ between: ["any", "any"], gap: 90, why: "room" }, { between: ["group:exhaust", "key:b"], gap: 3, why: "welded strap" }, { between: ["kind:muffler", "any"], gap: 2, why: "less" }] } });
    expect(gap).toMatchObject({ required: 3, margin: 37, why: "welded strap", overruled: [{ gap: 90, why: "room" }] });
  });
  it("a room needs 0 whatever the rules say, moves with its part, and is tight within the band", () => {
    const roomFor = [{ key: "top", name: "Room to pull", solids: [{ type: "box" as const, size: [50, 50, 50] as P3, at: [0, 0, 100] as P3 }] }];
    const at = (x: number) => pair({ parts: [cube("a", [1000, 0, 0], { roomFor, movement: { x: [-2, 2] } }), cube("b", [1075 + x, 0, 100])], rules: { gap: 40, pairs: [{ between: ["any", "any"], gap: 60 }] } }, "b", "a.top");
    expect([at(12), at(5), at(2), at(-1)].map((gap) => [gap.required, gap.verdict])).toEqual([[0, "clear"], [0, "tight"], [0, "rub"], [0, "touch"]]);
    expect(at(12).margin).toBeCloseTo(10, 9);
  });
});

describe("trusted", () => {
  it("contacts count either way round, also of a generated tyre, and leave the ledger with their distance", () => {
    const parts = [cube("a", [1000, 0, 0]), cube("b", [1130, 0, 0])];
    for (const between of [["a", "b"], ["b", "a"]] as [string, string][]) {
      const report = checkGaps(layoutOf({ parts, contacts: [{ between, why: "welded" }] }));
      expect([report.gaps, report.counts.clear]).toEqual([[], 0]);
      expect(report.trusted).toMatchObject([{ a: "a", b: "b", why: "welded", distance: 30 }]);
    }
    const arch = { ...cube("arch", [0, 0, 0]), at: [0, 750, 190 + 320 + 50 + 8] as P3 };
    expect(checkGaps(layoutOf({ parts: [arch], contacts: [{ between: ["tyre-front-right", "arch"], why: "liner" }] }))).toMatchObject({ gaps: [], trusted: [{ why: "liner", distance: expect.closeTo(8, 6) as number }] });
  });
});

describe("the shape of a run", () => {
  it("takes the smaller radius where tangents do not fit, and gaps use it: 100 instead of 200", () => {
    // two legs of 100 at a right angle: tangent length 200 does not fit, 100 does; the arc's centre is 100 from all of it
    const bent = run({ bendRadius: 200, nodes: [{ key: "n1", at: [1000, 0, 1500] }, { key: "n2", at: [1100, 0, 1500] }, { key: "n3", at: [1100, 100, 1500] }] });
    const ball = { ...cube("a", [0, 0, 0]), at: [1000, 100, 1500] as P3, solids: [{ type: "ball" as const, diameter: 20 }] };
    expect(Math.abs(pair({ parts: [ball], runs: [bent] }, "a", "run").distance - (100 - 10 - 10))).toBeLessThan(0.021);
  });
  it("is a ball of the largest diameter and the legs at a node of three", () => {
    const branch = run({
      nodes: [{ key: "m", at: [1500, 0, 1500] }, { key: "n1", at: [1300, 0, 1500] }, { key: "n2", at: [1700, 0, 1500] }, { key: "n3", at: [1500, 200, 1500] }],
      legs: [{ from: "m", to: "n1", diameter: 30 }, { from: "m", to: "n2", diameter: 20 }, { from: "m", to: "n3", diameter: 60 }],
    });
    const ball = { ...cube("a", [0, 0, 0]), solids: [{ type: "ball" as const, diameter: 20 }] };
    // below the branch the ball of 60 is nearest, beyond its reach the thin leg
    expect(pair({ parts: [{ ...ball, at: [1500, -80, 1500] as P3 }], runs: [branch] }, "a", "run").distance).toBeCloseTo(80 - 10 - 30, 6);
    expect(pair({ parts: [{ ...ball, at: [1650, -80, 1500] as P3 }], runs: [branch] }, "a", "run").distance).toBeCloseTo(80 - 10 - 10, 6);
  });
  it("is exempt within 2 diameters of the leg at a bound end, 50 mm of a clip, to the millimetre", () => {
    const post = cube("post", [1500, 0, 0]);
    const bound = (diameter: number) => run({ nodes: [{ key: "n1", at: [1000, 0, 1500] }, { key: "n2", at: [1450, 0, 1500], on: "post" }], legs: [{ from: "n1", to: "n2", diameter }] });
    // the end is on the post's face; what is left begins two diameters away
    expect(pair({ parts: [post], runs: [bound(20)] }, "post", "run").distance).toBeCloseTo(40, 6);
    expect(pair({ parts: [post], runs: [bound(30)] }, "post", "run").distance).toBeCloseTo(60, 6);
    const clipped = run({ nodes: [{ key: "n1", at: [1000, 0, 1500] }, { key: "n2", at: [1450, 0, 1500], clip: "post" }] });
    expect(pair({ parts: [post], runs: [clipped] }, "post", "run").distance).toBeCloseTo(50, 6);
  });
});
