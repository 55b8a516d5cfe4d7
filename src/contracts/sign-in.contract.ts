import { z } from "zod";
import { anyone, endpoint, id, signedIn } from "./endpoint.ts";
import { at } from "./addresses.ts";

export const personSchema = z.strictObject({ id, name: z.string(), email: z.string(), units: z.enum(["mm", "in", "in-fraction"]), theme: z.enum(["light", "night", "system"]) });
export type Person = z.output<typeof personSchema>;
/** Demo accounts offered on the sign-in page; empty in production. */
export const demoAccountSchema = z.strictObject({ name: z.string(), email: z.string(), role: z.string(), says: z.string() });

export const getMe = endpoint({ ...at("getMe"), policy: anyone, response: z.strictObject({ person: personSchema.nullable(), demo: z.array(demoAccountSchema), production: z.boolean() }) });
export const signIn = endpoint({ ...at("signIn"), policy: anyone, body: z.strictObject({ email: z.string().trim().min(3).max(254), password: z.string().min(1).max(200) }), response: z.strictObject({ person: personSchema }) });
/** Signs in as one of the demo members; 404 in production, where none exist. */
export const signInDemo = endpoint({ ...at("signInDemo"), policy: anyone, body: z.strictObject({ email: z.string().max(254) }), response: z.strictObject({ person: personSchema }) });
export const signOut = endpoint({ ...at("signOut"), policy: signedIn, response: z.strictObject({ signedOut: z.literal(true) }) });
export const setPreferences = endpoint({ ...at("setPreferences"), policy: signedIn, body: z.strictObject({ units: z.enum(["mm", "in", "in-fraction"]).optional(), theme: z.enum(["light", "night", "system"]).optional() }), response: personSchema });
