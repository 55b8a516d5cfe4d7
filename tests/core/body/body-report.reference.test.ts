import { describe, expect, it } from "vitest";
import { bodyReport, measureStance } from "../../../src/core/body/stance.ts";
import { generatedTyres, wheelCentre } from "../../../src/core/layout/generated.ts";
import { layoutSchema, type Layout } from "../../../src/core/layout/schema.ts";
import { randomStanding, standingBySamples } from "./stance-oracle.ts";

const axle = (rideHeight: number, loadedRadius = 310) => ({ track: 1500, rideHeight, bump: 60, droop: 70, tyre: { diameter: 640, width: 225, loadedRadius } });
const layoutOf = (input: object, chassis: object = {}): Layout =>
  layoutSchema.parse({ format: "handbreadth-layout", version: 1, name: "t", chassis: { wheelbase: 2500, front: axle(0), rear: axle(0), ...chassis }, ...input });
const box = (key: string, size: number[], at: number[], rest: object = {}) => ({ key, name: key, kind: "other", solids: [{ type: "box", size }], at, ...rest });
const degrees = (radians: number) => (radians * 180) / Math.PI;
/** Tangent from a point to the circle of the loaded radius: facts.md section 1. */
const theta = (x: number, h: number, r = 310) => degrees(Math.atan2(h - r, x) + Math.asin(r / Math.hypot(x, h - r)));

describe("overhangs and lengths: along x, over parts, runs and body lines", () => {
  it("run from the foremost to the rearmost box, whatever the ride heights", () => {
    const parts = [box("nose", [100, 400, 100], [-600, 0, 300]), box("tail", [200, 400, 100], [3300, 0, 400])];
    for (const chassis of [{}, { front: axle(90), rear: axle(150) }]) {
      expect(bodyReport(layoutOf({ parts }, chassis))).toMatchObject({
        wheelbase: 2500, length: 3400 + 650, frontOverhang: 650, rearOverhang: 900, rearOverhangShare: 0.36, governs: { frontOverhang: "nose", rearOverhang: "tail" },
      });
    }
  });

  it("end where a cylinder lying across, a leaning one and a ball end", () => {
    const round = (turn: number[]) => bodyReport(layoutOf({ parts: [{ key: "can", name: "can", kind: "muffler", solids: [{ type: "round", diameter: 200, length: 500, axis: "x" }], at: [3000, 0, 400], turn }] })).rearOverhang;
    expect(round([0, 0, 90])).toBeCloseTo(600, 9);
    // facts.md section 11, no. 12: an envelope reaches D cos + L sin; lying along x and pitched by 30 degrees it is L cos + D sin
    expect(round([0, 30, 0])).toBeCloseTo(500 + 250 * Math.cos(Math.PI / 6) + 100 * Math.sin(Math.PI / 6), 9);
    expect(bodyReport(layoutOf({ parts: [{ key: "b", name: "b", kind: "other", solids: [{ type: "ball", diameter: 90 }], at: [3000, 0, 400] }] })).rearOverhang).toBeCloseTo(545, 9);
  });

  it("count the exhaust tip, flat at its end", () => {
    const runs = [{ key: "pipe", name: "Pipe", kind: "exhaust", diameter: 60, nodes: [{ key: "a", at: [2800, 0, 250] }, { key: "tip", at: [3700, 0, 250] }] }];
    expect(bodyReport(layoutOf({ parts: [box("tail", [200, 400, 100], [3300, 0, 400])], runs }))).toMatchObject({ rearOverhang: 1200, governs: { rearOverhang: "pipe" } });
  });

  it("count body lines seen from the side, from above and in sections, but neither tyres nor shafts", () => {
    const shafts = [{ key: "s", name: "s", inboard: [4000, 0, 0], outboard: [4000, 500, 0], diameter: 30 }];
    const tyre = box("tyre-rear-left", [900, 200, 900], [4000, -700, 310], { kind: "tyre" });
    const at = (body: object) => bodyReport(layoutOf({ body, shafts, parts: [tyre] }));
    expect(at({ side: [[-700, 200], [3300, 200], [3250, 900]] })).toMatchObject({ frontOverhang: 700, rearOverhang: 800, governs: { rearOverhang: "body", frontOverhang: "body" } });
    expect(at({ top: [[-720, -800], [3310, -800], [3310, 800]] })).toMatchObject({ length: 4030, groundClearance: -15, governs: { groundClearance: "s" } });
    expect(at({ sections: [{ x: 3420, line: [[-700, 500], [700, 500]] }] })).toMatchObject({ rearOverhang: 920, frontOverhang: -3420, length: 0 });
  });

  it("are held against the limit: over it by name and by how much, at it not", () => {
    const at = (x: number) => bodyReport(layoutOf({ parts: [box("tail", [200, 100, 100], [x, 0, 400])], body: { overhangLimit: { share: 0.6, why: "guidance" } } }));
    const over = (x: number) => at(x).findings.filter(({ code }) => code === "over-limit");
    // 60 % of the wheelbase: facts.md section 2, guidance read there
    expect(over(2500 + 1500 - 100)).toEqual([]);
    expect(over(2500 + 1525 - 100)).toMatchObject([{ key: "tail", message: expect.stringContaining("25.0 mm more than the limit of 0.6 of the wheelbase (1500.0 mm): guidance") as string }]);
    expect(at(2500 + 1525 - 100).rearOverhangShare).toBeCloseTo(0.61, 12);
  });
});

