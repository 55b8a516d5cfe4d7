import { describe, expect, it } from "vitest";
import { buildScene, checkGaps, updateScene } from "../../../src/core/gaps/scene.ts";
import { parseLayout } from "../../../src/core/layout/parse-layout.ts";
import { layoutSchema, type Layout, type LayoutInput } from "../../../src/core/layout/schema.ts";

type PartInput = NonNullable<LayoutInput["parts"]>[number];
const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const layoutOf = (rest: Partial<LayoutInput>): Layout =>
  layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name: "t",
    chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } }, ...rest,
  });
const cube = (key: string, x: number, rest: Partial<PartInput> = {}): PartInput => ({ key, name: key, kind: "other", solids: [{ type: "box", size: [100, 100, 100] }], at: [x, 0, 1500], ...rest });
const numbersOf = (layout: Layout) => checkGaps(layout).gaps.flatMap((gap) => [gap.distance, gap.worst, gap.required, gap.margin, ...gap.pointA, ...gap.pointB, ...Object.values(gap.shares)]);

describe("the ledger stands", () => {
  it("nothing at all: only the four tyres, which are far apart", () => expect(checkGaps(layoutOf({}))).toEqual({ gaps: [], trusted: [], counts: { touch: 0, rub: 0, short: 0, tight: 0, clear: 0 } }));

  it("one part", () => expect(checkGaps(layoutOf({ parts: [cube("a", 1250)] })).gaps).toEqual([]));

  it("two parts that are the same in the same place: as deep as they are wide", () => {
    const { gaps, counts } = checkGaps(layoutOf({ parts: [cube("a", 1250), cube("b", 1250)] }));
    expect(counts.touch).toBe(1);
    expect(gaps[0]!.distance).toBeCloseTo(-100, 9);
  });

  it("forty cubes in one place: every pair, in the same order every time", () => {
    const parts = Array.from({ length: 40 }, (_, i) => cube(`c${i}`, 1250));
    const one = checkGaps(layoutOf({ parts }));
    expect(one.gaps).toHaveLength(780);
    expect(one.counts.touch).toBe(780);
    expect(JSON.stringify(checkGaps(layoutOf({ parts })))).toBe(JSON.stringify(one));
    const names = one.gaps.map((gap) => `${gap.margin} ${gap.a} ${gap.b}`);
    expect(new Set(names).size).toBe(780);
  });

  it("the same numbers whatever the order of the parts", () => {
    const parts = [cube("a", 1000), cube("b", 1130, { movement: { x: [-9, 4], y: [-3, 2] } }), cube("c", 1065, { turn: [20, 30, 40], at: [1065, 120, 1560] }), cube("d", 990, { at: [990, 40, 1650], source: { plusMinus: { x: [-3, 9] } } })];
    const rows = (list: PartInput[]) => new Map(checkGaps(layoutOf({ parts: list })).gaps.map((gap) => [[gap.a, gap.b].sort().join(" "), gap]));
    const there = rows(parts);
    const back = rows([...parts].reverse());
    expect([...back.keys()].sort()).toEqual([...there.keys()].sort());
    for (const [name, gap] of there) {
      expect(back.get(name)!.distance).toBeCloseTo(gap.distance, 8);
      expect(back.get(name)!.worst).toBeCloseTo(gap.worst, 8);
      expect(back.get(name)!.verdict).toBe(gap.verdict);
    }
  });

  it("faces that just touch, a hair apart and a hair deep, without a number that is none", () => {
    for (const hair of [0, 1e-12, -1e-12, 1e-9, -1e-9, 1e-7, -1e-7]) {
      const layout = layoutOf({ parts: [cube("a", 1000), cube("b", 1100 + hair), cube("c", 1000, { at: [1000, 100 + hair, 1500] })] });
      expect(numbersOf(layout).every(Number.isFinite)).toBe(true);
      expect(checkGaps(layout).counts.touch).toBe(3);
    }
  });

  it("the smallest and the farthest that the format allows", () => {
    const far = 99_000;
    const layout = layoutOf({ parts: [
      cube("dust", far, { solids: [{ type: "box", size: [0.001, 0.001, 0.001] }], at: [far, far, far] }), cube("grain", far, { solids: [{ type: "ball", diameter: 0.001 }], at: [far + 20, far, far] }),
      cube("world", 0, { solids: [{ type: "box", size: [100_000, 100_000, 1] }], at: [0, 0, -5000] }),
    ] });
    const numbers = numbersOf(layout);
    expect(numbers.every(Number.isFinite)).toBe(true);
    expect(checkGaps(layout).gaps.find((gap) => gap.a === "dust")!.distance).toBeCloseTo(20 - 0.001, 6);
  });

  it("movement and plus-minus larger than the car", () => {
    const { gaps } = checkGaps(layoutOf({ parts: [cube("a", 1000, { movement: { x: [-50_000, 50_000], y: [-50_000, 50_000], z: [-50_000, 50_000] }, source: { plusMinus: { x: [-50_000, 50_000] } } }), cube("b", 1140, { source: { plusMinus: 20_000 } })] }));
    const gap = gaps.find((g) => g.a === "a" && g.b === "b")!;
    expect(gap).toMatchObject({ distance: 40, verdict: "rub" });
    expect(Number.isFinite(gap.worst)).toBe(true);
    expect(gap.worst).toBeLessThan(-20_000);
  });

  it("rules that ask for nothing, and for more than the car is long", () => {
    const parts = [cube("a", 1000), cube("b", 1140)];
    expect(checkGaps(layoutOf({ parts, rules: { near: 0, band: 0, gap: 0 } })).gaps).toEqual([]);
    expect(checkGaps(layoutOf({ parts, rules: { near: 40, band: 0, gap: 0 } })).gaps).toMatchObject([{ verdict: "clear", margin: 40 }]);
    expect(checkGaps(layoutOf({ parts, rules: { pairs: [{ between: ["any", "any"], gap: 90_000 }] } })).gaps.length).toBe(15);
  });

  it("a chain of two thousand carriers, each against the next by its own movement alone", () => {
    const parts = Array.from({ length: 2000 }, (_, i) => cube(`p${i}`, 140 * i - 99_000, { at: [140 * i - 99_000 - (i < 1000 ? 0 : 140_000), i < 1000 ? 0 : 5000, 1500], movement: { y: [-0.5, 0.5], x: [-1, 0] }, ...(i > 0 ? { carriedBy: `p${i - 1}` } : {}) }));
    const { gaps } = checkGaps(layoutOf({ parts, rules: { near: 50 } }));
    const mine = gaps.filter((gap) => gap.a.startsWith("p") && gap.b.startsWith("p"));
    expect(mine).toHaveLength(1998);
    for (const gap of mine) expect(gap.worst).toBeCloseTo(39, 9);
  }, 60_000);
});

describe("before the ledger", () => {
  it("refuses carriers in a circle, so that it never meets one", () => {
    const parsed = parseLayout({ format: "handbreadth-layout", version: 1, name: "t", chassis: layoutOf({}).chassis, parts: [cube("a", 0, { carriedBy: "b" }), cube("b", 500, { carriedBy: "a" })] });
    expect(parsed.ok).toBe(false);
  });
  it("ends all the same on a circle that slipped through", () => {
    const scene = buildScene(layoutOf({ parts: [cube("a", 1000), cube("b", 1140)] }));
    const circle = layoutOf({ parts: [cube("a", 1000, { carriedBy: "b" }), cube("b", 1140, { carriedBy: "a" })] });
    updateScene(scene, circle);
    expect(scene.report.gaps).toHaveLength(1);
  });
});
