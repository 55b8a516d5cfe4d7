import type { Gap } from "#core/gaps/gap.ts";
import type { FullReport } from "#core/reports.ts";

/** A report as text for a terminal: the ledger as a table, then stance, mass, spaces and cautions. Numbers are rounded; `--json` gives them whole. */
export function printReport(report: FullReport): string {
  const { counts, body, mass, spaces, trusted } = report;
  const lines = [report.layout, "", `Gap ledger, mm: ${Object.entries(counts).map(([verdict, n]) => `${n} ${verdict}`).join(", ")}`, ""];
  if (report.gaps.length > 0) {
    lines.push(...table([
      ["no", "verdict", "between", "and", "drawn", "worst", "need", "margin", "because"],
      ...report.gaps.map((gap, i) => [String(i + 1), gap.verdict, gap.a, gap.b, depth(gap), one(gap.worst), one(gap.required), one(gap.margin), because(gap)]),
    ], new Set([0, 4, 5, 6, 7])));
  } else lines.push("Nothing is near anything else.");
  if (trusted.length > 0) lines.push("", `Meant to touch, not judged: ${trusted.length}`, ...trusted.map((pair) => `  ${pair.a} and ${pair.b}: ${one(pair.distance)} (${pair.why})`));
  lines.push("", "Stance, mm and degrees", ...table([
    ["  length", one(body.length)], ["  front overhang", one(body.frontOverhang)],
    ["  rear overhang", `${one(body.rearOverhang)}${body.rearOverhangShare === null ? "" : ` (${(body.rearOverhangShare * 100).toFixed(1)} % of the wheelbase)`}`],
    ["  approach angle", one(body.approachAngle)], ["  departure angle", one(body.departureAngle)], ["  breakover angle", one(body.breakoverAngle)], ["  ground clearance", one(body.groundClearance)],
  ], new Set()), ...body.findings.map((finding) => `! ${finding.message}`));
  lines.push("", `Mass: ${one(mass.total)} kg, front axle ${one(mass.frontAxle)}, rear axle ${one(mass.rearAxle)}`);
  if (mass.missing.length > 0) lines.push(`  without a mass: ${mass.missing.join(", ")}`);
  if (spaces.length > 0) lines.push("", "Luggage spaces, litres");
  for (const space of spaces) lines.push(`  ${space.key}: ${one(space.grossLitres)} by its outlines, ${one(space.freeLitres)} free`, ...(space.findings ?? []).map((finding) => `! ${finding}`));
  lines.push("", ...CAUTIONS);
  return lines.join("\n");
}

const CAUTIONS = [
  "Estimates from what was drawn. Measure on the car. For heat, fuel, brakes, steering, battery and roadworthiness",
  "follow the part maker and the local rules, and have a licensed person check.",
];

function because(gap: Gap): string {
  return [
    gap.why,
    ...(gap.provisional ? ["a size is guessed"] : []),
    ...(gap.notCovered ? [`not covered: ${gap.notCovered.join(", ")}`] : []),
    ...(gap.overruled ?? []).map((rule) => `overrules ${one(rule.gap)}: ${rule.why}`),
  ].join("; ");
}

/** Drawn, with a mark where an overlap's depth is a lower estimate. */
function depth(gap: Gap): string {
  return `${gap.depthIsEstimate ? "~" : ""}${one(gap.distance)}`;
}

function one(value: number | null): string {
  if (value === null) return "cannot be computed";
  const text = value.toFixed(1);
  return text === "-0.0" ? "0.0" : text;
}

/** Columns as wide as their widest cell; those in `right` stand right. */
function table(rows: readonly (readonly string[])[], right: ReadonlySet<number>): string[] {
  const widths = rows[0]!.map((_, column) => rows.reduce((widest, row) => Math.max(widest, row[column]!.length), 0));
  return rows.map((row) => row.map((cell, column) => (right.has(column) ? cell.padStart(widths[column]!) : cell.padEnd(widths[column]!))).join("  ").trimEnd());
}
