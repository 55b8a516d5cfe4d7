import { readFileSync, statSync } from "node:fs";
import { parseArgs } from "node:util";
import { LIMITS } from "#core/layout/schema.ts";
import { parseLayout } from "#core/layout/parse-layout.ts";
import { fullReport, type FullReport } from "#core/reports.ts";

/**
 * The command line: `npm run --silent check -- FILE [--json] [--seconds N]`. No server, no database.
 * Exit 0 when nothing is touch, rub, short or over; 1 when something is; 2 when the file cannot be read.
 */
const USAGE = "usage: npm run --silent check -- FILE [--json] [--seconds N]";

function fail(lines: readonly string[]): never {
  process.stderr.write(`${lines.join("\n")}\n`);
  process.exit(2);
}

function readFile(path: string): unknown {
  let text: string;
  try {
    if (statSync(path).size > LIMITS.bytes) fail([`${path}: larger than ${LIMITS.bytes / 1024 / 1024} MB`]);
    text = readFileSync(path, "utf8");
  } catch (error) {
    fail([`${path}: cannot be read: ${error instanceof Error ? error.message : String(error)}`]);
  }
  try {
    return JSON.parse(text);
  } catch (error) {
    fail([`${path}: not JSON: ${error instanceof Error ? error.message : String(error)}`]);
  }
}

function table(rows: readonly (readonly string[])[], right: ReadonlySet<number>): string[] {
  const widths = rows[0]!.map((_, column) => Math.max(...rows.map((row) => row[column]!.length)));
  return rows.map((row) => row.map((cell, column) => (right.has(column) ? cell.padStart(widths[column]!) : cell.padEnd(widths[column]!))).join("  ").trimEnd());
}

const number = (value: number | null, decimals = 1) => (value === null ? "–" : value.toFixed(decimals));

function words(report: FullReport): string {
  const { counts, body, mass } = report;
  const lines = [`${report.layout}`, "", `Gap ledger: ${Object.entries(counts).map(([verdict, n]) => `${n} ${verdict}`).join(", ")}`, ""];
  if (report.gaps.length > 0) {
    lines.push(...table([
      ["no", "verdict", "between", "and", "drawn", "worst", "need", "margin", "because"],
      ...report.gaps.map((gap, i) => [
        String(i + 1), gap.verdict + (gap.provisional ? " ?" : ""), gap.a, gap.b, number(gap.distance), number(gap.worst), number(gap.required), number(gap.margin),
        gap.why + (gap.notCovered ? ` (not covered: ${gap.notCovered.join(", ")})` : ""),
      ]),
    ], new Set([0, 4, 5, 6, 7])));
  } else lines.push("Nothing is near anything else.");
  lines.push("", "Stance (mm, degrees)", ...table([
    ["length", number(body.length)], ["front overhang", number(body.frontOverhang)],
    ["rear overhang", `${number(body.rearOverhang)}${body.rearOverhangShare === null ? "" : ` (${(body.rearOverhangShare * 100).toFixed(1)} % of the wheelbase)`}`],
    ["approach", number(body.approachAngle)], ["departure", number(body.departureAngle)], ["breakover", number(body.breakoverAngle)], ["ground clearance", number(body.groundClearance)],
  ], new Set()), ...body.findings.map((finding) => `! ${finding.message}`));
  lines.push("", `Mass ${number(mass.total)} kg, front axle ${number(mass.frontAxle)}, rear axle ${number(mass.rearAxle)}${mass.missing.length > 0 ? `; without a mass: ${mass.missing.join(", ")}` : ""}`);
  for (const space of report.spaces) lines.push(`Space ${space.key}: ${number(space.grossLitres)} l by its outlines, ${number(space.freeLitres)} l free`, ...(space.findings ?? []).map((f) => `! ${f}`));
  lines.push("", "Estimates from what was drawn; ? marks pairs with a guessed size. Measure on the car; for heat, fuel, brakes, steering and battery follow", "the part maker and the local rules, and have a licensed person check.");
  return lines.join("\n");
}

function main(): void {
  let options;
  try {
    options = parseArgs({ allowPositionals: true, options: { json: { type: "boolean" }, seconds: { type: "string" }, help: { type: "boolean" } } });
  } catch (error) {
    fail([error instanceof Error ? error.message : String(error), USAGE]);
  }
  const { values, positionals } = options;
  if (values.help) {
    process.stdout.write(`${USAGE}\n`);
    return;
  }
  if (positionals.length !== 1) fail([USAGE]);
  if (values.seconds !== undefined && !(Number(values.seconds) > 0 && Number(values.seconds) <= 3600)) fail([`--seconds: expected a number of seconds above 0 and up to 3600, found "${values.seconds}"`]);
  const parsed = parseLayout(readFile(positionals[0]!));
  if (!parsed.ok) fail([`${positionals[0]}: not a layout`, ...parsed.faults.map((fault) => `  ${fault.path || "(whole file)"}: ${fault.message}`)]);
  const report = fullReport(parsed.layout);
  process.stdout.write(values.json ? `${JSON.stringify(report)}\n` : `${words(report)}\n`);
  const { touch, rub, short } = report.counts;
  process.exitCode = touch + rub + short > 0 ? 1 : 0;
}

main();
