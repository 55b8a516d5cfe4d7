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
  /** mm */
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

/** Rules with their selectors numbered, so that a side is looked at once and not once a pair. */
export interface CompiledRules {
  readonly rules: Rules;
  readonly selectors: readonly string[];
  readonly pairs: readonly { readonly rule: PairRule; readonly first: number; readonly second: number }[];
  /** Where "moving" stands among the selectors, or -1: the only one that depends on the pair. */
  readonly moving: number;
  readonly plain: Requirement;
  /** The largest gap that any rule asks for, mm. */
  readonly largest: number;
}

export function compileRules(rules: Rules): CompiledRules {
  const selectors: string[] = [];
  const number = (selector: string): number => {
    const known = selectors.indexOf(selector);
    return known >= 0 ? known : selectors.push(selector) - 1;
  };
  const pairs = rules.pairs.map((rule) => ({ rule, first: number(rule.between[0]), second: number(rule.between[1]) }));
  return {
    rules, selectors, pairs, moving: selectors.indexOf("moving"), plain: { gap: rules.gap, why: "default gap", overruled: [] },
    largest: rules.pairs.reduce((most, rule) => Math.max(most, rule.gap), rules.gap),
  };
}

/** Rank of every selector for one side; "moving" as if nothing moved. */
export function ranksOf(compiled: CompiledRules, side: RuleSide): Int8Array {
  return Int8Array.from(compiled.selectors, (selector) => selectorRank(selector, side, false));
}

/**
 * The required gap of a pair, mm: of the rules that match either way round, the strongest (its two ranks, larger first, compared in order; then the
 * larger gap; then the first listed), else the default. Weaker ones that ask for more are named. Symmetric in a and b.
 * @param moving whether the two move against each other at all
 */
export function strongestRule(compiled: CompiledRules, a: Int8Array, b: Int8Array, moving: boolean): Requirement {
  let winner: PairRule | null = null;
  let strength = -1;
  let matching: PairRule[] | null = null;
  const rank = (side: Int8Array, selector: number): number => (selector === compiled.moving ? (moving ? 1 : -1) : side[selector]!);
  for (const { rule, first, second } of compiled.pairs) {
    const one = strengthOf(rank(a, first), rank(b, second));
    const other = strengthOf(rank(b, first), rank(a, second));
    const here = Math.max(one, other);
    if (here < 0) continue;
    (matching ??= []).push(rule);
    if (winner === null || here > strength || (here === strength && rule.gap > winner.gap)) {
      winner = rule;
      strength = here;
    }
  }
  if (winner === null) return compiled.plain;
  const { gap } = winner;
  const overruled = matching!.filter((rule) => rule.gap > gap).map((rule) => ({ gap: rule.gap, why: reasonOf(rule) }));
  return { gap, why: reasonOf(winner), overruled };
}

/** Two ranks as one number, larger first; -1 where either does not match. */
function strengthOf(one: number, other: number): number {
  if (one < 0 || other < 0) return -1;
  return one >= other ? 4 * one + other : 4 * other + one;
}

function reasonOf(rule: PairRule): string {
  return rule.why || rule.between.join(" to ");
}

/** The same for a single question. @example a rule of kind against kind beats one of hot against limited, whatever it asks for */
export function requiredGap(rules: Rules, a: RuleSide, b: RuleSide, moving: boolean): Requirement {
  const compiled = compileRules(rules);
  return strongestRule(compiled, ranksOf(compiled, a), ranksOf(compiled, b), moving);
}
