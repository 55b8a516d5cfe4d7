import { beforeAll, describe, expect, it } from "vitest";
import Module, { type Manifold, type ManifoldToplevel } from "manifold-3d";
import { measurePieces } from "#core/geometry/measure.ts";
import type { Piece, Pose, TravelBox } from "#core/geometry/piece.ts";
import type { Vec3 } from "#core/frames.ts";
import { at, ball, box, capsule, compose, cone, cylinder, hull, norm, oval, place, prism, sub, times, triangle, tube, turned, unit, vec } from "./kernel-pieces.ts";

/** Every closed form is checked where it was derived, and again after a turn and a move to coordinates of 5 000 mm. */
const MOTIONS: readonly Pose[] = [
  at(0, 0, 0),
  turned([0.3, -0.8, 0.5], 1.1, [4870, -913, 4411]),
  turned([-0.7, 0.2, 0.9], -2.6, [-5000, 5000, -5000]),
];

function expectDistance(a: Piece, poseA: Pose, b: Piece, poseB: Pose, expected: number, slack = 1e-6): void {
  for (const motion of MOTIONS) {
    const [p, q] = [compose(motion, poseA), compose(motion, poseB)];
    const there = measurePieces(a, p, b, q);
    const back = measurePieces(b, q, a, p);
    expect(Math.abs(there.distance - expected)).toBeLessThan(slack);
    expect(Math.abs(back.distance - there.distance)).toBeLessThan(1e-9);
    const apart = norm(sub(vec(there.pointA), vec(there.pointB)));
    expect(Math.abs(apart - Math.abs(there.distance))).toBeLessThan(1e-5);
  }
}

describe("distance of balls and capsules", () => {
  it("of two balls is that of the centres less both radii", () => {
    // |(300, 400, 0)| = 500
    expectDistance(ball(100), at(0, 0, 0), ball(60), at(300, 400, 0), 500 - 50 - 30);
  });

  it("of a pipe and a loom crossing square is 72.053 mm (facts-checks gap-1)", () => {
    // Lines x axis and x = 500, y = 100: nearest at z = 50, sqrt(100^2 + 50^2) - 31.75 - 8
    const pipe = capsule([0, 0, 0], [1000, 0, 0], 63.5);
    const loom = capsule([500, 100, 50], [500, 100, 400], 16);
    expectDistance(pipe, at(0, 0, 0), loom, at(0, 0, 0), Math.hypot(100, 50) - 31.75 - 8);
    expect(measurePieces(pipe, at(0, 0, 0), loom, at(0, 0, 0)).distance).toBeCloseTo(72.053, 2);
  });

  it("of two skew runs is 58.295 mm (facts-checks gap-2)", () => {
    const pipe = capsule([0, 0, 0], [800, 0, 200], 76.2);
    const loom = capsule([0, 120, -50], [800, 90, 260], 12);
    // Common perpendicular of the lines, both feet inside: |(q - p).(u x v)| / |u x v|
    const [u, v, w]: Vec3[] = [[800, 0, 200], [800, -30, 310], [0, 120, -50]];
    const n: Vec3 = [u![1] * v![2] - u![2] * v![1], u![2] * v![0] - u![0] * v![2], u![0] * v![1] - u![1] * v![0]];
    const perpendicular = Math.abs(w![0] * n[0] + w![1] * n[1] + w![2] * n[2]) / norm(n);
    expectDistance(pipe, at(0, 0, 0), loom, at(0, 0, 0), perpendicular - 38.1 - 6);
    expect(Math.abs(perpendicular - 44.1 - 58.295)).toBeLessThan(0.02);
  });

  it("of two runs end to end is 81.619 mm (facts-checks gap-3)", () => {
    // Ends (300, 0, 0) and (400, 60, 0): sqrt(100^2 + 60^2) - 25 - 10
    expectDistance(capsule([0, 0, 0], [300, 0, 0], 50), at(0, 0, 0), capsule([400, 60, 0], [700, 60, 0], 20), at(0, 0, 0), Math.hypot(100, 60) - 35);
  });

  it("of parallel runs side by side is that of their lines less both radii", () => {
    expectDistance(capsule([0, 0, 0], [500, 0, 0], 40), at(0, 0, 0), capsule([100, 90, 0], [900, 90, 0], 20), at(0, 0, 0), 60);
    expectDistance(capsule([0, 0, 0], [500, 0, 0], 40), at(0, 0, 0), capsule([499.9999, 90, 0], [900, 90, 1e-7], 20), at(0, 0, 0), 60);
  });
});

