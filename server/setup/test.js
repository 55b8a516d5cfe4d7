// `npm test`: all set-up, then types, lint, both builds and every test; ends with "N passed, N failed". Node's own modules only.
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { buildClient, buildServer } from "./build.js";
import { postgresBin, startCluster } from "./cluster.js";
import { installModules, requireNode, requirePackages, ROOT } from "./install.js";
import { say } from "./say.js";

requireNode();
requirePackages([
  { name: "postgresql", shows: () => postgresBin() !== null },
  { name: "chromium", shows: () => existsSync("/usr/bin/chromium") },
  { name: "poppler-utils", shows: () => existsSync("/usr/bin/pdftotext") },
]);
installModules();

let failedSteps = 0;
/** @param {string} what @param {string} script @param {string[]} args */
const step = (what, script, args) => {
  say(`${what} …`);
  const result = spawnSync(process.execPath, [join(ROOT, "node_modules", script), ...args], { cwd: ROOT, stdio: ["ignore", 2, 2] });
  if (result.status !== 0) {
    failedSteps++;
    say(`FAILED: ${what}`);
  }
};
step("Types", "typescript/bin/tsc", ["-b"]);
step("Lint", "eslint/bin/eslint.js", ["-c", ".eslint.config.js", "."]);
buildServer();
buildClient();

const cluster = await startCluster({ name: `test-${process.pid}`, durable: false });
const results = join(ROOT, ".artifacts", "vitest.json");
mkdirSync(join(ROOT, ".artifacts"), { recursive: true });
rmSync(results, { force: true });
const only = process.argv.slice(2);
const vitest = spawnSync(process.execPath, [join(ROOT, "node_modules/vitest/vitest.mjs"), "run", "--reporter=default", "--reporter=json", `--outputFile.json=${results}`, ...only], {
  cwd: ROOT, stdio: ["ignore", 2, 2], env: { ...process.env, TEST_CLUSTER_URL: cluster.ownerUrl, NODE_ENV: "test" },
});
cluster.stop();
rmSync(cluster.folder, { recursive: true, force: true });

const report = existsSync(results) ? JSON.parse(readFileSync(results, "utf8")) : { numPassedTests: 0, numFailedTests: 0 };
const passed = report.numPassedTests;
// a file that could not run, or a step before the tests, counts as a failure of its own
let failed = report.numFailedTests + failedSteps;
if (vitest.status !== 0 && failed === 0) failed = 1;
if (passed === 0 && failed === 0) failed = 1;
process.stdout.write(`${passed} passed, ${failed} failed\n`);
process.exit(failed === 0 ? 0 : 1);
