import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { layoutJsonSchema } from "#core/layout/json-schema.ts";
import { parseLayout } from "#core/layout/parse-layout.ts";
import type { Layout } from "#core/layout/schema.ts";
import { fullReport } from "#core/reports.ts";

const FOLDER = new URL("../../examples/", import.meta.url).pathname;
const read = (name: string): unknown => JSON.parse(readFileSync(join(FOLDER, name), "utf8"));
const layoutOf = (name: string): Layout => {
  const parsed = parseLayout(read(name));
  if (!parsed.ok) throw new Error(parsed.faults.map((f) => `${f.path}: ${f.message}`).join("\n"));
  return parsed.layout;
};

interface ExpectedGap { a: string; b: string; distance: number; worst: number; required: number; margin: number; verdict: string; provisional?: boolean; listed?: boolean; why: string }
interface Expected { gaps: ExpectedGap[]; body?: { rearOverhang: number; frontOverhang: number; length: number; rearOverhangShare: number }; mass?: { total: number; rearAxle: number }; spaces?: { key: string; grossLitres: number; freeLitres: number }[] }

describe.each(["dunlin", "front-engine", "electric"])("examples/%s", (name) => {
  const report = fullReport(layoutOf(`${name}.layout.json`));
  const expected = read(`${name}.expected.json`) as Expected;

  it.each(expected.gaps.map((gap) => [`${gap.a} and ${gap.b}`, gap] as const))("gives the hand-worked gap of %s", (_, want) => {
    const found = report.gaps.find((gap) => (gap.a === want.a && gap.b === want.b) || (gap.a === want.b && gap.b === want.a));
    if (want.listed === false) return expect(found).toBeUndefined();
    expect(found).toBeDefined();
    for (const field of ["distance", "worst", "required", "margin"] as const) expect(Math.abs(found![field] - want[field])).toBeLessThan(1e-3);
    expect(found!.verdict).toBe(want.verdict);
    if (want.provisional !== undefined) expect(found!.provisional).toBe(want.provisional);
  });

  it("gives the hand-worked lengths, masses and litres", () => {
    if (expected.body) for (const field of ["rearOverhang", "frontOverhang", "length", "rearOverhangShare"] as const) expect(report.body[field]).toBeCloseTo(expected.body[field], 9);
    if (expected.mass) {
      expect(report.mass.total).toBeCloseTo(expected.mass.total, 9);
      expect(report.mass.rearAxle).toBeCloseTo(expected.mass.rearAxle, 9);
    }
    for (const space of expected.spaces ?? []) {
      const found = report.spaces.find((one) => one.key === space.key)!;
      expect(found.grossLitres).toBeCloseTo(space.grossLitres, 3);
      expect(found.freeLitres).toBeCloseTo(space.freeLitres, 3);
    }
    expect(expected.gaps.length + (expected.spaces?.length ?? 0)).toBeGreaterThan(0);
  });
});

describe("examples/dunlin", () => {
  const layout = layoutOf("dunlin.layout.json");
  const report = fullReport(layout);
  const gap = (a: string, b: string) => report.gaps.find((g) => (g.a === a && g.b === b) || (g.a === b && g.b === a))!;

  it("shows the problems of its story, and says why", () => {
    expect(gap("charge-hose", "shaft-right").verdict).toBe("rub");
    expect(gap("catalyst", "clutch-line").verdict).toBe("short");
    expect(gap("fan", "rack")).toMatchObject({ verdict: "short", provisional: true });
    expect(report.body.findings.some((finding) => finding.code === "over-limit")).toBe(true);
    const pins = (part: string) => layout.parts.find((p) => p.key === part)!.ports.find((port) => port.key === "plug")!.spec["pins"];
    expect(pins("sender")).toBe(3);
    expect(report.counts.touch).toBe(0);
  });

  it("stays within 2 % of the sum that its outlines allow: gross litres by hand", () => {
    // plan 660 x 1200; side area: trapezoids 120..640 to 120..560 over 540, then to 120..470 over 120
    const side = (540 * (520 + 440)) / 2 + (120 * (440 + 350)) / 2;
    expect(report.spaces[0]!.grossLitres).toBeCloseTo((side * 1200) / 1e6, 3);
    expect(report.spaces[0]!.freeLitres).toBeLessThan(report.spaces[0]!.grossLitres);
  });

  it("carries some forty parts and ten runs, all with a mass", () => {
    expect(layout.parts.length).toBeGreaterThanOrEqual(40);
    expect(layout.runs.length).toBeGreaterThanOrEqual(10);
    expect(report.mass.missing).toEqual([]);
  });
});

describe("the broken examples", () => {
  const expected = read("broken.expected.json") as Record<string, string[]>;
  it.each(Object.entries(expected).filter(([name]) => name.endsWith(".json")))("%s is refused with every fault at its path", (name, paths) => {
    const parsed = parseLayout(read(name));
    expect(parsed.ok).toBe(false);
    if (!parsed.ok) expect(parsed.faults.map((fault) => fault.path.replace(/\[0\]$/, "")).sort()).toEqual(paths.map((path) => path.replace(/\[0\]$/, "")).sort());
  });
});

describe("examples/layout.schema.json", () => {
  it("is what the code makes", () => {
    expect(read("layout.schema.json")).toEqual(JSON.parse(JSON.stringify(layoutJsonSchema())));
  });

  it("every layout file here that is not broken parses", () => {
    const files = readdirSync(FOLDER).filter((name) => name.endsWith(".layout.json") && !name.startsWith("broken"));
    expect(files.length).toBeGreaterThanOrEqual(3);
    for (const file of files) expect(parseLayout(read(file)).ok).toBe(true);
  });
});
