import { describe, expect, it } from "vitest";
import { massReport } from "../../../src/core/body/mass.ts";
import { layoutSchema } from "../../../src/core/layout/schema.ts";

const axle = { track: 1500, rideHeight: 115, tyre: { diameter: 640, width: 225, loadedRadius: 310 } };
const reportOf = (input: object, wheelbase = 2500) => massReport(layoutSchema.parse({ format: "handbreadth-layout", version: 1, name: "t", chassis: { wheelbase, front: axle, rear: axle }, ...input }));
const part = (key: string, at: number[], mass?: number, rest: object = {}) => ({ key, name: key, kind: "other", solids: [{ type: "ball", diameter: 10 }], at, ...(mass === undefined ? {} : { mass }), ...rest });

describe("massReport", () => {
  it("is the worked example: 1200 kg at 1500 of 2500 stands with 480 in front and 720 behind (facts.md section 8)", () => {
    expect(reportOf({ parts: [part("car", [1500, 0, 500], 1200)] })).toEqual({ total: 1200, centre: [1500, 0, 500], frontAxle: 480, rearAxle: 720, missing: [] });
  });

  it("turns massAt with its part: roll, pitch and yaw by 90 degrees, by hand", () => {
    const at = (turn: number[]) => reportOf({ parts: [part("a", [1000, 100, 200], 50, { turn, massAt: [10, 20, 30] })] }).centre!.map((v) => Math.round(v * 1e9) / 1e9);
    expect(at([0, 0, 0])).toEqual([1010, 120, 230]);
    expect(at([90, 0, 0])).toEqual([1010, 70, 220]); // y to z, z to -y
    expect(at([0, 90, 0])).toEqual([1030, 120, 190]); // z to x, x to -z
    expect(at([0, 0, 90])).toEqual([980, 110, 230]); // x to y, y to -x
    expect(at([90, 0, 90])).toEqual([1030, 110, 220]); // roll first: [10, -30, 20], then yaw: [30, 10, 20]
  });

  it("balances: no moment is left about either axle, nor about the centre (seed 71)", () => {
    let state = 71;
    const next = () => (state = (state * 48271) % 2147483647) / 2147483647;
    for (let round = 0; round < 50; round++) {
      const wheelbase = 1800 + 1500 * next();
      const parts = Array.from({ length: 1 + Math.floor(12 * next()) }, (_, i) => part(`p${i}`, [-800 + 4500 * next(), -700 + 1400 * next(), 900 * next()], 200 * next()));
      const report = reportOf({ parts }, wheelbase);
      const sum = (value: (p: (typeof parts)[number]) => number) => parts.reduce((s, p) => s + value(p), 0);
      // moments about the rear axle line, which the report does not use: each mass with its lever ahead of it
      expect(report.frontAxle).toBeCloseTo(sum((p) => (p.mass! * (wheelbase - p.at[0]!)) / wheelbase), 8);
      expect(report.frontAxle + report.rearAxle).toBeCloseTo(report.total, 9);
      for (const k of [0, 1, 2]) expect(sum((p) => p.mass! * (p.at[k]! - report.centre![k]!))).toBeCloseTo(0, 6);
    }
  });

  it("lifts the front where a mass hangs far behind: an axle load may be below 0", () => {
    expect(reportOf({ parts: [part("tail", [3000, 0, 0], 100)] })).toMatchObject({ frontAxle: -20, rearAxle: 120 });
  });

  it("names what has no mass, and reckons with the rest; runs, shafts and generated tyres have none to give", () => {
    const runs = [{ key: "pipe", name: "pipe", kind: "exhaust", diameter: 60, nodes: [{ key: "a", at: [0, 0, 0] }, { key: "b", at: [900, 0, 0] }] }];
    expect(reportOf({ runs, parts: [part("b", [100, 0, 0]), part("a", [500, 0, 0], 10), part("nothing", [900, 0, 0], 0), part("c", [1, 2, 3], undefined, { kind: "tyre" })] }))
      .toEqual({ total: 10, centre: [500, 0, 0], frontAxle: 8, rearAxle: 2, missing: ["b", "c"] });
  });

  it("has no centre without a mass, never a number that is none", () => {
    const nothing = { total: 0, centre: null, frontAxle: 0, rearAxle: 0 };
    expect(reportOf({})).toEqual({ ...nothing, missing: [] });
    expect(reportOf({ parts: [part("a", [500, 0, 0])] })).toEqual({ ...nothing, missing: ["a"] });
    expect(reportOf({ parts: [part("a", [500, 0, 0], 0)] })).toEqual({ ...nothing, missing: [] });
    const least = reportOf({ parts: [part("a", [90000, 0, 0], 1000)] }, 0.001);
    expect([least.rearAxle, least.frontAxle, least.centre![0]].every(Number.isFinite)).toBe(true);
  });
});
