import Module, { type Manifold, type ManifoldToplevel } from "manifold-3d";
import { beforeAll, describe, expect, it } from "vitest";
import { spacesReport } from "../../../src/core/luggage/spaces-report.ts";
import { layoutSchema, type Layout } from "../../../src/core/layout/schema.ts";
import { freeLitresByDice, randomBoot } from "./boot-oracle.ts";

const axle = { track: 1500, rideHeight: 115, tyre: { diameter: 640, width: 225, loadedRadius: 310 } };
const layoutOf = (input: object): Layout => layoutSchema.parse({ format: "handbreadth-layout", version: 1, name: "t", chassis: { wheelbase: 2500, front: axle, rear: axle }, ...input });
const rectangle = (u: [number, number], v: [number, number]) => [[u[0], v[0]], [u[1], v[0]], [u[1], v[1]], [u[0], v[1]]];
const boot = (rest: object = {}) => ({ key: "boot", name: "Boot", top: rectangle([3000, 4000], [-300, 300]), side: rectangle([3000, 4000], [400, 800]), partGap: 0, ...rest });
const only = (input: object) => spacesReport(layoutOf(input))[0]!;
const part = (solid: object, at: number[], rest: object = {}) => ({ key: "p", name: "p", kind: "other", solids: [solid], at, ...rest });

describe("grossLitres: the outlines alone", () => {
  it("of a box, 1 m by 0.6 by 0.4, are 240, whichever two outlines give it, and whatever lies in it", () => {
    const views = [{ top: boot().top, side: boot().side }, { top: boot().top, rear: rectangle([-300, 300], [400, 800]) }, { side: boot().side, rear: rectangle([-300, 300], [400, 800]) }];
    for (const two of views) {
      const input = { spaces: [{ key: "boot", name: "Boot", ...two, wallGap: 20, partGap: 0 }], parts: [part({ type: "box", size: [500, 200, 200] }, [3500, 0, 600])] };
      expect(only(input).grossLitres).toBeCloseTo(240, 6);
      expect(only(input).freeLitres).toBeCloseTo(0.96 * 0.56 * 0.36 * 1000 - 20, 3);
    }
    // facts.md section 7: 650 x 420 x 310 is 84.6 litres
    expect(only({ spaces: [boot({ top: rectangle([0, 650], [0, 420]), side: rectangle([0, 650], [0, 310]) })] }).grossLitres).toBeCloseTo(84.63, 2);
  });

  it("of a wedge, a notch and a slanted tail are areas times widths, by hand", () => {
    const side = [[3000, 400], [4000, 400], [4000, 600], [3500, 600], [3500, 800], [3000, 800]];
    expect(only({ spaces: [boot({ side })] }).grossLitres).toBeCloseTo((1000 * 200 + 500 * 200) * 600 / 1e6, 6);
    expect(only({ spaces: [boot({ side: [[3000, 400], [4000, 400], [3000, 800]] })] }).grossLitres).toBeCloseTo(120, 6);
    // a roof that falls and sides that close in: the integral of 600 (1 - t) 400 (1 - t) is a third
    const top = [[3000, -300], [4000, 0], [3000, 300]];
    expect(only({ spaces: [boot({ top, side: [[3000, 400], [4000, 400], [3000, 800]] })] }).grossLitres).toBeCloseTo(80, 3);
  });

  let module: ManifoldToplevel;
  beforeAll(async () => {
    module = await Module();
    module.setup();
  });
  /** A polygon pushed through everything, then its axes put where the outline has them. */
  const through = (outline: number[][], view: "top" | "side" | "rear"): Manifold => {
    const raw = new module.CrossSection(outline as [number, number][], "EvenOdd").extrude(20000).translate(0, 0, -10000);
    if (view === "top") return raw;
    // (x, z, depth) to (x, -depth, z); (y, z, depth) to (depth, y, z)
    return view === "side" ? raw.rotate(90, 0, 0) : raw.rotate(90, 0, 90);
  };
  it.each(Array.from({ length: 20 }, (_, i) => 900 + i))("agree with an independent solid library (manifold-3d, seed %d)", (seed) => {
    const { space } = randomBoot(seed);
    const solids = (["top", "side", "rear"] as const).flatMap((view) => (space[view] ? [through(space[view]!, view)] : []));
    const volume = module.Manifold.intersection(solids).volume() / 1e6;
    const { grossLitres } = only({ spaces: [space] });
    expect(volume).toBeGreaterThan(10);
    expect(Math.abs(grossLitres - volume) / volume).toBeLessThan(1e-4);
  });
});

