import { createContext, useContext } from "react";
import type { Role } from "#core/layout/commands.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import type { DocumentStore } from "./document-store.ts";
import type { Shown } from "./shown.ts";
import type { Inks } from "./theme-inks.ts";

/** What every piece of the bench shares. */
export interface Editor {
  readonly store: DocumentStore;
  readonly useShown: <T>(selector: (shown: Shown) => T) => T;
  readonly role: Role;
  /** May this member move parts and edit runs? */
  readonly mayMove: boolean;
  readonly units: LengthUnit;
  readonly inks: Inks;
  /** Free litres of each space, as last computed. */
  readonly litres: ReadonlyMap<string, number>;
}

export const EditorContext = createContext<Editor | null>(null);

export function useEditor(): Editor {
  const editor = useContext(EditorContext);
  if (!editor) throw new Error("this piece belongs on the bench");
  return editor;
}
