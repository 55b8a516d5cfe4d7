import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { segmentsMeet } from "#core/drawing/balloon-ring.ts";
import { boundsOf, findTextOnLines, findTextOutside, findTextOverlaps } from "#core/drawing/overlaps.ts";
import { PAPER_NAMES } from "#core/drawing/paper.ts";
import { planSheets, type SheetOptions } from "#core/drawing/sheet.ts";
import type { SheetPlan } from "#core/drawing/plan.ts";
import { bodyReport } from "#core/body/stance.ts";
import { massReport } from "#core/body/mass.ts";
import { hostileLayout, type HostileLayout } from "./hostile-layout.ts";

const SEED = 20261201;
const options: fc.Arbitrary<SheetOptions> = fc.record({
  paper: fc.constantFrom(...PAPER_NAMES), scale: fc.constant("fit" as const), units: fc.constantFrom("mm" as const, "in" as const, "in-fraction" as const),
  station: fc.option(fc.integer({ min: -800, max: 3500 }), { nil: undefined }), datum: fc.constantFrom(undefined, "d-0", "d-3", "front-axle", "rear-axle", "no-such"),
});
const sheetsOf = ({ layout, gaps }: HostileLayout, asked: SheetOptions): SheetPlan[] => planSheets(layout, { gaps, body: bodyReport(layout), mass: massReport(layout) }, asked, { owner: "An owner of some name", number: "N-1", date: "2026-12-01" });
/** Texts of a layer in reading order. */
const textsOf = (sheets: readonly SheetPlan[], layer: string) => sheets.flatMap((sheet) => sheet.marks.filter((mark) => mark.kind === "text" && mark.layer === layer).map((mark) => (mark as { text: string }).text));

describe(`planSheets, whatever the layout, paper, unit, station and datum (seed ${SEED})`, () => {
  it("never lets a text overlap another, lie on a line or leave the paper", () => {
    fc.assert(
      fc.property(hostileLayout({ parts: 45, gaps: 40 }), options, (made, asked) => {
        for (const sheet of sheetsOf(made, asked)) {
          expect(findTextOverlaps(sheet.marks)).toEqual([]);
          expect(findTextOnLines(sheet.marks)).toEqual([]);
          expect(findTextOutside(sheet.marks, { left: 10, right: sheet.paper.width - 4, top: 4, bottom: sheet.paper.height - 4 })).toEqual([]);
        }
      }),
      { seed: SEED, numRuns: 150, endOnFailure: true },
    );
  }, 240_000);

  it("draws nothing over the edge of the paper, and only finite numbers", () => {
    fc.assert(
      fc.property(hostileLayout({ parts: 20, gaps: 5 }), options, (made, asked) => {
        for (const sheet of sheetsOf(made, asked)) {
          for (const mark of sheet.marks) {
            if (mark.kind === "text") {
              expect(Number.isFinite(mark.at[0]) && Number.isFinite(mark.at[1]) && mark.size >= 1).toBe(true);
              continue;
            }
            const box = boundsOf(mark);
            expect(box.left >= 0 && box.top >= 0 && box.right <= sheet.paper.width && box.bottom <= sheet.paper.height).toBe(true);
          }
        }
      }),
      { seed: SEED + 1, numRuns: 60, endOnFailure: true },
    );
  }, 120_000);

  it("lists every part and every gap once, in the document's and the ledger's order, over as many sheets as it takes", () => {
    fc.assert(
      fc.property(hostileLayout({ parts: 60, gaps: 80 }), options, (made, asked) => {
        const sheets = sheetsOf(made, asked);
        const bold = sheets.flatMap((sheet) => sheet.marks.filter((mark) => mark.kind === "text" && mark.layer === "tables" && mark.weight === "bold" && mark.of !== undefined));
        const numbers = (key: (of: string) => boolean) => bold.filter((mark) => key(mark.of!)).map((mark) => (mark as { text: string }).text).filter((text) => /^\d+$/u.test(text)).map(Number);
        expect(numbers((of) => of.startsWith("p-") && !of.includes("|"))).toEqual(made.layout.parts.map((_, i) => i + 1));
        expect(numbers((of) => of.includes("|")).sort((a, b) => a - b)).toEqual(made.gaps.map((_, i) => i + 1));
        expect(sheets.map((sheet) => [sheet.sheet, sheet.sheets])).toEqual(sheets.map((_, i) => [i + 1, sheets.length]));
      }),
      { seed: SEED + 2, numRuns: 40, endOnFailure: true },
    );
  }, 120_000);

  it("numbers each part once in the views, or says that it found no room", () => {
    fc.assert(
      fc.property(hostileLayout({ parts: 50, gaps: 0 }), options, (made, asked) => {
        const sheets = sheetsOf(made, { ...asked, station: undefined });
        const shown = textsOf(sheets, "balloons").filter((text) => /^\d+$/u.test(text)).map(Number);
        const left = sheets.flatMap((sheet) => sheet.remarks).flatMap((remark) => /without room in these views: (.*); see/u.exec(remark)?.[1]?.split(", ") ?? []).filter((text) => /^\d+$/u.test(text)).map(Number);
        expect([...shown, ...left].sort((a, b) => a - b)).toEqual(made.layout.parts.map((_, i) => i + 1));
      }),
      { seed: SEED + 3, numRuns: 40, endOnFailure: true },
    );
  }, 120_000);

  it("draws leaders that do not cross one another", () => {
    fc.assert(
      fc.property(hostileLayout({ parts: 50, gaps: 12 }), options, (made, asked) => {
        for (const sheet of sheetsOf(made, asked)) {
          const leaders = sheet.marks.flatMap((mark) => (mark.kind === "polyline" && mark.layer === "balloons" && !mark.closed ? [mark.points] : []));
          const pieces = leaders.flatMap((points, leader) => points.slice(1).map((p, i) => ({ leader, a: points[i]!, b: p })));
          for (const one of pieces) for (const other of pieces) if (one.leader < other.leader) expect(segmentsMeet(one.a, one.b, other.a, other.b)).toBe(false);
        }
      }),
      { seed: SEED + 4, numRuns: 40, endOnFailure: true },
    );
  }, 120_000);

  it("gives the same plan for the same input", () => {
    fc.assert(fc.property(hostileLayout({ parts: 15, gaps: 10 }), options, (made, asked) => void expect(sheetsOf(made, asked)).toEqual(sheetsOf(made, asked))), { seed: SEED + 5, numRuns: 10, endOnFailure: true });
  }, 60_000);
});
