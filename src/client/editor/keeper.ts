import { createStore, del, delMany, entries, set, setMany, type UseStore } from "idb-keyval";
import type { Waiting } from "./document-store.ts";

/** Keeps unsent commands somewhere that outlives the page. */
export interface Keeper {
  /** What earlier pages of this person left unsent for this layout, in the order it was given. */
  load(): Promise<readonly Waiting[]>;
  keep(one: Waiting): Promise<void>;
  /** Writes again what changed of commands that are kept. */
  update(waiting: readonly Waiting[]): Promise<void>;
  forget(commandIds: readonly string[]): Promise<void>;
}

interface Kept {
  readonly layoutId: string;
  readonly personId: string;
  /** The page that gave it: while that page lives, nobody else sends it. */
  readonly page: string;
  readonly order: number;
  readonly waiting: Waiting;
}

/**
 * Keeps unsent commands in IndexedDB: one entry a command, under the person and the layout, so that two pages of one browser never overwrite each other. What a page that
 * is gone has left is taken over by the next one; whether a page still lives is told by a lock that it holds.
 */
export function browserKeeper(layoutId: string, personId = ""): Keeper {
  let store: UseStore | null = null;
  const open = () => (store ??= createStore("handbreadth", "waiting"));
  const page = crypto.randomUUID();
  const lockName = (of: string) => `handbreadth-page-${of}`;
  if ("locks" in navigator) void navigator.locks.request(lockName(page), () => new Promise<void>(() => undefined));
  const kept = new Map<string, number>();
  let next = Date.now();
  const entry = (waiting: Waiting): Kept => {
    const order = kept.get(waiting.commandId) ?? (next = Math.max(next + 1, Date.now()));
    kept.set(waiting.commandId, order);
    return { layoutId, personId, page, order, waiting };
  };
  return {
    async load() {
      const living = "locks" in navigator ? new Set((await navigator.locks.query()).held?.map((lock) => lock.name)) : new Set<string>();
      const all = (await entries<string, Kept>(open())).map(([, value]) => value);
      const left = all.filter((one) => one.layoutId === layoutId && one.personId === personId && one.page !== page && !living.has(lockName(one.page))).sort((a, b) => a.order - b.order);
      for (const one of left) kept.set(one.waiting.commandId, one.order);
      if (left.length > 0) await setMany(left.map((one) => [one.waiting.commandId, entry(one.waiting)]), open());
      return left.map((one) => one.waiting);
    },
    keep: (one) => set(one.commandId, entry(one), open()),
    update: (waiting) => (waiting.length === 0 ? Promise.resolve() : setMany(waiting.filter((one) => kept.has(one.commandId)).map((one) => [one.commandId, entry(one)]), open())),
    async forget(commandIds) {
      for (const id of commandIds) kept.delete(id);
      if (commandIds.length === 1) await del(commandIds[0]!, open());
      else await delMany([...commandIds], open());
    },
  };
}
