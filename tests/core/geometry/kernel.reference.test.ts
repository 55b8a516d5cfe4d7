import { describe, expect, it } from "vitest";
import { readFileSync, existsSync } from "node:fs";
import { measurePieces } from "#core/geometry/measure.ts";
import { IDENTITY, type Piece, type Pose } from "#core/geometry/piece.ts";
import type { Vec3 } from "#core/frames.ts";

const at = (x: number, y: number, z: number): Pose => ({ ...IDENTITY, at: [x, y, z] });
const ball = (d: number): Piece => ({ points: [[0, 0, 0]], discs: [], radius: d / 2, form: "ball" });
const capsule = (p: Vec3, q: Vec3, d: number): Piece => ({ points: [p, q], discs: [], radius: d / 2, form: "capsule" });
const box = (x: number, y: number, z: number): Piece => ({
  points: [-1, 1].flatMap((i) => [-1, 1].flatMap((j) => [-1, 1].map((k): Vec3 => [(i * x) / 2, (j * y) / 2, (k * z) / 2]))),
  discs: [],
  radius: 0,
  form: "box",
});
const cylinder = (d: number, length: number): Piece => ({
  points: [],
  discs: [-1, 1].map((s) => ({ centre: [0, 0, (s * length) / 2], u: [d / 2, 0, 0], v: [0, d / 2, 0] })),
  radius: 0,
  form: "cylinder",
});

describe("measurePieces", () => {
  it("is the distance of centres less both radii for two balls", () => {
    const m = measurePieces(ball(100), at(0, 0, 0), ball(60), at(300, 400, 0));
    expect(m.distance).toBeCloseTo(500 - 80, 9);
    expect([...m.pointA]).toEqual([30, 40, 0]);
  });
  it("parts two overlapping boxes by the least face", () => {
    const m = measurePieces(box(100, 100, 100), at(0, 0, 0), box(50, 50, 50), at(70, 20, 10));
    expect(m.distance).toBeCloseTo(-5, 9);
  });
  it("parts two overlapping cylinders", () => {
    const m = measurePieces(cylinder(100, 400), at(0, 0, 0), cylinder(50, 300), at(70, 0, 10));
    expect(m.distance).toBeCloseTo(-5, 7);
  });
  it("box cyl", () => {
    const m = measurePieces(cylinder(100, 400), at(0, 0, 0), box(50, 50, 50), at(70, 10, 10));
    expect(m.distance).toBeCloseTo(-5, 7);
  });
});
