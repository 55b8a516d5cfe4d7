import { describe, expect, it } from "vitest";
import { partPieces } from "../../../src/core/geometry/solids.ts";
import { placePiece, poseOf } from "../../../src/core/geometry/turn.ts";
import type { Vec3 } from "../../../src/core/frames.ts";
import { measureSpace } from "../../../src/core/luggage/free-volume.ts";
import { partSchema, spaceSchema } from "../../../src/core/layout/schema.ts";

const box = (lx: number, ly: number, lz: number) => ({
  top: [[0, 0], [lx, 0], [lx, ly], [0, ly]], side: [[0, 0], [lx, 0], [lx, lz], [0, lz]],
});
const space = (input: object) => spaceSchema.parse({ key: "boot", name: "Boot", ...input });
const at = (solid: object, place: Vec3, turn: Vec3 = [0, 0, 0]) => {
  const part = partSchema.parse({ key: "p", name: "p", kind: "other", solids: [solid], at: place, turn });
  return partPieces(part).map((piece) => placePiece(piece, poseOf(part)));
};

describe("measureSpace", () => {
  it("is the box's own volume where nothing lies in it, and the shrunk box's with a wall gap", () => {
    const v = measureSpace(space({ ...box(1000, 600, 400), partGap: 0 }), []);
    expect(v.grossLitres).toBeCloseTo(240, 6);
    expect(v.freeLitres).toBeCloseTo(240, 6);
    const w = measureSpace(space({ ...box(1000, 600, 400), wallGap: 25 }), []);
    expect(w.freeLitres).toBeCloseTo((0.95 * 0.55 * 0.35) * 1000, 3);
  });

  // Steiner's formula for a convex body grown by a ball: V + S r + M r^2 + 4/3 pi r^3, M the integral of mean curvature
  // (box: pi (a + b + c); cylinder: pi l + pi^2 d / 2, from memory), all inside the space.
  it("takes a box grown by the part gap: Steiner's formula", () => {
    const [a, b, c, r] = [200, 150, 100, 10];
    const grown = a * b * c + 2 * (a * b + b * c + c * a) * r + Math.PI * (a + b + c) * r * r + (4 / 3) * Math.PI * r ** 3;
    const v = measureSpace(space(box(1000, 600, 400)), at({ type: "box", size: [a, b, c] }, [500, 300, 200], [20, 30, 40]));
    expect(Math.abs(v.grossLitres - v.freeLitres - grown / 1e6)).toBeLessThan(0.02);
  });

  it("takes a lying and a leaning cylinder grown by the part gap: Steiner's formula", () => {
    const [d, l, r] = [160, 420, 10];
    const grown = (Math.PI * d * d * l) / 4 + (Math.PI * d * l + (Math.PI * d * d) / 2) * r + (Math.PI * l + (Math.PI ** 2 * d) / 2) * r * r + (4 / 3) * Math.PI * r ** 3;
    for (const turn of [[0, 0, 0], [0, 0, 90], [0, 25, 10]] as Vec3[]) {
      const v = measureSpace(space(box(1000, 700, 500)), at({ type: "round", diameter: d, length: l, axis: "x" }, [500, 350, 250], turn));
      expect(Math.abs(v.grossLitres - v.freeLitres - grown / 1e6)).toBeLessThan(0.03);
    }
  });

  it("counts overlapping parts once, and only what lies inside", () => {
    const parts = [...at({ type: "box", size: [200, 200, 200] }, [0, 300, 200]), ...at({ type: "box", size: [200, 200, 200] }, [50, 300, 200])];
    const v = measureSpace(space({ ...box(1000, 600, 400), partGap: 0 }), parts);
    expect(v.freeLitres).toBeCloseTo(240 - 0.15 * 0.2 * 0.2 * 1000, 4);
  });

  it("is 0 where parts fill it", () => {
    expect(measureSpace(space(box(300, 200, 100)), at({ type: "box", size: [400, 300, 200] }, [150, 100, 50])).freeLitres).toBe(0);
  });

  it("cuts three outlines together: a wheel-arch rear outline", () => {
    const rear = [[0, 0], [600, 0], [600, 400], [300, 400], [0, 200]];
    const v = measureSpace(space({ ...box(1000, 600, 400), rear, partGap: 0 }), []);
    expect(v.grossLitres).toBeCloseTo((600 * 400 - (300 * 200) / 2) / 1000, 3);
  });
});
