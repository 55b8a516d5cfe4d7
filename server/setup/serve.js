// What `npm start` and `npm run dev` share: a database that is up to date, and the application's process on it.
import { spawn, spawnSync } from "node:child_process";
import { join } from "node:path";
import { buildServer } from "./build.js";
import { postgresBin, sessionSecret, startCluster } from "./cluster.js";
import { installModules, requireNode, requirePackages, ROOT } from "./install.js";
import { say } from "./say.js";

/**
 * Modules, database, server build and tables. DATABASE_URL given: that database is used as it is and no cluster is made.
 * @returns {Promise<NodeJS.ProcessEnv>} the environment to start the application with
 */
export async function makeReady() {
  requireNode();
  const given = process.env.DATABASE_URL;
  if (!given) requirePackages([{ name: "postgresql", shows: () => postgresBin() !== null }]);
  installModules();
  buildServer();
  if (given) return { ...process.env };
  const cluster = await startCluster().catch((/** @type {Error} */ error) => {
    say(error.message);
    process.exit(1);
  });
  const migrated = spawnSync(process.execPath, [join(ROOT, "dist/server/migrate.js")], {
    env: { ...process.env, MIGRATION_DATABASE_URL: cluster.ownerUrl, APPLICATION_ROLE: "handbreadth_app", APPLICATION_PASSWORD: cluster.appPassword }, stdio: ["ignore", 2, 2],
  });
  if (migrated.status !== 0) {
    say("The database could not be brought up to date: see above. Nothing was changed.");
    process.exit(1);
  }
  /** @type {NodeJS.ProcessEnv} */
  const environment = { ...process.env, DATABASE_URL: cluster.appUrl, TABLES_READY: "1" };
  // where it runs for others the secret is theirs to choose and keep
  if (!process.env.PUBLIC_URL && !process.env.SESSION_SECRET) environment.SESSION_SECRET = sessionSecret(cluster.folder);
  return environment;
}

/**
 * Starts the application; Ctrl-C stops it. The database keeps running: the next start is quick, and one that is killed loses nothing.
 * @param {NodeJS.ProcessEnv} environment
 */
export function serve(environment) {
  const app = spawn(process.execPath, [join(ROOT, "dist/server/main.js")], { env: environment, stdio: ["inherit", "inherit", "inherit", "ipc"] });
  for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM"])) process.on(signal, () => app.kill(signal));
  app.on("exit", (code) => process.exit(code ?? 1));
  return app;
}
