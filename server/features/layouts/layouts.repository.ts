import { sql } from "kysely";
import { LISTS, SINGLETONS, type Diff } from "#core/layout/commands.ts";
import { isList, itemOf } from "#core/layout/diff.ts";
import { layoutSchema, type Layout } from "#core/layout/schema.ts";
import type { LayoutSummary } from "#contracts/layouts.contract.ts";
import type { Db } from "../../database/connection.ts";

function summaries(db: Db, buildId: string) {
  return db
    .selectFrom("layout")
    .leftJoin("person", "person.id", "layout.updated_by")
    .where("layout.build_id", "=", buildId)
    .select(["layout.id", "layout.seq", "layout.archived", "layout.updated_at", "person.name as updated_by_name"])
    .select((e) => [
      e.selectFrom("layout_item").whereRef("layout_id", "=", "layout.id").where("list", "=", "document").select(sql<string>`body->>'name'`.as("n")).as("name"),
      e.selectFrom("layout_item").whereRef("layout_id", "=", "layout.id").where("list", "=", "parts").select(sql<number>`count(*)::int`.as("n")).as("parts"),
      e.selectFrom("layout_item").whereRef("layout_id", "=", "layout.id").where("list", "=", "runs").select(sql<number>`count(*)::int`.as("n")).as("runs"),
    ]);
}
type Row = Awaited<ReturnType<ReturnType<typeof summaries>["execute"]>>[number];
const toSummary = (row: Row): LayoutSummary => ({ id: row.id, name: row.name ?? "", seq: row.seq, archived: row.archived, updatedAt: row.updated_at.toISOString(), updatedBy: row.updated_by_name, parts: row.parts ?? 0, runs: row.runs ?? 0 });

export async function listLayouts(db: Db, buildId: string, archived: boolean): Promise<LayoutSummary[]> {
  return (await summaries(db, buildId).where("layout.archived", "=", archived).orderBy("layout.updated_at", "desc").execute()).map(toSummary);
}

export async function findSummary(db: Db, buildId: string, layoutId: string): Promise<LayoutSummary | undefined> {
  const row = await summaries(db, buildId).where("layout.id", "=", layoutId).executeTakeFirst();
  return row && toSummary(row);
}

/** The layout's row, locked for this transaction: edits of one layout take turns. */
export function lockLayout(db: Db, buildId: string, layoutId: string): Promise<{ id: string; seq: number; archived: boolean } | undefined> {
  return db.selectFrom("layout").select(["id", "seq", "archived"]).where("id", "=", layoutId).where("build_id", "=", buildId).forUpdate().executeTakeFirst();
}

export function findLayoutRow(db: Db, buildId: string, layoutId: string): Promise<{ id: string; seq: number; archived: boolean } | undefined> {
  return db.selectFrom("layout").select(["id", "seq", "archived"]).where("id", "=", layoutId).where("build_id", "=", buildId).executeTakeFirst();
}

/** Items back to a document: lists by position, singletons by name. */
export async function findDocument(db: Db, layoutId: string): Promise<Layout> {
  const rows = await db.selectFrom("layout_item").select(["list", "body"]).where("layout_id", "=", layoutId).orderBy("list").orderBy("position").orderBy("key").execute();
  const lists: Record<string, unknown[]> = Object.fromEntries(LISTS.map((list) => [list, []]));
  const singles: Record<string, unknown> = {};
  for (const row of rows) {
    if (isList(row.list)) lists[row.list]!.push(row.body);
    else singles[row.list] = row.body;
  }
  const { document, ...rest } = singles;
  return layoutSchema.parse({ format: "handbreadth-layout", version: 1, ...(document as object), ...rest, ...lists });
}

export async function insertLayout(db: Db, buildId: string, personId: string | null, layout: Layout): Promise<string> {
  const { id } = await db.insertInto("layout").values({ build_id: buildId, seq: 0, updated_by: personId }).returning("id").executeTakeFirstOrThrow();
  const items = [
    ...SINGLETONS.map((name) => ({ list: name as string, key: name as string, position: 0, body: itemOf(layout, name, name) })),
    ...LISTS.flatMap((list) => layout[list].map((item, position) => ({ list: list as string, key: item.key, position, body: item as unknown }))),
  ].map((item) => ({ ...item, body: JSON.stringify(item.body), layout_id: id, seq: 0 }));
  for (let i = 0; i < items.length; i += 500) await db.insertInto("layout_item").values(items.slice(i, i + 500)).execute();
  return id;
}

