import { z } from "zod";
import { ROLES } from "#core/layout/commands.ts";
import { endpoint, EVERY_ROLE, id, members, signedIn } from "./endpoint.ts";
import { at } from "./addresses.ts";

export const roleSchema = z.enum(ROLES);
export const buildSchema = z.strictObject({ id, name: z.string(), role: roleSchema, createdAt: z.iso.datetime(), layouts: z.int(), members: z.int(), updatedAt: z.iso.datetime() });
export type Build = z.output<typeof buildSchema>;
export const memberSchema = z.strictObject({ personId: id, name: z.string(), email: z.string(), role: roleSchema, since: z.iso.datetime() });

const buildParams = z.strictObject({ buildId: id });
const name = z.string().trim().min(1).max(120);

export const listBuilds = endpoint({ ...at("listBuilds"), policy: signedIn, response: z.strictObject({ builds: z.array(buildSchema) }) });
export const createBuild = endpoint({ ...at("createBuild"), policy: signedIn, body: z.strictObject({ name }), response: buildSchema });
export const getBuild = endpoint({ ...at("getBuild"), policy: members(...EVERY_ROLE), params: buildParams, response: buildSchema });
export const renameBuild = endpoint({ ...at("renameBuild"), policy: members("owner"), params: buildParams, body: z.strictObject({ name }), response: buildSchema });
export const deleteBuild = endpoint({ ...at("deleteBuild"), policy: members("owner"), params: buildParams, response: z.strictObject({ deleted: z.literal(true) }) });
export const listMembers = endpoint({ ...at("listMembers"), policy: members(...EVERY_ROLE), params: buildParams, response: z.strictObject({ members: z.array(memberSchema) }) });
