import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Vec2, Vec3 } from "../../../src/core/frames.ts";
import { convexPartsOf } from "../../../src/core/geometry/decompose.ts";
import { outlineOfPiece } from "../../../src/core/geometry/outline-of-piece.ts";
import type { Piece } from "../../../src/core/geometry/piece.ts";
import { findOutlineFault, signedArea } from "../../../src/core/geometry/polygons.ts";
import { pieceSection } from "../../../src/core/geometry/section.ts";
import { silhouette } from "../../../src/core/geometry/silhouette.ts";
import { GeometryError, outlineFindings, outlineVolume, solidPieces } from "../../../src/core/geometry/solids.ts";
import { cutTube, tubePath, tubePieces } from "../../../src/core/geometry/tubes.ts";
import { applyPose, inversePose, multiplyPose, poseOf, turnMatrix, turnOf } from "../../../src/core/geometry/turn.ts";
import { solidSchema, type Solid } from "../../../src/core/layout/schema.ts";

const SEED = 20261201;
const solid = (input: unknown): Solid => solidSchema.parse(input);
const area = (loop: readonly Vec2[]) => Math.abs(signedArea(loop));

/** Volume by Simpson's rule over sections: shares no code with the pieces' own volumes. */
function volumeBySections(pieces: readonly Piece[], axis: "x" | "y" | "z", low: number, high: number, n = 400): number {
  let sum = 0;
  for (let i = 0; i <= n; i++) {
    const at = low + ((high - low) * i) / n;
    const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2;
    for (const piece of pieces) sum += weight * area(pieceSection(piece, axis, at, 0.01));
  }
  return (sum * (high - low)) / n / 3;
}

