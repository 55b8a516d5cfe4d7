import { useEffect } from "react";
import { toast } from "sonner";
import { tinykeys } from "tinykeys";
import { useBench, useDocument } from "../editor/bench-context.tsx";

/** Undo and redo of everything in the document, by word and by key; a step that no longer holds says why. */
export function UndoRedo() {
  const { store } = useBench();
  const undone = useDocument((state) => state.past[state.past.length - 1]?.label);
  const redone = useDocument((state) => state.future[state.future.length - 1]?.label);
  useEffect(() => {
    const act = (what: "undo" | "redo") => (event: KeyboardEvent) => {
      if (isTyping(event.target)) return;
      event.preventDefault();
      go(store, what);
    };
    return tinykeys(window, { "$mod+KeyZ": act("undo"), "$mod+Shift+KeyZ": act("redo"), "$mod+KeyY": act("redo") });
  }, [store]);
  const word = "min-h-8 px-1.5 text-pencil hover:text-ink disabled:opacity-40 disabled:hover:text-pencil pointer-coarse:min-h-11";
  return (
    <span role="group" aria-label="Steps" className="flex">
      <button type="button" className={word} disabled={undone === undefined} title={undone === undefined ? "Nothing to undo" : `Undo: ${undone} (Ctrl+Z)`} onClick={() => go(store, "undo")}>undo</button>
      <button type="button" className={word} disabled={redone === undefined} title={redone === undefined ? "Nothing to redo" : `Redo: ${redone} (Shift+Ctrl+Z)`} onClick={() => go(store, "redo")}>redo</button>
    </span>
  );
}

function go(store: ReturnType<typeof useBench>["store"], what: "undo" | "redo"): void {
  const before = store.state.getState().refusal;
  store[what]();
  const { refusal } = store.state.getState();
  if (refusal && refusal !== before) toast.error(refusal);
}

/** Whether keys belong to a field or a dialog and not to the page. */
export function isTyping(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false;
  return target.closest("input, textarea, select, dialog, [contenteditable=true]") !== null;
}
