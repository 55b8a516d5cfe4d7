import pg from "pg";
import { connect } from "../../server/database/connection.ts";
import { grantApplication, migrate } from "../../server/database/migrate.ts";
import { seedDemo } from "../../server/database/seed-demo.ts";

export const TEMPLATE = "handbreadth_template";
export const APP_ROLE = "handbreadth_app";
export const APP_PASSWORD = "only-for-tests";

/** The address of another database of the same cluster, as its owner or as the application. */
export function addressOf(clusterUrl: string, database: string, as: "owner" | "application" = "owner"): string {
  const url = new URL(clusterUrl);
  url.pathname = `/${database}`;
  if (as === "application") {
    url.username = APP_ROLE;
    url.password = APP_PASSWORD;
  }
  return url.toString();
}

/** One statement as the cluster's owner, outside any transaction. */
export async function asOwner(clusterUrl: string, statement: string): Promise<void> {
  const client = new pg.Client({ connectionString: clusterUrl });
  await client.connect();
  await client.query(statement);
  await client.end();
}

/** The database that test files clone: migrated, with the demo in it, and the application's role. */
export async function makeTemplate(clusterUrl: string): Promise<void> {
  await asOwner(clusterUrl, `create role ${APP_ROLE} login password '${APP_PASSWORD}'`);
  await asOwner(clusterUrl, `create database ${TEMPLATE}`);
  const { db } = connect(addressOf(clusterUrl, TEMPLATE), () => undefined, 2);
  await migrate(db);
  await grantApplication(db, APP_ROLE);
  await seedDemo(db);
  await db.destroy();
}