describe("distance of flat faces", () => {
  it("face to face is the gap between the planes", () => {
    expectDistance(box(100, 80, 60), at(0, 0, 0), box(50, 50, 50), at(20, 10, 30 + 25 + 7.5), 7.5);
  });

  it("face to corner is the height of the corner", () => {
    // A cube of edge s standing on a corner reaches s sqrt(3) / 2 below its centre.
    const corner = turned([1, -1, 0], Math.acos(1 / Math.sqrt(3)), [10, -5, 200]);
    expectDistance(box(400, 400, 20), at(0, 0, 0), box(60, 60, 60), corner, 200 - 10 - 30 * Math.sqrt(3));
  });

  it("edge to edge is the common perpendicular of the edges", () => {
    // Both boxes stand on an edge, turned by 45 degrees about x and about y; edges cross at right angles over each other.
    const lower = turned([1, 0, 0], Math.PI / 4, [0, 0, 0]);
    const upper = turned([0, 1, 0], Math.PI / 4, [0, 0, 150]);
    expectDistance(box(300, 60, 60), lower, box(80, 300, 80), upper, 150 - 30 * Math.SQRT2 - 40 * Math.SQRT2);
  });

  it("corner to corner is the distance of the corners", () => {
    expectDistance(box(100, 100, 100), at(0, 0, 0), box(60, 60, 60), at(50 + 30 + 3, 50 + 30 + 4, 50 + 30 + 12), 13);
  });

  it("of a sheet's triangle, grown by half its thickness, is that of its plane", () => {
    const sheet = triangle([[0, 0, 0], [300, 0, 0], [0, 300, 0]], 4);
    expectDistance(sheet, at(0, 0, 0), ball(20), at(60, 60, 50), 50 - 10 - 2);
    // Beyond the long edge x + y = 300: (250, 150, 40) is 100 / sqrt 2 off the edge and 40 above.
    expectDistance(sheet, at(0, 0, 0), ball(20), at(250, 150, 40), Math.hypot(100 / Math.SQRT2, 40) - 12);
  });
});

