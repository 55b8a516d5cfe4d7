import { cpus } from "node:os";
import { pino } from "pino";
import { createApp } from "./app.ts";
import { createPool } from "./compute/pool.ts";
import { connect } from "./database/connection.ts";
import { migrate } from "./database/migrate.ts";
import { DEMO_PASSWORD, DEMO_PEOPLE, seedDemo } from "./database/seed-demo.ts";
import { readSettings, type Settings } from "./settings.ts";

/** Starts one application process: settings, tables, demo (never in production), then the address. Ends cleanly on SIGTERM and SIGINT. */
function settingsOrEnd(): Settings {
  try {
    return readSettings(process.env);
  } catch (error) {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    process.exit(2);
  }
}

const settings = settingsOrEnd();
const log = pino({ level: process.env["LOG_LEVEL"] ?? (settings.production ? "info" : "warn"), redact: ["req.headers.cookie", "req.headers.authorization"] }, pino.destination(2));
// the tables are brought up here only where no separate set-up did it with a role of its own
if (process.env["TABLES_READY"] !== "1") {
  const owner = connect(settings.migrationUrl, (line) => log.warn(line), 2);
  await migrate(owner.db);
  await owner.db.destroy();
}
const { db, pool } = connect(settings.databaseUrl, (line) => log.warn(line));
if (!settings.production) await seedDemo(db);
const workers = createPool(new URL("./worker.js", import.meta.url), Math.max(2, cpus().length - 1));
const { app } = createApp({ db, pg: pool, pool: workers, settings, log, client: new URL("../client", import.meta.url).pathname });

const server = app.listen(settings.port, "127.0.0.1", (error?: Error) => {
  if (error) {
    process.stderr.write(`Cannot listen on port ${settings.port}: ${error.message}. Set PORT to another.\n`);
    process.exit(1);
  }
  const address = server.address();
  const port = typeof address === "object" && address ? address.port : settings.port;
  const lines = [`Handbreadth is at ${settings.publicUrl ?? `http://127.0.0.1:${port}`}`];
  if (!settings.production) lines.push("Demo sign-ins (click one on the page, or type):", ...DEMO_PEOPLE.map((p) => `  ${p.role.padEnd(10)} ${p.email}`), `  password   ${DEMO_PASSWORD}`);
  process.stdout.write(`${lines.join("\n")}\n`);
  process.send?.({ listening: port });
});
server.requestTimeout = 60_000;

let ending = false;
for (const signal of ["SIGTERM", "SIGINT"] as const) {
  process.on(signal, () => {
    if (ending) return;
    ending = true;
    server.close();
    setTimeout(() => server.closeAllConnections(), 2_000).unref();
    void Promise.all([workers.close(), new Promise((resolve) => server.on("close", resolve))]).then(() => db.destroy()).finally(() => process.exit(0));
  });
}
