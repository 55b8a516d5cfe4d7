import { createContext, useContext } from "react";
import { useStore, type StoreApi } from "zustand";
import { rolesFor } from "#core/layout/command-access.ts";
import type { Command, Role } from "#core/layout/commands.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import type { DocumentState, DocumentStore } from "./document-store.ts";
import type { LiveReports } from "./panels/live-reports.ts";
import type { Shown } from "./shown.ts";

/** Everything the screens of one layout share. */
export interface Bench {
  readonly store: DocumentStore;
  /** The document with the change that is in the hand. */
  readonly shown: StoreApi<Shown>;
  readonly reports: StoreApi<LiveReports>;
  readonly buildId: string;
  readonly layoutId: string;
  readonly role: Role;
  readonly archived: boolean;
  readonly units: LengthUnit;
}

export const BenchContext = createContext<Bench | null>(null);

export function useBench(): Bench {
  const bench = useContext(BenchContext);
  if (!bench) throw new Error("useBench outside of a layout's screens");
  return bench;
}

/** Part of the working document's state; rendered again when that part changes. */
export function useDocument<T>(selector: (state: DocumentState) => T): T {
  return useStore(useBench().store.state, selector);
}

/** Part of what is on screen: the document, with the change in the hand where there is one. */
export function useShown<T>(selector: (shown: Shown) => T): T {
  return useStore(useBench().shown, selector);
}

/** Part of the stance, mass and litres of what is on screen. */
export function useReports<T>(selector: (reports: LiveReports) => T): T {
  return useStore(useBench().reports, selector);
}

/** Whether the person may give such a command here: by role, and while the layout is not in the archive. */
export function mayGive(bench: Pick<Bench, "role" | "archived">, command: Command): boolean {
  return !bench.archived && rolesFor(command).includes(bench.role);
}
