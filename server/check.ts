import { readFileSync, statSync } from "node:fs";
import { parseArgs } from "node:util";
import { LIMITS } from "#core/layout/schema.ts";
import { parseLayout } from "#core/layout/parse-layout.ts";
import { fullReport } from "#core/reports.ts";
import { printReport } from "./print-report.ts";

/**
 * The command line: `npm run --silent check -- FILE [--json] [--seconds N]`. No server, no database.
 * Exit 0 when nothing is touch, rub, short or over; 1 when something is; 2 when there is no answer: a file that cannot be read, wrong options, a fault
 * of the program.
 */
const USAGE = "usage: npm run --silent check -- FILE [--json] [--seconds N]";

/** Ends the run: what to say on stderr. */
class NoAnswer extends Error {}

function readFile(path: string): unknown {
  let text: string;
  try {
    const { size } = statSync(path);
    if (size > LIMITS.bytes) throw new NoAnswer(`${path}: expected at most ${LIMITS.bytes / 1024 / 1024} MB, found ${(size / 1024 / 1024).toFixed(1)} MB`);
    text = readFileSync(path, "utf8");
  } catch (error) {
    if (error instanceof NoAnswer) throw error;
    throw new NoAnswer(`${path}: cannot be read: ${messageOf(error)}`);
  }
  try {
    // some editors begin a file with a byte order mark
    return JSON.parse(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    throw new NoAnswer(`${path}: expected JSON: ${messageOf(error)}`);
  }
}

function messageOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}

function readOptions(): { file: string; json: boolean; help: boolean } {
  let parsed;
  try {
    parsed = parseArgs({ allowPositionals: true, options: { json: { type: "boolean" }, seconds: { type: "string" }, help: { type: "boolean" } } });
  } catch (error) {
    throw new NoAnswer(`${messageOf(error)}\n${USAGE}`);
  }
  const { values, positionals } = parsed;
  const help = values.help === true;
  if (!help && positionals.length !== 1) throw new NoAnswer(`expected one file, found ${positionals.length === 0 ? "none" : positionals.join(", ")}\n${USAGE}`);
  const seconds = values.seconds === undefined ? 2 : Number(values.seconds);
  if (!(seconds > 0 && seconds <= 3600) || values.seconds === "") throw new NoAnswer(`--seconds: expected a number above 0 and up to 3600, found "${values.seconds}"\n${USAGE}`);
  return { file: positionals[0] ?? "", json: values.json === true, help };
}

function main(): number {
  const { file, json, help } = readOptions();
  if (help) {
    process.stdout.write(`${USAGE}\n`);
    return 0;
  }
  const parsed = parseLayout(readFile(file));
  if (!parsed.ok) throw new NoAnswer([`${file}: not a layout`, ...parsed.faults.map((fault) => `  ${fault.path || "(whole file)"}: ${fault.message}`)].join("\n"));
  const report = fullReport(parsed.layout);
  process.stdout.write(json ? `${JSON.stringify(report)}\n` : `${printReport(report)}\n`);
  const { touch, rub, short } = report.counts;
  return touch + rub + short > 0 ? 1 : 0;
}

// A reader that has seen enough (head, less) closes the pipe: no fault.
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
  if (error.code !== "EPIPE") throw error;
});
try {
  process.exitCode = main();
} catch (error) {
  process.stderr.write(error instanceof NoAnswer ? `${error.message}\n` : `a fault of this program, not of the file: ${error instanceof Error ? error.stack : String(error)}\n`);
  process.exitCode = 2;
}
