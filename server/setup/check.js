// `npm run check -- FILE`: installs and builds what is missing (on stderr), then runs the command.
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import { buildServer } from "./build.js";
import { installModules, requireNode, ROOT } from "./install.js";
import { say } from "./say.js";

// The command's 1 means that something is touch, rub, short or over: a set-up that fails ends with 2.
let ready = false;
process.on("exit", (code) => {
  if (!ready && code !== 0) process.exitCode = 2;
});

requireNode();
installModules();
buildServer();
process.chdir(process.env.INIT_CWD ?? process.cwd());
try {
  await import(pathToFileURL(join(ROOT, "dist/server/check.js")).href);
  ready = true;
} catch (error) {
  say(`The command could not be started: ${error instanceof Error ? error.message : String(error)}`);
  process.exitCode = 2;
}
