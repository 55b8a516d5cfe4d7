import { sql } from "kysely";
import { connect } from "./connection.ts";
import { grantApplication, migrate } from "./migrate.ts";

/**
 * Migrates by hand or from set-up: MIGRATION_DATABASE_URL (or DATABASE_URL); with APPLICATION_ROLE and APPLICATION_PASSWORD it makes that role and
 * gives it its rights.
 */
const url = process.env["MIGRATION_DATABASE_URL"] ?? process.env["DATABASE_URL"];
if (!url) {
  process.stderr.write("DATABASE_URL is needed\n");
  process.exit(2);
}
const { db } = connect(url, (line) => process.stderr.write(`${line}\n`), 2);
const role = process.env["APPLICATION_ROLE"];
const password = process.env["APPLICATION_PASSWORD"];
if (role && password) {
  const known = await sql`select 1 from pg_roles where rolname = ${role}`.execute(db);
  if (known.rows.length === 0) await sql`create role ${sql.id(role)} login password ${sql.lit(password)}`.execute(db);
}
for (const name of await migrate(db)) process.stderr.write(`migrated ${name}\n`);
if (role) await grantApplication(db, role);
await db.destroy();
