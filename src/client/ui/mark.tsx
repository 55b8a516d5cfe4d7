import type { ReactNode } from "react";
import type { Verdict } from "#core/gaps/gap.ts";

/** The product's mark: four fingers between two walls. */
export function HandbreadthMark({ size = 26, title }: { size?: number; title?: string }) {
  return (
    <svg width={size} height={(size * 22) / 26} viewBox="0 0 26 22" role={title ? "img" : undefined} aria-label={title} aria-hidden={title ? undefined : true} fill="currentColor" className="shrink-0">
      <rect x="0" y="0" width="2" height="22" />
      <rect x="24" y="0" width="2" height="22" />
      <rect x="4" y="7" width="3.4" height="13" rx="1.7" />
      <rect x="8.9" y="4" width="3.4" height="16" rx="1.7" />
      <rect x="13.8" y="3" width="3.4" height="17" rx="1.7" />
      <rect x="18.7" y="5.5" width="3.4" height="14.5" rx="1.7" />
    </svg>
  );
}

/**
 * One mark for each verdict, told apart by shape alone: two surfaces and what lies between them. touch: they have met; rub: two waves on each other; short: a mark that does not
 * reach from wall to wall; tight: walls close together; clear: walls well apart with room measured between.
 */
const SHAPES: Readonly<Record<Verdict, ReactNode>> = {
  touch: <><path d="M6.6 2v12M9.4 2v12" strokeWidth="2.8" /><path d="M2 8h12" /></>,
  rub: <path d="M1.5 6q2.6-3.600 5.200 0t5.200 0 2.600-1.600M1.500 11q2.600-3.600 5.200 0t5.200 0 2.600-1.600" />,
  short: <path d="M3 2v12M13 2v12M3 8h3M13 8h-3" />,
  tight: <path d="M5.5 2v12M10.5 2v12" />,
  clear: <path d="M2 2v12M14 2v12M4 8h8M6.500 5.500 4 8l2.500 2.500M9.500 5.500 12 8l-2.500 2.500" strokeWidth="1.4" />,
};
export const VERDICT_INK: Readonly<Record<Verdict, string>> = { touch: "text-touch", rub: "text-rub", short: "text-short", tight: "text-tight", clear: "text-clear" };
export const VERDICT_SAYS: Readonly<Record<Verdict, string>> = {
  touch: "touches now", rub: "touches when it moves or if the measurement is off", short: "closer than the rule", tight: "within the band above the rule, or not wholly covered", clear: "more than the rule and its band",
};

export function VerdictMark({ verdict, size = 15 }: { verdict: Verdict; size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 16 16" fill="none" stroke="currentColor" strokeWidth="1.8" aria-hidden="true" className={`inline-block shrink-0 align-[-2px] ${VERDICT_INK[verdict]}`}>
      {SHAPES[verdict]}
    </svg>
  );
}

/** A verdict: mark, word and ink together, never colour alone. */
export function VerdictWord({ verdict }: { verdict: Verdict }) {
  return (
    <span className={`inline-flex items-center gap-2 font-semibold ${VERDICT_INK[verdict]}`} title={VERDICT_SAYS[verdict]}>
      <VerdictMark verdict={verdict} /> {verdict}
    </span>
  );
}
