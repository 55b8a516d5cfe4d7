import { createHash } from "node:crypto";
import { applyCommand } from "#core/layout/apply-command.ts";
import { readsAndWrites, rolesFor } from "#core/layout/command-access.ts";
import type { Command, Diff } from "#core/layout/commands.ts";
import { itemOf } from "#core/layout/diff.ts";
import type { Db } from "../../database/connection.ts";
import { HttpFault, notFound } from "../../http/fault.ts";
import { findChange, findDocument, insertChange, listChangedSince, lockLayout, writeDiff } from "./layouts.repository.ts";

export interface GivenCommand {
  readonly buildId: string;
  readonly layoutId: string;
  readonly personId: string;
  readonly commandId: string;
  readonly base: number;
  readonly command: Command;
  readonly label: string;
}

export interface CommandAnswer {
  readonly seq: number;
  readonly diff: Diff;
  /** The same command had been taken before: this is its first answer. */
  readonly replay: boolean;
}

const keyReused = () => new HttpFault("key-reused", "This command id was already used for something else.");

/**
 * Takes one edit: all or nothing, in one transaction. Role and membership are read inside it; edits of one layout take turns on its row's lock; a repeated id gets
 * its first answer; a command conflicts only where something it reads or writes changed after the seq it was based on.
 */
export async function giveCommand(db: Db, given: GivenCommand): Promise<CommandAnswer> {
  const requestHash = createHash("sha256").update(JSON.stringify([given.layoutId, given.base, given.command])).digest("hex");
  return db.transaction().execute(async (tx) => {
    const member = await tx.selectFrom("membership").select("role").where("build_id", "=", given.buildId).where("person_id", "=", given.personId).forShare().executeTakeFirst();
    if (!member) throw notFound("build");
    const layout = await lockLayout(tx, given.buildId, given.layoutId);
    if (!layout) throw notFound("layout");

    const known = await findChange(tx, given.personId, given.commandId);
    if (known) {
      if (known.layout_id !== given.layoutId || known.request_hash !== requestHash) {
        throw keyReused();
      }
      return { seq: known.seq, diff: known.diff as unknown as Diff, replay: true };
    }

    const allowed = rolesFor(given.command);
    if (!allowed.includes(member.role)) throw new HttpFault("wrong-role", `A ${member.role} may not make this change: ${allowed.join(" or ")} may.`);
    if (layout.archived) throw new HttpFault("refused", "This layout is archived: take it out of the archive to change it.");
    if (given.base > layout.seq) throw new HttpFault("bad-input", "base: later than anything stored", { fields: [{ path: "base", message: `expected at most ${layout.seq}, found ${given.base}` }] });

    const document = await findDocument(tx, given.layoutId);
    if (given.base < layout.seq) {
      const changed = await listChangedSince(tx, given.layoutId, given.base);
      const collisions = readsAndWrites(given.command, document).filter((item) => changed.has(`${item.list}/${item.key}`));
      if (collisions.length > 0) {
        throw new HttpFault("conflict", "Somebody else changed this in the meantime.", {
          current: { seq: layout.seq, items: collisions.map((item) => ({ ...item, value: itemOf(document, item.list, item.key) })) },
        });
      }
    }
    const applied = applyCommand(document, given.command);
    if (!applied.ok) throw new HttpFault("refused", applied.reason, { fields: applied.fields ? [...applied.fields] : undefined });
    const seq = layout.seq + 1;
    await writeDiff(tx, given.layoutId, seq, given.personId, applied.diff, applied.layout);
    const inserted = await insertChange(tx, {
      layout_id: given.layoutId, seq, command_id: given.commandId, person_id: given.personId, label: given.label, kind: given.command.kind,
      command: JSON.stringify(given.command), request_hash: requestHash, diff: JSON.stringify(applied.diff),
    });
    if (!inserted) throw keyReused();
    return { seq, diff: applied.diff, replay: false };
  });
}
