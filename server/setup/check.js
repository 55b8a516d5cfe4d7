// `npm run check -- FILE`: installs and builds what is missing (on stderr), then runs the command.
import { spawnSync } from "node:child_process";
import { join } from "node:path";
import { buildServer } from "./build.js";
import { installModules, requireNode, ROOT } from "./install.js";

requireNode();
installModules();
buildServer();
const result = spawnSync(process.execPath, [join(ROOT, "dist/server/check.js"), ...process.argv.slice(2)], { cwd: process.env.INIT_CWD ?? process.cwd(), stdio: "inherit" });
process.exit(result.status ?? 2);
