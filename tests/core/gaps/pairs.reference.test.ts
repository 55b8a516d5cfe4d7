import { describe, expect, it } from "vitest";
import { buildScene, checkGaps, gapsOf, previewMove, previewScene } from "../../../src/core/gaps/scene.ts";
import { applyCommand } from "../../../src/core/layout/apply-command.ts";
import { layoutSchema, type Layout, type LayoutInput } from "../../../src/core/layout/schema.ts";

type PartInput = NonNullable<LayoutInput["parts"]>[number];
type SolidInput = PartInput["solids"][number];
type RunInput = NonNullable<LayoutInput["runs"]>[number];
const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const layoutOf = (rest: Partial<LayoutInput>): Layout =>
  layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name: "t",
    chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } }, ...rest,
  });
const part = (key: string, solids: SolidInput[], at: [number, number, number], rest: Partial<PartInput> = {}): PartInput => ({ key, name: key, kind: "other", solids, at, ...rest });
const cube = (key: string, at: [number, number, number], rest: Partial<PartInput> = {}) => part(key, [{ type: "box", size: [100, 100, 100] }], at, rest);
const pipe = (rest: Partial<RunInput> = {}): RunInput => ({ key: "pipe", name: "pipe", kind: "exhaust", diameter: 60, nodes: [{ key: "a", at: [1000, 0, 1500] }, { key: "b", at: [2000, 0, 1500] }], ...rest });
const between = (layout: Layout, a: string, b: string) => checkGaps(layout).gaps.find((gap) => gap.a === a && gap.b === b);

describe("drawn distances", () => {
  /** A capsule as a part: a bar with a ball at either end. */
  const capsule = (key: string, from: [number, number, number], to: [number, number, number], diameter: number) =>
    part(key, [{ type: "bar", from, to, diameter }, { type: "ball", diameter, at: from }, { type: "ball", diameter, at: to }], [1000, 0, 1500]);
  it.each([
    // facts-checks.json gap-1 to gap-3
    ["pipe to harness", [[0, 0, 0], [1000, 0, 0]], 63.5, [[500, 100, 50], [500, 100, 400]], 16, 72.053, 0.01],
    ["skew lines", [[0, 0, 0], [800, 0, 200]], 76.2, [[0, 120, -50], [800, 90, 260]], 12, 58.295, 0.02],
    ["end to end", [[0, 0, 0], [300, 0, 0]], 50, [[400, 60, 0], [700, 60, 0]], 20, 81.619, 0.01],
  ] as const)("of capsules, %s", (_, a, od, b, other, expected, tolerance) => {
    const layout = layoutOf({ parts: [capsule("a", [...a[0]], [...a[1]], od), capsule("b", [...b[0]], [...b[1]], other)] });
    expect(Math.abs(between(layout, "a", "b")!.distance - expected)).toBeLessThan(tolerance);
  });

  it("of a ball and a cube's corner", () => {
    const layout = layoutOf({ parts: [cube("a", [1000, 0, 1500]), part("b", [{ type: "ball", diameter: 40 }], [1000 + 50 + 30, 50 + 40, 1500 + 50 + 50])] });
    const gap = between(layout, "a", "b")!;
    expect(gap.distance).toBeCloseTo(Math.hypot(30, 40, 50) - 20, 9);
    gap.pointA.forEach((v, k) => expect(v).toBeCloseTo([1050, 50, 1550][k]!, 9));
  });

  it("of overlapping convex solids are minus the depth, exactly; of unions a lower estimate, which is said", () => {
    expect(between(layoutOf({ parts: [cube("a", [1000, 0, 1500]), cube("b", [1070, 10, 1520])] }), "a", "b")).toMatchObject({ distance: -30, verdict: "touch" });
    const two = layoutOf({ parts: [cube("a", [1000, 0, 1500]), part("b", [{ type: "box", size: [50, 50, 50] }, { type: "box", size: [50, 50, 50], at: [50, 0, 0] }], [1000, 0, 1500])] });
    expect(between(two, "a", "b")).toMatchObject({ depthIsEstimate: true });
    expect(between(layoutOf({ parts: [cube("a", [1000, 0, 1500]), cube("b", [1070, 10, 1520])] }), "a", "b")).not.toHaveProperty("depthIsEstimate");
  });

  it("of a run in several blocks that all overlap say that the depth is an estimate", () => {
    const mover = cube("mover", [1000, 0, 1700], { movement: { z: [-1, 1] } });
    const layout = layoutOf({ parts: [mover, part("plate", [{ type: "box", size: [2000, 50, 50] }], [1500, 0, 1500])], runs: [pipe({ nodes: [{ key: "a", at: [1000, 0, 1500], on: "mover" }, { key: "m", at: [1500, 0, 1500] }, { key: "b", at: [2000, 0, 1500] }] })] });
    expect(between(layout, "plate", "pipe")).toMatchObject({ verdict: "touch", depthIsEstimate: true });
  });
});

