import { useEffect, useRef } from "react";
import { PROJECTION, type View } from "#core/frames.ts";
import { addNode, lockSelection, removeSelection, twinSelection } from "./acts.ts";
import { useEditor } from "./editor-context.ts";
import { frameAll, frameKeys } from "./framing.ts";
import { legNear } from "./nodes.ts";
import { useViewState } from "./view-state.ts";

interface Act {
  readonly word: string;
  readonly keys?: string;
  readonly act: () => void;
}

/** What can be done with what is chosen, at the place of a long press, a right click or Shift+F10. */
export function PaperMenu({ view, width, height, back }: { view: View; width: number; height: number; back: () => void }) {
  const menu = useViewState((s) => (s.menu?.view === view ? s.menu : null));
  const list = useRef<HTMLDivElement>(null);
  const editor = useEditor();
  useEffect(() => {
    if (!menu) return;
    list.current?.querySelector<HTMLElement>("[role=menuitem]")?.focus({ preventScroll: true });
    const outside = (event: PointerEvent) => {
      if (!list.current?.contains(event.target as Node)) useViewState.getState().set({ menu: null });
    };
    document.addEventListener("pointerdown", outside, true);
    return () => document.removeEventListener("pointerdown", outside, true);
  }, [menu]);
  if (!menu) return null;
  const acts = actsFor(editor, view, menu.u, menu.v);
  const close = () => {
    useViewState.getState().set({ menu: null });
    back();
  };
  const walk = (to: (at: number, count: number) => number) => {
    const all = [...(list.current?.querySelectorAll<HTMLElement>("[role=menuitem]") ?? [])];
    all[to(all.indexOf(document.activeElement as HTMLElement), all.length)]?.focus({ preventScroll: true });
  };
  return (
    <div
      ref={list}
      role="menu"
      aria-label="What is chosen"
      className="absolute z-20 min-w-[210px] cursor-default border border-ink bg-lit py-1"
      style={{ left: Math.max(0, Math.min(menu.x, width - 220)), top: Math.max(0, Math.min(menu.y, height - 34 * acts.length - 12)) }}
      onPointerDown={(event) => event.stopPropagation()}
      onPointerUp={(event) => event.stopPropagation()}
      onPointerMove={(event) => event.stopPropagation()}
      onDoubleClick={(event) => event.stopPropagation()}
      onKeyDown={(event) => {
        event.stopPropagation();
        if (event.key === "Escape" || event.key === "Tab") close();
        else if (event.key === "ArrowDown") walk((at, n) => (at + 1) % n);
        else if (event.key === "ArrowUp") walk((at, n) => (at - 1 + n) % n);
        else if (event.key === "Home") walk(() => 0);
        else if (event.key === "End") walk((_, n) => n - 1);
        else return;
        event.preventDefault();
      }}
    >
      {acts.map(({ word, keys, act }) => (
        <button
          key={word} type="button" role="menuitem" tabIndex={-1}
          className="flex min-h-8 w-full items-center justify-between gap-6 px-3 text-left hover:bg-part focus:bg-part focus:outline-none pointer-coarse:min-h-11"
          onClick={() => {
            close();
            act();
          }}
        >
          {word}
          {keys && <span className="num text-sm text-pencil">{keys}</span>}
        </button>
      ))}
    </div>
  );
}

function actsFor({ store, role, mayMove }: ReturnType<typeof useEditor>, view: View, u: number, v: number): Act[] {
  const state = useViewState.getState();
  const layout = store.state.getState().document;
  const { selection, node, hidden, letters } = state;
  const run = selection.length === 1 ? layout.runs.find((one) => one.key === selection[0]) : undefined;
  const acts: Act[] = [];
  if (selection.length > 0) {
    acts.push({ word: "Frame it", act: () => frameKeys(layout, selection) });
    if (run && mayMove) {
      const leg = legNear(run, u, v, PROJECTION[view]);
      if (leg) acts.push({ word: "Put a node here", keys: "double click", act: () => addNode(store, role, run.key, leg) });
      if (node) acts.push({ word: `Take node ${node} out`, keys: "Delete", act: () => removeSelection(store, role) });
    }
    if (mayMove) {
      const locked = [...layout.parts, ...layout.runs].filter((one) => selection.includes(one.key)).every((one) => one.locked);
      acts.push({ word: "Twin beside it", keys: "D", act: () => twinSelection(store, role) });
      acts.push({ word: locked ? "Free it" : "Lock it", act: () => lockSelection(store, role) });
    }
    acts.push({ word: "Hide it", act: () => state.set({ hidden: new Set([...hidden, ...selection]), selection: [], node: null }) });
    if (!node && (mayMove || role === "designer")) acts.push({ word: "Remove", keys: "Delete", act: () => removeSelection(store, role) });
  }
  if (hidden.size > 0) acts.push({ word: `Show the ${hidden.size} hidden`, act: () => state.set({ hidden: new Set() }) });
  if (view !== "rear") acts.push({ word: "Cut the section here", act: () => state.set({ station: Math.round(u), peek: null }) });
  acts.push({ word: "Fit everything", keys: "Home", act: () => frameAll(layout) });
  acts.push({ word: letters ? "Letter keys off (D, N)" : "Letter keys on (D, N)", act: () => state.set({ letters: !letters }) });
  return acts;
}
