import type { Verdict } from "./gap.ts";

/** Slack of every comparison, mm. */
export const SLACK = 1e-6;

/**
 * touch if drawn <= slack; else rub if worst <= slack; else short if margin < -slack; else tight if margin < band - slack; else clear.
 * What is not covered is never better than tight.
 */
export function verdictOf(distance: number, worst: number, margin: number, band: number, covered: boolean): Verdict {
  if (distance <= SLACK) return "touch";
  if (worst <= SLACK) return "rub";
  if (margin < -SLACK) return "short";
  if (margin < band - SLACK || !covered) return "tight";
  return "clear";
}
