import { useVirtualizer } from "@tanstack/react-virtual";
import { useEffect, useMemo, useRef, useState, type KeyboardEvent } from "react";
import { Link } from "react-router-dom";
import { VERDICTS, type Verdict } from "#core/gaps/gap.ts";
import { formatLength } from "#core/units/format-length.ts";
import { classes } from "../../ui/classes.ts";
import { VERDICT_INK, VERDICT_SAYS, VerdictMark, VerdictWord } from "../../ui/mark.tsx";
import { paths } from "../../app/paths.ts";
import { useBench, useShown } from "../bench-context.tsx";
import { useViewState } from "../view-state.ts";
import { framePair } from "../workspace.tsx";
import { Gauge } from "./gauge.tsx";
import { namesOf } from "./names.ts";
import { ledgerRows, rowSentence, sharesSentence, type LedgerRow, type Order } from "./rows.ts";
import { Shares } from "./shares.tsx";

const GRID = "grid items-center gap-x-3 grid-cols-[34px_78px_minmax(0,1fr)_minmax(0,1fr)_62px] md:grid-cols-[34px_84px_minmax(90px,1fr)_minmax(90px,1fr)_66px_66px_56px_72px_minmax(120px,1.2fr)] xl:grid-cols-[34px_84px_minmax(120px,1fr)_minmax(120px,1fr)_172px_74px_74px_62px_78px_minmax(220px,1.7fr)]";
const WIDE = "max-xl:hidden";
const MIDDLE = "max-md:hidden";
const ROW = 33;
const HEADS: readonly { order: Order; word: string; className?: string }[] = [
  { order: "distance", word: "drawn", className: MIDDLE }, { order: "worst", word: "worst", className: MIDDLE }, { order: "required", word: "need", className: MIDDLE }, { order: "margin", word: "margin" },
];

/** What the ledger shows of itself: kept by the page, so that another tab in between does not forget it. */
export interface LedgerView {
  readonly verdicts: ReadonlySet<Verdict>;
  readonly text: string;
  readonly ofSelected: boolean;
  readonly order: Order;
  readonly descending: boolean;
}
export const WHOLE_LEDGER: LedgerView = { verdicts: new Set(), text: "", ofSelected: false, order: "margin", descending: false };