describe("freeLitres: less wall gap, parts, runs, shafts and tyres as drawn, grown by the part gap", () => {
  it("take off each kind of thing once, by hand", () => {
    const spaces = [boot()];
    const free = (input: object) => 240 - only({ spaces, ...input }).freeLitres;
    expect(free({})).toBeCloseTo(0, 9);
    expect(free({ parts: [part({ type: "box", size: [200, 100, 100] }, [3500, 0, 600])] })).toBeCloseTo(2, 4);
    const run = { key: "r", name: "r", kind: "exhaust", diameter: 80, nodes: [{ key: "a", at: [2900, 0, 600] }, { key: "b", at: [4100, 0, 600] }] };
    expect(free({ runs: [run] })).toBeCloseTo(Math.PI * 1.6, 2);
    const shaft = { key: "s", name: "s", inboard: [3500, -400, 600], outboard: [3500, 400, 600] };
    expect(free({ shafts: [{ ...shaft, diameter: 60 }] })).toBeCloseTo(Math.PI * 0.09 * 6, 2);
    expect(free({ shafts: [shaft] })).toBeCloseTo(0, 9);
    expect(free({ parts: [part({ type: "box", size: [200, 100, 100] }, [3500, 0, 600])], runs: [run] })).toBeCloseTo(2 + (Math.PI * 1.6 * 800) / 1000, 2);
  });

  it("take generated tyres off, and one that the document lists in its place", () => {
    const spaces = [boot({ top: rectangle([2200, 2800], [600, 900]), side: rectangle([2200, 2800], [-100, 500]), rear: rectangle([600, 900], [-100, 500]) })];
    // all of the tyre (750 +- 112.5 across) within the space's width; the wheel stands 195 up, the space begins at -100: a segment of the disc, twice over
    const r = 320;
    const segment = (h: number) => r * r * Math.acos(h / r) - h * Math.sqrt(r * r - h * h);
    const disc = Math.PI * r * r - segment(300) * 2 - segment(295) - segment(305);
    // the accuracy that is promised: 1e-4 of the gross volume, 108 litres
    expect(Math.abs(only({ spaces }).grossLitres - only({ spaces }).freeLitres - (disc * 225) / 1e6)).toBeLessThan(0.0108);
    const listed = part({ type: "ball", diameter: 100 }, [2500, 750, 195], { key: "tyre-rear-right", kind: "tyre" });
    expect(108 - only({ spaces, parts: [listed] }).freeLitres).toBeCloseTo((Math.PI * 1e6) / 6 / 1e6, 3);
  });

  it("know nothing of rules, movement, tolerance, rooms and other spaces", () => {
    const plain = part({ type: "box", size: [200, 100, 100] }, [3500, 0, 600]);
    const full = { ...plain, movement: { x: [-90, 90] }, source: { how: "estimate", plusMinus: 40 }, roomFor: [{ key: "k", name: "k", solids: [{ type: "ball", diameter: 300 }] }] };
    const bare = spacesReport(layoutOf({ spaces: [boot()], parts: [plain] }));
    expect(spacesReport(layoutOf({ spaces: [boot(), boot({ key: "other" })], parts: [full], rules: { gap: 80, near: 500 } }))).toEqual([bare[0], { ...bare[0], key: "other" }]);
  });

  it.each(Array.from({ length: 8 }, (_, i) => 500 + i))("agree with dice thrown in strata, within three standard errors (seed %d)", (seed) => {
    const { space, things } = randomBoot(seed);
    const found = only({ spaces: [space], ...things.document });
    const { litres, error } = freeLitresByDice(space, things.distances, seed);
    expect(litres).toBeGreaterThan(0);
    expect({ off: Math.abs(found.freeLitres - litres) < 3 * error + 1e-4 * found.grossLitres, found: found.freeLitres, litres, error }).toMatchObject({ off: true });
    expect(error).toBeLessThan(3e-4 * found.grossLitres);
  });
});

