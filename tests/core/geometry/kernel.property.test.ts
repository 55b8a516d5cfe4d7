import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { bodyBox, buildBody, setPose } from "#core/geometry/body.ts";
import { createMeasure, createPairCache, measureBodies, measurePieces, type Measure } from "#core/geometry/measure.ts";
import { candidatePairs, candidatesOf, createSweep, updateSweep } from "#core/geometry/sweep.ts";
import type { Piece, Pose } from "#core/geometry/piece.ts";
import {
  add,
  anyPiece,
  compose,
  dot,
  leastWidthBySphere,
  norm,
  place,
  polytopes,
  poses,
  rounds,
  sphereOf,
  spin,
  sub,
  supportHeight,
  times,
  travels,
  unit,
  vec,
  widthOf,
  type Box,
} from "./kernel-pieces.ts";

const SEED = 20260701;
const runs = (numRuns: number, shift = 0): fc.Parameters<unknown> => ({ seed: SEED + shift, numRuns });
const pair = fc.tuple(anyPiece, poses(400), anyPiece, poses(400), travels);
const close = fc.tuple(anyPiece, poses(60), anyPiece, poses(60), travels);
const DIRECTIONS = sphereOf(400);

/**
 * What a depth of round pieces is certain to: where many directions part them as shortly (cones nearly on one axis), the
 * search stops at 1e-4 mm. Distances, and depths of flat things, are known far better.
 */
const certainTo = (a: Piece, b: Piece, distance: number, otherwise: number): number =>
  distance <= a.radius + b.radius && a.discs.length + b.discs.length > 0 ? 1e-4 : otherwise;

/** Apart: both points lie in their bodies and the slab between them holds neither body; together that proves the distance. */
function proveApart(a: Piece, poseA: Pose, b: Piece, poseB: Pose, travel: Box | null, slack: number): void {
  const m = measurePieces(a, poseA, b, poseB, travel);
  if (m.overlapping) return;
  const pA = vec(m.pointA);
  const pB = vec(m.pointB);
  expect(Math.abs(norm(sub(pB, pA)) - m.distance)).toBeLessThan(1e-9);
  // Nearer than this the direction of two points says too little.
  if (m.distance < 1e-3) return;
  const n = unit(sub(pB, pA));
  // Dual: no point of A is farther along n than pA, none of the moved B nearer than pB.
  expect(-widthOf(a, poseA, b, poseB, travel, n)).toBeGreaterThan(m.distance - slack * (1 + 1 / m.distance));
  // Primal: the points are inside, as far as 400 directions can tell.
  for (const d of DIRECTIONS) {
    expect(dot(pA, d)).toBeLessThan(supportHeight(a, poseA, d) + 1e-8);
    const moved = travel ? d.reduce((sum, c, k) => sum + Math.max(c * travel.low[k]!, c * travel.high[k]!), 0) : 0;
    expect(dot(pB, d)).toBeLessThan(supportHeight(b, poseB, d) + moved + 1e-8);
  }
}

