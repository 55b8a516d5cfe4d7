import { itemSchemas, singletonSchemas, type Command, type ListName, type SingletonName } from "#core/layout/commands.ts";
import { itemOf } from "#core/layout/diff.ts";
import { faultsOf } from "#core/layout/parse-layout.ts";
import type { Layout } from "#core/layout/schema.ts";
import { mayGive, useBench, useDocument, type Bench } from "../bench-context.tsx";
import type { DocumentStore } from "../document-store.ts";

export type Path = readonly (string | number)[];
type Lists = { [L in ListName]: Layout[L][number] };
type Singles = Omit<{ [S in SingletonName]: S extends keyof Layout ? Layout[S] : never }, "document"> & { document: { name: string; notes: string; extra?: Record<string, unknown> | undefined } };

/** One thing of the document under the pen: each change is checked by its schema, given as a command, and undone as one. */
export interface Form<T> {
  readonly value: T;
  /** The person may change it. */
  readonly may: boolean;
  /** Takes a whole new value. @returns what is wrong, or null */
  give(next: T, label: string): string | null;
  /** Takes one place of it; undefined leaves it out. */
  put(path: Path, value: unknown, label: string): string | null;
}

/** A value with one place replaced; undefined takes the key out. */
export function withAt<T>(whole: T, path: Path, value: unknown): T {
  const [step, ...rest] = path;
  if (step === undefined) return value as T;
  if (Array.isArray(whole)) {
    const copy = [...(whole as unknown[])];
    if (rest.length === 0 && value === undefined) copy.splice(step as number, 1);
    else copy[step as number] = withAt(copy[step as number], rest, value);
    return copy as T;
  }
  const copy: Record<string, unknown> = { ...(whole as object) };
  const next = withAt((copy[step] ?? {}) as unknown, rest, value);
  if (next === undefined) delete copy[step as string];
  else copy[step as string] = next;
  return copy as T;
}

/** Gives a command that is checked by its schema first. @returns what is wrong, or null */
export function giveChecked(store: DocumentStore, schema: { safeParse(value: unknown): { success: boolean; data?: unknown; error?: unknown } }, value: unknown, commandOf: (checked: never) => Command, label: string): string | null {
  const parsed = schema.safeParse(value);
  if (!parsed.success) {
    const faults = faultsOf(parsed.error as never, value);
    return faults.map((fault) => (fault.path.includes("[") ? `${fault.path}: ${fault.message}` : fault.message)).slice(0, 2).join("; ");
  }
  return store.run(commandOf(parsed.data as never), label) ? null : (store.state.getState().refusal ?? "This cannot be taken.");
}

function formOf<T>(bench: Bench, value: T, schema: Parameters<typeof giveChecked>[1], commandOf: (next: T) => Command): Form<T> {
  const give = (next: T, label: string) => giveChecked(bench.store, schema, next, commandOf as (checked: never) => Command, label);
  return { value, may: mayGive(bench, commandOf(value)), give, put: (path, place, label) => give(withAt(value, path, place), label) };
}

/** A keyed thing by list and key; null once it is gone. */
export function useItemForm<L extends ListName>(list: L, key: string): Form<Lists[L]> | null {
  const bench = useBench();
  const item = useDocument((state) => itemOf(state.document, list, key)) as Lists[L] | null;
  return item && formOf(bench, item, itemSchemas[list], (next) => ({ kind: "replace", list, item: next }) as unknown as Command);
}

/** Chassis, rules, air, body lines, contacts, or name and notes. */
export function useSingletonForm<S extends SingletonName>(which: S): Form<Singles[S]> {
  const bench = useBench();
  const document = useDocument((state) => state.document);
  const value = itemOf(document, which, which) as Singles[S];
  return formOf(bench, value, singletonSchemas[which], (next) => ({ kind: "set", which, value: next }) as unknown as Command);
}