describe("hostile cases: findings, never a number that is none", () => {
  it("no spaces", () => expect(spacesReport(layoutOf({ parts: [part({ type: "ball", diameter: 10 }, [0, 0, 0])] }))).toEqual([]));
  it("outlines that do not overlap have 0 and say so", () => {
    const apart = { top: rectangle([0, 100], [0, 100]), side: rectangle([200, 300], [0, 100]) };
    expect(only({ spaces: [{ key: "s", name: "s", ...apart }] })).toEqual({ key: "s", grossLitres: 0, freeLitres: 0, findings: ["The outlines have no volume in common."] });
    const meet = { top: rectangle([0, 100], [0, 100]), side: rectangle([100, 300], [0, 100]) };
    expect(only({ spaces: [{ key: "s", name: "s", ...meet }] })).toMatchObject({ grossLitres: 0, freeLitres: 0, findings: [expect.any(String)] });
    const sideways = { top: rectangle([0, 100], [0, 100]), rear: rectangle([150, 300], [0, 100]) };
    expect(only({ spaces: [{ key: "s", name: "s", ...sideways }] })).toMatchObject({ grossLitres: 0, findings: [expect.any(String)] });
    const over = { side: rectangle([0, 100], [0, 100]), rear: rectangle([0, 300], [200, 300]) };
    expect(only({ spaces: [{ key: "s", name: "s", ...over }] })).toMatchObject({ grossLitres: 0, findings: [expect.any(String)] });
  });
  it("shared extents that differ by more than 1 mm are a finding, by 1 not; the common volume counts", () => {
    const off = (by: number) => only({ spaces: [boot({ side: rectangle([3000, 4000 + by], [400, 800]) })] });
    expect(off(1)).toEqual({ key: "boot", grossLitres: expect.closeTo(240, 6) as number, freeLitres: expect.closeTo(240, 6) as number });
    expect(off(1.5)).toMatchObject({ grossLitres: expect.closeTo(240, 6) as number, findings: [expect.stringContaining("length (x) by 1.5 mm") as string] });
  });
  it("gaps larger than the space leave nothing; a part far away leaves everything", () => {
    expect(only({ spaces: [boot({ wallGap: 250 })] })).toMatchObject({ freeLitres: 0 });
    expect(only({ spaces: [boot({ partGap: 5000 })], parts: [part({ type: "ball", diameter: 1 }, [3500, 0, 600])] })).toMatchObject({ freeLitres: 0 });
    expect(only({ spaces: [boot()], parts: [part({ type: "box", size: [10, 10, 10] }, [-90000, 90000, 0])] }).freeLitres).toBeCloseTo(240, 9);
  });
  it("a hair's breadth of a space, and a part that only touches", () => {
    const thin = only({ spaces: [boot({ top: rectangle([3000, 3000.01], [-300, 300]), side: rectangle([3000, 3000.01], [400, 800]) })] });
    expect(thin.grossLitres).toBeCloseTo(0.0024, 9);
    expect(only({ spaces: [boot()], parts: [part({ type: "box", size: [100, 100, 100] }, [4050, 0, 600])] }).freeLitres).toBeCloseTo(240, 9);
  });
});
