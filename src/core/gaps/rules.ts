import type { PairRule, Rules } from "../layout/schema.ts";

/** What a rule's selectors can see of one side of a pair. */
export interface RuleSide {
  readonly key: string;
  readonly kind: string;
  readonly group: string;
  /** Has a surface temperature. */
  readonly hot: boolean;
  /** Has a temperature limit. */
  readonly limited: boolean;
}

export interface Requirement {
  readonly gap: number;
  readonly why: string;
  /** Matching rules that were weaker and asked for more. */
  readonly overruled: readonly { readonly gap: number; readonly why: string }[];
}

/** Rank of a selector for a side, or -1 where it does not match: key 3, kind and group 2, words 1, any 0. */
export function selectorRank(selector: string, side: RuleSide, moving: boolean): number {
  if (selector === "any") return 0;
  if (selector === "hot") return side.hot ? 1 : -1;
  if (selector === "limited") return side.limited ? 1 : -1;
  if (selector === "moving") return moving ? 1 : -1;
  const colon = selector.indexOf(":");
  const name = selector.slice(colon + 1);
  if (selector.startsWith("key:")) return side.key === name ? 3 : -1;
  if (selector.startsWith("kind:")) return side.kind === name ? 2 : -1;
  return side.group !== "" && side.group === name ? 2 : -1;
}

/** The two ranks of a rule for a pair, larger first, the stronger way round; null where it matches neither way. */
function ranksOf(rule: PairRule, a: RuleSide, b: RuleSide, moving: boolean): readonly [number, number] | null {
  let best: readonly [number, number] | null = null;
  for (const [first, second] of [[a, b], [b, a]] as const) {
    const one = selectorRank(rule.between[0], first, moving);
    const other = selectorRank(rule.between[1], second, moving);
    if (one < 0 || other < 0) continue;
    const ranks: readonly [number, number] = one >= other ? [one, other] : [other, one];
    if (!best || ranks[0] > best[0] || (ranks[0] === best[0] && ranks[1] > best[1])) best = ranks;
  }
  return best;
}

/**
 * The required gap of a pair, mm: of the rules that match, the strongest (its two ranks, larger first, compared in order; then the larger gap; then
 * the first listed), else the default. Weaker ones that ask for more are named. Symmetric in a and b.
 */
export function requiredGap(rules: Rules, a: RuleSide, b: RuleSide, moving: boolean): Requirement {
  let winner: { rule: PairRule; ranks: readonly [number, number] } | null = null;
  const matching: PairRule[] = [];
  for (const rule of rules.pairs) {
    const ranks = ranksOf(rule, a, b, moving);
    if (!ranks) continue;
    matching.push(rule);
    const stronger = !winner || ranks[0] > winner.ranks[0] || (ranks[0] === winner.ranks[0] && (ranks[1] > winner.ranks[1] || (ranks[1] === winner.ranks[1] && rule.gap > winner.rule.gap)));
    if (stronger) winner = { rule, ranks };
  }
  if (!winner) return { gap: rules.gap, why: "default gap", overruled: [] };
  const { rule } = winner;
  return {
    gap: rule.gap,
    why: rule.why || rule.between.join(" to "),
    overruled: matching.filter((other) => other !== rule && other.gap > rule.gap).map((other) => ({ gap: other.gap, why: other.why || other.between.join(" to ") })),
  };
}