describe("worst", () => {
  it("takes every tolerance at once: 25 less 2, 3 and 1 is 19 (facts-checks.json unc-2)", () => {
    const layout = layoutOf({ parts: [cube("a", [1000, 0, 1500], { source: { plusMinus: 2 } }), cube("b", [1125, 0, 1500], { source: { plusMinus: 3 }, movement: { x: [-1, 0] } })] });
    expect(between(layout, "a", "b")!.worst).toBeCloseTo(19, 9);
  });

  it("is swept exactly: a corner that moves past an edge is nearest on the way, not at an end", () => {
    // b starts ahead and below and may move up 200: at half way it faces a's side, 30 from it
    const layout = layoutOf({ parts: [cube("a", [1000, 0, 1500]), cube("b", [1130, 0, 1380], { movement: { z: [0, 240] } })] });
    const gap = between(layout, "a", "b")!;
    expect(gap.distance).toBeCloseTo(Math.hypot(30, 20), 9);
    expect(gap.worst).toBeCloseTo(30, 9);
    expect(gap.shares.movement).toBeCloseTo(Math.hypot(30, 20) - 30, 9);
  });

  it("moves the piece of a run between two parts by the hull of both, and the rest by its own end", () => {
    const engine = cube("engine", [1000, 0, 1500], { movement: { y: [-8, 8] } });
    const rail = (key: string, x: number) => part(key, [{ type: "box", size: [60, 20, 20] }], [x, 60, 1500]);
    const layout = layoutOf({
      parts: [engine, rail("near", 1250), rail("far", 1650)],
      runs: [pipe({ key: "hose", kind: "coolant", diameter: 20, nodes: [{ key: "e", at: [1050, 0, 1500], on: "engine" }, { key: "m", at: [1400, 0, 1500] }, { key: "c", at: [1800, 0, 1500] }] })],
    });
    expect(between(layout, "near", "hose")).toMatchObject({ distance: 40, worst: 32 });
    expect(between(layout, "far", "hose")).toMatchObject({ distance: 40, worst: 40 });
  });

  it("does not move a hose bound to an engine against that engine's other parts", () => {
    const engine = cube("engine", [1000, 0, 1500], { movement: { y: [-8, 8] } });
    const turbo = cube("turbo", [1300, 100, 1500], { carriedBy: "engine" });
    const layout = layoutOf({ parts: [engine, turbo], runs: [pipe({ key: "hose", kind: "oil", diameter: 20, nodes: [{ key: "e", at: [1050, 0, 1500], on: "engine" }, { key: "t", at: [1500, 0, 1500], on: "engine" }] })] });
    const gap = between(layout, "turbo", "hose")!;
    expect(gap.worst).toBeCloseTo(gap.distance, 12);
    expect(gap.distance).toBeCloseTo(40, 9);
  });

  it("takes growth where the pipe is, not that of its far end: half way along a metre at 620 degC it is 5.6, within 0.2 on the safe side", () => {
    const hot = pipe({ material: "304", anchor: "a", heat: { surface: 620 } });
    const at = (x: number) => between(layoutOf({ parts: [part("probe", [{ type: "ball", diameter: 20 }], [x, 80, 1500])], runs: [hot] }), "probe", "pipe")!;
    const whole = 18.618181818e-6 * 600;
    for (const x of [1100, 1500, 1900]) {
      const gap = at(x);
      expect(gap.distance).toBeCloseTo(40, 9);
      expect(gap.shares.growth).toBeGreaterThanOrEqual(whole * (x - 1000) - 1e-6);
      expect(gap.shares.growth).toBeLessThan(whole * (x - 1000) + 0.2);
    }
  });

  it("says of a box plus-minus what it costs here: growth to the left is nothing to a neighbour on the right", () => {
    const layout = layoutOf({ parts: [cube("a", [1000, 0, 1500], { source: { how: "estimate", plusMinus: { x: [-40, 5] } } }), cube("b", [1140, 0, 1500])] });
    expect(between(layout, "a", "b")).toMatchObject({ worst: 35, shares: { movement: 0, plusMinus: 5, growth: 0 } });
  });
});

