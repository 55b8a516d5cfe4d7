import type { Contact } from "../layout/schema.ts";
import type { Thing } from "./things.ts";

/** Why a named contact is meant to touch, in the words of the file. */
export function reasonOf(contact: Contact): string {
  return contact.why || "named as a contact";
}

/** Why a pair that no contact names is meant to touch, or null: a generated tyre with its shaft, and with wheels, brakes and suspension. */
export function trustOf(a: Thing, b: Thing): string | null {
  return tyreTrust(a, b) ?? tyreTrust(b, a);
}

function tyreTrust(tyre: Thing, other: Thing): string | null {
  if (!tyre.generated) return null;
  if (other.wheel === tyre.key) return "the shaft that drives this wheel";
  if (other.is === "part" && (other.kind === "wheel" || other.kind === "brake" || other.kind === "suspension")) return `${other.kind}, which belongs to the wheel`;
  return null;
}

/** Pairs that are never looked at: room against its own part or other room. */
export function neverChecked(a: Thing, b: Thing): boolean {
  if (a.is !== "room" && b.is !== "room") return false;
  return a.is === b.is || a.owner === b.owner;
}
