import type { View } from "#core/frames.ts";
import type { Role } from "#core/layout/commands.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import type { DocumentStore } from "./document-store.ts";
import type { Painter } from "./pane-painter.ts";

/** What the pointer's and the keyboard's hands work with in one view. */
export interface HandsContext {
  readonly view: View;
  readonly store: DocumentStore;
  readonly role: Role;
  readonly units: LengthUnit;
  readonly painter: Painter;
  /** Pixels: what zooming keeps in the middle of the views that it does not point at. */
  readonly planHeight: number;
  readonly sideHeight: number;
  readonly sectionWidth: number;
  element(): HTMLElement;
  context2d(): CanvasRenderingContext2D;
  /** Where the pointer is, mm in the view, while something is drawn or measured. */
  point(at: readonly [number, number] | null): void;
  sweep(box: { readonly from: readonly [number, number]; readonly to: readonly [number, number] } | null): void;
}
