import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { chooseSpots, emptyInk, inkLine, inkUnder } from "../../../src/client/editor/spots.ts";

const SEED = 9931;
const page = { width: 900, height: 500, head: 60 };

describe(`spots for numbers (seed ${SEED})`, () => {
  it("never lays one number over another while there is room", () => {
    fc.assert(fc.property(fc.array(fc.tuple(fc.integer({ min: 60, max: 840 }), fc.integer({ min: 100, max: 460 })), { minLength: 1, maxLength: 10 }), (places) => {
      const wanting = places.map(([x, y], i) => ({ id: String(i), x, y, halfWidth: 18, halfHeight: 10 }));
      const spots = chooseSpots(wanting, emptyInk(page.width, page.height), page, new Map());
      const boxes = wanting.map((one) => ({ x: one.x + spots.get(one.id)!.x, y: one.y + spots.get(one.id)!.y }));
      boxes.forEach((a, i) => boxes.slice(i + 1).forEach((b) => expect(Math.abs(a.x - b.x) >= 36 || Math.abs(a.y - b.y) >= 20).toBe(true)));
    }), { seed: SEED });
  });

  it("keeps every number on the paper and below its head", () => {
    fc.assert(fc.property(fc.array(fc.tuple(fc.integer({ min: 0, max: 900 }), fc.integer({ min: 61, max: 500 })), { minLength: 1, maxLength: 6 }), (places) => {
      const wanting = places.map(([x, y], i) => ({ id: String(i), x, y, halfWidth: 18, halfHeight: 10 }));
      for (const [id, spot] of chooseSpots(wanting, emptyInk(page.width, page.height), page, new Map())) {
        const one = wanting[Number(id)]!;
        expect(one.x + spot.x - 18).toBeGreaterThanOrEqual(0);
        expect(one.x + spot.x + 18).toBeLessThanOrEqual(page.width);
        expect(one.y + spot.y - 10).toBeGreaterThanOrEqual(page.head);
        expect(one.y + spot.y + 10).toBeLessThanOrEqual(page.height);
      }
    }), { seed: SEED });
  });

  it("goes off a line where there is clean paper within reach", () => {
    const ink = emptyInk(page.width, page.height);
    // the default spot right above is crossed by a thick band of lines
    for (let y = 200; y < 290; y += 4) inkLine(ink, 300, y, 600, y);
    const spot = chooseSpots([{ id: "a", x: 450, y: 300, halfWidth: 18, halfHeight: 10 }], ink, page, new Map()).get("a")!;
    expect(inkUnder(ink, 450 + spot.x, 300 + spot.y, 18, 10)).toBe(0);
  });

  it("stays where it was while nothing is better there", () => {
    const before = new Map([["a", { x: 48, y: 0 }]]);
    expect(chooseSpots([{ id: "a", x: 450, y: 300, halfWidth: 18, halfHeight: 10 }], emptyInk(page.width, page.height), page, before).get("a")).toEqual({ x: 48, y: 0 });
  });

  it("inks every cell that a line passes, and none far from it", () => {
    const ink = emptyInk(400, 400);
    inkLine(ink, 10, 10, 390, 200);
    for (let t = 0; t <= 1; t += 0.01) expect(inkUnder(ink, 10 + 380 * t, 10 + 190 * t, 0.1, 0.1)).toBe(1);
    expect(inkUnder(ink, 200, 350, 40, 40)).toBe(0);
  });
});
