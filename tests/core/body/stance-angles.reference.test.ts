import { describe, expect, it } from "vitest";
import { breakoverAngle, groundFrame, tangentAngle, type StanceItem } from "../../../src/core/body/stance-geometry.ts";
import type { Piece } from "../../../src/core/geometry/piece.ts";
import type { Chassis } from "../../../src/core/layout/schema.ts";
import type { Vec3 } from "../../../src/core/frames.ts";

const chassis = (wheelbase: number, radius: number, rideFront = 0, rideRear = rideFront): Chassis => {
  const axle = (rideHeight: number) => ({ track: 1500, rideHeight, bump: 60, droop: 60, steer: 0, tyre: { diameter: 2 * radius, width: 200, loadedRadius: radius } });
  return { wheelbase, front: axle(rideFront), rear: axle(rideRear), datums: [] };
};
const corner = (...points: Vec3[]): StanceItem => ({ key: "corner", pieces: [{ points, discs: [], radius: 0, form: "polytope" }] });

describe("tangentAngle", () => {
  // Tangent from a point to the static loaded radius arc: theta = atan2(h - r, x) + asin(r / d). Definition: 49 CFR 523.2, ISO 612 6.11.
  it.each([
    { x: 1000, h: 300, r: 310, angle: 17.4854, within: 0.01, source: "facts-checks dep-1, computed from the definition" },
    { x: 900, h: 0, r: 320, angle: 0, within: 1e-6, source: "dep-2: a point on the ground" },
    { x: 620, h: 310, r: 310, angle: 30, within: 1e-9, source: "dep-3: asin 0.5" },
    { x: 850, h: 289.16, r: 315, angle: 20, within: 0.001, source: "dep-4: z = (x - r tan(t/2)) tan t" },
    { x: 1150, h: 398.35, r: 315, angle: 20, within: 0.001, source: "dep-5" },
  ])("is the tangent to the loaded radius: $source", ({ x, h, r, angle, within }) => {
    const ground = groundFrame(chassis(2500, r));
    const behind = tangentAngle([corner([2500 + x, 0, h])], ground, 1);
    const ahead = tangentAngle([corner([-x, 0, h])], ground, -1);
    expect(Math.abs(behind!.angle - angle)).toBeLessThan(within);
    expect(Math.abs(ahead!.angle - angle)).toBeLessThan(within);
  });

  it("is found at the corner that cuts the line, not at the farthest or lowest one", () => {
    const ground = groundFrame(chassis(2500, 310));
    const low: Vec3 = [2500 + 700, 0, 220];
    const far: Vec3 = [2500 + 1200, 0, 520];
    const angleOf = (p: Vec3) => tangentAngle([corner(p)], ground, 1)!.angle;
    const both = tangentAngle([corner(low, far)], ground, 1)!;
    expect(both.angle).toBeCloseTo(Math.min(angleOf(low), angleOf(far)), 10);
    expect(both.governs.point).toEqual(low);
  });

  it("touches a round pipe on its surface: the common tangent of two circles", () => {
    // Circle r1 = 310 at the wheel, circle r2 = 40 at (900, 300) from the contact point; the line lies under both.
    // Angle of centres + asin((r1 - r2) / d): external tangent of two circles (elementary geometry).
    const r1 = 310;
    const r2 = 40;
    const centre: Vec3 = [2500 + 900, 0, 300];
    const d = Math.hypot(900, 300 - r1);
    const expected = ((Math.atan2(300 - r1, 900) + Math.asin((r1 - r2) / d)) * 180) / Math.PI;
    const pipe: Piece = { points: [], radius: 0, form: "cylinder", discs: [-100, 100].map((y) => ({ centre: [centre[0], y, centre[2]], u: [r2, 0, 0], v: [0, 0, r2] })) };
    const ball: Piece = { points: [centre], discs: [], radius: r2, form: "ball" };
    const ground = groundFrame(chassis(2500, r1));
    expect(tangentAngle([{ key: "pipe", pieces: [pipe] }], ground, 1)!.angle).toBeCloseTo(expected, 9);
    expect(tangentAngle([{ key: "ball", pieces: [ball] }], ground, 1)!.angle).toBeCloseTo(expected, 9);
  });

  it("does not change when car and ground are tilted together by the ride heights", () => {
    // Turning everything about the front contact point leaves every angle to the ground as it was.
    const rise = 60;
    const tilt = Math.atan2(-rise, 2500);
    const flat = groundFrame(chassis(2500, 310));
    const tilted = groundFrame(chassis(2500, 310, 0, rise));
    const expectation = tangentAngle([corner([3400, 0, 260])], flat, 1)!.angle;
    const wheel: Vec3 = [2500, 0, -rise + 310];
    // the same offset from the wheel centre, turned with the ground
    const [dx, dz] = [900, 260 - 310];
    const turned: Vec3 = [wheel[0] + dx * Math.cos(tilt) - dz * Math.sin(tilt), 0, wheel[2] + dx * Math.sin(tilt) + dz * Math.cos(tilt)];
    expect(tangentAngle([corner(turned)], tilted, 1)!.angle).toBeCloseTo(expectation, 9);
  });

  it("limits nothing where nothing reaches beyond the tyre's circle", () => {
    expect(tangentAngle([corner([2500 + 100, 0, 310], [1000, 0, 200])], groundFrame(chassis(2500, 310)), 1)).toBeNull();
  });
});

describe("breakoverAngle", () => {
  it("is the sum of both tangent angles at a belly point (49 CFR 523.2; facts-checks ramp-1: 10.8827)", () => {
    const ground = groundFrame(chassis(2550, 310));
    expect(Math.abs(breakoverAngle([corner([1300, 0, 120])], ground)!.angle - 10.8827)).toBeLessThan(0.001);
  });

  it("of a level floor is least in the middle of the floor, not at its corners", () => {
    // By symmetry the least is at half the wheelbase: 2 (atan((h - r) / x) + asin(r / d)), x = L / 2.
    const r = 310;
    const h = 110;
    const x = 1250;
    const expected = ((2 * (Math.atan2(h - r, x) + Math.asin(r / Math.hypot(x, h - r)))) * 180) / Math.PI;
    const floor = corner([700, -100, h], [1800, -100, h], [700, 100, h], [1800, 100, h], [700, 0, 400], [1800, 0, 400]);
    const found = breakoverAngle([floor], groundFrame(chassis(2500, r)))!;
    expect(found.angle).toBeCloseTo(expected, 6);
    expect(found.governs.point[0]).toBeCloseTo(1250, 1);
  });

  it("agrees with a dense walk along the underside of a round belly", () => {
    const ground = groundFrame(chassis(2460, 305, 115, 130));
    const centre: Vec3 = [1500, 0, 60];
    const radius = 90;
    const found = breakoverAngle([{ key: "tank", pieces: [{ points: [centre], discs: [], radius, form: "ball" }] }], ground)!;
    let least = Infinity;
    for (let i = 0; i <= 4000; i++) {
      const a = Math.PI + (i / 4000) * Math.PI;
      const p: Vec3 = [centre[0] + radius * Math.cos(a), 0, centre[2] + radius * Math.sin(a)];
      least = Math.min(least, breakoverAngle([corner(p)], ground)!.angle);
    }
    expect(found.angle).toBeLessThanOrEqual(least + 1e-9);
    expect(least - found.angle).toBeLessThan(1e-4);
  });
});
