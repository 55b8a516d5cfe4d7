// `npm run bench [-- --c] [-- --quick]`: builds tests/bench and runs it. Node's own modules only.
import { spawnSync } from "node:child_process";
import { join } from "node:path";
import { installModules, requireNode, ROOT } from "./install.js";
import { say } from "./say.js";

requireNode();
installModules();
const build = spawnSync(
  process.execPath,
  [join(ROOT, "node_modules/vite/bin/vite.js"), "build", "--ssr", "tests/bench/main.ts", "--outDir", "dist/bench", "--logLevel", "warn"],
  { cwd: ROOT, stdio: ["ignore", 2, 2] },
);
if (build.status !== 0) {
  say("The bench could not be built: see above.");
  process.exit(1);
}
const run = spawnSync(process.execPath, [join(ROOT, "dist/bench/main.js"), ...process.argv.slice(2)], { cwd: ROOT, stdio: "inherit" });
process.exit(run.status ?? 1);
