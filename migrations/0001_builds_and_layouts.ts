import { sql, type Kysely } from "kysely";

/** People, sign-ins, builds and their members; layouts as items and an append-only history; reports by content. */
export async function up(db: Kysely<unknown>): Promise<void> {
  const now = sql`now()`;
  const newId = sql`gen_random_uuid()`;
  await db.schema
    .createTable("person")
    .addColumn("id", "uuid", (c) => c.primaryKey().defaultTo(newId))
    .addColumn("email", "text", (c) => c.notNull().unique().check(sql`email = lower(email)`))
    .addColumn("name", "text", (c) => c.notNull())
    .addColumn("password_hash", "text", (c) => c.notNull())
    .addColumn("units", "text", (c) => c.notNull().defaultTo("mm").check(sql`units in ('mm', 'in', 'in-fraction')`))
    .addColumn("theme", "text", (c) => c.notNull().defaultTo("system").check(sql`theme in ('light', 'night', 'system')`))
    .addColumn("demo_role", "text")
    .addColumn("created_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .execute();
  await db.schema
    .createTable("sign_in")
    .addColumn("id", "uuid", (c) => c.primaryKey().defaultTo(newId))
    .addColumn("person_id", "uuid", (c) => c.notNull().references("person.id").onDelete("cascade"))
    .addColumn("created_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addColumn("last_seen_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addColumn("ended_at", "timestamptz")
    .execute();
  await db.schema.createIndex("sign_in_person").on("sign_in").column("person_id").execute();
  await db.schema
    .createTable("session")
    .addColumn("sid", "text", (c) => c.primaryKey())
    .addColumn("sess", "json", (c) => c.notNull())
    .addColumn("expire", "timestamptz", (c) => c.notNull())
    .execute();
  await db.schema.createIndex("session_expire").on("session").column("expire").execute();
  await db.schema
    .createTable("rate_limit")
    .addColumn("key", "text", (c) => c.primaryKey())
    .addColumn("points", "integer", (c) => c.notNull().defaultTo(0))
    .addColumn("expire", "bigint")
    .execute();
  await db.schema
    .createTable("build")
    .addColumn("id", "uuid", (c) => c.primaryKey().defaultTo(newId))
    .addColumn("name", "text", (c) => c.notNull())
    .addColumn("created_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .execute();
  await db.schema
    .createTable("membership")
    .addColumn("build_id", "uuid", (c) => c.notNull().references("build.id").onDelete("cascade"))
    .addColumn("person_id", "uuid", (c) => c.notNull().references("person.id").onDelete("cascade"))
    .addColumn("role", "text", (c) => c.notNull().check(sql`role in ('owner', 'designer', 'fabricator', 'viewer')`))
    .addColumn("since", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addPrimaryKeyConstraint("membership_pk", ["build_id", "person_id"])
    .execute();
  await db.schema.createIndex("membership_person").on("membership").column("person_id").execute();
  await db.schema
    .createTable("layout")
    .addColumn("id", "uuid", (c) => c.primaryKey().defaultTo(newId))
    .addColumn("build_id", "uuid", (c) => c.notNull().references("build.id").onDelete("cascade"))
    .addColumn("seq", "integer", (c) => c.notNull())
    .addColumn("archived", "boolean", (c) => c.notNull().defaultTo(false))
    .addColumn("created_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addColumn("updated_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addColumn("updated_by", "uuid", (c) => c.references("person.id").onDelete("set null"))
    .execute();
  await db.schema.createIndex("layout_build").on("layout").column("build_id").execute();
  await db.schema
    .createTable("layout_item")
    .addColumn("layout_id", "uuid", (c) => c.notNull().references("layout.id").onDelete("cascade"))
    .addColumn("list", "text", (c) => c.notNull())
    .addColumn("key", "text", (c) => c.notNull())
    .addColumn("position", "integer", (c) => c.notNull())
    .addColumn("body", "jsonb", (c) => c.notNull())
    .addColumn("seq", "integer", (c) => c.notNull())
    .addPrimaryKeyConstraint("layout_item_pk", ["layout_id", "list", "key"])
    .execute();
  await db.schema
    .createTable("layout_change")
    .addColumn("layout_id", "uuid", (c) => c.notNull().references("layout.id").onDelete("cascade"))
    .addColumn("seq", "integer", (c) => c.notNull())
    .addColumn("command_id", "uuid", (c) => c.notNull().unique())
    .addColumn("person_id", "uuid", (c) => c.references("person.id").onDelete("set null"))
    .addColumn("at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addColumn("label", "text", (c) => c.notNull())
    .addColumn("kind", "text", (c) => c.notNull())
    .addColumn("command", "jsonb", (c) => c.notNull())
    .addColumn("request_hash", "text", (c) => c.notNull())
    .addColumn("diff", "jsonb", (c) => c.notNull())
    .addPrimaryKeyConstraint("layout_change_pk", ["layout_id", "seq"])
    .execute();
  await db.schema
    .createTable("report")
    .addColumn("content_hash", "text", (c) => c.notNull())
    .addColumn("section", "text", (c) => c.notNull())
    .addColumn("core_version", "integer", (c) => c.notNull())
    .addColumn("body", "json", (c) => c.notNull())
    .addColumn("computed_at", "timestamptz", (c) => c.notNull().defaultTo(now))
    .addPrimaryKeyConstraint("report_pk", ["content_hash", "section", "core_version"])
    .execute();
}
