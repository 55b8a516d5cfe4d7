import * as contract from "#contracts/layouts.contract.ts";
import { exportLayout } from "#core/layout/export-layout.ts";
import { emptyLayout } from "#core/layout/new-layout.ts";
import type { ParsedLayout } from "#core/layout/parse-layout.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { Pool } from "../../compute/pool.ts";
import type { Db } from "../../database/connection.ts";
import { HttpFault, notFound } from "../../http/fault.ts";
import { mount, SENT, type Context, type Mounted } from "../../http/mount.ts";
import { giveCommand } from "./give-command.ts";
import * as layouts from "./layouts.repository.ts";

type Creating = Pick<Context<{ buildId: string }, unknown, unknown>, "params" | "personId" | "write">;

export function mountLayouts(mounted: Mounted, db: Db, pool: Pool): void {
  const summary = async (buildId: string, layoutId: string) => {
    const found = await layouts.findSummary(db, buildId, layoutId);
    if (!found) throw notFound("layout");
    return found;
  };
  const row = async (from: Db, buildId: string, layoutId: string) => {
    const found = await layouts.findLayoutRow(from, buildId, layoutId);
    if (!found) throw notFound("layout");
    return found;
  };
  const create = async ({ params, personId, write }: Creating, layout: Layout) =>
    summary(params.buildId, await write((tx) => layouts.insertLayout(tx, params.buildId, personId, layout)));

  mount(mounted, contract.listLayouts, async ({ params, query }) => ({ layouts: await layouts.listLayouts(db, params.buildId, query.archived === "yes") }));
  mount(mounted, contract.createLayout, (context) => create(context, emptyLayout(context.body.name)));
  mount(mounted, contract.importLayout, async (context) => {
    const parsed = await pool.run<ParsedLayout>({ kind: "parse", text: typeof context.body === "string" ? (context.body as string) : "" });
    if (!parsed.ok) throw new HttpFault("bad-input", parsed.faults.length === 1 ? `${parsed.faults[0]!.path}: ${parsed.faults[0]!.message}` : `The file has ${parsed.faults.length} faults.`, { fields: [...parsed.faults] });
    return create(context, parsed.layout);
  });
  mount(mounted, contract.getLayout, async ({ params }) =>
    db.transaction().setIsolationLevel("repeatable read").execute(async (tx) => {
      const found = await layouts.findLayoutRow(tx, params.buildId, params.layoutId);
      if (!found) throw notFound("layout");
      return { ...found, document: await layouts.findDocument(tx, params.layoutId) };
    }));
  mount(mounted, contract.exportLayout, async ({ params, response }) => {
    await row(db, params.buildId, params.layoutId);
    const document = await layouts.findDocument(db, params.layoutId);
    const name = document.name.toLowerCase().replace(/[^a-z0-9]+/g, "-").replace(/^-|-$/g, "").slice(0, 60) || "layout";
    response.setHeader("Content-Disposition", `attachment; filename="${name}.layout.json"`);
    response.type("application/json").send(exportLayout(document));
    return SENT;
  });
  mount(mounted, contract.duplicateLayout, async (context) => {
    const { params, body } = context;
    await row(db, params.buildId, params.layoutId);
    const document = await layouts.findDocument(db, params.layoutId);
    return create(context, { ...document, name: body.name });
  });
  mount(mounted, contract.archiveLayout, async ({ params, body, write }) => {
    await write(async (tx) => {
      await row(tx, params.buildId, params.layoutId);
      await layouts.updateArchived(tx, params.layoutId, body.archived);
    });
    return summary(params.buildId, params.layoutId);
  });
  mount(mounted, contract.postCommand, async ({ params, personId, body }) => {
    const { seq, diff, replay } = await giveCommand(db, { ...params, personId, ...body });
    return { seq, diff: [...diff], replay };
  });
  mount(mounted, contract.listChanges, async ({ params, query }) => {
    await row(db, params.buildId, params.layoutId);
    const { rows, more } = await layouts.listChanges(db, params.layoutId, query);
    return {
      more,
      changes: rows.map((r) => {
        const diff = r.diff as unknown as { list: "parts"; key: string; before: unknown; after: unknown }[];
        return { seq: r.seq, commandId: r.command_id, at: r.at.toISOString(), by: { id: r.person_id, name: r.name ?? "somebody who has left" }, label: r.label, kind: r.kind, items: diff.map(({ list, key }) => ({ list, key })), diff };
      }),
    };
  });
}
