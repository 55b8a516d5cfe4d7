import type { Contact } from "../layout/schema.ts";
import type { Thing } from "./things.ts";

/** Pairs that are meant to touch, by name both ways round. */
export type Contacts = ReadonlyMap<string, string>;

export function contactsOf(contacts: readonly Contact[]): Contacts {
  const map = new Map<string, string>();
  for (const contact of contacts) {
    const why = contact.why || "named as a contact";
    map.set(contact.between.join("|"), why);
    map.set([...contact.between].reverse().join("|"), why);
  }
  return map;
}

/** Why a pair is meant to touch, or null. */
export function trustOf(a: Thing, b: Thing, contacts: Contacts): string | null {
  const named = contacts.get(`${a.key}|${b.key}`);
  if (named !== undefined) return named;
  for (const [tyre, other] of [[a, b], [b, a]] as const) {
    if (!tyre.generated) continue;
    if (other.wheel === tyre.key) return "the shaft that drives this wheel";
    if (other.kind === "wheel" || other.kind === "brake" || other.kind === "suspension") return `${other.kind} of this wheel`;
  }
  return null;
}

/** Pairs that are never looked at: room against its own part or other room. */
export function neverChecked(a: Thing, b: Thing): boolean {
  if (a.is === "room" && b.is === "room") return true;
  return (a.is === "room" || b.is === "room") && a.owner === b.owner;
}