describe("the ground and the wheels", () => {
  it("stand at minus the ride heights; wheel centres on the axle lines, the loaded radius above the ground", () => {
    const layout = layoutOf({}, { front: axle(115, 305), rear: axle(140, 318) });
    expect(wheelCentre(layout, "front-left")).toEqual([0, -750, -115 + 305]);
    expect(wheelCentre(layout, "rear-right")).toEqual([2500, 750, -140 + 318]);
    const tyre = generatedTyres(layout).find(({ key }) => key === "tyre-rear-left")!;
    // the free diameter, not twice the loaded radius; bump is up
    expect(tyre).toMatchObject({ kind: "tyre", at: [2500, -750, 178], movement: { x: [0, 0], y: [0, 0], z: [-70, 60] }, solids: [{ type: "round", diameter: 640, length: 225, axis: "y" }] });
    expect(tyre.mass).toBeUndefined();
  });

  it("give the clearance square to a leaning ground: cos times the height above it", () => {
    const parts = [box("sump", [10, 10, 100], [1250, 0, 50])];
    // a box turned with the ground, so that its lowest point is known by hand: a ball instead
    const ball = { key: "ball", name: "ball", kind: "other", solids: [{ type: "ball", diameter: 80 }], at: [1000, 30, 60] };
    const lean = Math.atan2(80, 2500);
    const report = bodyReport(layoutOf({ parts: [ball] }, { front: axle(100), rear: axle(180) }));
    expect(report.groundClearance).toBeCloseTo((60 + 100 + (80 * 1000) / 2500) * Math.cos(lean) - 40, 9);
    expect(bodyReport(layoutOf({ parts }, { front: axle(115), rear: axle(115) }))).toMatchObject({ groundClearance: 115, governs: { groundClearance: "sump" } });
  });

  it("change with the ride height by as much, while lengths stay", () => {
    const at = (ride: number) => bodyReport(layoutOf({ parts: [box("a", [100, 100, 100], [3000, 0, 100])] }, { front: axle(ride), rear: axle(ride) }));
    expect(at(130).groundClearance! - at(100).groundClearance!).toBeCloseTo(30, 9);
    expect(at(130).rearOverhang).toBe(at(100).rearOverhang);
    // the wheel rises with the body's own frame: h grows by the same 30
    expect(at(130).departureAngle).toBeCloseTo(theta(550, 50 + 130), 9);
  });

  it("leave tyres and brakes out, and nothing else", () => {
    const low = (kind: string) => bodyReport(layoutOf({ parts: [box("high", [100, 100, 100], [1250, 0, 250]), box("low", [50, 50, 20], [1300, 300, 60], { kind })] })).governs.groundClearance;
    expect([low("tyre"), low("brake"), low("wheel"), low("suspension"), low("panel")]).toEqual(["high", "high", "low", "low", "low"]);
    const shafts = [{ key: "s", name: "s", inboard: [1250, 0, 150], outboard: [1250, 500, 150], diameter: 30 }];
    expect(bodyReport(layoutOf({ parts: [box("high", [100, 100, 100], [1250, 0, 250])], shafts }))).toMatchObject({ groundClearance: 135, governs: { groundClearance: "s", breakoverAngle: "s" } });
  });
});

