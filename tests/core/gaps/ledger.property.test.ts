import { describe, expect, it } from "vitest";
import { checkGaps } from "../../../src/core/gaps/scene.ts";
import { findFaults } from "../../../src/core/layout/invariants.ts";
import { Oracle } from "./oracle.ts";
import { ELL, ELL_PARTS, randomLayout } from "./random-layout.ts";

const cut = (outline: readonly (readonly [number, number])[]) => (outline.length === ELL.length ? ELL_PARTS : [outline]);

/** mm: chords lie within 0.02 mm of their arcs, as the oracle's do. */
const APART = 0.05;
/** Where legs of a run move unlike, the oracle's square ends at the middle of a bend stand off the true ones by a share of its 0.5 mm steps. */
const UNLIKE_LEGS = 0.2;
/** Growth is taken in stretches of 0.2 mm, always on the safe side; the oracle's own stretches add up to 0.1. */
const GROWTH = 0.35;

describe("the ledger", () => {
  const first = Number(process.env["ORACLE_FROM"] ?? 1);
  const count = Number(process.env["ORACLE_COUNT"] ?? 6);
  it(`agrees with nearest points found in turns, on crowded random layouts (seeds ${first} to ${first + count - 1})`, () => {
    let rows = 0;
    let overlaps = 0;
    for (let seed = first; seed < first + count; seed++) {
      const layout = randomLayout(seed);
      expect(findFaults(layout)).toEqual([]);
      const report = checkGaps(layout);
      const oracle = new Oracle(layout, cut);
      const { near, band } = layout.rules;
      const { things } = oracle;
      for (let i = 0; i < things.length; i++) {
        for (let j = i + 1; j < things.length; j++) {
          const [a, b] = [things[i]!, things[j]!];
          if ((a.kind === "room" && b.kind === "room") || ((a.kind === "room" || b.kind === "room") && a.owner === b.owner)) continue;
          const required = oracle.required(a, b, oracle.moves(a, b));
          const limit = Math.max(near, required + band);
          const row = report.gaps.find((gap) => (gap.a === a.key && gap.b === b.key) || (gap.a === b.key && gap.b === a.key));
          const { drawn, worst } = oracle.measure(a, b, limit + 1);
          const where = `seed ${seed}: ${a.key}, ${b.key}: drawn ${drawn}, worst ${worst}, required ${required}, row ${JSON.stringify(row)}`;
          if (row === undefined) {
            expect(worst, where).toBeGreaterThan(limit - GROWTH);
            continue;
          }
          rows++;
          expect(worst, where).toBeLessThan(limit + GROWTH);
          expect(row.required, where).toBe(required);
          const union = a.bits.length > 1 || b.bits.length > 1;
          if (drawn > 0.01) {
            expect(Math.abs(row.distance - drawn), where).toBeLessThan(APART);
          } else {
            overlaps++;
            expect(row.distance, where).toBeLessThanOrEqual(APART);
            if (!union) expect(Math.abs(row.distance - drawn), where).toBeLessThan(APART);
          }
          if (worst > 0.01 - a.scalar - b.scalar && worst > 0.01) {
            const unlike = [a, b].some((thing) => new Set(thing.bits.map((bit) => bit.carried.map((chain) => chain[0]).sort().join())).size > 1);
            const slack = unlike ? UNLIKE_LEGS : APART;
            expect(row.worst, where).toBeLessThan(worst + slack);
            expect(row.worst, where).toBeGreaterThan(worst - slack - (row.shares.growth > 0 ? GROWTH : 0));
          } else {
            expect(row.worst, where).toBeLessThan(APART);
            if (!union) expect(Math.abs(row.worst - worst), where).toBeLessThan(APART);
          }
          // the shares say it all, and the verdict follows from the numbers
          expect(row.distance - row.worst - row.shares.movement - row.shares.plusMinus - row.shares.growth).toBeCloseTo(0, 9);
          for (const share of Object.values(row.shares)) expect(share).toBeGreaterThanOrEqual(0);
          expect(row.verdict).toBe(row.distance <= 1e-6 ? "touch" : row.worst <= 1e-6 ? "rub" : row.worst - required < -1e-6 ? "short" : row.worst - required < band - 1e-6 ? "tight" : "clear");
        }
      }
    }
    // the layouts are worth it: plenty of rows, some of them overlapping
    expect(rows).toBeGreaterThan(count * 5);
    expect(overlaps).toBeGreaterThan(count / 5);
  }, 600_000);
});
