import { sql } from "kysely";
import type { Person } from "#contracts/sign-in.contract.ts";
import type { Db } from "../../database/connection.ts";

/** After this a sign-in ends, whatever happens; and after this without a request. */
export const ABSOLUTE_LIFETIME_HOURS = 24 * 14;
export const IDLE_LIFETIME_HOURS = 24 * 3;

const PERSON = ["person.id", "person.name", "person.email", "person.units", "person.theme"] as const;

export function findPerson(db: Db, id: string): Promise<Person | undefined> {
  return db.selectFrom("person").select(PERSON).where("id", "=", id).executeTakeFirst();
}

/** Demo members only where they may sign in: their password is known to everybody. */
export function findCredentials(db: Db, email: string, demoToo: boolean): Promise<(Person & { password_hash: string }) | undefined> {
  return db.selectFrom("person").select([...PERSON, "person.password_hash"]).where("email", "=", email.toLowerCase())
    .$if(!demoToo, (q) => q.where("demo_role", "is", null)).executeTakeFirst();
}

export function findDemoPerson(db: Db, email: string): Promise<Person | undefined> {
  return db.selectFrom("person").select(PERSON).where("email", "=", email.toLowerCase()).where("demo_role", "is not", null).executeTakeFirst();
}

export function listDemoPeople(db: Db): Promise<{ name: string; email: string; demo_role: string | null }[]> {
  return db.selectFrom("person").select(["name", "email", "demo_role"]).where("demo_role", "is not", null).orderBy("created_at").execute();
}

export async function insertSignIn(db: Db, personId: string): Promise<string> {
  const row = await db.insertInto("sign_in").values({ person_id: personId }).returning("id").executeTakeFirstOrThrow();
  return row.id;
}

const hoursAgo = (hours: number) => sql<Date>`now() - make_interval(hours => ${hours})`;

/** The person of a sign-in that is neither ended nor past its lifetimes, by the database's clock. */
export function findLiveSignIn(db: Db, signInId: string, demoToo: boolean): Promise<{ person_id: string; last_seen_at: Date } | undefined> {
  return db
    .selectFrom("sign_in")
    .innerJoin("person", "person.id", "sign_in.person_id")
    .select(["person_id", "last_seen_at"])
    .where("sign_in.id", "=", signInId)
    .$if(!demoToo, (q) => q.where("demo_role", "is", null))
    .where("ended_at", "is", null)
    .where("sign_in.created_at", ">", hoursAgo(ABSOLUTE_LIFETIME_HOURS))
    .where("last_seen_at", ">", hoursAgo(IDLE_LIFETIME_HOURS))
    .executeTakeFirst();
}

export async function touchSignIn(db: Db, signInId: string): Promise<void> {
  await db.updateTable("sign_in").set({ last_seen_at: sql<Date>`now()` }).where("id", "=", signInId).where("ended_at", "is", null).execute();
}

export async function endSignIn(db: Db, signInId: string): Promise<void> {
  await db.updateTable("sign_in").set({ ended_at: sql<Date>`now()` }).where("id", "=", signInId).where("ended_at", "is", null).execute();
}

export function updatePreferences(db: Db, id: string, changes: { units?: Person["units"] | undefined; theme?: Person["theme"] | undefined }): Promise<Person> {
  const set = Object.fromEntries(Object.entries(changes).filter(([, value]) => value !== undefined));
  const query = Object.keys(set).length > 0 ? db.updateTable("person").set(set).where("id", "=", id).returning(["id", "name", "email", "units", "theme"]) : db.selectFrom("person").select(PERSON).where("id", "=", id);
  return query.executeTakeFirstOrThrow() as Promise<Person>;
}