describe("angles: tangent to the circle of the loaded radius", () => {
  it("are those of the governing corner, in front and behind", () => {
    const parts = [box("nose", [100, 400, 100], [-600, 0, 250]), box("tail", [200, 400, 100], [3300, 0, 400])];
    const report = bodyReport(layoutOf({ parts }, { front: axle(0, 300) }));
    expect(report.approachAngle).toBeCloseTo(theta(650, 200, 300), 9);
    expect(report.departureAngle).toBeCloseTo(theta(900, 350), 9);
    expect(report.governs).toMatchObject({ approachAngle: "nose", departureAngle: "tail" });
  });

  it("see what hangs low behind the tyre's foot, nearer than its own radius", () => {
    // 200 behind the axle and 60 up: outside the circle (d = 320.2), met at 24.3 degrees, hidden by the arc only from 77 on
    const low = box("arm", [200, 50, 40], [2600, 0, 80]);
    expect(bodyReport(layoutOf({ parts: [low] })).departureAngle).toBeCloseTo(theta(200, 60), 9);
    const far = box("tail", [100, 400, 100], [3250, 0, 850]);
    const one = { key: "plate", name: "plate", kind: "panel", solids: [{ type: "prism", plane: "xz", outline: [[2600, 12], [3300, 810], [2600, 810]], from: -50, to: 50 }], at: [0, 0, 0] };
    expect(bodyReport(layoutOf({ parts: [far, low] }))).toMatchObject({ governs: { departureAngle: "arm" } });
    // one plate with a low corner and a far one: 9.0 degrees at the low one, where the arc hides it from 28 on; the far one alone has 51.2
    expect(bodyReport(layoutOf({ parts: [one] })).departureAngle).toBeCloseTo(theta(100, 12), 9);
    expect(bodyReport(layoutOf({ parts: [{ ...one, turn: [0, 0, 180], at: [2500, 0, 0] }] })).approachAngle).toBeCloseTo(theta(100, 12), 9);
  });

  it("see a pipe across the car below the arc: common tangent of two circles", () => {
    const pipe = (x: number, z: number, d: number) => bodyReport(layoutOf({ parts: [{ key: "p", name: "p", kind: "other", solids: [{ type: "round", diameter: d, length: 400, axis: "y" }], at: [2500 + x, 0, z] }] })).departureAngle;
    const closed = (x: number, z: number, d: number) => degrees(Math.atan2(z - 310, x) + Math.asin((310 - d / 2) / Math.hypot(x, z - 310)));
    expect(pipe(200, 50, 30)).toBeCloseTo(closed(200, 50, 30), 9);
    expect(pipe(120, 30, 20)).toBeCloseTo(closed(120, 30, 20), 9);
    expect(pipe(800, 300, 76)).toBeCloseTo(closed(800, 300, 76), 9);
  });

  it("of the ramp are the sum of both tangents at the belly point (facts-checks ramp-1: 10.8827)", () => {
    const parts = [{ key: "v", name: "v", kind: "frame", solids: [{ type: "prism", plane: "xz", outline: [[1300, 120], [1310, 400], [1290, 400]], from: -20, to: 20 }], at: [0, 0, 0] }];
    const report = bodyReport(layoutOf({ parts }, { wheelbase: 2550 }));
    expect(report.breakoverAngle).toBeCloseTo(theta(1300, 120) + theta(1250, 120), 6);
    expect(Math.abs(report.breakoverAngle! - 10.8827)).toBeLessThan(0.001);
    expect(measureStance(layoutOf({ parts }, { wheelbase: 2550 })).points.breakoverAngle![2]).toBeCloseTo(120, 6);
  });

  it.each(Array.from({ length: 40 }, (_, i) => 4100 + i))("and everything else agree with a walk over sampled surfaces (seed %d)", (seed) => {
    const { layout, clouds } = randomStanding(seed);
    const report = bodyReport(layout);
    const brute = standingBySamples(layout, clouds);
    expect(report.findings.filter(({ code }) => code === "shape")).toEqual([]);
    if (report.groundClearance! < 0) {
      expect(report).toMatchObject({ approachAngle: null, departureAngle: null, breakoverAngle: null });
      expect(report.findings.map(({ code }) => code)).toContain("below-ground");
    }
    for (const name of ["length", "frontOverhang", "rearOverhang", "groundClearance", "approachAngle", "departureAngle", "breakoverAngle"] as const) {
      if (name.endsWith("Angle") && report.groundClearance! < 0) continue;
      const [found, walked] = [report[name], brute[name]];
      if (walked === null || found === null) {
        // samples see nothing where a surface is below the arc by less than they are apart
        expect([name, found === null ? null : found > 0]).toEqual([name, walked]);
        continue;
      }
      const sign = name === "length" || name.endsWith("Overhang") ? -1 : 1;
      // samples lie on the surface: they can only be higher or nearer than the truth
      expect({ name, beyond: sign * (found - walked) <= 1e-6, near: Math.abs(found - walked) < (name.endsWith("Angle") ? 0.02 : 0.05), found, walked }).toMatchObject({ beyond: true, near: true });
    }
  });
});

