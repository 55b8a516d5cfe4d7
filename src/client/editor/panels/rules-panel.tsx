import { useMemo, type ReactNode } from "react";
import { selectorRank } from "#core/gaps/rules.ts";
import { PART_KINDS, RUN_KINDS, type PairRule } from "#core/layout/schema.ts";
import { formatLength } from "#core/units/format-length.ts";
import { Button } from "../../ui/button.tsx";
import { useBench, useDocument, useShown } from "../bench-context.tsx";
import { Entry, LengthEntry, TextEntry } from "../forms/entry.tsx";
import { useSingletonForm } from "../forms/item-form.ts";
import { complain } from "../ticket/part-card.tsx";
import { kindWord } from "../ticket/words.ts";

/** What a selector says, in words. */
export function selectorText(selector: string, name: (key: string) => string): string {
  const colon = selector.indexOf(":");
  const rest = selector.slice(colon + 1);
  if (selector.startsWith("key:")) return name(rest);
  if (selector.startsWith("kind:")) return `any ${kindWord(rest)}`;
  if (selector.startsWith("group:")) return `group ${rest}`;
  return { hot: "anything hot", limited: "anything with a heat limit", moving: "anything that moves against it", any: "anything" }[selector] ?? selector;
}

/** How much a selector says: its rank, as the strongest rule is chosen by it. */
const rankOf = (selector: string): number => (selector.startsWith("key:") ? 3 : selector.includes(":") ? 2 : selectorRank(selector, { key: "", kind: "", group: "", hot: true, limited: true }, true));