describe("what is near and what is not judged", () => {
  it("lists a named contact however far apart, and with a room by its whole name", () => {
    const { gaps, trusted } = checkGaps(layoutOf({
      parts: [cube("a", [1000, 0, 1500], { roomFor: [{ key: "top", name: "Top", solids: [{ type: "box", size: [100, 100, 50], at: [0, 0, 75] }] }] }), cube("b", [2000, 0, 1500])],
      contacts: [{ between: ["b", "a"], why: "bracket" }, { between: ["a.top", "b"], why: "" }, { between: ["a", "a.top"] }],
    }));
    expect(gaps).toEqual([]);
    expect(trusted.map(({ a, b, distance, why }) => ({ a, b, distance, why }))).toEqual([{ a: "a", b: "b", distance: 900, why: "bracket" }, { a: "b", b: "a.top", distance: 900, why: "named as a contact" }]);
  });

  it("trusts a generated tyre with wheels, brakes and suspension, but a tyre of the document's own only by contact", () => {
    const brake = cube("brake", [0, -600, 190], { kind: "brake" });
    const generated = checkGaps(layoutOf({ parts: [brake] }));
    expect(generated.gaps.filter((gap) => gap.a === "brake")).toEqual([]);
    expect(generated.trusted.map((pair) => pair.b)).toEqual(["tyre-front-left"]);
    const own = part("tyre-front-left", [{ type: "round", diameter: 640, length: 200, axis: "y" }], [0, -750, 190], { kind: "tyre" });
    expect(checkGaps(layoutOf({ parts: [brake, own] })).gaps.some((gap) => gap.a === "brake" && gap.b === "tyre-front-left")).toBe(true);
  });

  it("lets a loom through the room of the plug that it goes into, but not another", () => {
    const ecu = cube("ecu", [1000, 0, 1500], { ports: [{ key: "plug", at: [50, 0, 0], kind: "plug" }], roomFor: [{ key: "pull", name: "Room to pull the plug", solids: [{ type: "box", size: [30, 60, 60], at: [65, 0, 0] }] }] });
    const loom = pipe({ key: "loom", kind: "harness", diameter: 20, nodes: [{ key: "p", at: [1050, 0, 1500], on: "ecu.plug" }, { key: "q", at: [1500, 0, 1500] }] });
    const other = pipe({ key: "other", kind: "harness", diameter: 20, nodes: [{ key: "p", at: [1065, -200, 1500] }, { key: "q", at: [1065, 200, 1500] }] });
    const layout = layoutOf({ parts: [ecu], runs: [loom, other] });
    expect(between(layout, "loom", "ecu.pull")!.distance).toBeCloseTo(10, 9);
    expect(between(layout, "other", "ecu.pull")).toMatchObject({ verdict: "touch", required: 0 });
  });

  it("leaves a stretch out along the path, round a bend and over a branch, and only against the clip's part", () => {
    const wall = part("wall", [{ type: "box", size: [400, 20, 400] }], [1200, 40, 1500]);
    const branching = (clip: boolean) => layoutOf({ parts: [wall], runs: [pipe({
      key: "loom", kind: "harness", diameter: 20, nodes: [{ key: "a", at: [1000, 0, 1500] }, { key: "m", at: [1200, 0, 1500], ...(clip ? { clip: "wall" } : {}) }, { key: "b", at: [1400, 0, 1500] }, { key: "c", at: [1200, 0, 1700] }],
      legs: [{ from: "a", to: "m" }, { from: "m", to: "b" }, { from: "m", to: "c" }],
    })] });
    expect(between(branching(false), "wall", "loom")!.distance).toBeCloseTo(20, 9);
    const clipped = between(branching(true), "wall", "loom")!;
    expect(clipped.distance).toBeCloseTo(20, 9);
    expect(Math.hypot(clipped.pointB[0] - 1200, clipped.pointB[2] - 1500)).toBeGreaterThan(39.9);
  });

  it("sees nothing of a run that is wholly within its exemptions", () => {
    const layout = layoutOf({ parts: [cube("ecu", [1000, 0, 1500])], runs: [pipe({ key: "stub", kind: "harness", diameter: 20, nodes: [{ key: "p", at: [1050, 0, 1500], on: "ecu" }, { key: "q", at: [1085, 0, 1500] }] })] });
    expect(between(layout, "ecu", "stub")).toBeUndefined();
  });

  it("counts a part that only turns as moving, and says that turning is not covered", () => {
    const rocking = cube("engine", [1000, 0, 1500], { rock: [{ about: [0, 0, 0], axis: [1, 0, 0], angle: [-3, 3] }] });
    const gap = between(layoutOf({ parts: [rocking, cube("b", [1140, 0, 1500])], rules: { pairs: [{ between: ["moving", "any"], gap: 25 }] } }), "engine", "b")!;
    expect(gap).toMatchObject({ required: 25, notCovered: ["rock"], verdict: "tight", distance: 40, worst: 40 });
  });
});

