import pg from "pg";
import { pino } from "pino";
import { createApp } from "../../server/app.ts";
import { createPool, type Pool } from "../../server/compute/pool.ts";
import { connect, type Connection } from "../../server/database/connection.ts";
import { grantApplication, migrate } from "../../server/database/migrate.ts";
import { seedDemo } from "../../server/database/seed-demo.ts";
import type { Settings } from "../../server/settings.ts";
import type { Endpoint } from "#contracts/endpoint.ts";
import type { Express } from "express";

/** The cluster that `npm test` made for this run. Tests that need it fail with a sentence where it is not there. */
function clusterUrl(): string {
  const url = process.env["TEST_CLUSTER_URL"];
  if (!url) throw new Error("These tests need a database: run them with `npm test -- tests/server`");
  return url;
}

const APP_ROLE = "handbreadth_app";
const APP_PASSWORD = "only-for-tests";

export interface TestServer {
  readonly app: Express;
  readonly endpoints: readonly Endpoint[];
  readonly connection: Connection;
  readonly workers: Pool;
  readonly settings: Settings;
  close(): Promise<void>;
}

/** A database of its own for a test file, migrated, with the demo; and an application on it, under the role that cannot alter history. */
export async function startTestServer({ publicUrl = null, signInTries = 1000, client = null }: { publicUrl?: string | null; signInTries?: number; client?: string | null } = {}): Promise<TestServer> {
  const base = clusterUrl();
  const name = `t_${crypto.randomUUID().replaceAll("-", "")}`;
  const root = new pg.Client({ connectionString: base });
  await root.connect();
  await root.query(`create database ${name}`);
  await root.query(`do $$ begin create role ${APP_ROLE} login password '${APP_PASSWORD}'; exception when duplicate_object or unique_violation then null; end $$`);
  await root.end();
  const at = (user: string, password: string) => {
    const url = new URL(base);
    url.pathname = `/${name}`;
    url.username = user;
    url.password = password;
    return url.toString();
  };
  const owner = new URL(base);
  const ownerConnection = connect(at(owner.username, owner.password), () => undefined, 2);
  await migrate(ownerConnection.db);
  await grantApplication(ownerConnection.db, APP_ROLE);
  await seedDemo(ownerConnection.db);
  await ownerConnection.db.destroy();
  const connection = connect(at(APP_ROLE, APP_PASSWORD), () => undefined, 8);
  const workers = createPool(new URL("../../dist/server/worker.js", import.meta.url), 2);
  const settings: Settings = { databaseUrl: "", migrationUrl: "", sessionSecret: "a-secret-for-tests-that-is-long-enough", publicUrl, production: publicUrl !== null, port: 0 };
  const { app, endpoints } = createApp({ db: connection.db, pg: connection.pool, pool: workers, settings, log: pino({ level: "silent" }), client, signInTries });
  return {
    app, endpoints, connection, workers, settings,
    close: async () => {
      await workers.close();
      await connection.db.destroy();
    },
  };
}