/** Which gap each pair needs. The most particular rule wins, whatever it asks for; a weaker one that asks for more is named in the ledger. */
export function RulesPanel() {
  const { units } = useBench();
  const form = useSingletonForm("rules");
  const document = useDocument((state) => state.document);
  const report = useShown((shown) => shown.report);
  const rules = form.value;
  const names = useMemo(() => new Map([...document.parts, ...document.runs, ...document.shafts].map((item) => [item.key, item.name])), [document]);
  const used = useMemo(() => {
    const count = new Map<string, number>();
    for (const gap of report.gaps) count.set(`${gap.required}|${gap.why}`, (count.get(`${gap.required}|${gap.why}`) ?? 0) + 1);
    return count;
  }, [report]);
  const options = useMemo(() => {
    const groups = new Set([...document.parts, ...document.runs].map((item) => item.group).filter(Boolean));
    return ["any", "hot", "limited", "moving", ...PART_KINDS.map((kind) => `kind:${kind}`), ...RUN_KINDS.map((kind) => `kind:${kind}`), ...[...groups].map((group) => `group:${group}`), ...[...names.keys()].map((key) => `key:${key}`)];
  }, [document, names]);
  const name = (key: string) => names.get(key) ?? key;
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(path, value, `Rules: ${what}`);
  const move = (i: number, by: number) => {
    const pairs = [...rules.pairs];
    const [rule] = pairs.splice(i, 1);
    pairs.splice(i + by, 0, rule!);
    complain(form.put(["pairs"], pairs, "Rules: order"));
  };
  const length = (mm: number) => formatLength(mm, units, units === "mm" ? 0 : undefined);
  return (
    <div className="min-h-0 flex-1 overflow-auto px-4 py-3">
      <div className="mb-4 grid max-w-4xl gap-x-8 gap-y-2 sm:grid-cols-3">
        <Plain label="gap where no rule says otherwise" ><LengthEntry label="Gap where no rule says otherwise" mm={rules.gap} disabled={!form.may} give={(mm) => put(["gap"], mm, `default gap ${length(mm)}`)} /></Plain>
        <Plain label="tight below this margin"><LengthEntry label="Tight below this margin" mm={rules.band} disabled={!form.may} give={(mm) => put(["band"], mm, `band ${length(mm)}`)} /></Plain>
        <Plain label="pairs nearer than this are listed"><LengthEntry label="Pairs nearer than this are listed" mm={rules.near} disabled={!form.may} give={(mm) => put(["near"], mm, `near ${length(mm)}`)} /></Plain>
      </div>
      <p className="mb-3 max-w-[92ch] text-sm text-pencil">Of the rules that match a pair the strongest wins: one thing named (rank 3) before a kind or a group (2), before hot, limited or moving (1), before anything (0). Where two are as strong, the larger gap, then the one higher up. {!form.may && "Rules are the owner's to change."}</p>
      <datalist id="rule-selectors">{options.map((option) => <option key={option} value={option}>{selectorText(option, name)}</option>)}</datalist>
      <table className="w-full min-w-[760px] text-left">
        <thead>
          <tr className="border-b border-ink text-sm text-pencil">
            <th className="w-10 py-1 font-normal">no</th><th className="font-normal">between</th><th className="pl-4 font-normal">and</th><th className="w-16 pl-4 font-normal">rank</th><th className="w-28 pl-4 font-normal">gap</th><th className="pl-4 font-normal">because</th><th className="w-24 pl-4 text-right font-normal">decides</th>{form.may && <th className="w-40"><span className="sr-only">order</span></th>}
          </tr>
        </thead>
        <tbody>
          {rules.pairs.map((rule, i) => (
            <tr key={i} className="border-b border-hair align-top">
              <td className="num pt-2">{i + 1}</td>
              {rule.between.map((selector, side) => (
                <td key={side} className={side === 1 ? "pl-4" : undefined}>
                  <Selector label={`Rule ${i + 1}, ${side === 0 ? "between" : "and"}`} value={selector} says={selectorText(selector, name)} disabled={!form.may} give={(to) => put(["pairs", i, "between", side], to, `rule ${i + 1}`)} />
                </td>
              ))}
              <td className="num pl-4 pt-2 text-pencil" title="The larger first">{rule.between.map(rankOf).sort((a, b) => b - a).join(", ")}</td>
              <td className="pl-4"><LengthEntry label={`Rule ${i + 1}, gap`} mm={rule.gap} disabled={!form.may} give={(mm) => put(["pairs", i, "gap"], mm, `rule ${i + 1}: ${length(mm)}`)} /></td>
              <td className="pl-4"><TextEntry label={`Rule ${i + 1}, because`} value={rule.why} disabled={!form.may} give={(why) => put(["pairs", i, "why"], why, `rule ${i + 1}`)} /></td>
              <td className="pl-4 pt-2 text-right text-sm text-pencil">{pairsText(used.get(`${rule.gap}|${rule.why || rule.between.join(" to ")}`) ?? 0)}</td>
              {form.may && (
                <td className="pt-1.5 text-right text-sm">
                  <button type="button" disabled={i === 0} className="min-h-6 min-w-6 px-1 text-pencil hover:text-ink disabled:opacity-30" onClick={() => move(i, -1)} aria-label={`Rule ${i + 1} up`}>up</button>
                  <button type="button" disabled={i === rules.pairs.length - 1} className="min-h-6 min-w-6 px-1 text-pencil hover:text-ink disabled:opacity-30" onClick={() => move(i, 1)} aria-label={`Rule ${i + 1} down`}>down</button>
                  <button type="button" className="min-h-6 px-1 text-pencil hover:text-short" onClick={() => complain(put(["pairs", i], undefined, `rule ${i + 1} taken out`))} aria-label={`Take out rule ${i + 1}`}>take out</button>
                </td>
              )}
            </tr>
          ))}
        </tbody>
      </table>
      {form.may && <Button className="mt-3" onClick={() => complain(put(["pairs"], [...rules.pairs, { between: ["any", "any"], gap: rules.gap, why: "" } satisfies PairRule], "a rule more"))}>Add a rule</Button>}
    </div>
  );
}

const pairsText = (n: number) => (n === 0 ? "no pair" : n === 1 ? "1 pair" : `${n} pairs`);

function Plain({ label, children }: { label: string; children: ReactNode }) {
  return <div><p className="text-sm text-pencil">{label}</p>{children}</div>;
}

function Selector({ label, value, says, give, disabled }: { label: string; value: string; says: string; give: (to: string) => string | null; disabled: boolean }) {
  return (
    <div title={value}>
      <Entry words label={label} text={value} options="rule-selectors" says={says} read={(typed) => ({ ok: true, value: typed.trim() })} give={give} disabled={disabled} />
    </div>
  );
}
