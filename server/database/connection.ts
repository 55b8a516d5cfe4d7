import { Kysely, PostgresDialect } from "kysely";
import pg from "pg";
import type { Database } from "./database.ts";

export type Db = Kysely<Database>;
export interface Connection {
  readonly db: Db;
  readonly pool: pg.Pool;
}

/** A pool that never waits for ever: statements, locks, idle transactions and connections all have limits; a lost idle client is not the end. */
export function connect(url: string, log: (message: string) => void, max = 10): Connection {
  const pool = new pg.Pool({
    connectionString: url, max, connectionTimeoutMillis: 5_000, idleTimeoutMillis: 30_000, statement_timeout: 10_000, lock_timeout: 5_000,
    idle_in_transaction_session_timeout: 15_000, application_name: "handbreadth",
  });
  pool.on("error", (error) => log(`database connection lost: ${error.message}`));
  // one that is lost while it is lent out tells only its client; without a listener that would end the process. The query itself rejects too.
  pool.on("connect", (client) => client.on("error", (error) => log(`database connection lost in use: ${error.message}`)));
  return { db: new Kysely<Database>({ dialect: new PostgresDialect({ pool }) }), pool };
}

/** PostgreSQL is away or too busy: to be answered with 503, not 500. */
export function isDatabaseAway(error: unknown): boolean {
  const { code, message } = (error ?? {}) as { code?: string; message?: string };
  if (code !== undefined && (/^(ECONN|EPIPE|ETIMEDOUT|ENOTFOUND|EHOSTUNREACH)/.test(code) || /^(08|57P|53)/.test(code))) return true;
  return typeof message === "string" && /timeout exceeded when trying to connect|Connection terminated|connection timeout|not queryable|Cannot use a pool after calling end/i.test(message);
}

/** A statement was stopped for taking too long, or lost a race that a retry may win. */
export const isContention = (error: unknown): boolean => ["57014", "55P03", "40001", "40P01", "25P03"].includes((error as { code?: string } | null)?.code ?? "");