describe("scenes", () => {
  const layout = layoutOf({ parts: [cube("a", [1000, 0, 1500], { roomFor: [{ key: "top", name: "Top", solids: [{ type: "box", size: [20, 20, 20], at: [0, 0, 80] }] }] }), cube("b", [1140, 0, 1500]), cube("c", [1000, 150, 1500], { locked: true })] });

  it("give the rows of one part, its rooms' included", () => expect(gapsOf(buildScene(layout), "a").map((gap) => `${gap.a} ${gap.b}`).sort()).toEqual(["a b", "a c", "b a.top", "c a.top"]));

  it("are previewed without changing", () => {
    const scene = buildScene(layout);
    const before = JSON.stringify(scene.report);
    const moved = previewMove(scene, [{ list: "parts", key: "a" }], [20, 0, 0])!;
    expect(gapsOf(moved, "a").find((gap) => gap.b === "b")!.distance).toBe(20);
    expect(JSON.stringify(scene.report)).toBe(before);
    const applied = applyCommand(layout, { kind: "move", items: [{ list: "parts", key: "a" }], by: [20, 0, 0] });
    expect(applied.ok && previewScene(scene, applied.layout).report).toEqual(moved.report);
  });

  it("are not previewed where the move is refused", () => expect(previewMove(buildScene(layout), [{ list: "parts", key: "c" }], [20, 0, 0])).toBeNull());

  it("keep the rows of pairs that a move leaves alone, by identity", () => {
    const scene = buildScene(layout);
    const moved = previewMove(scene, [{ list: "parts", key: "b" }], [0, 5, 0])!;
    const row = (s: typeof scene) => s.report.gaps.find((gap) => gap.a === "a" && gap.b === "c");
    expect(row(moved)).toBe(row(scene));
  });
});
