import { type Kysely } from "kysely";

/** A command's id belongs to the person who made it up: the same id from somebody else is another command. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await db.schema.alterTable("layout_change").dropConstraint("layout_change_command_id_key").execute();
  await db.schema.alterTable("layout_change").addUniqueConstraint("layout_change_command_by_person", ["person_id", "command_id"]).execute();
}
