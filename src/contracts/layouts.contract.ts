import { z } from "zod";
import { commandSchema, itemChangeSchema } from "#core/layout/commands.ts";
import { layoutSchema } from "#core/layout/schema.ts";
import { endpoint, EVERY_ROLE, id, members } from "./endpoint.ts";
import { at } from "./addresses.ts";

export const layoutSummarySchema = z.strictObject({ id, name: z.string(), seq: z.int(), archived: z.boolean(), updatedAt: z.iso.datetime(), updatedBy: z.string().nullable(), parts: z.int(), runs: z.int() });
export type LayoutSummary = z.output<typeof layoutSummarySchema>;

const build = z.strictObject({ buildId: id });
const layout = z.strictObject({ buildId: id, layoutId: id });
const name = z.string().trim().min(1).max(200);

export const listLayouts = endpoint({ ...at("listLayouts"), policy: members(...EVERY_ROLE), params: build, query: z.strictObject({ archived: z.enum(["yes", "no"]).optional() }), response: z.strictObject({ layouts: z.array(layoutSummarySchema) }) });
/** A new layout: empty on a plain chassis. */
export const createLayout = endpoint({ ...at("createLayout"), policy: members("owner"), params: build, body: z.strictObject({ name }), response: layoutSummarySchema });
/** Takes a layout file as it is; every fault is named with its path. */
export const importLayout = endpoint({ ...at("importLayout"), policy: members("owner"), params: build, body: layoutSchema, bodyAsText: true, bodyLimit: 20 * 1024 * 1024, response: layoutSummarySchema });
export const getLayout = endpoint({ ...at("getLayout"), policy: members(...EVERY_ROLE), params: layout, response: z.strictObject({ id, seq: z.int(), archived: z.boolean(), document: layoutSchema }) });
/** The layout file, as an attachment. */
export const exportLayout = endpoint({ ...at("exportLayout"), policy: members(...EVERY_ROLE), params: layout, response: layoutSchema, produces: "application/json" });
export const duplicateLayout = endpoint({ ...at("duplicateLayout"), policy: members("owner"), params: layout, body: z.strictObject({ name }), response: layoutSummarySchema });
export const archiveLayout = endpoint({ ...at("archiveLayout"), policy: members("owner"), params: layout, body: z.strictObject({ archived: z.boolean() }), response: layoutSummarySchema });

/** One edit. `commandId` makes a repeat harmless; `base` is the seq the author saw. Renaming a layout is the command that sets its document. */
export const postCommand = endpoint({
  ...at("postCommand"), policy: members("owner", "designer", "fabricator"), params: layout, bodyLimit: 4 * 1024 * 1024,
  body: z.strictObject({ commandId: id, base: z.int().min(0).max(2_147_483_647), command: commandSchema, label: z.string().min(1).max(200) }),
  response: z.strictObject({ seq: z.int(), diff: z.array(itemChangeSchema), replay: z.boolean() }),
});

export const changeSchema = z.strictObject({ seq: z.int(), commandId: id, at: z.iso.datetime(), by: z.object({ id: id.nullable(), name: z.string() }), label: z.string(), kind: z.string(), items: z.array(z.object({ list: z.string(), key: z.string() })), diff: z.array(itemChangeSchema) });
export type Change = z.output<typeof changeSchema>;
/** Who changed what and when, newest first; `after` gives those later than a seq, oldest first, for catching up. */
export const listChanges = endpoint({ ...at("listChanges"), policy: members(...EVERY_ROLE), params: layout, query: z.strictObject({ before: z.coerce.number().int().min(-1).max(2_147_483_647).optional(), after: z.coerce.number().int().min(-1).max(2_147_483_647).optional(), limit: z.coerce.number().int().min(1).max(200).default(50) }), response: z.strictObject({ changes: z.array(changeSchema), more: z.boolean() }) });
