import { useMemo, useRef, useState, type KeyboardEvent, type MouseEvent } from "react";
import { LISTS, type ListName } from "#core/layout/commands.ts";
import type { Layout } from "#core/layout/schema.ts";
import { VERDICTS, type GapReport, type Verdict } from "#core/gaps/gap.ts";
import { classes } from "../../ui/classes.ts";
import { VerdictMark } from "../../ui/mark.tsx";
import { mayGive, useBench, useShown } from "../bench-context.tsx";
import { kindWord } from "../ticket/words.ts";
import { useViewState } from "../view-state.ts";

interface Item {
  readonly key: string;
  readonly name: string;
  readonly list: ListName;
  readonly kind: string;
  readonly group: string;
  readonly locked: boolean | null;
  readonly note: string;
}
const LIST_WORDS: Readonly<Record<ListName, string>> = { parts: "other", runs: "run", spaces: "luggage space", luggage: "case", glass: "glass opening", eyes: "eye", shafts: "half-shaft" };
type By = "kind" | "group";

function itemsOf(layout: Layout): Item[] {
  return LISTS.flatMap((list) => (layout[list] as readonly { key: string; name: string; kind?: string; group?: string; locked?: boolean; status?: string }[]).map((item): Item => ({
    key: item.key, name: item.name, list, kind: item.kind ? kindWord(item.kind) : LIST_WORDS[list], group: item.group ?? "", locked: item.locked ?? null, note: item.status ?? "",
  })));
}

/** Worst verdict of each thing. */
function worstByKey(report: GapReport): Map<string, Verdict> {
  const worst = new Map<string, Verdict>();
  for (const gap of report.gaps) {
    for (const key of [gap.a, gap.b]) {
      const owner = key.split(".")[0]!;
      const known = worst.get(owner);
      if (!known || VERDICTS.indexOf(gap.verdict) < VERDICTS.indexOf(known)) worst.set(owner, gap.verdict);
    }
  }
  return worst;
}

/** Everything in the layout as one list by kind or group: the keyboard's and a screen reader's way to all that is drawn. Selecting here selects in the drawing. */
export function PartsList() {
  const bench = useBench();
  const document = useShown((shown) => shown.document);
  const report = useShown((shown) => shown.report);
  const selection = useViewState((state) => state.selection);
  const hidden = useViewState((state) => state.hidden);
  const set = useViewState((state) => state.set);
  const [text, setText] = useState("");
  const [by, setBy] = useState<By>("kind");
  const [active, setActive] = useState<string | null>(null);
  const list = useRef<HTMLDivElement>(null);
  const worst = useMemo(() => worstByKey(report), [report]);
  const groups = useMemo(() => {
    const words = text.trim().toLowerCase().split(/\s+/).filter(Boolean);
    const kept = itemsOf(document).filter((item) => words.every((word) => `${item.name} ${item.key} ${item.kind} ${item.group} ${item.note}`.toLowerCase().includes(word)));
    const sorted = new Map<string, Item[]>();
    for (const item of kept) {
      const name = by === "kind" ? item.kind : item.group || "no group";
      sorted.set(name, [...(sorted.get(name) ?? []), item]);
    }
    return [...sorted].sort(([a], [b]) => (a === "other" || a === "no group" ? 1 : b === "other" || b === "no group" ? -1 : a < b ? -1 : 1));
  }, [document, text, by]);
  const flat = groups.flatMap(([, items]) => items);
  const current = flat.some((item) => item.key === active) ? active : (flat.find((item) => selection.includes(item.key)) ?? flat[0])?.key ?? null;

  const go = (key: string | undefined) => {
    if (key === undefined) return;
    setActive(key);
    list.current?.querySelector(`[data-key="${key}"]`)?.scrollIntoView({ block: "nearest" });
  };
  const choose = (key: string, add: boolean) => {
    setActive(key);
    const next = add ? (selection.includes(key) ? selection.filter((one) => one !== key) : [...selection, key]) : [key];
    set({ selection: next, node: null, pair: null });
  };
  const keys = (event: KeyboardEvent) => {
    const at = flat.findIndex((item) => item.key === current);
    const steps: Record<string, number> = { ArrowDown: at + 1, ArrowUp: at - 1, Home: 0, End: flat.length - 1, PageDown: at + 10, PageUp: at - 10 };
    const to = steps[event.key];
    if (to !== undefined) {
      event.preventDefault();
      const next = flat[Math.max(0, Math.min(flat.length - 1, to))];
      go(next?.key);
      if (next && event.shiftKey) choose(next.key, !selection.includes(next.key));
    } else if (event.key === " " || event.key === "Enter") {
      event.preventDefault();
      if (current) choose(current, event.ctrlKey || event.metaKey || event.key === " ");
    } else if (event.key === "Escape") set({ selection: [] });
    else if (event.key === "a" && (event.ctrlKey || event.metaKey)) {
      event.preventDefault();
      set({ selection: flat.map((item) => item.key), pair: null });
    } else if (event.key.length === 1 && /\p{L}/u.test(event.key) && !event.ctrlKey && !event.metaKey && !event.altKey) {
      const from = [...flat.slice(at + 1), ...flat.slice(0, at + 1)];
      go(from.find((item) => item.name.toLowerCase().startsWith(event.key.toLowerCase()))?.key);
    }
  };
  return (
    <div className="flex min-h-0 flex-1 flex-col">
      <div className="flex shrink-0 flex-wrap items-center gap-x-6 gap-y-1 border-b border-ink px-4 py-1 text-sm text-pencil">
        <input type="search" aria-label="Find a part" placeholder="find by name, kind, group or status" className="written max-w-64" value={text} onChange={(event) => setText(event.target.value)} />
        <label className="flex items-center gap-2">by <select className="written !w-auto" aria-label="Sorted by" value={by} onChange={(event) => setBy(event.target.value as By)}><option value="kind">kind</option><option value="group">group</option></select></label>
        <span>{flat.length} of {itemsOf(document).length}</span>
        {hidden.size > 0 && <button type="button" className="border-b border-hair hover:border-ink" onClick={() => set({ hidden: new Set() })}>Show {hidden.size} hidden</button>}
        <span className="max-md:hidden">Enter selects, space adds, Ctrl+A takes all that are shown</span>
      </div>
      {flat.length === 0 ? <p className="px-4 py-6 text-pencil">{text ? "Nothing is called that." : "Nothing is placed yet. Take the tool \"Part\" and give it its sizes."}</p> : (
        <div
          ref={list}
          role="listbox"
          aria-label="Everything in the layout"
          aria-multiselectable="true"
          aria-activedescendant={current ? `item-${current}` : undefined}
          tabIndex={0}
          className="group/list min-h-0 flex-1 columns-[260px] gap-x-8 overflow-auto px-4 py-2 -outline-offset-2"
          onKeyDown={keys}
        >
          {groups.map(([name, items]) => (
            <div key={name} role="group" aria-label={name} className="mb-3 break-inside-avoid-column">
              <p aria-hidden="true" className="flex items-baseline justify-between border-b border-ink text-sm text-pencil"><span>{name}</span><span className="num">{items.length}</span></p>
              {items.map((item) => (
                <Row key={item.key} item={item} selected={selection.includes(item.key)} active={item.key === current} verdict={worst.get(item.key)} hidden={hidden.has(item.key)} mayLock={item.locked !== null && mayGive(bench, { kind: "remove", list: item.list, key: item.key })} choose={choose} hover={(key) => set({ hover: key })}
                  hide={() => {
                    const next = new Set(hidden);
                    if (!next.delete(item.key)) next.add(item.key);
                    set({ hidden: next });
                  }}
                  lock={() => {
                    const whole = (item.list === "parts" ? document.parts : document.runs).find((one) => one.key === item.key);
                    if (whole) bench.store.run({ kind: "replace", list: item.list, item: { ...whole, locked: !item.locked } } as never, `${item.name}: ${item.locked ? "unlocked" : "locked"}`);
                  }} />
              ))}
            </div>
          ))}
        </div>
      )}
    </div>
  );
}

