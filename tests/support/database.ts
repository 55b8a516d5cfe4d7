import { inject } from "vitest";
import type { Express } from "express";
import { pino, type Logger } from "pino";
import type { Endpoint } from "#contracts/endpoint.ts";
import { createApp } from "../../server/app.ts";
import { createPool, type Pool } from "../../server/compute/pool.ts";
import { connect, type Connection } from "../../server/database/connection.ts";
import type { Settings } from "../../server/settings.ts";
import { addressOf, asOwner, TEMPLATE } from "./template.ts";

export interface TestServer {
  readonly app: Express;
  readonly endpoints: readonly Endpoint[];
  /** As the application sees the database: its role cannot alter history. */
  readonly connection: Connection;
  /** As the one who made the tables: to look, and to put things where no endpoint puts them. */
  readonly owner: Connection;
  readonly workers: Pool;
  readonly settings: Settings;
  close(): Promise<void>;
}

export interface TestServerOptions {
  readonly publicUrl?: string | null;
  readonly signInTries?: number;
  readonly client?: string | null;
  readonly log?: Logger;
  /** Put between the application and the database: the port of a proxy of the test's own. */
  readonly through?: number;
}

/** A database of its own for a test file, cloned from the migrated one with the demo in it; and an application on it, under the role that cannot alter history. */
export async function startTestServer({ publicUrl = null, signInTries = 1000, client = null, log = pino({ level: "silent" }), through }: TestServerOptions = {}): Promise<TestServer> {
  const cluster = inject("clusterUrl");
  const name = `t_${crypto.randomUUID().replaceAll("-", "")}`;
  await asOwner(cluster, `create database ${name} template ${TEMPLATE}`);
  const owner = connect(addressOf(cluster, name), () => undefined, 2);
  const address = new URL(addressOf(cluster, name, "application"));
  if (through !== undefined) address.port = String(through);
  const connection = connect(address.toString(), () => undefined, 8);
  const workers = createPool(new URL("../../dist/server/worker.js", import.meta.url), 2);
  const settings: Settings = { databaseUrl: address.toString(), migrationUrl: addressOf(cluster, name), sessionSecret: "a-secret-for-tests-that-is-long-enough", publicUrl, production: publicUrl !== null, port: null, proxies: publicUrl === null ? 0 : 1 };
  const { app, endpoints } = createApp({ db: connection.db, pg: connection.pool, pool: workers, settings, log, client, signInTries });
  return {
    app, endpoints, connection, owner, workers, settings,
    close: async () => {
      await workers.close();
      await connection.db.destroy();
      await owner.db.destroy();
      await asOwner(cluster, `drop database ${name} with (force)`);
    },
  };
}
