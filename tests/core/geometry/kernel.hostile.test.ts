import { describe, expect, it } from "vitest";
import { buildBody, bodyBox, setPose } from "#core/geometry/body.ts";
import { createMeasure, measureBodies, measurePieces, type Measure } from "#core/geometry/measure.ts";
import { IDENTITY, type Piece, type Pose } from "#core/geometry/piece.ts";
import type { Vec3 } from "#core/frames.ts";
import { at, ball, box, capsule, compose, cone, cylinder, hull, oval, prism, triangle, tube, turned } from "./kernel-pieces.ts";

const EVERY: Readonly<Record<string, Piece>> = {
  ball: ball(40),
  point: ball(0),
  capsule: capsule([0, 0, -60], [0, 0, 60], 30),
  line: capsule([0, 0, -60], [0, 0, 60], 0),
  box: box(80, 50, 30),
  prism: prism(7, 60, 90),
  hull: hull([[30, 0, 0], [-20, 35, 0], [-20, -35, 0], [0, 0, 70], [0, 0, -70]]),
  cylinder: cylinder(60, 100),
  cone: cone(80, 20, 70),
  tip: cone(0, 80, 70),
  oval: oval(120, 50, 90),
  tube: tube(30, 120, [0.4, -0.2], [-0.6, 0.3]),
  triangle: triangle([[0, 0, 0], [90, 0, 0], [0, 70, 0]], 3),
  grown: { ...cylinder(50, 60), radius: 8, form: "grown" },
};

function expectSound(m: Measure): void {
  expect(Number.isFinite(m.distance)).toBe(true);
  for (const p of [m.pointA, m.pointB]) for (const c of p) expect(Number.isFinite(c)).toBe(true);
  expect(m.overlapping).toBe(m.distance <= 0);
}