describe("solidPieces", () => {
  it.each([
    { name: "box", input: { type: "box", size: [200, 120, 80] }, volume: 200 * 120 * 80 },
    { name: "round along y: pi r2 l", input: { type: "round", diameter: 150, length: 400, axis: "y" }, volume: Math.PI * 75 ** 2 * 400 },
    { name: "cone: pi l (a2 + ab + b2) / 3", input: { type: "cone", diameters: [60, 140], length: 90, axis: "x" }, volume: (Math.PI * 90 * (30 ** 2 + 30 * 70 + 70 ** 2)) / 3 },
    { name: "pointed cone", input: { type: "cone", diameters: [0, 100], length: 120, axis: "z" }, volume: (Math.PI * 50 ** 2 * 120) / 3 },
    { name: "oval: stadium area times length", input: { type: "oval", width: 240, height: 110, length: 560, axis: "x" }, volume: (Math.PI * 55 ** 2 + 130 * 110) * 560 },
    { name: "oval standing: the larger is the long way", input: { type: "oval", width: 110, height: 240, length: 560, axis: "y" }, volume: (Math.PI * 55 ** 2 + 130 * 110) * 560 },
    { name: "ball", input: { type: "ball", diameter: 90 }, volume: (4 / 3) * Math.PI * 45 ** 3 },
    { name: "bar, round", input: { type: "bar", from: [0, 0, 0], to: [300, 0, 0], diameter: 40 }, volume: Math.PI * 400 * 300 },
    { name: "L-shaped prism", input: { type: "prism", plane: "xz", outline: [[0, 0], [200, 0], [200, 60], [60, 60], [60, 180], [0, 180]], from: -50, to: 30 }, volume: (200 * 60 + 60 * 120) * 80 },
  ])("has the volume of the closed form: $name", ({ input, volume }) => {
    const pieces = solidPieces(solid(input));
    for (const axis of ["x", "y", "z"] as const) expect(Math.abs(volumeBySections(pieces, axis, -401, 401, 1604) / volume - 1)).toBeLessThan(8e-3);
  });

  it("cuts two outlines to their common solid: width times height integrated along x", () => {
    // a wedge: top 0..400 by +-100; side rises from 50 to 150: integral of 200 * (50 + x / 4) dx
    const volume = 200 * (50 * 400 + 400 ** 2 / 8);
    const wedge = { top: [[0, -100], [400, -100], [400, 100], [0, 100]] as Vec2[], side: [[0, 0], [400, 0], [400, 150], [0, 50]] as Vec2[] };
    expect(outlineVolume(wedge)).toBeCloseTo(volume, 3);
    expect(Math.abs(volumeBySections(solidPieces(solid({ type: "outlines", ...wedge })), "y", -100, 100) / volume - 1)).toBeLessThan(1e-6);
  });

  it("cuts three crossed bars of square section to a cube, and the common part of non-convex outlines exactly", () => {
    const square = (a: number, b: number): Vec2[] => [[-a, -b], [a, -b], [a, b], [-a, b]];
    expect(outlineVolume({ top: square(10, 10), side: square(10, 10), rear: square(10, 10) })).toBeCloseTo(8000, 6);
    // L above, L beside: sum over the two lengths of width times height
    const top: Vec2[] = [[0, 0], [300, 0], [300, 50], [100, 50], [100, 200], [0, 200]];
    const side: Vec2[] = [[0, 0], [300, 0], [300, 80], [150, 80], [150, 140], [0, 140]];
    expect(outlineVolume({ top, side })).toBeCloseTo(200 * 140 * 100 + 50 * 140 * 50 + 50 * 80 * 150, 4);
  });

  it("finds outlines that disagree by more than 1 mm, and says by how much", () => {
    const top: Vec2[] = [[0, 0], [300, 0], [300, 50], [0, 50]];
    expect(outlineFindings({ top, side: [[0, 0], [300.9, 0], [300.9, 50], [0, 50]] })).toEqual([]);
    expect(outlineFindings({ top, side: [[0, 0], [310, 0], [310, 50], [0, 50]] })[0]).toMatch(/length \(x\) by 10\.0 mm/);
  });

  it.each([
    [{ type: "prism", plane: "xy", outline: [[0, 0], [100, 100], [100, 0], [0, 100]], from: 0, to: 10 }, "outline", /meets/],
    [{ type: "prism", plane: "xy", outline: [[0, 0], [100, 0], [50, 0]], from: 0, to: 10 }, "outline", /meets|area/],
    [{ type: "prism", plane: "xy", outline: [[0, 0], [100, 0], [50, 40]], from: 5, to: 5 }, "to", /thickness/],
    [{ type: "outlines", top: [[0, 0], [10, 0], [10, 10]] }, "", /at least two/],
    [{ type: "outlines", top: [[0, 0], [10, 0], [10, 10]], side: [[50, 0], [60, 0], [60, 10]] }, "", /no volume in common/],
    [{ type: "bar", from: [0, 0, 0], to: [0, 0, 0], diameter: 5 }, "to", /same place/],
    [{ type: "bar", from: [0, 0, 0], to: [9, 0, 0] }, "", /exactly one/],
    [{ type: "sheet", rows: [[[0, 0, 0], [0, 9, 0]], [[9, 0, 0], [9, 9, 0], [9, 18, 0]]], thickness: 4 }, "rows[1]", /expected 2, found 3/],
  ])("refuses what cannot be, with its place: %j", (input, path, message) => {
    try {
      solidPieces(solid(input));
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(GeometryError);
      expect((error as GeometryError).path).toBe(path);
      expect((error as GeometryError).message).toMatch(message);
    }
  });
});

describe("convexPartsOf", () => {
  /** A simple polygon about the origin: radii over rising angles. */
  const star = fc.array(fc.integer({ min: 10, max: 300 }), { minLength: 4, maxLength: 40 }).map((radii): Vec2[] =>
    radii.map((r, i) => [r * Math.cos((2 * Math.PI * i) / radii.length), r * Math.sin((2 * Math.PI * i) / radii.length)]));

  it(`tiles the polygon with convex parts, whatever corner it starts at and whichever way it runs (seed ${SEED})`, () => {
    fc.assert(fc.property(star, fc.nat(100), fc.boolean(), (ring, shift, flip) => {
      fc.pre(findOutlineFault(ring) === null);
      const parts = convexPartsOf(ring);
      const total = parts.reduce((sum, part) => sum + signedArea(part), 0);
      expect(total).toBeCloseTo(Math.abs(signedArea(ring)), 5);
      for (const part of parts) {
        expect(signedArea(part)).toBeGreaterThan(0);
        part.forEach((p, i) => {
          const q = part[(i + 1) % part.length]!;
          const r = part[(i + 2) % part.length]!;
          expect((q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0])).toBeGreaterThanOrEqual(-1e-9);
        });
      }
      const k = shift % ring.length;
      const again = [...ring.slice(k), ...ring.slice(0, k)];
      expect(convexPartsOf(flip ? again.reverse() : again)).toEqual(parts);
    }), { seed: SEED, numRuns: 300 });
  });

  it("cuts a 2 000-corner comb without losing area", () => {
    const comb: Vec2[] = [];
    for (let i = 0; i < 500; i++) comb.push([4 * i, 0], [4 * i + 2, 0], [4 * i + 2, 50], [4 * i + 4, 50]);
    const ring: Vec2[] = [...comb, [2000, 100], [0, 100]];
    expect(findOutlineFault(ring)).toBeNull();
    expect(convexPartsOf(ring).reduce((sum, part) => sum + signedArea(part), 0)).toBeCloseTo(Math.abs(signedArea(ring)), 4);
  });
});

