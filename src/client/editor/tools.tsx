import { useRef, type KeyboardEvent } from "react";
import { finishDraft } from "./acts.ts";
import { useEditor } from "./editor-context.ts";
import { frameAll, zoomBy } from "./framing.ts";
import { useViewState, type Draft, type Tool } from "./view-state.ts";

const TOOLS: readonly { readonly tool: Tool; readonly word: string; readonly says: string; readonly who: "all" | "mover" | "designer" }[] = [
  { tool: "pick", word: "Pick", says: "Choose, drag and turn what is drawn. Shift-drag on the paper gathers.", who: "all" },
  { tool: "tape", word: "Tape", says: "Click two places: the distance between them, in words.", who: "all" },
  { tool: "part", word: "Part", says: "A new part by its sizes, on the ticket; then click where it goes.", who: "mover" },
  { tool: "outline", word: "Outline", says: "A new part by its outlines: click its corners in the plan, Enter, then in the side view.", who: "mover" },
  { tool: "run", word: "Run", says: "Click each node of a pipe, hose or loom. A number typed first is the direction this view does not show. Enter ends it.", who: "mover" },
  { tool: "space", word: "Space", says: "Click a luggage space's corners in the plan, Enter, then in the side view.", who: "designer" },
];

/** The tools, as words; fit and zoom. */
export function Tools() {
  const { store, role, mayMove } = useEditor();
  const tool = useViewState((s) => s.tool);
  const set = useViewState((s) => s.set);
  const bar = useRef<HTMLDivElement>(null);
  const may = TOOLS.filter(({ who }) => who === "all" || mayMove || (who === "designer" && role === "designer"));
  // one stop of the Tab key; arrows walk along the words
  const walk = (event: KeyboardEvent) => {
    const step = event.key === "ArrowRight" ? 1 : event.key === "ArrowLeft" ? -1 : 0;
    if (step === 0) return;
    event.preventDefault();
    const all = [...bar.current!.querySelectorAll<HTMLButtonElement>("button")];
    all[(all.indexOf(document.activeElement as HTMLButtonElement) + step + all.length) % all.length]!.focus();
  };
  const plain = "min-h-8 border-l border-hair px-3 hover:bg-lit pointer-coarse:min-h-11";
  return (
    <div className="flex flex-col items-end gap-1.5">
      <div ref={bar} role="toolbar" aria-label="Tools" className="flex border border-hair bg-film" onKeyDown={walk}>
        {may.map((one, i) => (
          <button
            key={one.tool} type="button" title={one.says} aria-pressed={tool === one.tool} tabIndex={tool === one.tool ? 0 : -1}
            className={`min-h-8 px-3 font-semibold pointer-coarse:min-h-11 ${i > 0 ? "border-l border-hair" : ""} ${tool === one.tool ? "bg-ink text-film" : "hover:bg-lit"}`}
            onClick={() => set({ tool: one.tool, draft: null, measured: null, placing: null, saying: null, typed: "" })}
          >
            {one.word}
          </button>
        ))}
        <button type="button" tabIndex={-1} title="Everything in view (Home)" className={plain} onClick={() => frameAll(store.state.getState().document)}>Fit</button>
        <button type="button" tabIndex={-1} aria-label="Nearer" title="Nearer" className={`num ${plain}`} onClick={() => zoomBy(1.4)}>+</button>
        <button type="button" tabIndex={-1} aria-label="Farther" title="Farther" className={`num ${plain}`} onClick={() => zoomBy(1 / 1.4)}>−</button>
      </div>
      <Hint />
    </div>
  );
}

/** What the tool in the hand waits for, and a way to end it without the keyboard. */
function Hint() {
  const { store, role } = useEditor();
  const tool = useViewState((s) => s.tool);
  const draft = useViewState((s) => s.draft);
  const placing = useViewState((s) => s.placing);
  const set = useViewState((s) => s.set);
  const text = hintFor(tool, draft, placing !== null);
  if (!text) return null;
  const complete = draft !== null && draft.points.length >= (draft.tool === "run" ? 2 : 3);
  return (
    <div className="flex max-w-[440px] items-center gap-3 border border-hair bg-lit px-3 py-1 text-sm" role="status">
      <span>{text}</span>
      {complete && <button type="button" className="min-h-6 border border-ink px-2 font-semibold hover:bg-part" onClick={() => finishDraft(store, role)}>{draft.tool === "run" || draft.top ? "Done" : "On to the side"}</button>}
      <button type="button" className="min-h-6 px-1 underline decoration-hair underline-offset-4 hover:decoration-ink" onClick={() => set({ tool: "pick", draft: null, measured: null, placing: null, typed: "", saying: null })}>Put away</button>
    </div>
  );
}

function hintFor(tool: Tool, draft: Draft | null, placing: boolean): string | null {
  switch (tool) {
    case "pick": return null;
    case "tape": return "Click two places. Corners, edges, ports, nodes and datums catch the tape.";
    case "part": return placing ? "Click where it goes. A number typed first is the direction this view does not show." : null;
    case "run": return draft ? "Next node, or end it." : "Click the first node. A number typed first is the direction this view does not show.";
    default: return draft?.top ? "Click the corners of its side outline, in the side view." : draft ? "Next corner, or on to the side view." : "Click the first corner, in the plan.";
  }
}
