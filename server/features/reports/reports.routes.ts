import { createHash } from "node:crypto";
import * as contract from "#contracts/reports.contract.ts";
import { canonicalText } from "#core/layout/export-layout.ts";
import { layoutJsonSchema } from "#core/layout/json-schema.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { SheetReport } from "#core/drawing/sheet-tables.ts";
import { CORE_VERSION, SECTIONS, type Section } from "#core/reports.ts";
import type { SheetAnswer } from "../../compute/job.ts";
import type { Pool } from "../../compute/pool.ts";
import type { Db } from "../../database/connection.ts";
import { HttpFault, notFound } from "../../http/fault.ts";
import { mount, SENT, type Mounted } from "../../http/mount.ts";
import { findDocument, findLayoutRow } from "../layouts/layouts.repository.ts";

export function mountReports(mounted: Mounted, db: Db, pool: Pool): void {
  const load = async (buildId: string, layoutId: string) => {
    const row = await findLayoutRow(db, buildId, layoutId);
    if (!row) throw notFound("layout");
    const document = await findDocument(db, layoutId);
    return { row, document, contentHash: createHash("sha256").update(canonicalText(document)).digest("hex") };
  };

  /** A section as kept, or computed in a worker and kept. */
  const sectionOf = async (document: Layout, contentHash: string, section: Section): Promise<unknown> => {
    const kept = await db.selectFrom("report").select("body").where("content_hash", "=", contentHash).where("section", "=", section).where("core_version", "=", CORE_VERSION).executeTakeFirst();
    if (kept) return kept.body;
    const body = await pool.run<object>({ kind: "report", layout: document, section });
    await db.insertInto("report").values({ content_hash: contentHash, section, core_version: CORE_VERSION, body: JSON.stringify(body) }).onConflict((c) => c.doNothing()).execute();
    return body;
  };

  mount(mounted, contract.getReport, async ({ params, query }) => {
    const { row, document, contentHash } = await load(params.buildId, params.layoutId);
    const wanted: readonly Section[] = query.section ? [query.section] : SECTIONS;
    const bodies = await Promise.all(wanted.map((section) => sectionOf(document, contentHash, section)));
    const sections = Object.assign({}, ...wanted.map((section, i) => (section === "gaps" ? (bodies[i] as object) : { [section]: bodies[i] })));
    return { format: "handbreadth-report" as const, version: 1 as const, layout: document.name, seq: row.seq, contentHash, ...sections };
  });

  mount(mounted, contract.getSheet, async ({ params, query, personId, response }) => {
    const { row, document, contentHash } = await load(params.buildId, params.layoutId);
    const [gaps, body, mass, spaces] = await Promise.all(SECTIONS.map((section) => sectionOf(document, contentHash, section)));
    const build = await db.selectFrom("build").select("name").where("id", "=", params.buildId).executeTakeFirstOrThrow();
    const person = await db.selectFrom("person").select("name").where("id", "=", personId).executeTakeFirstOrThrow();
    const now = new Date();
    const info = { owner: build.name, number: `${build.name.slice(0, 3).toUpperCase()}-GA-${row.seq}`, date: now.toISOString().slice(0, 10), creator: person.name, revision: "working copy", documentType: "general arrangement" };
    const answer = await pool.run<SheetAnswer>({ kind: "sheet", layout: document, report: { ...(gaps as object), body, mass, spaces } as SheetReport, options: query, info, created: now });
    if (!answer.ok) throw new HttpFault("bad-input", answer.message, { fields: [{ path: `query.${answer.field}`, message: answer.message }] });
    response.setHeader("Content-Disposition", `inline; filename="${info.number.toLowerCase().replace(/[^a-z0-9-]+/g, "-")}.pdf"`);
    response.type("application/pdf").send(Buffer.from(answer.pdf));
    return SENT;
  });

  mount(mounted, contract.getLayoutSchema, ({ response }) => {
    response.type("application/schema+json").send(JSON.stringify(layoutJsonSchema(), null, 2));
    return Promise.resolve(SENT);
  });
}
