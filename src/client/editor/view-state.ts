import { create } from "zustand";
import type { Vec3, View } from "#core/frames.ts";
import type { Command } from "#core/layout/commands.ts";
import type { Part } from "#core/layout/schema.ts";

export type Tool = "pick" | "tape" | "part" | "outline" | "run" | "space";

/** One scale for all views, as on a drawing sheet; what lies at the left and bottom of each. */
export interface Camera {
  /** CSS pixels per millimetre. */
  readonly scale: number;
  /** Station at the left edge of plan and side, mm. */
  readonly x: number;
  /** y at the top edge of the plan, mm. */
  readonly top: number;
  /** z at the top edge of side and section, mm. */
  readonly high: number;
  /** y at the left edge of the section, mm. */
  readonly across: number;
}

/** What is being drawn by clicks: nodes of a run, or the two outlines of a space or of a part. */
export interface Draft {
  readonly tool: "run" | "space" | "outline";
  readonly view: View;
  readonly points: readonly (readonly [number, number, number])[];
  /** With two outlines: the plan outline, once drawn. */
  readonly top?: readonly (readonly [number, number])[];
}

/** A face or centre that the thing in the hand has come to lie on: a thin line across a view, at a place along one car axis. */
export interface Witness {
  readonly axis: 0 | 1 | 2;
  readonly at: number;
  readonly name: string;
}

/** Two points measured with the tape, or the first of them. */
export interface Measured {
  readonly view: View;
  readonly from: Vec3;
  readonly to: Vec3 | null;
  readonly names: readonly [string | null, string | null];
}

export interface PaperMenu {
  readonly view: View;
  /** CSS pixels in the view. */
  readonly x: number;
  readonly y: number;
  /** mm in the view. */
  readonly u: number;
  readonly v: number;
}

interface ViewState {
  readonly selection: readonly string[];
  /** A node of the one selected run. */
  readonly node: string | null;
  readonly hover: string | null;
  readonly station: number;
  /** The station under the pointer while it is over plan or side: the section is cut there until it leaves. */
  readonly peek: number | null;
  readonly tool: Tool;
  readonly camera: Camera;
  /** A change being made in the hand: shown, not yet given. */
  readonly preview: Command | null;
  /** What the hand does, said on the tape: "rear 12.0", "lean back 4.5°". */
  readonly saying: string | null;
  readonly typed: string;
  /** A ledger row that is framed: "a|b". */
  readonly pair: string | null;
  readonly draft: Draft | null;
  /** A part that the next click puts on the paper. */
  readonly placing: Part | null;
  readonly witnesses: readonly Witness[];
  readonly measured: Measured | null;
  readonly menu: PaperMenu | null;
  readonly hidden: ReadonlySet<string>;
  /** Single-letter keys (D twins, N next node) while the drawing has the focus. */
  readonly letters: boolean;
  set(change: Partial<Omit<ViewState, "set">>): void;
}

/** What the person looks at and has in the hand; nothing of it is stored. */
export const useViewState = create<ViewState>((set) => ({
  selection: [], node: null, hover: null, station: 2700, peek: null, tool: "pick", camera: { scale: 0.2, x: -900, top: 1100, high: 1200, across: -1100 },
  preview: null, saying: null, typed: "", pair: null, draft: null, placing: null, witnesses: [], measured: null, menu: null, hidden: new Set(), letters: true,
  set: (change) => set(change),
}));

export const select = (keys: readonly string[]): void => useViewState.getState().set({ selection: keys, node: null });
/** What the section is cut at right now. */
export const cutStation = ({ peek, station }: Pick<ViewState, "peek" | "station">): number => peek ?? station;
/** Opens the hand: what was being done is dropped. */
export const letGo = (): void => useViewState.getState().set({ preview: null, saying: null, witnesses: [] });
