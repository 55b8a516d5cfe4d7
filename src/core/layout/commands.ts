import { z } from "zod";
import { mm, count } from "../units/quantities.ts";
import {
  airSchema, bodySchema, chassisSchema, contactSchema, eyeSchema, glassSchema, key, luggageSchema, partSchema, placement, rulesSchema,
  runSchema, shaftSchema, spaceSchema, PART_STATUSES,
} from "./schema.ts";

/**
 * Every change to a layout is a command: data, named in words, checked here, applied by `applyCommand` (apply-command.ts) to
 * the same result in the browser and on the server. A command yields a diff: before and after of each item it wrote.
 */

export const LISTS = ["parts", "runs", "spaces", "luggage", "glass", "eyes", "shafts"] as const;
export type ListName = (typeof LISTS)[number];
export const SINGLETONS = ["document", "chassis", "body", "air", "rules", "contacts"] as const;
export type SingletonName = (typeof SINGLETONS)[number];

export const ROLES = ["owner", "designer", "fabricator", "viewer"] as const;
export type Role = (typeof ROLES)[number];

export const itemSchemas = {
  parts: partSchema, runs: runSchema, spaces: spaceSchema, luggage: luggageSchema, glass: glassSchema, eyes: eyeSchema, shafts: shaftSchema,
} as const;
export const documentSchema = z.strictObject({ name: z.string().min(1).max(200), notes: z.string().max(20_000).default(""), extra: z.record(z.string(), z.unknown()).optional() });
export const singletonSchemas = {
  document: documentSchema, chassis: chassisSchema, body: bodySchema, air: airSchema, rules: rulesSchema, contacts: z.array(contactSchema).max(2000),
} as const;

const item = <K extends string>(kind: K) =>
  [
    z.strictObject({ kind: z.literal(kind), list: z.literal("parts"), item: partSchema }),
    z.strictObject({ kind: z.literal(kind), list: z.literal("runs"), item: runSchema }),
    z.strictObject({ kind: z.literal(kind), list: z.literal("spaces"), item: spaceSchema }),
    z.strictObject({ kind: z.literal(kind), list: z.literal("luggage"), item: luggageSchema }),
    z.strictObject({ kind: z.literal(kind), list: z.literal("glass"), item: glassSchema }),
    z.strictObject({ kind: z.literal(kind), list: z.literal("eyes"), item: eyeSchema }),
    z.strictObject({ kind: z.literal(kind), list: z.literal("shafts"), item: shaftSchema }),
  ] as const;
const singleton = <K extends SingletonName>(which: K) =>
  z.strictObject({ kind: z.literal("set"), which: z.literal(which), value: singletonSchemas[which] });

/** Before and after of one item; null where it does not exist. For a singleton, list and key are both its name. */
export const itemChangeSchema = z.strictObject({
  list: z.enum([...LISTS, ...SINGLETONS]), key,
  before: z.unknown(), after: z.unknown(),
  /** Place in its list before and after; absent for singletons. */
  positionBefore: count("place before", { max: 100_000 }).nullable().optional(), positionAfter: count("place after", { max: 100_000 }).nullable().optional(),
});
export type ItemChange = z.output<typeof itemChangeSchema>;
export type Diff = readonly ItemChange[];

const simpleCommand = z.union([
  z.discriminatedUnion("list", item("add")),
  z.discriminatedUnion("list", item("replace")),
  z.strictObject({ kind: z.literal("remove"), list: z.enum(LISTS), key }),
  z.strictObject({ kind: z.literal("reorder"), list: z.enum(LISTS), key, position: count("place in its list", { max: 100_000 }) }),
  z.strictObject({ kind: z.literal("rename"), list: z.enum(LISTS), key, to: key }),
  z.discriminatedUnion("which", [singleton("document"), singleton("chassis"), singleton("body"), singleton("air"), singleton("rules"), singleton("contacts")]),
  /** Moves whole items (parts with at, runs by every node not bound to a part that moves too, spaces, shafts, eyes, glass). */
  z.strictObject({ kind: z.literal("move"), items: z.array(z.strictObject({ list: z.enum(LISTS), key })).min(1).max(2000), by: z.tuple([mm("x"), mm("y"), mm("z")]) }),
  z.strictObject({ kind: z.literal("place"), key, at: placement.at, turn: placement.turn.optional() }),
  z.strictObject({ kind: z.literal("move-node"), run: key, node: key, at: z.tuple([mm("x"), mm("y"), mm("z")]) }),
  z.strictObject({ kind: z.literal("status"), key, status: z.enum(PART_STATUSES) }),
  z.strictObject({ kind: z.literal("restore"), changes: z.array(itemChangeSchema).min(1).max(5000) }),
]);
export const commandSchema = z.union([simpleCommand, z.strictObject({ kind: z.literal("together"), label: z.string().min(1).max(200), commands: z.array(simpleCommand).min(1).max(500) })]);

export type SimpleCommand = z.output<typeof simpleCommand>;
export type Command = z.output<typeof commandSchema>;
