import { sql } from "kysely";
import type { Role } from "#core/layout/commands.ts";
import type { Build } from "#contracts/builds.contract.ts";
import type { Db } from "../../database/connection.ts";

function builds(db: Db, personId: string) {
  return db
    .selectFrom("build")
    .innerJoin("membership", "membership.build_id", "build.id")
    .where("membership.person_id", "=", personId)
    .select(["build.id", "build.name", "membership.role", "build.created_at"])
    .select((e) => [
      e.selectFrom("layout").whereRef("layout.build_id", "=", "build.id").where("archived", "=", false).select(sql<number>`count(*)::int`.as("n")).as("layouts"),
      e.selectFrom("membership as m").whereRef("m.build_id", "=", "build.id").select(sql<number>`count(*)::int`.as("n")).as("members"),
      e.selectFrom("layout").whereRef("layout.build_id", "=", "build.id").select(sql<Date | null>`max(updated_at)`.as("t")).as("touched"),
    ]);
}
type Row = { id: string; name: string; role: Role; created_at: Date; layouts: number | null; members: number | null; touched: Date | null };
const toBuild = (row: Row): Build => ({ id: row.id, name: row.name, role: row.role, createdAt: row.created_at.toISOString(), layouts: row.layouts ?? 0, members: row.members ?? 0, updatedAt: (row.touched ?? row.created_at).toISOString() });

export async function listBuilds(db: Db, personId: string): Promise<Build[]> {
  return (await builds(db, personId).orderBy("build.created_at", "desc").execute()).map(toBuild);
}

export async function findBuild(db: Db, personId: string, buildId: string): Promise<Build | undefined> {
  const row = await builds(db, personId).where("build.id", "=", buildId).executeTakeFirst();
  return row && toBuild(row);
}

export async function insertBuild(db: Db, name: string, ownerId: string): Promise<string> {
  const { id } = await db.insertInto("build").values({ name }).returning("id").executeTakeFirstOrThrow();
  await insertMember(db, id, ownerId, "owner");
  return id;
}

export async function insertMember(db: Db, buildId: string, personId: string, role: Role): Promise<void> {
  await db.insertInto("membership").values({ build_id: buildId, person_id: personId, role }).execute();
}

export async function updateBuildName(db: Db, buildId: string, name: string): Promise<void> {
  await db.updateTable("build").set({ name }).where("id", "=", buildId).execute();
}

export async function deleteBuild(db: Db, buildId: string): Promise<void> {
  await db.deleteFrom("build").where("id", "=", buildId).execute();
}

export async function listMembers(db: Db, buildId: string) {
  const rows = await db.selectFrom("membership").innerJoin("person", "person.id", "membership.person_id").where("build_id", "=", buildId).select(["person.id", "person.name", "person.email", "role", "since"]).orderBy("since").orderBy("person.name").execute();
  return rows.map((row) => ({ personId: row.id, name: row.name, email: row.email, role: row.role, since: row.since.toISOString() }));
}