describe("tubePath", () => {
  const chain = (bend: number, ...places: Vec3[]) => ({ diameter: 20, bendRadius: bend, nodes: places.map((at, i) => ({ key: `n${i}`, at })), legs: [] });

  it("develops a bent pipe: 90 degrees of radius 95.25 between 300 and 400 is 659.12, 45 degrees 695.90 (facts.md section 6)", () => {
    expect(tubePath(chain(95.25, [0, 0, 0], [300, 0, 0], [300, 400, 0])).length).toBeCloseTo(700 - 2 * 95.25 + (95.25 * Math.PI) / 2, 9);
    expect(Math.abs(tubePath(chain(95.25, [0, 0, 0], [300, 0, 0], [300, 400, 0])).length - 659.12)).toBeLessThan(0.01);
    const c = 400 * Math.SQRT1_2;
    expect(Math.abs(tubePath(chain(95.25, [0, 0, 0], [300, 0, 0], [300 + c, c, 0])).length - 695.9)).toBeLessThan(0.01);
  });

  it("scales tangents that do not fit by one factor, and names the largest radius", () => {
    const path = tubePath(chain(100, [0, 0, 0], [150, 0, 0], [150, 120, 0], [300, 120, 0]));
    // 100 + 100 > 120: both tangents become 60, radius 60
    for (const bend of path.bends) expect(bend.radius).toBeCloseTo(60, 9);
    expect(path.findings.map((f) => [f.code, f.node, Math.round(f.largest!)])).toEqual([["bend-does-not-fit", "n1", 60], ["bend-does-not-fit", "n2", 60]]);
    expect(path.length).toBeCloseTo(90 + 90 + 60 * Math.PI, 9);
  });

  it("finds a reversal, a bend tighter than the pipe, and nodes on one spot", () => {
    expect(tubePath(chain(30, [0, 0, 0], [100, 0, 0], [20, 0, 0])).findings[0]!.code).toBe("reversal");
    expect(tubePath(chain(8, [0, 0, 0], [100, 0, 0], [100, 100, 0])).findings[0]!.code).toBe("bend-too-tight");
    expect(tubePath(chain(8, [0, 0, 0], [0, 0, 0], [100, 100, 0])).findings[0]!.code).toBe("no-length");
  });

  it("fills the volume of Pappus: section area times developed length, for a bend and for a mitre", () => {
    // Pappus (second theorem): a disc carried square to its centre's path sweeps area times path
    const r = 10;
    for (const bend of [60, 0]) {
      const path = tubePath(chain(bend, [0, 0, 0], [200, 0, 0], [200, 0, 200]));
      const pieces = tubePieces(path).map((tube) => tube.piece);
      const volume = volumeBySections(pieces, "y", -r, r, 400);
      expect(Math.abs(volume / (Math.PI * r * r * path.length) - 1)).toBeLessThan(5e-3);
    }
  });

  it("keeps every chord's ends within 0.02 mm of the arc, and joins them without steps", () => {
    const path = tubePath(chain(100, [0, 0, 0], [300, 0, 0], [300, 300, 0]));
    const tubes = tubePieces(path);
    const centre: Vec3 = [200, 100, 0];
    let on = 0;
    tubes.forEach((tube, i) => {
      for (let k = 0; k <= 10; k++) {
        const p = [0, 1, 2].map((m) => tube.line[0][m]! + ((tube.line[1][m]! - tube.line[0][m]!) * k) / 10);
        if (p[0]! > 200.5 && p[1]! < 99.5) {
          on++;
          expect(Math.abs(Math.hypot(p[0]! - centre[0], p[1]! - centre[1]) - 100)).toBeLessThan(0.0201);
        }
      }
      if (i > 0) expect(Math.hypot(...[0, 1, 2].map((m) => tube.line[0][m]! - tubes[i - 1]!.line[1][m]!))).toBeLessThan(1e-9);
    });
    expect(on).toBeGreaterThan(100);
  });

  it("cuts stretches out square, so that what is left is as long as it should be", () => {
    const path = tubePath(chain(60, [0, 0, 0], [200, 0, 0], [200, 0, 200]));
    const rest = cutTube(tubePieces(path), [{ leg: 0, from: 0, to: 50 }, { leg: 1, from: path.legs[1]!.length - 40, to: path.legs[1]!.length }], new Set());
    const left = rest.reduce((sum, tube) => sum + Math.abs(tube.to - tube.from), 0);
    expect(left).toBeCloseTo(path.length - 90, 9);
    const low = Math.min(...rest.flatMap((tube) => tube.piece.discs.map((d) => d.centre[0])));
    expect(low).toBeCloseTo(50, 9);
  });
});

