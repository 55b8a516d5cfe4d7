import type { Role } from "#core/layout/commands.ts";
import { parseLayout } from "#core/layout/parse-layout.ts";
import { insertBuild, insertMember } from "../features/builds/builds.repository.ts";
import { insertLayout } from "../features/layouts/layouts.repository.ts";
import { hashPassword } from "../features/sign-in/passwords.ts";
import type { Db } from "./connection.ts";

/** Four invented members, one a role. Their password is known to everybody, so they never exist in production. */
export const DEMO_PASSWORD = "handbreadth-demo";
export const DEMO_PEOPLE: readonly { name: string; email: string; role: Role }[] = [
  { name: "Maren Built", email: "owner@example.test", role: "owner" },
  { name: "Ivo Skinner", email: "designer@example.test", role: "designer" },
  { name: "Tess Weld", email: "fabricator@example.test", role: "fabricator" },
  { name: "Olin Reader", email: "viewer@example.test", role: "viewer" },
];

const files = import.meta.glob<unknown>("../../examples/*.layout.json", { eager: true, import: "default" });
/** The demo build's layouts: the file names of examples, in this order; the first is what a newcomer sees. */
const DEMO_LAYOUTS = ["dunlin"];

/** The demo build, once: left alone where its owner already exists, whatever has become of it. */
export async function seedDemo(db: Db): Promise<boolean> {
  const known = await db.selectFrom("person").select("id").where("email", "=", DEMO_PEOPLE[0]!.email).executeTakeFirst();
  if (known) return false;
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  await db.transaction().execute(async (tx) => {
    const ids: string[] = [];
    for (const person of DEMO_PEOPLE) {
      const row = await tx.insertInto("person").values({ email: person.email, name: person.name, password_hash: passwordHash, demo_role: person.role }).returning("id").executeTakeFirstOrThrow();
      ids.push(row.id);
    }
    const buildId = await insertBuild(tx, "Dunlin", ids[0]!);
    for (let i = 1; i < ids.length; i++) await insertMember(tx, buildId, ids[i]!, DEMO_PEOPLE[i]!.role);
    for (const name of DEMO_LAYOUTS) {
      const parsed = parseLayout(files[`../../examples/${name}.layout.json`]);
      if (!parsed.ok) throw new Error(`examples/${name}.layout.json: ${parsed.faults.map((f) => `${f.path}: ${f.message}`).join("; ")}`);
      await insertLayout(tx, buildId, ids[0]!, parsed.layout);
    }
  });
  return true;
}