/** Every pair that matters, worst margin first, numbered as the balloons in the views are. Follows the hand while something is dragged. */
export function GapLedger({ view, setView }: { view: LedgerView; setView: (view: LedgerView) => void }) {
  const { units } = useBench();
  const report = useShown((shown) => shown.report);
  const document = useShown((shown) => shown.document);
  const pair = useViewState((state) => state.pair);
  const selection = useViewState((state) => state.selection);
  const set = useViewState((state) => state.set);
  const [open, setOpen] = useState<string | null>(null);
  const name = useMemo(() => namesOf(document), [document]);
  const of = view.ofSelected ? selection : NONE;
  const rows = useMemo(() => ledgerRows(report, name, { ...view, of }), [report, name, view, of]);
  const scroll = useRef<HTMLDivElement>(null);
  const virtual = useVirtualizer({ count: rows.length, getScrollElement: () => scroll.current, estimateSize: () => ROW, overscan: 10, getItemKey: (i) => rows[i]?.id ?? i });
  const at = rows.findIndex((row) => row.id === pair);
  const length = (mm: number) => formatLength(mm, units);
  const short = (mm: number) => formatLength(mm, units, units === "mm" ? (Number.isInteger(mm) ? 0 : 1) : undefined);

  const choose = (row: LedgerRow | undefined) => {
    if (!row) return;
    const keys = [row.gap.a, row.gap.b].map((key) => key.split(".")[0]!);
    set({ pair: row.id, selection: [...new Set(keys)], node: null });
  };
  // a pair that was chosen in the drawing comes into sight here
  const shownPair = useRef(pair);
  useEffect(() => {
    if (pair !== shownPair.current && at >= 0) virtual.scrollToIndex(at, { align: "auto" });
    shownPair.current = pair;
  }, [pair, at, virtual]);

  const key = (event: KeyboardEvent) => {
    const page = Math.max(1, Math.floor((scroll.current?.clientHeight ?? 200) / ROW) - 1);
    const last = rows.length - 1;
    // where nothing is chosen, down begins at the first row and up at the last
    const targets: Record<string, number> = at < 0
      ? { ArrowDown: 0, PageDown: 0, Home: 0, ArrowUp: last, PageUp: last, End: last }
      : { ArrowDown: at + 1, PageDown: at + page, Home: 0, ArrowUp: at - 1, PageUp: at - page, End: last };
    const target = targets[event.key];
    if (target !== undefined) {
      event.preventDefault();
      const next = Math.max(0, Math.min(last, target));
      choose(rows[next]);
      if (rows[next]) virtual.scrollToIndex(next, { align: "auto" });
    } else if (event.key === "Enter" && rows[at]) {
      event.preventDefault();
      framePair(rows[at].gap);
    } else if ((event.key === " " || event.key === "ArrowRight" || event.key === "ArrowLeft") && rows[at]) {
      event.preventDefault();
      setOpen(event.key === "ArrowRight" ? rows[at].id : event.key === "ArrowLeft" || open === rows[at].id ? null : rows[at].id);
    }
  };
  const head = (order: Order, word: string, className?: string) => (
    <button key={order} type="button" className={classes("text-right hover:text-ink", view.order === order ? "text-ink" : "", className)} title={`Order by ${word}`} aria-pressed={view.order === order} onClick={() => setView({ ...view, order, descending: view.order === order && !view.descending })}>
      {word}{view.order === order && order !== "margin" ? (view.descending ? " ↑" : " ↓") : ""}
    </button>
  );

  return (
    <div className="flex min-h-0 flex-1 flex-col">
      <div className={classes(GRID, "shrink-0 border-b border-ink px-4 py-1 text-sm text-pencil")}>
        <span>no</span>
        <button type="button" className="text-left hover:text-ink" aria-pressed={view.order === "verdict"} onClick={() => setView({ ...view, order: view.order === "verdict" ? "margin" : "verdict", descending: false })}>verdict</button>
        <button type="button" className="text-left hover:text-ink" aria-pressed={view.order === "between"} onClick={() => setView({ ...view, order: view.order === "between" ? "margin" : "between", descending: false })}>between</button>
        <span>and</span>
        <span className={WIDE}>gap against need</span>
        {HEADS.map(({ order, word, className }) => head(order, word, className))}
        <span className={MIDDLE}>because</span>
      </div>
      <div ref={scroll} className="min-h-0 flex-1 overflow-auto">
        {rows.length === 0 && (
          <p className="px-4 py-6 text-pencil">
            {report.gaps.length === 0 ? (document.parts.length + document.runs.length < 2 ? "Nothing to measure yet. Take \"Part\" above the plan and give a first part its sizes; with the second one their gap stands here." : "Nothing is near anything else.") : "No row is left by this filter."}
            {report.gaps.length > 0 && <button type="button" className="ml-3 border-b border-hair hover:border-ink" onClick={() => setView({ ...WHOLE_LEDGER, order: view.order, descending: view.descending })}>Show all {report.gaps.length}</button>}
          </p>
        )}
        <div
          role="listbox"
          aria-label={`Gap ledger, ${rows.length} ${rows.length === 1 ? "row" : "rows"}. Enter frames the pair in the drawing, space opens what stands behind its margin.`}
          aria-activedescendant={at >= 0 ? `gap-${rows[at]!.number}` : undefined}
          tabIndex={0}
          className={classes("relative -outline-offset-2", rows.length === 0 && "hidden")}
          style={{ height: virtual.getTotalSize() }}
          onKeyDown={key}
        >
          {virtual.getVirtualItems().map((item) => {
            const row = rows[item.index];
            if (!row) return null;
            const { gap, number, id } = row;
            const chosen = id === pair;
            return (
              <div
                key={item.key}
                ref={virtual.measureElement}
                data-index={item.index}
                id={`gap-${number}`}
                role="option"
                aria-selected={chosen}
                data-open={open === id || undefined}
                aria-label={open === id ? `${rowSentence(row, name, length)}. ${sharesSentence(gap, length)}` : rowSentence(row, name, length)}
                aria-setsize={rows.length}
                aria-posinset={item.index + 1}
                className={classes("absolute inset-x-0 cursor-pointer border-b border-hair", chosen ? "bg-lit shadow-[inset_3px_0_0_0_var(--ink)]" : "hover:bg-lit")}
                style={{ transform: `translateY(${item.start}px)` }}
                onClick={() => {
                  if (chosen) setOpen(open === id ? null : id);
                  choose(row);
                  framePair(gap);
                }}
              >
                <div className={classes(GRID, "min-h-8 px-4")}>
                  <span className="num">{number}</span>
                  <VerdictWord verdict={gap.verdict} />
                  <span className="truncate">{name(gap.a)}</span>
                  <span className="truncate">{name(gap.b)}</span>
                  <span className={WIDE}><Gauge gap={gap} /></span>
                  <span className={classes("num text-right", MIDDLE)}>{length(gap.distance)}</span>
                  <span className={classes("num text-right", MIDDLE)}>{length(gap.worst)}</span>
                  <span className={classes("num text-right", MIDDLE)}>{short(gap.required)}</span>
                  <span className={classes("num text-right font-semibold", VERDICT_INK[gap.verdict])}>{length(gap.margin)}</span>
                  <span className={classes("flex min-w-0 items-baseline gap-2 text-sm text-pencil", MIDDLE)}>
                    {gap.provisional && <span className="border border-dashed border-pencil px-1 text-ink" title="A size here is an estimate">estimate</span>}
                    {gap.notCovered && <span className="border border-dotted border-tight px-1 text-tight" title={`Not covered yet: ${gap.notCovered.join(", ")}`}>no {gap.notCovered.join(", ")}</span>}
                    <span className="truncate" title={gap.why}>{gap.why}</span>
                  </span>
                </div>
                {open === id && <Shares gap={gap} />}
              </div>
            );
          })}
        </div>
        {rows.length > 0 && (
          <p className="px-4 py-3 text-sm text-pencil">
            {report.trusted.length > 0 && <>{report.trusted.length === 1 ? "One pair that is meant to touch is left out." : `${report.trusted.length} pairs that are meant to touch are left out.`} </>}
            Estimates from what was drawn. Measure on the car before cutting; with heat, fuel, brakes and steering follow the part maker and the local rules, and have a licensed person check. <Link className="border-b border-hair hover:border-ink" to={paths.method}>How a gap is found</Link>
          </p>
        )}
      </div>
    </div>
  );
}

