// `npm test`: all set-up, then types, lint, both builds and every test; ends with "N passed, N failed". Node's own modules only.
// `npm test -- tests/core/geometry` runs the tests of some files after the same set-up.
import { spawn, spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { buildClient, buildServer } from "./build.js";
import { postgresBin } from "./cluster.js";
import { installModules, requireNode, requirePackages, ROOT } from "./install.js";
import { say } from "./say.js";

requireNode();
requirePackages([
  { name: "postgresql", shows: () => postgresBin() !== null },
  { name: "chromium", shows: () => existsSync("/usr/bin/chromium") },
  { name: "poppler-utils", shows: () => existsSync("/usr/bin/pdftotext") },
]);
installModules();

/** Steps before the tests that failed, by name. @type {string[]} */
const failedSteps = [];
const module = (/** @type {string} */ path) => join(ROOT, "node_modules", path);
/**
 * Runs a step beside others; what it says is shown when it has ended.
 * @param {string} name @param {string} script @param {string[]} args @returns {Promise<void>}
 */
const step = (name, script, args) => new Promise((resolve) => {
  const child = spawn(process.execPath, [module(script), ...args], { cwd: ROOT, stdio: ["ignore", "pipe", "pipe"] });
  /** @type {Buffer[]} */
  const said = [];
  child.stdout.on("data", (chunk) => said.push(chunk));
  child.stderr.on("data", (chunk) => said.push(chunk));
  child.on("close", (code) => {
    process.stderr.write(Buffer.concat(said));
    say(code === 0 ? `${name}: right` : `${name}: FAILED`);
    if (code !== 0) failedSteps.push(name);
    resolve();
  });
});

say("Types and lint …");
await Promise.all([step("types", "typescript/bin/tsc", ["-b"]), step("lint", "eslint/bin/eslint.js", ["-c", ".eslint.config.js", "."])]);
for (const [name, build] of /** @type {const} */ ([["server build", buildServer], ["client build", buildClient]])) {
  if (!build({ orEnd: false })) failedSteps.push(name);
}

const results = join(ROOT, ".artifacts", "vitest.json");
mkdirSync(join(ROOT, ".artifacts"), { recursive: true });
rmSync(results, { force: true });
const vitest = spawnSync(process.execPath, [module("vitest/vitest.mjs"), "run", "--reporter=default", "--reporter=json", `--outputFile.json=${results}`, ...process.argv.slice(2)], {
  cwd: ROOT, stdio: ["ignore", 2, 2], env: { ...process.env, NODE_ENV: "test" },
});

/** @type {{ numPassedTests: number, numFailedTests: number, testResults: { status: string, assertionResults: unknown[] }[] }} */
const report = existsSync(results) ? JSON.parse(readFileSync(results, "utf8")) : { numPassedTests: 0, numFailedTests: 0, testResults: [] };
const passed = report.numPassedTests;
// a file that could not even begin has no tests that failed: it counts as one; so does each step before the tests
const brokenFiles = report.testResults.filter((file) => file.status === "failed" && file.assertionResults.length === 0).length;
let failed = report.numFailedTests + brokenFiles + failedSteps.length;
if (failed === 0 && (vitest.status !== 0 || passed === 0)) failed = 1;
if (failedSteps.length > 0) say(`Failed before the tests: ${failedSteps.join(", ")}`);
process.stdout.write(`${passed} passed, ${failed} failed\n`);
process.exitCode = failed === 0 ? 0 : 1;
