import { readFileSync, readdirSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { checkGaps } from "../../../src/core/gaps/scene.ts";
import { findFaults } from "../../../src/core/layout/invariants.ts";
import { parseLayout } from "../../../src/core/layout/parse-layout.ts";
import type { Layout } from "../../../src/core/layout/schema.ts";
import { Oracle, type OracleThing } from "./oracle.ts";
import { randomLayout } from "./random-layout.ts";

/** mm: chords lie within 0.02 mm of their arcs, the oracle's within 0.01; where a stretch is left out within a bend both errors meet the slant of the cut. */
const APART = 0.08;
/** Growth is taken in stretches of 0.2 mm, always on the safe side; the oracle's own stretches add up to 0.1. */
const GROWTH = 0.35;

/** Holds every pair of a layout against the oracle. */
function compare(layout: Layout): { rows: number; overlaps: number; rubs: number } {
  const report = checkGaps(layout);
  const { near, band } = layout.rules;
  const { things } = new Oracle(layout);
  const oracle = new Oracle(layout);
  const seen = { rows: 0, overlaps: 0, rubs: 0 };
  const contacts = new Set(layout.contacts.flatMap(({ between: [a, b] }) => [`${a}|${b}`, `${b}|${a}`]));
  const ofWheel = (tyre: OracleThing, other: OracleThing) =>
    tyre.kind === "tyre" && !layout.parts.some((part) => part.key === tyre.key) && (["wheel", "brake", "suspension"].includes(other.kind) || layout.shafts.some((shaft) => shaft.key === other.key && `tyre-${shaft.wheel}` === tyre.key));
  things.forEach((a, i) => things.slice(i + 1).forEach((b) => {
    const rooms = [a, b].filter((thing) => thing.kind === "room").length;
    const isPair = (row: { a: string; b: string }) => (row.a === a.key && row.b === b.key) || (row.a === b.key && row.b === a.key);
    const row = report.gaps.find(isPair);
    const trusted = report.trusted.find(isPair);
    const where = `${layout.name}: ${a.key}, ${b.key}`;
    if (rooms === 2 || (rooms === 1 && a.owner === b.owner)) return expect(row ?? trusted, where).toBeUndefined();
    const named = contacts.has(`${a.key}|${b.key}`);
    if (named || ofWheel(a, b) || ofWheel(b, a)) {
      expect(row, where).toBeUndefined();
      const { drawn } = oracle.measure(a, b, trusted ? Math.max(0, trusted.distance) + 1 : near);
      if (trusted) expect(drawn > 0.01 ? Math.abs(trusted.distance - drawn) : trusted.distance, `${where}: drawn ${drawn}, trusted ${JSON.stringify(trusted)}`).toBeLessThan(APART);
      else {
        expect(drawn, where).toBeGreaterThan(near - APART);
        // a named contact has a row unless nothing of the two is left to check
        expect(named && !a.bits.every((bit) => bit.spares.has(b.owner)) && !b.bits.every((bit) => bit.spares.has(a.owner)), where).toBe(false);
      }
      return;
    }
    const required = oracle.required(a, b, oracle.moves(a, b));
    const limit = Math.max(near, required + band);
    const { drawn, worst } = oracle.measure(a, b, limit + 1);
    const said = `${where}: drawn ${drawn}, worst ${worst}, required ${required}, row ${JSON.stringify(row)}`;
    if (row === undefined) return expect(worst, said).toBeGreaterThan(limit - GROWTH);
    seen.rows++;
    if (drawn <= 0.01) seen.overlaps++;
    else if (worst <= 0) seen.rubs++;
    expect(worst, said).toBeLessThan(limit + GROWTH);
    expect(row.required, said).toBe(required);
    const union = a.bits.length > 1 || b.bits.length > 1;
    if (drawn > 0.01 || !union) expect(Math.abs(row.distance - drawn), said).toBeLessThan(APART);
    else expect(row.distance, said).toBeLessThanOrEqual(APART);
    if (worst > 0.01) {
      expect(row.worst, said).toBeLessThan(worst + APART);
      expect(row.worst, said).toBeGreaterThan(worst - APART - (row.shares.growth > 0 ? GROWTH : 0));
    } else {
      expect(row.worst, said).toBeLessThan(APART);
      if (!union) expect(Math.abs(row.worst - worst), said).toBeLessThan(APART);
    }
    // the shares say it all, and the verdict follows from the numbers
    expect(row.distance - row.worst - row.shares.movement - row.shares.plusMinus - row.shares.growth, said).toBeCloseTo(0, 9);
    for (const share of Object.values(row.shares)) expect(share, said).toBeGreaterThanOrEqual(0);
    const verdict = row.distance <= 1e-6 ? "touch" : row.worst <= 1e-6 ? "rub" : row.worst - required < -1e-6 ? "short" : row.worst - required < band - 1e-6 ? "tight" : "clear";
    expect(row.verdict, said).toBe(row.notCovered && verdict === "clear" ? "tight" : verdict);
  }));
  return seen;
}

describe("the ledger agrees with nearest points found in turns", () => {
  const first = Number(process.env["ORACLE_FROM"] ?? 1);
  const count = Number(process.env["ORACLE_COUNT"] ?? 6);
  it(`on crowded random layouts (seeds ${first} to ${first + count - 1})`, () => {
    const seen = { rows: 0, overlaps: 0, rubs: 0 };
    for (let seed = first; seed < first + count; seed++) {
      const layout = randomLayout(seed);
      expect(findFaults(layout)).toEqual([]);
      const here = compare(layout);
      for (const key of ["rows", "overlaps", "rubs"] as const) seen[key] += here[key];
    }
    // the layouts are worth it: plenty of rows, some of them overlapping
    expect(seen.rows).toBeGreaterThan(count * 5);
    expect(seen.overlaps).toBeGreaterThan(count / 5);
    expect(seen.rubs).toBeGreaterThan(0);
  }, 600_000);

  const examples = new URL("../../../examples/", import.meta.url);
  const layouts = readdirSync(examples).filter((name) => name.endsWith(".layout.json")).flatMap((name) => {
    const parsed = parseLayout(JSON.parse(readFileSync(new URL(name, examples), "utf8")));
    return parsed.ok ? [{ name, layout: parsed.layout }] : [];
  });
  it.each(layouts)("on every pair of examples/$name", ({ layout }) => {
    expect(compare(layout).rows).toBeGreaterThan(0);
  }, 600_000);
});