describe("measurePieces", () => {
  it(`finds points that prove the distance of any two pieces, to 1e-6 mm or, with round edges, 1e-5 mm (seed ${SEED})`, () => {
    fc.assert(
      fc.property(pair, ([a, poseA, b, poseB, travel]) =>
        // The direction may lean by the square root of the rounding before the distance shows it.
        proveApart(a, poseA, b, poseB, travel, a.discs.length + b.discs.length > 0 ? 1e-5 : 1e-6),
      ),
      runs(1500),
    );
  });

  it(`parts any two overlapping pieces by no more than a fine sphere of directions finds (seed ${SEED + 1})`, () => {
    let seen = 0;
    fc.assert(
      fc.property(close, ([a, poseA, b, poseB, travel]) => {
        const m = measurePieces(a, poseA, b, poseB, travel);
        if (!m.overlapping) return;
        seen++;
        const least = leastWidthBySphere(a, poseA, b, poseB, travel);
        expect(-m.distance).toBeLessThan(Math.max(0, least) + certainTo(a, b, m.distance, 1e-6));
        // And really parts them: the width along the direction it names is the depth.
        if (m.distance < -1e-6) {
          const n = unit(sub(vec(m.pointA), vec(m.pointB)));
          expect(Math.abs(widthOf(a, poseA, b, poseB, travel, n) + m.distance)).toBeLessThan(1e-7);
        }
      }),
      runs(400, 1),
    );
    expect(seen).toBeGreaterThan(200);
  });

  it(`gives the same distance with a and b exchanged, to 1e-9 mm (seed ${SEED + 2})`, () => {
    fc.assert(
      fc.property(fc.oneof(pair, close), ([a, poseA, b, poseB, travel]) => {
        const back = travel && { low: times(-1, travel.high), high: times(-1, travel.low) };
        const m = measurePieces(a, poseA, b, poseB, travel);
        const w = measurePieces(b, poseB, a, poseA, back);
        expect(Math.abs(m.distance - w.distance)).toBeLessThan(1e-9 + 1e-12 * Math.abs(m.distance));
      }),
      runs(1500, 2),
    );
  });

  it(`does not change when both are moved and turned together, to 1e-8 mm or the certainty of a round depth (seed ${SEED + 3})`, () => {
    fc.assert(
      fc.property(fc.oneof(pair, close), poses(5000), ([a, poseA, b, poseB], motion) => {
        const m = measurePieces(a, poseA, b, poseB);
        const w = measurePieces(a, compose(motion, poseA), b, compose(motion, poseB));
        expect(Math.abs(m.distance - w.distance)).toBeLessThan(certainTo(a, b, m.distance, 1e-8));
      }),
      runs(1500, 3),
    );
  });

  it(`never changes by more than b is moved (seed ${SEED + 4})`, () => {
    fc.assert(
      fc.property(fc.oneof(pair, close), poses(30), ([a, poseA, b, poseB, travel], shift) => {
        const m = measurePieces(a, poseA, b, poseB, travel);
        const w = measurePieces(a, poseA, b, { ...poseB, at: add(poseB.at, shift.at) }, travel);
        expect(Math.abs(m.distance - w.distance)).toBeLessThan(norm(shift.at) + certainTo(a, b, Math.min(m.distance, w.distance), 1e-7));
      }),
      runs(1500, 4),
    );
  });

  it(`never grows when b may move more (seed ${SEED + 5})`, () => {
    fc.assert(
      fc.property(fc.oneof(pair, close), ([a, poseA, b, poseB, travel]) => {
        const still = measurePieces(a, poseA, b, poseB).distance;
        const moving = measurePieces(a, poseA, b, poseB, travel).distance;
        const more = travel && { low: times(1.5, travel.low), high: times(1.5, travel.high) };
        expect(moving).toBeLessThan(still + certainTo(a, b, moving, 1e-7));
        expect(measurePieces(a, poseA, b, poseB, more).distance).toBeLessThan(moving + certainTo(a, b, moving, 1e-7));
      }),
      runs(800, 5),
    );
  });

  it(`scales with everything (seed ${SEED + 6})`, () => {
    const larger = (p: Piece, s: number): Piece => ({
      ...p,
      points: p.points.map((q) => times(s, q)),
      discs: p.discs.map((d) => ({ centre: times(s, d.centre), u: times(s, d.u), v: times(s, d.v) })),
      radius: s * p.radius,
    });
    fc.assert(
      fc.property(fc.oneof(pair, close), fc.double({ min: 0.01, max: 8, noNaN: true }), ([a, poseA, b, poseB], s) => {
        const m = measurePieces(a, poseA, b, poseB).distance;
        const w = measurePieces(
          larger(a, s),
          { ...poseA, at: times(s, poseA.at) },
          larger(b, s),
          { ...poseB, at: times(s, poseB.at) },
        ).distance;
        expect(Math.abs(w - s * m)).toBeLessThan(certainTo(a, b, m, 1e-7) * Math.max(1, s));
      }),
      runs(800, 6),
    );
  });

  it(`is never positive for pieces that share a point (seed ${SEED + 7})`, () => {
    fc.assert(
      fc.property(fc.oneof(polytopes, rounds), poses(400), fc.oneof(polytopes, rounds), poses(1), fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 16, maxLength: 16 }), (a, poseA, b, poseB, mix) => {
        // A point inside each: a random mean of its corners and disc centres. B is put so that the two coincide.
        const inside = (p: Piece, offset: number) => {
          const all = [...p.points, ...p.discs.map((d) => d.centre)].slice(0, 8);
          const weights = all.map((_, i) => 0.01 + mix[offset + i]!);
          const whole = weights.reduce((s, w) => s + w, 0);
          return all.reduce((s, q, i) => add(s, times(weights[i]! / whole, q)), [0, 0, 0] as readonly [number, number, number]);
        };
        const target = place(poseA, inside(a, 0));
        const from = place({ ...poseB, at: [0, 0, 0] }, inside(b, 8));
        const m = measurePieces(a, poseA, b, { ...poseB, at: sub(target, from) });
        expect(m.overlapping).toBe(true);
        expect(m.distance).toBeLessThanOrEqual(0);
      }),
      runs(1500, 7),
    );
  });
});