describe("distance of round things", () => {
  it("of a ball from a cylinder is to its side, its end or its rim", () => {
    const round = cylinder(200, 300);
    expectDistance(round, at(0, 0, 0), ball(10), at(180, 0, 40), 180 - 100 - 5);
    expectDistance(round, at(0, 0, 0), ball(10), at(30, 40, 220), 220 - 150 - 5);
    expectDistance(round, at(0, 0, 0), ball(10), at(130, 0, 190), Math.hypot(30, 40) - 5);
  });

  it("of crossing cylinders is the common perpendicular of the axes less both radii", () => {
    expectDistance(cylinder(60, 400), at(0, 0, 0), cylinder(40, 500), turned([1, 0, 0], 1.2, [90, 0, 0]), 90 - 50);
  });

  it("of cylinders end to end on one axis is the gap between the ends", () => {
    expectDistance(cylinder(80, 100), at(0, 0, 0), cylinder(120, 60), at(0, 0, 50 + 30 + 12.5), 12.5);
  });

  it("of parallel cylinders offset along and across is that of the facing rims", () => {
    // Rims are nearest in the plane of both axes: across 200 - 50 - 40, along 300 - 100 - 60.
    expectDistance(cylinder(100, 200), at(0, 0, 0), cylinder(80, 120), at(200, 0, 300), Math.hypot(110, 140));
  });

  it("of a leaning cylinder over a plate is the height of its lowest rim point", () => {
    // The rim's lowest point is L/2 cos t + r sin t below the centre.
    for (const t of [0.01, 0.4, 1.2, 1.55]) {
      const reach = 60 * Math.cos(t) + 45 * Math.sin(t);
      expectDistance(box(900, 900, 20), at(0, 0, 0), cylinder(90, 120), turned([1, 0.4, 0], t, [15, -20, 300]), 300 - 10 - reach);
    }
  });

  it("of a frustum lying on its side over a plate is to the wide rim", () => {
    expectDistance(box(900, 900, 20), at(0, 0, 0), cone(60, 140, 200), turned([0, 1, 0], Math.PI / 2, [0, 0, 200]), 200 - 10 - 70);
  });

  it("of a ball beside a cone is square to the slant", () => {
    // Slant from (100, 0) at z = -150 to the tip at z = 150: unit normal (300, 100) / sqrt(100000).
    const tip = cone(200, 0, 300);
    const n = unit([300, 0, 100]);
    const on: Vec3 = [50, 0, 0];
    expectDistance(tip, at(0, 0, 0), ball(8), at(on[0] + 70 * n[0], 0, on[2] + 70 * n[2]), 70 - 4);
    expectDistance(tip, at(0, 0, 0), ball(8), at(0, 0, 190), 40 - 4);
  });

  it("of an oval from a plate is to its flat or its round side", () => {
    const muffler = oval(240, 110, 500);
    expectDistance(muffler, at(0, 0, 0), box(30, 20, 600), at(40, 55 + 10 + 9, 0), 9);
    expectDistance(muffler, at(0, 0, 0), box(40, 600, 600), at(120 + 20 + 11, 0, 0), 11);
    // Diagonally: the round end's centre is (65, 0), radius 55; a long corner edge at (65 + 80, 60).
    expectDistance(muffler, at(0, 0, 0), box(100, 100, 100), at(65 + 80 + 50, 60 + 50, 0), Math.hypot(80, 60) - 55);
  });

  it("of a mitred tube is to its side up to the longest generator, then to the mitre's edge", () => {
    // End plane z = x at the top: the side at x = +20 reaches z = 120, at x = -20 only z = 80.
    const leg = tube(40, 100, [0, 0], [1, 0]);
    expectDistance(leg, at(0, 0, 0), ball(10), at(65, 0, 115), 65 - 20 - 5);
    expectDistance(leg, at(0, 0, 0), ball(10), at(-65, 0, 75), 65 - 20 - 5);
    // Over the slanted face: (0, 0, 100) + 60 (-1, 0, 1) / sqrt 2
    expectDistance(leg, at(0, 0, 0), ball(10), at(-60 / Math.SQRT2, 0, 100 + 60 / Math.SQRT2), 60 - 5);
    // Beyond the tip (20, 0, 120), out along (1, 0, 3): between the side's normal and the face's.
    const out = times(50, unit([1, 0, 0.5]));
    expectDistance(leg, at(0, 0, 0), ball(10), at(20 + out[0], out[1], 120 + out[2]), 50 - 5);
  });

  it("of discs, pins and boxes in any position agrees with alternating projections, to 1e-3 mm", () => {
    // Projecting to and fro between two closed convex sets, one of them bounded, tends to their nearest points (Cheney and
    // Goldstein 1959). The projections onto a solid cylinder and a box are closed forms.
    const onCylinder = (d: number, length: number) => (p: Vec3): Vec3 => {
      const r = Math.hypot(p[0], p[1]);
      const k = r > d / 2 ? d / 2 / r : 1;
      return [k * p[0], k * p[1], Math.max(-length / 2, Math.min(length / 2, p[2]))];
    };
    const onBox = (...size: [number, number, number]) => (p: Vec3): Vec3 => [0, 1, 2].map((k) => Math.max(-size[k]! / 2, Math.min(size[k]! / 2, p[k]!))) as unknown as Vec3;
    const invert = (pose: Pose, p: Vec3): Vec3 => {
      const q = sub(p, pose.at);
      const m = pose.rotation;
      return [0, 1, 2].map((k) => m[k]! * q[0] + m[3 + k]! * q[1] + m[6 + k]! * q[2]) as unknown as Vec3;
    };
    const shapes = [
      { piece: cylinder(120, 8), onto: onCylinder(120, 8) },
      { piece: cylinder(90, 40), onto: onCylinder(90, 40) },
      { piece: cylinder(12, 300), onto: onCylinder(12, 300) },
      { piece: box(80, 40, 120), onto: onBox(80, 40, 120) },
    ];
    let n = 0;
    for (const a of shapes) {
      for (const b of shapes) {
        for (let k = 0; k < 6; k++) {
          n++;
          const poseB = turned([Math.sin(n), Math.cos(3 * n), Math.sin(7 * n)], n, times(240 + (n % 5) * 20, unit([Math.cos(n), Math.sin(2 * n), Math.cos(5 * n)])));
          let q: Vec3 = poseB.at;
          let p: Vec3 = q;
          for (let i = 0; i < 6000; i++) {
            p = a.onto(q);
            q = place(poseB, b.onto(invert(poseB, p)));
          }
          expectDistance(a.piece, at(0, 0, 0), b.piece, poseB, norm(sub(p, q)), 1e-3);
        }
      }
    }
  });
});

