import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { cpus } from "node:os";
import { pino } from "pino";
import { createApp } from "./app.ts";
import { createPool } from "./compute/pool.ts";
import { connect } from "./database/connection.ts";
import { grantApplication, migrate } from "./database/migrate.ts";
import { DEMO_PASSWORD, DEMO_PEOPLE, seedDemo } from "./database/seed-demo.ts";
import { readSettings, USUAL_PORT, type Settings } from "./settings.ts";

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
/** Ends with one line, not a stack: what is wrong is outside, and the details are of no use to whoever starts this. */
const orEnd = (what: string) => (error: unknown): never => {
  process.stderr.write(`${what}: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
};

// the tables are brought up here only where no separate set-up did it with a role of its own
if (process.env["TABLES_READY"] !== "1") {
  const owner = connect(settings.migrationUrl, (line) => log.warn(line), 2);
  await migrate(owner.db).catch(orEnd("The database could not be brought up to date"));
  if (settings.migrationUrl !== settings.databaseUrl) await grantApplication(owner.db, decodeURIComponent(new URL(settings.databaseUrl).username)).catch(orEnd("The application's role could not be given its rights"));
  await owner.db.destroy();
}
const { db, pool } = connect(settings.databaseUrl, (line) => log.warn(line));
if (!settings.production) await seedDemo(db).catch(orEnd("The demo build could not be made"));
const workers = createPool(new URL("./worker.js", import.meta.url), Math.max(2, cpus().length - 1));
const { app } = createApp({ db, pg: pool, pool: workers, settings, log, client: new URL("../client", import.meta.url).pathname });

function says(server: Server): void {
  const { port } = server.address() as AddressInfo;
  const lines = [`Handbreadth is at ${settings.publicUrl ?? `http://127.0.0.1:${port}`}`];
  if (!settings.production) lines.push("Demo sign-ins (click one on the page, or type):", ...DEMO_PEOPLE.map((p) => `  ${p.role.padEnd(10)} ${p.email}`), `  password   ${DEMO_PASSWORD}`);
  process.stdout.write(`${lines.join("\n")}\n`);
  process.send?.({ listening: port });
}

function listen(port: number): Server {
  const server = createServer(app);
  // slow headers and bodies are cut; kept connections outlive a proxy's
  server.headersTimeout = 20_000;
  server.requestTimeout = 60_000;
  server.keepAliveTimeout = 75_000;
  server.once("error", (error: NodeJS.ErrnoException) => {
    if (error.code !== "EADDRINUSE" || settings.port !== null || port === 0) orEnd(`Cannot listen on port ${port} (set PORT to another)`)(error);
    log.warn(`port ${port} is taken: another is used`);
    current = listen(0);
  });
  server.listen(port, "127.0.0.1", () => says(server));
  return server;
}
let current = listen(settings.port ?? USUAL_PORT);

let ending = false;
for (const signal of ["SIGTERM", "SIGINT"] as const) {
  process.on(signal, () => {
    if (ending) return;
    ending = true;
    const closed = new Promise((resolve) => current.close(resolve));
    current.closeIdleConnections();
    setTimeout(() => current.closeAllConnections(), 5_000).unref();
    // requests under way get their answer before the workers and the database go
    void closed.then(() => workers.close()).then(() => db.destroy()).finally(() => process.exit(0));
  });
}
