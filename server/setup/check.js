// `npm run check -- FILE`: installs and builds what is missing (on stderr), then runs the command.
import { spawnSync } from "node:child_process";
import { join } from "node:path";
import { buildServer } from "./build.js";
import { installModules, requireNode, ROOT } from "./install.js";

// The command's 1 means that something is touch, rub, short or over: a set-up that fails ends with 2.
let ready = false;
process.on("exit", (code) => {
  if (!ready && code !== 0) process.exitCode = 2;
});

requireNode();
installModules();
buildServer();
ready = true;
const result = spawnSync(process.execPath, [join(ROOT, "dist/server/check.js"), ...process.argv.slice(2)], { cwd: process.env.INIT_CWD ?? process.cwd(), stdio: "inherit" });
process.exit(result.status ?? 2);