describe("turnMatrix", () => {
  it("turns about x, then y, then z, right-handed, exact at quarter turns", () => {
    expect(applyPose(poseOf({ at: [1, 2, 3], turn: [90, 0, 0] }), [0, 1, 0])).toEqual([1, 2, 4]);
    expect(applyPose(poseOf({ at: [0, 0, 0], turn: [90, 0, 90] }), [0, 1, 0])).toEqual([0, 0, 1]);
  });

  it(`is undone by turnOf and inversePose (seed ${SEED})`, () => {
    const angle = fc.double({ min: -179, max: 179, noNaN: true });
    fc.assert(fc.property(angle, fc.double({ min: -89, max: 89, noNaN: true }), angle, (roll, pitch, yaw) => {
      const m = turnMatrix([roll, pitch, yaw]);
      turnMatrix(turnOf(m)).forEach((v, i) => expect(v).toBeCloseTo(m[i]!, 9));
      const pose = { rotation: m, at: [10, -20, 30] as Vec3 };
      const p = applyPose(multiplyPose(inversePose(pose), pose), [5, 6, 7]);
      [5, 6, 7].forEach((v, i) => expect(p[i]).toBeCloseTo(v, 9));
    }), { seed: SEED, numRuns: 200 });
  });
});

describe("outlines and silhouettes", () => {
  it("are the envelope of a leaning cylinder: 150 x 400 at 10 degrees is 217.18 by 419.97 (facts-checks lean-1)", () => {
    const pieces = solidPieces(solid({ type: "round", diameter: 150, length: 400, axis: "z", turn: [0, 10, 0] }));
    const loop = outlineOfPiece(pieces[0]!, "side", 0.001);
    const width = Math.max(...loop.map((p) => p[0])) - Math.min(...loop.map((p) => p[0]));
    const height = Math.max(...loop.map((p) => p[1])) - Math.min(...loop.map((p) => p[1]));
    expect(Math.abs(width - 217.18)).toBeLessThan(0.01);
    expect(Math.abs(height - 419.97)).toBeLessThan(0.01);
  });

  it("join overlapping pieces: two crossed bars cover their areas less the square they share", () => {
    const bars = [solid({ type: "box", size: [200, 40, 10] }), solid({ type: "box", size: [40, 200, 30] })].flatMap(solidPieces);
    const loops = silhouette(bars, "plan");
    expect(loops).toHaveLength(1);
    expect(area(loops[0]!)).toBeCloseTo(2 * 200 * 40 - 40 * 40, 6);
  });

  it("a ball's section is a circle of sqrt(r2 - h2), a grown triangle's is its thickness", () => {
    const ball = solidPieces(solid({ type: "ball", diameter: 100 }))[0]!;
    expect(Math.abs(area(pieceSection(ball, "z", 30, 0.001)) - Math.PI * 40 ** 2)).toBeLessThan(8);
    const sheet = solidPieces(solid({ type: "sheet", rows: [[[0, 0, 0], [0, 100, 0]], [[100, 0, 0], [100, 100, 0]]], thickness: 4 }));
    const cut = pieceSection(sheet[0]!, "x", 60, 0.01);
    expect(Math.max(...cut.map((p) => p[1]))).toBeCloseTo(2, 6);
  });
});
