import { Migrator, sql, type Kysely, type Migration } from "kysely";
import type { Database } from "./database.ts";

const files = import.meta.glob<Migration>("../../migrations/*.ts", { eager: true });

/** Brings the tables to this version; waits for another migrator; tries again while a lock is busy. */
export async function migrate(db: Kysely<Database>): Promise<string[]> {
  const migrations = Object.fromEntries(Object.entries(files).map(([path, migration]) => [path.split("/").pop()!.replace(/\.ts$/, ""), migration]));
  const migrator = new Migrator({ db, provider: { getMigrations: () => Promise.resolve(migrations) } });
  for (let attempt = 1; ; attempt++) {
    const { error, results } = await migrator.migrateToLatest();
    if (!error) return (results ?? []).filter((r) => r.status === "Success").map((r) => r.migrationName);
    const busy = (error as { code?: string }).code === "55P03";
    if (!busy || attempt >= 10) throw error;
    await new Promise((resolve) => setTimeout(resolve, 500 * attempt));
  }
}

/** What the application's own role may do: everything but altering or removing history. */
export async function grantApplication(db: Kysely<Database>, role: string): Promise<void> {
  const name = sql.id(role);
  await sql`grant usage on schema public to ${name}`.execute(db);
  await sql`grant select, insert, update, delete on all tables in schema public to ${name}`.execute(db);
  await sql`revoke update, delete, truncate on layout_change from ${name}`.execute(db);
  await sql`revoke insert, update, delete on kysely_migration, kysely_migration_lock from ${name}`.execute(db);
}