const bodies = fc
  .tuple(fc.array(fc.tuple(anyPiece, poses(250)), { minLength: 1, maxLength: 12 }), poses(250))
  .map(([list, pose]) => ({ pieces: list.map(([piece, where]) => placed(piece, where)), pose }));

function placed(piece: Piece, pose: Pose): Piece {
  return {
    ...piece,
    points: piece.points.map((p) => place(pose, p)),
    discs: piece.discs.map((d) => ({ centre: place(pose, d.centre), u: spin(pose.rotation, d.u), v: spin(pose.rotation, d.v) })),
  };
}

const asNumbers = (m: Measure): number[] => [m.distance, ...m.pointA, ...m.pointB, m.pieceA, m.pieceB, Number(m.overlapping), Number(m.depthIsEstimate)];

describe("measureBodies", () => {
  it(`is the least over all pairs of pieces, in whatever tree they are (seed ${SEED + 8})`, () => {
    fc.assert(
      fc.property(bodies, bodies, travels, (a, b, travel) => {
        const [bodyA, bodyB] = [buildBody(a.pieces), buildBody(b.pieces)];
        setPose(bodyA, a.pose);
        setPose(bodyB, b.pose);
        const out = createMeasure();
        measureBodies(bodyA, bodyB, travel, Infinity, out);
        let least = Infinity;
        for (const p of a.pieces) for (const q of b.pieces) least = Math.min(least, measurePieces(p, a.pose, q, b.pose, travel).distance);
        expect(Math.abs(out.distance - least)).toBeLessThan(1e-9);
        expect(out.overlapping).toBe(least <= 0);
        const cutoff = 40;
        measureBodies(bodyA, bodyB, travel, cutoff, out);
        if (least < cutoff - 1e-6) expect(Math.abs(out.distance - least)).toBeLessThan(1e-9);
        if (least > cutoff + 1e-6) expect(out.distance).toBe(Infinity);
      }),
      runs(250, 8),
    );
  });

  it(`gives the same bits whatever the cache remembers and whatever was measured before (seed ${SEED + 9})`, () => {
    fc.assert(
      fc.property(bodies, bodies, travels, fc.array(poses(250), { minLength: 1, maxLength: 6 }), fc.nat(11), fc.nat(11), (a, b, travel, path, i, j) => {
        const fresh = (pose: Pose): number[] => {
          const [bodyA, bodyB] = [buildBody(a.pieces), buildBody(b.pieces)];
          setPose(bodyA, a.pose);
          setPose(bodyB, pose);
          const out = createMeasure();
          measureBodies(bodyA, bodyB, travel, 150, out);
          return asNumbers(out);
        };
        const [bodyA, bodyB] = [buildBody(a.pieces), buildBody(b.pieces)];
        setPose(bodyA, a.pose);
        const cache = createPairCache(1);
        cache.pieceA[0] = i;
        cache.pieceB[0] = j;
        const out = createMeasure();
        for (const pose of path) {
          setPose(bodyB, pose);
          measureBodies(bodyA, bodyB, travel, 150, out, cache, 0);
          if (out.distance < Infinity) expect(asNumbers(out)).toEqual(fresh(pose));
          else expect(fresh(pose)[0]).toBe(Infinity);
        }
      }),
      runs(250, 9),
    );
  });

  it(`moves a body to the same bits by any way round (seed ${SEED + 10})`, () => {
    fc.assert(
      fc.property(bodies, fc.array(poses(250), { maxLength: 4 }), (a, path) => {
        const moved = buildBody(a.pieces);
        for (const pose of path) setPose(moved, pose);
        setPose(moved, a.pose);
        const direct = buildBody(a.pieces);
        setPose(direct, a.pose);
        expect([...moved.world]).toEqual([...direct.world]);
        expect([...moved.boxes]).toEqual([...direct.boxes]);
      }),
      runs(100, 10),
    );
  });
});

