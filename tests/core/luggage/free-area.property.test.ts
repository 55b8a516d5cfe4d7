import { difference, featureCollection, polygon, union } from "@turf/turf";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { freeArea, type ScanRegion } from "../../../src/core/luggage/free-area.ts";
import { insetStretches, insideStretches } from "../../../src/core/luggage/stretches.ts";

type Loop = [number, number][];
const SEED = 20261201;

/** Area by the shoelace formula, over all rings of a turf geometry (holes wind the other way). */
const areaOf = (feature: { geometry: { type: string; coordinates: unknown } } | null): number => {
  if (!feature) return 0;
  const polygons = (feature.geometry.type === "Polygon" ? [feature.geometry.coordinates] : feature.geometry.coordinates) as number[][][][];
  let area = 0;
  for (const rings of polygons) {
    rings.forEach((ring, index) => {
      let twice = 0;
      for (let i = 0; i + 1 < ring.length; i++) twice += ring[i]![0]! * ring[i + 1]![1]! - ring[i + 1]![0]! * ring[i]![1]!;
      area += (index === 0 ? 1 : -1) * Math.abs(twice / 2);
    });
  }
  return area;
};
const closed = (loop: Loop) => polygon([[...loop, loop[0]!]]);

/** A convex polygon: corners on an ellipse, turned. */
const convex = fc
  .record({
    x: fc.integer({ min: -300, max: 300 }), y: fc.integer({ min: -200, max: 200 }), a: fc.integer({ min: 5, max: 200 }), b: fc.integer({ min: 5, max: 150 }),
    n: fc.integer({ min: 3, max: 9 }), turn: fc.integer({ min: 0, max: 359 }),
  })
  .map(({ x, y, a, b, n, turn }): Loop =>
    Array.from({ length: n }, (_, i) => {
      const t = (i / n) * 2 * Math.PI;
      const c = Math.cos((turn * Math.PI) / 180);
      const s = Math.sin((turn * Math.PI) / 180);
      return [x + a * Math.cos(t) * c - b * Math.sin(t) * s, y + a * Math.cos(t) * s + b * Math.sin(t) * c];
    }),
  );
const star: Loop = [[-250, -150], [-40, -180], [0, -60], [120, -170], [260, -90], [180, 40], [240, 160], [10, 120], [-60, 190], [-230, 130], [-120, 10]];
const regionOf = (outline: Loop): ScanRegion => {
  const us = outline.map((p) => p[0]);
  return { from: Math.min(...us), to: Math.max(...us), breaks: us, stretchesAt: (u, side) => insideStretches(outline, u + side * 1e-9) };
};

describe("freeArea", () => {
  it(`agrees with polygon clipping by an independent library (turf difference, seed ${SEED})`, () => {
    fc.assert(
      fc.property(fc.array(convex, { minLength: 0, maxLength: 6 }), (obstacles) => {
        const all = obstacles.map(closed);
        const joined = all.length > 1 ? union(featureCollection(all)) : (all[0] ?? null);
        const expected = areaOf(joined ? difference(featureCollection([closed(star), joined])) : closed(star));
        expect(Math.abs(freeArea(regionOf(star), obstacles) - expected)).toBeLessThan(0.02 + 1e-7 * expected);
      }),
      { seed: SEED, numRuns: 300 },
    );
  });

  it("is nothing where an obstacle covers all, and everything where it only touches", () => {
    const square: Loop = [[0, 0], [100, 0], [100, 80], [0, 80]];
    expect(freeArea(regionOf(square), [[[-1, -1], [101, -1], [101, 81], [-1, 81]]])).toBe(0);
    expect(freeArea(regionOf(square), [square])).toBeCloseTo(0, 9);
    expect(freeArea(regionOf(square), [[[100, 0], [150, 0], [150, 80], [100, 80]]])).toBeCloseTo(8000, 6);
  });
});

describe("insetStretches", () => {
  it("leaves what is at least the gap from every edge: a square shrunk by 10 is a square", () => {
    const square: Loop = [[0, 0], [100, 0], [100, 80], [0, 80]];
    expect(insetStretches(square, 50, 10)).toEqual([10, 70]);
    expect(insetStretches(square, 9.999, 10)).toEqual([]);
  });

  it(`agrees with the distance to the outline, point by point (seed ${SEED})`, () => {
    const distance = (p: [number, number]) => {
      let least = Infinity;
      star.forEach((a, i) => {
        const b = star[(i + 1) % star.length]!;
        const t = Math.max(0, Math.min(1, ((p[0] - a[0]) * (b[0] - a[0]) + (p[1] - a[1]) * (b[1] - a[1])) / ((b[0] - a[0]) ** 2 + (b[1] - a[1]) ** 2)));
        least = Math.min(least, Math.hypot(p[0] - a[0] - t * (b[0] - a[0]), p[1] - a[1] - t * (b[1] - a[1])));
      });
      return least;
    };
    fc.assert(
      fc.property(fc.double({ min: -260, max: 270, noNaN: true }), fc.double({ min: -200, max: 200, noNaN: true }), fc.double({ min: 0.5, max: 60, noNaN: true }), (u, v, gap) => {
        const inside = insideStretches(star, u).some((low, i, all) => i % 2 === 0 && v > low && v < all[i + 1]!);
        const d = distance([u, v]);
        fc.pre(Math.abs(d - gap) > 1e-6);
        const open = insetStretches(star, u, gap).some((low, i, all) => i % 2 === 0 && v > low && v < all[i + 1]!);
        expect(open).toBe(inside && d > gap);
      }),
      { seed: SEED, numRuns: 3000 },
    );
  });
});