export async function updateArchived(db: Db, layoutId: string, archived: boolean): Promise<void> {
  await db.updateTable("layout").set({ archived, updated_at: new Date() }).where("id", "=", layoutId).execute();
}

/** Writes a diff: each item's row, positions of its list where they moved, the layout's seq. */
export async function writeDiff(db: Db, layoutId: string, seq: number, personId: string, diff: Diff, after: Layout): Promise<void> {
  const movedLists = new Set<string>();
  for (const change of diff) {
    if (change.after === null || change.after === undefined) {
      await db.deleteFrom("layout_item").where("layout_id", "=", layoutId).where("list", "=", change.list).where("key", "=", change.key).execute();
    } else {
      const row = { layout_id: layoutId, list: change.list, key: change.key, position: change.positionAfter ?? 0, body: JSON.stringify(change.after), seq };
      await db.insertInto("layout_item").values(row).onConflict((c) => c.columns(["layout_id", "list", "key"]).doUpdateSet({ body: row.body, position: row.position, seq })).execute();
    }
    if (isList(change.list) && change.positionBefore !== change.positionAfter) movedLists.add(change.list);
  }
  for (const list of movedLists) {
    if (!isList(list)) continue;
    const keys = after[list].map((item) => item.key);
    await sql`update layout_item set position = t.position - 1 from unnest(${keys}::text[]) with ordinality as t(key, position)
      where layout_item.layout_id = ${layoutId} and layout_item.list = ${list} and layout_item.key = t.key`.execute(db);
  }
  await db.updateTable("layout").set({ seq, updated_at: new Date(), updated_by: personId }).where("id", "=", layoutId).execute();
}

/** Items among some names that changed after a seq; removed ones too, from the history. */
export async function listChangedSince(db: Db, layoutId: string, base: number): Promise<Set<string>> {
  const { rows } = await sql<{ list: string; key: string }>`select distinct c->>'list' as list, c->>'key' as key from layout_change, jsonb_array_elements(diff) as c
    where layout_id = ${layoutId} and seq > ${base}`.execute(db);
  return new Set(rows.map((row) => `${row.list}/${row.key}`));
}

export interface NewChange {
  readonly layout_id: string;
  readonly seq: number;
  readonly command_id: string;
  readonly person_id: string;
  readonly label: string;
  readonly kind: string;
  readonly command: string;
  readonly request_hash: string;
  readonly diff: string;
}

/** @returns false where this person's command id was taken at the same moment for another layout */
export async function insertChange(db: Db, change: NewChange): Promise<boolean> {
  const { numInsertedOrUpdatedRows } = await db.insertInto("layout_change").values(change).onConflict((c) => c.columns(["person_id", "command_id"]).doNothing()).executeTakeFirst();
  return numInsertedOrUpdatedRows === 1n;
}

/** A person's command as it was first taken. */
export function findChange(db: Db, personId: string, commandId: string) {
  return db.selectFrom("layout_change").select(["layout_id", "seq", "request_hash", "diff"]).where("person_id", "=", personId).where("command_id", "=", commandId).executeTakeFirst();
}

export async function listChanges(db: Db, layoutId: string, where: { before?: number | undefined; after?: number | undefined; limit: number }) {
  let query = db.selectFrom("layout_change").leftJoin("person", "person.id", "layout_change.person_id").where("layout_id", "=", layoutId)
    .select(["layout_change.seq", "command_id", "at", "label", "kind", "diff", "person.id as person_id", "person.name"]).limit(where.limit + 1);
  query = where.after !== undefined ? query.where("layout_change.seq", ">", where.after).orderBy("layout_change.seq", "asc") : query.orderBy("layout_change.seq", "desc");
  if (where.before !== undefined) query = query.where("layout_change.seq", "<", where.before);
  const rows = await query.execute();
  return { rows: rows.slice(0, where.limit), more: rows.length > where.limit };
}