describe("depth", () => {
  it("of two boxes is the least overlap of their extents", () => {
    expectDistance(box(100, 100, 100), at(0, 0, 0), box(50, 50, 50), at(70, 20, 10), -5);
    expectDistance(box(100, 80, 60), at(0, 0, 0), box(10, 10, 10), at(0, 0, 0), -(30 + 5));
  });

  it("of boxes crossing edge on edge is along the common perpendicular", () => {
    const lower = turned([1, 0, 0], Math.PI / 4, [0, 0, 0]);
    const upper = turned([0, 1, 0], Math.PI / 4, [0, 0, 30 * Math.SQRT2 + 40 * Math.SQRT2 - 6]);
    expectDistance(box(300, 60, 60), lower, box(80, 300, 80), upper, -6);
  });

  it("of two balls is the sum of the radii less the distance of centres, and the sum for one centre", () => {
    expectDistance(ball(100), at(0, 0, 0), ball(60), at(30, 40, 0), 50 - 80);
    expectDistance(ball(100), at(0, 0, 0), ball(60), at(0, 0, 0), -80);
  });

  it("of capsules whose lines cross is the sum of the radii", () => {
    expectDistance(capsule([-100, 0, 0], [100, 0, 0], 30), at(0, 0, 0), capsule([0, -100, 0], [0, 100, 0], 20), at(20, 10, 0), -25);
    expectDistance(capsule([-100, 0, 0], [100, 0, 0], 30), at(0, 0, 0), capsule([-50, 0, 0], [150, 0, 0], 20), at(0, 0, 0), -25);
  });

  it("of a ball inside a box is to the nearest face, radius and all", () => {
    expectDistance(box(200, 120, 80), at(0, 0, 0), ball(20), at(30, -20, 25), -(40 - 25 + 10));
  });

  it("of a capsule inside a box counts the way out of the whole capsule", () => {
    // Lying along x at height 10: up 30 - 10 + r, sideways 60 + r, along 100 + 50 + r.
    expectDistance(box(200, 120, 60), at(0, 0, 0), capsule([-50, 0, 10], [50, 0, 10], 16), at(0, 0, 0), -(20 + 8));
    // Leaning: least over the box's faces and the edges crossed with the line; straight up the line's low end is 30 + 30 off.
    expectDistance(box(200, 120, 60), at(0, 0, 0), capsule([0, 0, -30], [0, 0, 30], 16), at(0, 0, 0), -(60 + 8));
  });

  it("of cylinders on one axis is out through the side or the end", () => {
    expectDistance(cylinder(100, 400), at(0, 0, 0), cylinder(50, 300), at(0, 0, 0), -75);
    expectDistance(cylinder(100, 40), at(0, 0, 0), cylinder(50, 30), at(0, 0, 5), -(20 + 15 - 5));
    expectDistance(cylinder(100, 400), at(0, 0, 0), cylinder(50, 300), at(60, 0, 0), -15);
  });

  it("of crossing cylinders is both radii less the offset of the axes", () => {
    // Long enough that the ends do not matter; the depth is along the common perpendicular.
    expectDistance(cylinder(60, 900), at(0, 0, 0), cylinder(40, 900), turned([1, 0, 0], Math.PI / 2, [35, 0, 0]), -(50 - 35));
  });

  it("of a pin through a plate is the short way out", () => {
    // A plate 10 thick, a pin of diameter 20 square through its middle: sideways out of the plate is longer than along.
    expectDistance(box(400, 300, 10), at(0, 0, 0), cylinder(20, 60), at(0, 0, 0), -(5 + 30));
    expectDistance(box(400, 300, 10), at(0, 0, 0), cylinder(20, 600), at(190, 0, 0), -(10 + 10));
  });

  it("of a ball in a cone is to the slant", () => {
    const tip = cone(200, 0, 300);
    // From (20, 0, 0): the slant through (50, 0, 0) with normal (3, 0, 1) / sqrt 10 is 30 * 3 / sqrt 10 away.
    expectDistance(tip, at(0, 0, 0), ball(8), at(20, 0, 0), -(90 / Math.sqrt(10) + 4));
  });

  it("is nothing where faces, edges or corners only touch", () => {
    for (const where of [[75, 10, 5], [75, 75, 5], [75, 75, 75]] as [number, number, number][]) {
      const m = measurePieces(box(100, 100, 100), at(0, 0, 0), box(50, 50, 50), at(...where));
      expect(Math.abs(m.distance)).toBeLessThan(1e-9);
      expect(Object.is(m.distance, -0)).toBe(false);
    }
  });
});