describe("measurePieces", () => {
  it("finds every shape overlapping its own copy, by more than nothing where it has any width", () => {
    for (const [name, piece] of Object.entries(EVERY)) {
      const m = measurePieces(piece, at(100, -50, 30), piece, at(100, -50, 30));
      expectSound(m);
      expect(m.overlapping, name).toBe(true);
      if (name === "point" || name === "line") expect(m.distance).toBe(0);
      else expect(m.distance, name).toBeLessThan(-1);
    }
  });

  it("gives a sound answer for every pair of shapes, centre on centre, at far coordinates and quarter turns", () => {
    for (const [nameA, a] of Object.entries(EVERY)) {
      for (const [nameB, b] of Object.entries(EVERY)) {
        for (const pose of [at(0, 0, 0), turned([1, 0, 0], Math.PI / 2, [0, 0, 0]), turned([1, 1, 1], (2 * Math.PI) / 3, [0, 0, 0]), turned([0.2, 0.5, 0.9], 0.7, [0, 0, 0])]) {
          const far = at(5000, -5000, 5000);
          const m = measurePieces(a, far, b, compose(far, pose));
          expectSound(m);
          expect(m.distance, `${nameA} ${nameB}`).toBeLessThanOrEqual(0);
        }
      }
    }
  });

  it("passes from gap to overlap without a jump as one piece is pushed into another", () => {
    for (const [nameA, a] of Object.entries(EVERY)) {
      for (const [nameB, b] of Object.entries(EVERY)) {
        const pose = (x: number): Pose => turned([0.3, 0.7, 0.2], 0.5, [x, 3, -2]);
        let before = measurePieces(a, IDENTITY, b, pose(200)).distance;
        for (let x = 199; x >= 0; x -= 1) {
          const now = measurePieces(a, IDENTITY, b, pose(x)).distance;
          expect(Math.abs(now - before), `${nameA} ${nameB} at ${x}`).toBeLessThan(1 + 1e-6);
          before = now;
        }
      }
    }
  });

  it("sees gaps of 1e-5 mm as gaps and overlaps of 1e-5 mm as overlaps", () => {
    const pairs: [Piece, Piece, number][] = [
      [box(80, 50, 30), box(60, 40, 20), 70],
      [cylinder(60, 100), cylinder(40, 100), 50],
      [ball(40), ball(30), 35],
      [box(80, 50, 30), cylinder(40, 80), 60],
      [oval(120, 50, 90), box(20, 20, 20), 70],
      [capsule([0, 0, -60], [0, 0, 60], 30), box(80, 50, 30), 55],
    ];
    for (const [a, b, touching] of pairs) {
      for (const motion of [at(0, 0, 0), turned([0.4, 0.1, 0.8], 2.2, [4800, -4200, 3900])]) {
        const put = (x: number): Measure => measurePieces(a, motion, b, compose(motion, at(x, 0, 0)));
        expect(put(touching + 1e-5).distance).toBeCloseTo(1e-5, 8);
        expect(put(touching - 1e-5).distance).toBeCloseTo(-1e-5, 8);
        expect(Math.abs(put(touching).distance)).toBeLessThan(1e-8);
      }
    }
  });

  it("takes points in one place, on one line and on one plane for what they are", () => {
    const same: Vec3 = [3, 4, 5];
    expect(measurePieces(hull([same, same, same, same, same]), IDENTITY, ball(10), at(3, 4, 25)).distance).toBeCloseTo(15, 9);
    const line = hull([[0, 0, 0], [50, 0, 0], [100, 0, 0], [25, 0, 0], [75, 0, 0]]);
    expect(measurePieces(line, IDENTITY, box(20, 20, 20), at(50, 0, 30)).distance).toBeCloseTo(20, 9);
    // A line through a box leaves it through the nearest face.
    expect(measurePieces(line, IDENTITY, box(20, 40, 30), at(50, 0, 0)).distance).toBeCloseTo(-15, 9);
    const plate = hull([[0, 0, 0], [100, 0, 0], [100, 60, 0], [0, 60, 0], [50, 30, 0], [50, 0, 0]]);
    expect(measurePieces(plate, IDENTITY, box(20, 20, 20), at(50, 30, 4)).distance).toBeCloseTo(-6, 9);
    expect(measurePieces(plate, IDENTITY, plate, at(10, 5, 0)).distance).toBe(0);
  });

  it("measures needles and hair-thin plates", () => {
    const needle = triangle([[0, 0, 0], [2000, 0, 0], [1000, 0.001, 0]], 2);
    expect(measurePieces(needle, IDENTITY, ball(10), at(1000, 0, 50)).distance).toBeCloseTo(50 - 1 - 5, 6);
    expect(measurePieces(needle, IDENTITY, needle, turned([0, 0, 1], 1.2, [900, -400, 3])).distance).toBeCloseTo(1, 6);
    const foil = box(3000, 2000, 0.01);
    expect(measurePieces(foil, IDENTITY, foil, at(100, 50, 0.02)).distance).toBeCloseTo(0.01, 9);
    expect(measurePieces(foil, IDENTITY, cylinder(0.01, 4000), turned([1, 0, 0], Math.PI / 2, [0, 0, 1])).distance).toBeCloseTo(1 - 0.005 - 0.005, 8);
    expect(measurePieces(box(4000, 0.5, 0.5), IDENTITY, box(0.5, 4000, 0.5), at(0, 0, 0.25)).distance).toBeCloseTo(-0.25, 9);
  });

  it("measures things of a hundredth of a millimetre at coordinates of 5 000 mm", () => {
    const where: Vec3 = [4999, -5000, 4998];
    for (const make of [ball(0.01), box(0.01, 0.01, 0.01), cylinder(0.01, 0.01), prism(8, 0.01, 0.01)]) {
      const m = measurePieces(make, at(...where), make, at(where[0], where[1], where[2] + 0.015));
      expect(m.distance).toBeCloseTo(0.005, 8);
      const over = measurePieces(make, at(...where), make, at(where[0], where[1], where[2] + 0.006));
      expect(over.distance).toBeCloseTo(-0.004, 7);
    }
  });

  it("does not mind faces, edges and axes that are parallel to within rounding", () => {
    for (const tilt of [0, 1e-15, 1e-12, 1e-9, 1e-7]) {
      const pose = turned([1, 0, 0], tilt, [10, 5, 80]);
      expect(Math.abs(measurePieces(box(300, 300, 60), IDENTITY, box(200, 200, 60), pose).distance - (20 - 100 * tilt))).toBeLessThan(2e-8);
      expect(Math.abs(measurePieces(cylinder(300, 60), IDENTITY, cylinder(200, 60), pose).distance - (20 - 100 * tilt))).toBeLessThan(1e-6);
      const beside = turned([1, 0, 0], tilt, [90, 0, 0]);
      expect(Math.abs(measurePieces(cylinder(60, 800), IDENTITY, cylinder(60, 800), beside).distance - 30)).toBeLessThan(1e-6);
      expect(Math.abs(measurePieces(capsule([0, 0, -400], [0, 0, 400], 60), IDENTITY, capsule([0, 0, -400], [0, 0, 400], 60), beside).distance - 30)).toBeLessThan(1e-6);
    }
  });

  it("refuses what is not a piece, saying what is wrong", () => {
    const empty: Piece = { points: [], discs: [], radius: 1, form: "ball" };
    expect(() => buildBody([empty])).toThrow(/at least one point or disc/);
    expect(() => buildBody([])).toThrow(/at least one piece/);
    expect(() => buildBody([{ ...ball(10), radius: -1 }])).toThrow(/radius must be zero or more, got -1/);
    expect(() => buildBody([{ ...ball(10), radius: Number.NaN }])).toThrow(/radius/);
    expect(() => buildBody([hull([[0, 0, Number.NaN]])])).toThrow(/not a finite number/);
    expect(() => buildBody([hull([[0, Number.POSITIVE_INFINITY, 0]])])).toThrow(/not a finite number/);
  });

  it("does not trust a wrong hint about the form", () => {
    const honest = hull([[0, 0, 0], [80, 0, 0], [0, 60, 0], [0, 0, 40], [30, 30, 30], [5, 70, 5], [70, 5, 5], [5, 5, 70]]);
    for (const form of ["box", "cylinder", "ball", "capsule", "triangle"] as const) {
      const m = measurePieces({ ...honest, form }, IDENTITY, ball(10), at(200, 100, 50));
      expect(m.distance).toBe(measurePieces(honest, IDENTITY, ball(10), at(200, 100, 50)).distance);
    }
  });
});

