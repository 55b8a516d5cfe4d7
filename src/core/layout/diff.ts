import { LISTS, SINGLETONS, type Diff, type ItemChange, type ListName, type SingletonName } from "./commands.ts";
import type { Layout } from "./schema.ts";

/** True for a name of one of the document's lists of keyed items. */
export const isList = (name: string): name is ListName => (LISTS as readonly string[]).includes(name);
/** True for a name of a part of the document that there is one of. */
export const isSingleton = (name: string): name is SingletonName => (SINGLETONS as readonly string[]).includes(name);

/** One keyed item or singleton as stored: the value, or null where it does not exist. "document" is name, notes and extra. */
export function itemOf(layout: Layout, list: string, key: string): unknown {
  if (isList(list)) return layout[list].find((item) => item.key === key) ?? null;
  if (list === "document") return layout.extra === undefined ? { name: layout.name, notes: layout.notes } : { name: layout.name, notes: layout.notes, extra: layout.extra };
  if (isSingleton(list)) return layout[list as Exclude<SingletonName, "document">];
  return null;
}

/** The layout with a diff's "after" values in place. Lists not named keep their identity (structural sharing). */
export function applyDiff(layout: Layout, diff: Diff): Layout {
  const next: Record<string, unknown> = { ...layout };
  const lists = new Map<ListName, { key: string }[]>();
  for (const change of diff) {
    if (isList(change.list)) {
      const items = lists.get(change.list) ?? [...(layout[change.list] as { key: string }[])];
      lists.set(change.list, items);
      const at = items.findIndex((item) => item.key === change.key);
      if (change.after === null || change.after === undefined) {
        if (at >= 0) items.splice(at, 1);
        continue;
      }
      const value = change.after as { key: string };
      const to = change.positionAfter ?? (at >= 0 ? at : items.length);
      if (at >= 0 && at === to) items[at] = value;
      else {
        if (at >= 0) items.splice(at, 1);
        items.splice(Math.min(to, items.length), 0, value);
      }
    } else if (change.list === "document") {
      const document = change.after as { name: string; notes: string; extra?: Record<string, unknown> };
      next["name"] = document.name;
      next["notes"] = document.notes;
      if (document.extra === undefined) delete next["extra"];
      else next["extra"] = document.extra;
    } else {
      next[change.list] = change.after;
    }
  }
  for (const [list, items] of lists) next[list] = items;
  return next as unknown as Layout;
}

/** The diff that takes a diff back: before and after exchanged, last change first. */
export function invertDiff(diff: Diff): ItemChange[] {
  return [...diff].reverse().map((change) => ({
    list: change.list, key: change.key, before: change.after, after: change.before,
    ...(change.positionBefore !== undefined || change.positionAfter !== undefined ? { positionBefore: change.positionAfter ?? null, positionAfter: change.positionBefore ?? null } : {}),
  }));
}

/** Equal as JSON, keys in any order. */
export function sameValue(a: unknown, b: unknown): boolean {
  if (Object.is(a, b)) return true;
  if (typeof a !== "object" || typeof b !== "object" || a === null || b === null) return a === b;
  if (Array.isArray(a) || Array.isArray(b)) {
    return Array.isArray(a) && Array.isArray(b) && a.length === b.length && a.every((value, i) => sameValue(value, b[i]));
  }
  const present = (o: object) => Object.entries(o).filter(([, value]) => value !== undefined);
  const left = present(a);
  const right = new Map(present(b));
  return left.length === right.size && left.every(([key, value]) => right.has(key) && sameValue(value, right.get(key)));
}