describe("hostile cases: null and a finding by name, never a number that is none", () => {
  const finite = (report: object) => expect(JSON.stringify(Object.values(report).filter((v) => typeof v === "number" && !Number.isFinite(v)))).toBe("[]");
  it("nothing drawn", () => {
    expect(bodyReport(layoutOf({}))).toEqual({
      wheelbase: 2500, length: null, frontOverhang: null, rearOverhang: null, rearOverhangShare: null, approachAngle: null, departureAngle: null, breakoverAngle: null, groundClearance: null,
      governs: {}, findings: [{ code: "nothing-to-measure", message: expect.any(String) as string }],
    });
  });
  it("a rear outline alone knows no station", () => expect(bodyReport(layoutOf({ body: { rear: [[-700, 100], [700, 100], [0, 900]] } }))).toMatchObject({ length: null, groundClearance: null, findings: [{ code: "nothing-to-measure" }] }));
  it("nothing beyond the wheels", () => {
    const report = bodyReport(layoutOf({ parts: [box("a", [100, 100, 100], [1250, 0, 200])] }));
    expect(report).toMatchObject({ approachAngle: null, departureAngle: null, frontOverhang: -1200, rearOverhang: -1200 });
    expect(report.findings.map(({ code }) => code)).toEqual(["no-limit-known", "no-limit-known"]);
  });
  it("a part below the ground is named, by how much, and no angle is given; one that just touches it has its angles", () => {
    const report = bodyReport(layoutOf({ parts: [box("keel", [100, 100, 100], [3000, 0, 37])] }));
    expect(report).toMatchObject({ groundClearance: -13, rearOverhang: 550, approachAngle: null, departureAngle: null, breakoverAngle: null });
    expect(report.findings).toEqual([{ code: "below-ground", key: "keel", message: "keel lies 13.0 mm below the ground: angles cannot be computed." }]);
    const touching = bodyReport(layoutOf({ parts: [box("keel", [100, 100, 100], [3000, 0, 50])] }));
    expect(touching).toMatchObject({ groundClearance: 0, findings: [{ code: "no-limit-known" }] });
    expect(touching.departureAngle).toBeCloseTo(0, 9); // facts-checks dep-2: a point on the ground
  });
  it("the least wheelbase, steep ground, the farthest parts", () => {
    for (const chassis of [{ wheelbase: 0.001, front: axle(0), rear: axle(0) }, { wheelbase: 1, front: axle(-5000), rear: axle(5000) }, { wheelbase: 2500, front: axle(0, 0.001), rear: axle(0, 9000) }]) {
      for (const at of [[0, 0, 0], [90000, 0, 90000], [-90000, 90000, -90000]]) {
        const report = bodyReport(layoutOf({ parts: [box("a", [100, 100, 100], at), { key: "b", name: "b", kind: "other", solids: [{ type: "ball", diameter: 50 }], at }] }, chassis));
        finite(report);
        expect(report.length).toBeGreaterThanOrEqual(100);
      }
    }
  });
});
