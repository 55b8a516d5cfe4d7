import { VERDICTS, type Gap, type GapReport, type Verdict } from "#core/gaps/gap.ts";

/** A row with its number: the place in the whole ledger, worst first, whatever is shown. The balloons in the views carry the same. */
export interface LedgerRow {
  readonly gap: Gap;
  readonly number: number;
  readonly id: string;
}
export type Order = "margin" | "distance" | "worst" | "required" | "verdict" | "between";

export interface Shown {
  readonly verdicts: ReadonlySet<Verdict>;
  readonly text: string;
  /** Only rows of these things; empty for all. */
  readonly of: readonly string[];
  readonly order: Order;
  readonly descending: boolean;
}

export const pairId = (gap: Pick<Gap, "a" | "b">): string => `${gap.a}|${gap.b}`;
const owner = (key: string) => key.split(".")[0]!;

/** The rows that a filter keeps, in an order; ties keep the ledger's own. */
export function ledgerRows(report: GapReport, name: (key: string) => string, shown: Shown): LedgerRow[] {
  const words = shown.text.trim().toLowerCase().split(/\s+/).filter(Boolean);
  const rows = report.gaps.map((gap, i) => ({ gap, number: i + 1, id: pairId(gap) })).filter(({ gap }) => {
    if (shown.verdicts.size > 0 && !shown.verdicts.has(gap.verdict)) return false;
    if (shown.of.length > 0 && !shown.of.includes(owner(gap.a)) && !shown.of.includes(owner(gap.b))) return false;
    if (words.length === 0) return true;
    const text = `${name(gap.a)} ${name(gap.b)} ${gap.why} ${gap.verdict} ${gap.provisional ? "estimate" : ""}`.toLowerCase();
    return words.every((word) => text.includes(word));
  });
  const sign = shown.descending ? -1 : 1;
  const compare: Record<Order, (x: LedgerRow, y: LedgerRow) => number> = {
    margin: (x, y) => x.number - y.number,
    distance: (x, y) => x.gap.distance - y.gap.distance,
    worst: (x, y) => x.gap.worst - y.gap.worst,
    required: (x, y) => x.gap.required - y.gap.required,
    verdict: (x, y) => VERDICTS.indexOf(x.gap.verdict) - VERDICTS.indexOf(y.gap.verdict),
    between: (x, y) => (name(x.gap.a) < name(y.gap.a) ? -1 : name(x.gap.a) > name(y.gap.a) ? 1 : 0),
  };
  return rows.sort((x, y) => sign * compare[shown.order](x, y) || x.number - y.number);
}

/** A row in one sentence, for a screen reader and for copying. */
export function rowSentence({ gap, number }: LedgerRow, name: (key: string) => string, length: (mm: number) => string): string {
  return `${number}, ${gap.verdict}: ${name(gap.a)} and ${name(gap.b)}, drawn ${length(gap.distance)}, worst ${length(gap.worst)}, need ${length(gap.required)}, margin ${length(gap.margin)}, because ${gap.why}${gap.provisional ? "; one of them is an estimate" : ""}`;
}

/** What stands behind a margin, in one sentence: read aloud where the row is opened. */
export const sharesSentence = ({ shares }: Gap, length: (mm: number) => string): string => `From drawn to worst: ${length(shares.movement)} by movement, ${length(shares.plusMinus)} by plus-minus, ${length(shares.growth)} by growth when hot`;
