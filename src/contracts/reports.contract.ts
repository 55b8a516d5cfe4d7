import { z } from "zod";
import { PAPER_NAMES } from "#core/drawing/paper.ts";
import { endpoint, EVERY_ROLE, id, members, anyone } from "./endpoint.ts";
import { at } from "./addresses.ts";

const layout = z.strictObject({ buildId: id, layoutId: id });

/** The whole report, or one section of it, in the shape of layout-file.md; computed once for each content. */
export const getReport = endpoint({
  ...at("getReport"), policy: members(...EVERY_ROLE), params: layout,
  query: z.strictObject({ section: z.enum(["gaps", "body", "mass", "spaces"]).optional() }),
  response: z.looseObject({ format: z.literal("handbreadth-report"), version: z.literal(1), layout: z.string(), seq: z.int(), contentHash: z.string() }),
});

export const sheetQuery = z.strictObject({
  paper: z.enum(PAPER_NAMES).default("A3"),
  /** One in this many (ISO 5455), or fit: the largest standard scale that fits. */
  scale: z.union([z.literal("fit"), z.coerce.number().refine((n) => [1, 2, 5, 10, 20, 50, 100].includes(n), "a standard scale: 1, 2, 5, 10, 20, 50, 100")]).default("fit"),
  units: z.enum(["mm", "in", "in-fraction"]).default("mm"),
  /** Station of the section, mm; the rear view where absent. */
  station: z.coerce.number().min(-100_000).max(100_000).optional(),
  datum: z.string().max(60).optional(),
});
export type SheetOptions = z.output<typeof sheetQuery>;
export const getSheet = endpoint({ ...at("getSheet"), policy: members(...EVERY_ROLE), params: layout, query: sheetQuery, response: z.unknown(), produces: "application/pdf" });
/** JSON Schema of the layout file. */
export const getLayoutSchema = endpoint({ ...at("getLayoutSchema"), policy: anyone, response: z.unknown(), produces: "application/json" });