function Row({ item, selected, active, verdict, hidden, mayLock, choose, hover, hide, lock }: {
  item: Item; selected: boolean; active: boolean; verdict: Verdict | undefined; hidden: boolean; mayLock: boolean; choose: (key: string, add: boolean) => void; hover: (key: string | null) => void; hide: () => void; lock: () => void;
}) {
  const act = (event: MouseEvent, what: () => void) => {
    event.stopPropagation();
    what();
  };
  return (
    <div
      id={`item-${item.key}`}
      data-key={item.key}
      role="option"
      aria-selected={selected}
      aria-label={`${item.name}, ${item.kind}${verdict ? `, worst gap ${verdict}` : ""}${item.locked ? ", locked" : ""}${item.note ? `, ${item.note}` : ""}${hidden ? ", hidden in the drawing" : ""}`}
      className={classes("group flex min-h-7 cursor-pointer items-center gap-2 border-b border-hair pl-1 pointer-coarse:min-h-11", selected ? "bg-ink text-film" : "hover:bg-lit", active && "group-focus-visible/list:outline-1 group-focus-visible/list:-outline-offset-1 group-focus-visible/list:outline-ink", hidden && "opacity-55")}
      onPointerEnter={() => hover(item.key)}
      onPointerLeave={() => hover(null)}
      onClick={(event) => choose(item.key, event.shiftKey || event.ctrlKey || event.metaKey)}
    >
      <span className="w-4">{verdict && verdict !== "clear" && !selected && <VerdictMark verdict={verdict} size={13} />}</span>
      <span className="truncate">{item.name}</span>
      <span className={classes("ml-auto truncate text-sm", selected ? "" : "text-pencil")}>{[item.note, item.locked && "locked"].filter(Boolean).join(", ")}</span>
      <span className="flex shrink-0 gap-2 pr-1 text-sm opacity-0 group-hover:opacity-100 pointer-coarse:opacity-100" aria-hidden="true">
        {/* for the pointer only: an option may hold no buttons, and the ticket's menu does the same for everybody */}
        <span className="underline decoration-hair underline-offset-2" onClick={(event) => act(event, hide)}>{hidden ? "show" : "hide"}</span>
        {mayLock && <span className="underline decoration-hair underline-offset-2" onClick={(event) => act(event, lock)}>{item.locked ? "free" : "lock"}</span>}
      </span>
    </div>
  );
}
