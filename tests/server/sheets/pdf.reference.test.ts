import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Layout } from "#core/layout/schema.ts";
import { readPdf, type ReadPdf } from "../../support/pdf.ts";
import { demoIds, signInAs, type Agent } from "../../support/members.ts";
import { startTestServer, type TestServer } from "../../support/database.ts";

let server: TestServer;
let owner: Agent;
let path: string;
beforeAll(async () => {
  server = await startTestServer();
  owner = await signInAs(server.app, "owner");
  const { buildId, layoutId } = await demoIds(owner);
  path = `/api/builds/${buildId}/layouts/${layoutId}`;
});
afterAll(() => server.close());

const sheet = async (query: string): Promise<ReadPdf> => {
  const answer = await owner.get(`${path}/sheet.pdf?${query}`).buffer(true).parse((response, done) => {
    const chunks: Buffer[] = [];
    response.on("data", (chunk: Buffer) => chunks.push(chunk)).on("end", () => done(null, Buffer.concat(chunks)));
  }).expect(200).expect("content-type", "application/pdf");
  return readPdf(answer.body as Buffer);
};

/** ISO 216 trimmed sizes and ANSI/ASME Y14.1 (Letter 8.5 x 11 in, Tabloid 11 x 17 in), from memory, laid on their long side. */
const SIZES = { A4: [297, 210], A3: [420, 297], A2: [594, 420], A1: [841, 594], Letter: [279.4, 215.9], Tabloid: [431.8, 279.4] } as const;
const papers = Object.keys(SIZES) as (keyof typeof SIZES)[];

/** A horizontal stroke of this length, mm, with what stands at its two ends. */
const horizontal = ({ lines }: ReadPdf, length: number, within: number) => lines.filter(({ from, to }) => Math.abs(from[1] - to[1]) < 0.01 && Math.abs(Math.abs(to[0] - from[0]) - length) < within);
const tickAt = ({ lines }: ReadPdf, x: number, y: number) => lines.some(({ from, to }) => Math.abs(from[0] - to[0]) < 0.01 && Math.abs(from[0] - x) < 0.05 && Math.min(from[1], to[1]) < y - 0.5 && Math.max(from[1], to[1]) > y + 0.5);

describe("the sheet as poppler reads it", () => {
  describe.each(papers)("on %s", (paper) => {
    let read: ReadPdf;
    beforeAll(async () => {
      read = await sheet(`paper=${paper}`);
    });

    it("is a page of that size", () => {
      expect(Math.abs(read.size[0] - SIZES[paper][0])).toBeLessThan(0.1);
      expect(Math.abs(read.size[1] - SIZES[paper][1])).toBeLessThan(0.1);
      expect(read.pages).toBeGreaterThan(0);
    });

    it("carries a check bar of 100 mm with a tick every 10 mm", () => {
      const bars = horizontal(read, 100, 0.02).filter(({ from, to }) => {
        const left = Math.min(from[0], to[0]);
        return Array.from({ length: 11 }, (_, i) => tickAt(read, left + 10 * i, from[1])).every(Boolean);
      });
      expect(bars).toHaveLength(1);
    });

    it("keeps page, check bar and scale in inches at a scale that was asked for", async () => {
      const inches = await sheet(`paper=${paper}&units=in&scale=50`);
      expect(Math.abs(inches.size[0] - SIZES[paper][0])).toBeLessThan(0.1);
      expect(Math.abs(inches.size[1] - SIZES[paper][1])).toBeLessThan(0.1);
      expect(inches.text).toContain("1 : 50");
      expect(inches.text).toContain("CHECK BAR 100 mm");
      expect(horizontal(inches, 100, 0.02).length).toBeGreaterThan(0);
    });

    it("embeds its letters as a subset and holds no picture", () => {
      expect(read.fonts.length).toBeGreaterThan(0);
      for (const font of read.fonts) {
        expect(font).toMatchObject({ embedded: true, subset: true });
        expect(font.name).toMatch(/^[A-Z]{6}\+JetBrainsMono/u);
      }
      expect(read.images).toBe(0);
    });

    it("says what it is, of what, how to print it and what to beware of", () => {
      // fields of ISO 7200:2004, table 1 to 3, and the cautions
      for (const field of ["legal owner", "number", "date of issue", "sheet", "title", "approver", "creator", "document type", "Mufflers flat, third try", "third angle", "General arrangement"]) expect(read.text).toContain(field);
      for (const caution of ["CHECK BAR 100 mm", "print at 100 %", "measure on the"]) expect(read.text).toContain(caution);
      for (const part of ["Left muffler", "Catalyst", "Steering rack", "Clutch line", "rub", "short"]) expect(read.text).toContain(part);
    });
  });

  it("draws to true scale: wheelbase and left muffler are as long on paper as in the document", async () => {
    const { body } = await owner.get(path).expect(200);
    const document = body.document as Layout;
    const wheelbase = document.chassis.wheelbase;
    for (const [paper, scale] of [["A1", 10], ["A2", 20], ["A3", 20]] as const) {
      const read = await sheet(`paper=${paper}&scale=${scale}`);
      expect(read.text).toContain(`1 : ${scale}`);
      // the axles are upright chain lines right through plan and side: as far apart as the wheelbase says
      const upright = read.lines.filter(({ from, to }) => Math.abs(from[0] - to[0]) < 0.01 && Math.abs(to[1] - from[1]) > 20).map(({ from }) => from[0]);
      const pairs = upright.filter((x) => upright.some((other) => Math.abs(other - x - wheelbase / scale) < 0.02));
      expect(pairs.length).toBeGreaterThan(0);
      // the left muffler, an oval 540 long lying fore and aft: its two long sides in plan and in side view
      const muffler = document.parts.find((part) => part.key === "muffler-left")!;
      const solid = muffler.solids[0]!;
      if (solid.type !== "oval") throw new Error("the demo's muffler is an oval");
      expect(horizontal(read, solid.length / scale, 0.02).length).toBeGreaterThanOrEqual(2);
    }
  });

  it("speaks inches where they are asked for", async () => {
    const read = await sheet("paper=A3&units=in-fraction");
    // 2460 mm = 96.850 in, to 1/16: 96 14/16 = 96 7/8
    expect(read.text).toContain("96 7/8");
    const decimal = await sheet("paper=A3&units=in");
    // 2460 / 25.4 = 96.850...
    expect(decimal.text).toMatch(/96\.85/u);
  });

  it("prints the gaps' numbers as the report has them", async () => {
    const { body: report } = await owner.get(`${path}/report`).expect(200);
    const read = await sheet("paper=A3");
    const rows = read.text.split("\n");
    for (const gap of (report.gaps as { distance: number; worst: number; margin: number; verdict: string }[]).slice(0, 3)) {
      const numbers = [gap.distance, gap.worst, gap.margin].map((value) => value.toFixed(1));
      expect(rows.some((row) => row.includes(gap.verdict) && numbers.every((number) => row.includes(number))), numbers.join(", ")).toBe(true);
    }
  });

  it("cuts the section where it is asked to", async () => {
    const read = await sheet("paper=A3&station=2700");
    expect(read.text).toContain("SECTION A-A");
    expect(read.text).not.toContain("REAR, FROM BEHIND");
  });

  it("refuses a paper, a scale or a station that there is not", async () => {
    for (const query of ["paper=B5", "scale=7", "station=abc", "nonsense=1"]) await owner.get(`${path}/sheet.pdf?${query}`).expect(400);
  });
});