describe("travel", () => {
  const moved = (a: Piece, poseA: Pose, b: Piece, poseB: Pose, low: Vec3, high: Vec3): number => {
    const travel: TravelBox = { low, high };
    return measurePieces(a, poseA, b, poseB, travel).distance;
  };

  it("takes off what b can move straight toward a", () => {
    expect(moved(box(100, 100, 100), at(0, 0, 0), box(50, 50, 50), at(110, 0, 0), [-8, -4, -4], [3, 4, 4])).toBeCloseTo(35 - 8, 9);
    expect(moved(ball(20), at(0, 0, 0), ball(30), at(0, 0, 90), [-2, -2, -6], [2, 2, 40])).toBeCloseTo(90 - 6 - 25, 9);
  });

  it("uses all axes at once on a diagonal", () => {
    // Centres (60, 80, 0) apart, travel to (40, 50, 0): what is left is |(20, 30, 0)|.
    expect(moved(ball(10), at(0, 0, 0), ball(12), at(60, 80, 0), [-20, -30, 0], [0, 0, 0])).toBeCloseTo(Math.hypot(40, 50) - 11, 9);
  });

  it("is a depth of the swept pair where the travel closes the gap", () => {
    // A 35 mm gap and 50 mm of travel: 15 deep, counted as the way the swept b must be moved.
    expect(moved(box(100, 100, 100), at(0, 0, 0), box(50, 50, 50), at(110, 0, 0), [-50, 0, 0], [0, 0, 0])).toBeCloseTo(-15, 9);
    expect(moved(cylinder(40, 200), at(0, 0, 0), cylinder(40, 200), at(60, 0, 0), [-30, 0, 0], [0, 0, 0])).toBeCloseTo(-10, 6);
  });
});

describe("distance of solids with flat faces", () => {
  let solids: ManifoldToplevel;
  beforeAll(async () => {
    solids = await Module();
    solids.setup();
  });

  it("agrees with manifold-3d's minGap, which works on single-precision triangles, to 2e-3 mm", () => {
    let state = 12345;
    const random = (): number => {
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      return state / 4294967296;
    };
    const some = (): Piece => {
      const kind = random();
      if (kind < 0.4) return box(20 + 150 * random(), 20 + 150 * random(), 20 + 150 * random());
      if (kind < 0.7) return prism(3 + Math.floor(14 * random()), 20 + 150 * random(), 20 + 150 * random());
      return hull(Array.from({ length: 6 + Math.floor(12 * random()) }, (): Vec3 => [200 * (random() - 0.5), 200 * (random() - 0.5), 200 * (random() - 0.5)]));
    };
    const solidOf = (piece: Piece, pose: Pose): Manifold =>
      solids.Manifold.hull(piece.points.map((p) => [...place(pose, p)] as [number, number, number]));
    let apart = 0;
    for (let n = 0; n < 250; n++) {
      const [a, b] = [some(), some()];
      const poseA = turned([random() - 0.5, random() - 0.5, random() - 0.5], 6 * random(), [0, 0, 0]);
      const away = unit([random() - 0.5, random() - 0.5, random() - 0.5]);
      const poseB = turned([random() - 0.5, random() - 0.5, random() - 0.5], 6 * random(), times(40 + 320 * random(), away));
      const m = measurePieces(a, poseA, b, poseB);
      const [p, q] = [solidOf(a, poseA), solidOf(b, poseB)];
      const gap = p.minGap(q, 1000);
      const common = p.intersect(q);
      if (m.distance > 1e-2) {
        apart++;
        expect(Math.abs(gap - m.distance)).toBeLessThan(2e-3);
      } else if (m.distance < -1e-2) {
        expect(common.volume()).toBeGreaterThan(0);
        // Parted by the depth (and a little), they no longer meet; parted by less along the same way, they still do.
        const n2 = unit(sub(vec(m.pointA), vec(m.pointB)));
        const shift = (d: number): [number, number, number] => [d * n2[0], d * n2[1], d * n2[2]];
        expect(p.intersect(q.translate(shift(-m.distance + 0.01))).volume()).toBeLessThan(1e-6);
        expect(p.intersect(q.translate(shift(-m.distance - 0.05))).volume()).toBeGreaterThan(0);
      }
    }
    expect(apart).toBeGreaterThan(120);
  });
});
