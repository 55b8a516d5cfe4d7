import type { ColumnType, Generated, JSONColumnType } from "kysely";

type Json<T> = JSONColumnType<T & object, string, string>;
type Stamp = ColumnType<Date, never, never>;

/** Tables as the application sees them; migrations/ makes them. */
export interface Database {
  person: { id: Generated<string>; email: string; name: string; password_hash: string; units: Generated<"mm" | "in" | "in-fraction">; theme: Generated<"light" | "night" | "system">; demo_role: string | null; created_at: Stamp };
  sign_in: { id: Generated<string>; person_id: string; created_at: Stamp; last_seen_at: ColumnType<Date, never, Date>; ended_at: ColumnType<Date | null, never, Date> };
  build: { id: Generated<string>; name: string; created_at: Stamp };
  membership: { build_id: string; person_id: string; role: "owner" | "designer" | "fabricator" | "viewer"; since: Stamp };
  layout: { id: Generated<string>; build_id: string; seq: number; archived: Generated<boolean>; created_at: Stamp; updated_at: ColumnType<Date, never, Date>; updated_by: string | null };
  layout_item: { layout_id: string; list: string; key: string; position: number; body: Json<unknown>; seq: number };
  layout_change: { layout_id: string; seq: number; command_id: string; person_id: string | null; at: Stamp; label: string; kind: string; command: Json<unknown>; request_hash: string; diff: Json<unknown> };
  report: { content_hash: string; section: string; core_version: number; body: Json<unknown>; computed_at: Stamp };
}