const NONE: readonly string[] = [];

/** How many of each verdict there are; each a filter. */
export function VerdictCounts({ view, setView }: { view: LedgerView; setView: (view: LedgerView) => void }) {
  const counts = useShown((shown) => shown.report.counts);
  return (
    <div role="group" aria-label="Show only" className="flex items-center gap-1">
      {VERDICTS.map((verdict) => {
        if (counts[verdict] === 0 && !view.verdicts.has(verdict)) return null;
        const on = view.verdicts.has(verdict);
        return (
          <button
            key={verdict}
            type="button"
            aria-pressed={on}
            title={`${verdict}: ${VERDICT_SAYS[verdict]}`}
            className={classes("flex min-h-7 items-center gap-1.5 border px-2 hover:border-ink", on ? "border-ink bg-lit" : "border-transparent")}
            onClick={() => {
              const verdicts = new Set(view.verdicts);
              if (!verdicts.delete(verdict)) verdicts.add(verdict);
              setView({ ...view, verdicts });
            }}
          >
            <VerdictMark verdict={verdict} size={13} />
            <span className={classes("num font-semibold", VERDICT_INK[verdict])}>{counts[verdict]}</span> {verdict}
          </button>
        );
      })}
    </div>
  );
}

/** Find by words, and keep to what is selected. */
export function LedgerFind({ view, setView }: { view: LedgerView; setView: (view: LedgerView) => void }) {
  return (
    <div className="flex items-center gap-5">
      <label className="flex min-h-7 items-center gap-2 whitespace-nowrap text-pencil"><input type="checkbox" className="size-4 accent-[var(--ink)]" checked={view.ofSelected} onChange={(event) => setView({ ...view, ofSelected: event.target.checked })} />of what is selected</label>
      <input type="search" aria-label="Find in the ledger" placeholder="find a part or a reason" className="written w-48" value={view.text} onChange={(event) => setView({ ...view, text: event.target.value })} />
    </div>
  );
}
