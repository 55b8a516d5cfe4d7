import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { VIEWS } from "#core/frames.ts";
import { fit, pan, toScreen, toView, zoomAt } from "../../../src/client/editor/camera.ts";

const SEED = 2417;
const number = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const camera = fc.record({ scale: number(0.03, 8), x: number(-5000, 5000), top: number(-3000, 3000), high: number(-3000, 3000), across: number(-3000, 3000) });
const view = fc.constantFrom(...VIEWS);
const close = (a: number, b: number, within = 1e-6) => expect(Math.abs(a - b)).toBeLessThanOrEqual(within * (1 + Math.abs(a) + Math.abs(b)));

describe(`the camera (seed ${SEED})`, () => {
  it("gives back the place of the car that a pixel shows", () => {
    fc.assert(fc.property(camera, view, number(-4000, 4000), number(-4000, 4000), (c, v, u, w) => {
      const [px, py] = toScreen(c, v, u, w);
      const [u2, w2] = toView(c, v, px, py);
      close(u, u2);
      close(w, w2);
    }), { seed: SEED });
  });

  it("keeps the place under the pointer when it zooms", () => {
    fc.assert(fc.property(camera, view, number(0, 1500), number(0, 900), number(0.4, 2.5), (c, v, px, py, factor) => {
      const before = toView(c, v, px, py);
      const after = toView(zoomAt(c, v, px, py, factor, { plan: 400, section: 300 }), v, px, py);
      close(before[0], after[0]);
      close(before[1], after[1]);
    }), { seed: SEED });
  });

  it("moves what is under the pointer with the pointer when it pans", () => {
    fc.assert(fc.property(camera, view, number(-800, 800), number(-800, 800), (c, v, dx, dy) => {
      const before = toView(c, v, 300, 200);
      const after = toView(pan(c, v, dx, dy), v, 300 + dx, 200 + dy);
      close(before[0], after[0]);
      close(before[1], after[1]);
    }), { seed: SEED });
  });

  it("keeps plan and side on one x, side and section on one z, whatever is panned or zoomed", () => {
    fc.assert(fc.property(camera, view, fc.array(fc.tuple(view, number(-300, 300), number(-300, 300), number(0.6, 1.6)), { maxLength: 8 }), (c, v, steps) => {
      let now = c;
      for (const [which, dx, dy, factor] of steps) now = zoomAt(pan(now, which, dx, dy), which, 200, 100, factor, { plan: 400, section: 300 });
      expect(toScreen(now, "plan", 1234, 0)[0]).toBe(toScreen(now, "side", 1234, 0)[0]);
      expect(toScreen(now, "side", 0, 567)[1]).toBe(toScreen(now, "rear", 0, 567)[1]);
      expect(v).toBeDefined();
    }), { seed: SEED });
  });

  it("shows all of an extent in every view when it fits", () => {
    fc.assert(fc.property(fc.tuple(number(-3000, 3000), number(-1500, 1500), number(-400, 1500)), fc.tuple(number(60, 6000), number(60, 2500), number(60, 2000)), ([x, y, z], [l, w, h]) => {
      const sizes = { width: 900, planHeight: 380, sideHeight: 300, sectionWidth: 340 };
      const c = fit({ low: [x, y, z], high: [x + l, y + w, z + h] }, sizes);
      const inside = (v: (typeof VIEWS)[number], a: number, b: number, width: number, height: number) => {
        const [px, py] = toScreen(c, v, a, b);
        expect(px).toBeGreaterThanOrEqual(0);
        expect(px).toBeLessThanOrEqual(width);
        expect(py).toBeGreaterThanOrEqual(0);
        expect(py).toBeLessThanOrEqual(height);
      };
      for (const p of [[x, y, z], [x + l, y + w, z + h]] as const) {
        inside("plan", p[0], p[1], sizes.width, sizes.planHeight);
        inside("side", p[0], p[2], sizes.width, sizes.sideHeight);
        inside("rear", p[1], p[2], sizes.sectionWidth, sizes.sideHeight);
      }
    }), { seed: SEED });
  });
});