describe("bodyBox", () => {
  it("is the exact extent of turned round pieces", () => {
    const body = buildBody([cylinder(60, 200)]);
    setPose(body, turned([1, 0, 0], 0.6, [100, 200, 300]));
    const reach = 100 * Math.cos(0.6) + 30 * Math.sin(0.6);
    const across = 100 * Math.sin(0.6) + 30 * Math.cos(0.6);
    [70, 200 - across, 300 - reach, 130, 200 + across, 300 + reach].forEach((c, k) => expect(bodyBox(body)[k]).toBeCloseTo(c, 10));
  });
});

describe("measureBodies", () => {
  it("says Infinity beyond the cut-off and the distance at it", () => {
    const [a, b] = [buildBody([box(10, 10, 10)]), buildBody([box(10, 10, 10)])];
    setPose(b, at(110, 0, 0));
    const out = createMeasure();
    measureBodies(a, b, null, 99, out);
    expect(out.distance).toBe(Infinity);
    expect(out.pieceA).toBe(-1);
    measureBodies(a, b, null, 100, out);
    expect(out.distance).toBeCloseTo(100, 9);
  });

  it("holds ten thousand pieces a body", () => {
    const pins = (count: number, y: number): Piece[] => Array.from({ length: count }, (_, i) => capsule([i, y, 0], [i + 0.5, y, 0], 0.2));
    const [a, b] = [buildBody(pins(10000, 0)), buildBody(pins(10000, 7))];
    const out = createMeasure();
    measureBodies(a, b, null, 150, out);
    expect(out.distance).toBeCloseTo(6.8, 9);
  });

  it("keeps the points it is given in a and b apart from each other when they are the same body", () => {
    const body = buildBody([box(10, 20, 30), ball(50)]);
    const out = createMeasure();
    measureBodies(body, body, null, 10, out);
    expect(out.overlapping).toBe(true);
    expect(out.distance).toBeLessThan(0);
  });
});