describe("candidatePairs", () => {
  it(`visits each pair of boxes within reach once, in an order that does not depend on the moves before (seed ${SEED + 11})`, () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(anyPiece, poses(900), fc.double({ min: 0, max: 40, noNaN: true })), { minLength: 2, maxLength: 25 }),
        fc.array(fc.tuple(fc.nat(24), poses(900)), { maxLength: 10 }),
        fc.double({ min: 0, max: 200, noNaN: true }),
        (list, moves, reach) => {
          const all = list.map(([piece, pose]) => {
            const body = buildBody([piece]);
            setPose(body, pose);
            return body;
          });
          const margins = list.map(([, , margin]) => margin);
          const sweep = createSweep(all, margins);
          for (const [k, pose] of moves) {
            const index = k % all.length;
            setPose(all[index]!, pose);
            updateSweep(sweep, index);
          }
          const seen: string[] = [];
          candidatePairs(sweep, reach, (i, j) => seen.push(`${i} ${j}`));
          const again: string[] = [];
          candidatePairs(createSweep(all, margins), reach, (i, j) => again.push(`${i} ${j}`));
          expect(seen).toEqual(again);
          const expected = new Set<string>();
          for (let i = 0; i < all.length; i++) {
            for (let j = i + 1; j < all.length; j++) {
              const [p, q] = [bodyBox(all[i]!), bodyBox(all[j]!)];
              const grown = margins[i]! + margins[j]!;
              const apart = [0, 1, 2].map((k) => Math.max(0, q[k]! - p[k + 3]! - grown, p[k]! - q[k + 3]! - grown));
              const gap = Math.hypot(...apart);
              if (gap < reach - 1e-9) expected.add(`${i} ${j}`);
              else if (gap <= reach + 1e-9 && seen.includes(`${i} ${j}`)) expected.add(`${i} ${j}`);
            }
          }
          expect([...seen].sort()).toEqual([...expected].sort());
          for (let i = 0; i < all.length; i++) {
            const near: number[] = [];
            candidatesOf(sweep, i, reach, (j) => near.push(j));
            const from = seen.map((s) => s.split(" ").map(Number)).filter((p) => p.includes(i)).map((p) => (p[0] === i ? p[1]! : p[0]!));
            expect(near).toEqual(from.sort((x, y) => x - y));
          }
        },
      ),
      runs(200, 11),
    );
  });
});
