import { create } from "zustand";
import type { View } from "#core/frames.ts";
import type { Command } from "#core/layout/commands.ts";

export type Tool = "pick" | "run" | "space" | "part";

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

export interface Draft {
  readonly tool: "run" | "space";
  readonly view: View;
  readonly points: readonly (readonly [number, number, number])[];
  /** With a space: the plan outline, once drawn. */
  readonly top?: readonly (readonly [number, number])[];
}

interface ViewState {
  readonly selection: readonly string[];
  /** A node of the one selected run. */
  readonly node: string | null;
  readonly hover: string | null;
  readonly station: number;
  readonly stationFollows: boolean;
  readonly tool: Tool;
  readonly camera: Camera;
  /** A change being made in the hand: shown, not yet given. */
  readonly preview: Command | null;
  readonly typed: string;
  /** A ledger row that is framed: "a|b". */
  readonly pair: string | null;
  readonly draft: Draft | null;
  readonly hidden: ReadonlySet<string>;
  set(change: Partial<Omit<ViewState, "set">>): void;
}

/** What the person looks at and has in the hand; nothing of it is stored. */
export const useViewState = create<ViewState>((set) => ({
  selection: [], node: null, hover: null, station: 2700, stationFollows: false, tool: "pick", camera: { scale: 0.2, x: -900, top: 1100, high: 1200, across: -1100 },
  preview: null, typed: "", pair: null, draft: null, hidden: new Set(),
  set: (change) => set(change),
}));

export const select = (keys: readonly string[]): void => useViewState.getState().set({ selection: keys, node: null });
