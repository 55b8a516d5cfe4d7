import type { Verdict } from "#core/gaps/gap.ts";

/** Four fingers between two walls: the product's mark. */
export function HandbreadthMark({ size = 26 }: { size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 26 26" aria-hidden="true" className="shrink-0">
      <path d="M1.5 2v22M24.5 2v22" stroke="currentColor" strokeWidth="1.6" />
      {[5.2, 9.6, 14, 18.4].map((x, i) => <rect key={x} x={x} y={[8, 5, 4.2, 6.6][i]} width="3.2" height={[13, 16, 17, 14.4][i]} rx="1.6" fill="currentColor" />)}
    </svg>
  );
}

/** Each verdict's own mark, beside its word: never colour alone. */
export function VerdictMark({ verdict, size = 15 }: { verdict: Verdict; size?: number }) {
  const common = { fill: "none", stroke: "currentColor", strokeWidth: 1.8 };
  return (
    <svg width={size} height={size} viewBox="0 0 16 16" aria-hidden="true" className="inline-block shrink-0 align-[-2px]">
      {verdict === "touch" && <path d="M3 3l10 10M13 3L3 13" {...common} />}
      {verdict === "rub" && <path d="M1 6q2.5-3.500 5 0t5 0 4-1M1 11q2.5-3.500 5 0t5 0 4-1" {...common} />}
      {verdict === "short" && <path d="M3 2v12M13 2v12M3 8h3M13 8h-3" {...common} />}
      {verdict === "tight" && <path d="M5.5 2v12M10.5 2v12" {...common} />}
      {verdict === "clear" && <path d="M2 2v12M14 2v12M4 8h8M6.5 5.5L4 8l2.5 2.5M9.5 5.5L12 8l-2.5 2.5" {...common} strokeWidth={1.4} />}
    </svg>
  );
}

export const VERDICT_INK: Readonly<Record<Verdict, string>> = { touch: "text-touch", rub: "text-rub", short: "text-short", tight: "text-tight", clear: "text-clear" };
export const VERDICT_SAYS: Readonly<Record<Verdict, string>> = {
  touch: "touches now", rub: "touches when it moves or if the measurement is off", short: "closer than the rule", tight: "within the band", clear: "clear",
};

export function VerdictWord({ verdict }: { verdict: Verdict }) {
  return (
    <span className={`inline-flex items-center gap-2 font-semibold ${VERDICT_INK[verdict]}`} title={VERDICT_SAYS[verdict]}>
      <VerdictMark verdict={verdict} /> {verdict}
    </span>
  );
}
