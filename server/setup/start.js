// `npm start`: everything from a fresh machine to a served application. Node's own modules only until the modules are there.
import { spawn, spawnSync } from "node:child_process";
import { join } from "node:path";
import { buildClient, buildServer } from "./build.js";
import { postgresBin, sessionSecret, startCluster } from "./cluster.js";
import { installModules, requireNode, requirePackages, ROOT } from "./install.js";
import { say } from "./say.js";

requireNode();
const given = process.env.DATABASE_URL;
if (!given) requirePackages([{ name: "postgresql", shows: () => postgresBin() !== null }]);
installModules();
buildServer();
buildClient();
const environment = { ...process.env };
if (!given) {
  const cluster = await startCluster();
  const migrated = spawnSync(process.execPath, [join(ROOT, "dist/server/migrate.js")], {
    env: { ...environment, DATABASE_URL: cluster.ownerUrl, APPLICATION_ROLE: "handbreadth_app", APPLICATION_PASSWORD: cluster.appPassword }, stdio: ["ignore", 2, 2],
  });
  if (migrated.status !== 0) {
    say("The database could not be brought up to date: see above. Nothing was changed.");
    process.exit(1);
  }
  environment.DATABASE_URL = cluster.appUrl;
  environment.TABLES_READY = "1";
  environment.SESSION_SECRET ??= sessionSecret(cluster.folder);
}
// the database keeps running after Ctrl-C: a second start is quick, and nothing is lost if it is killed
const app = spawn(process.execPath, [join(ROOT, "dist/server/main.js")], { env: environment, stdio: "inherit" });
for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM"])) process.on(signal, () => app.kill(signal));
app.on("exit", (code) => process.exit(code ?? 0));
