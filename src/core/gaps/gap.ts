import type { Vec3 } from "../frames.ts";

export const VERDICTS = ["touch", "rub", "short", "tight", "clear"] as const;
export type Verdict = (typeof VERDICTS)[number];

/** One row of the gap ledger; field names are those of the report (layout-file.md). Lengths mm, car frame. */
export interface Gap {
  readonly a: string;
  readonly b: string;
  readonly distance: number;
  readonly worst: number;
  readonly required: number;
  readonly margin: number;
  readonly verdict: Verdict;
  readonly pointA: Vec3;
  readonly pointB: Vec3;
  readonly why: string;
  /** What worst takes off distance, mm each, by name. */
  readonly shares: { readonly movement: number; readonly plusMinus: number; readonly growth: number };
  readonly provisional: boolean;
  readonly depthIsEstimate?: boolean;
  /** Rules that matched, asked for more, and were weaker. */
  readonly overruled?: readonly { readonly gap: number; readonly why: string }[];
  /** What this build does not yet cover for the pair, for instance "steer". Such a pair is never better than tight. */
  readonly notCovered?: readonly string[];
}

export interface TrustedGap {
  readonly a: string;
  readonly b: string;
  readonly distance: number;
  readonly why: string;
  readonly pointA: Vec3;
  readonly pointB: Vec3;
}

export interface GapReport {
  /** Least margin first. */
  readonly gaps: readonly Gap[];
  readonly trusted: readonly TrustedGap[];
  readonly counts: Readonly<Record<Verdict, number>>;
}
