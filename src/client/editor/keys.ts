import type { Vec3 } from "#core/frames.ts";
import { formatLengthWithUnit, tapeStep } from "#core/units/format-length.ts";
import { finishDraft, give, removeSelection, twinSelection } from "./acts.ts";
import { toScreen } from "./camera.ts";
import { directionOf, distanceOf, moveCommand, moveWords, nextFace, wordOf, type Arrow } from "./hands.ts";
import type { HandsContext } from "./hands-context.ts";
import { shapesOf } from "./shapes.ts";
import { letGo, select, useViewState } from "./view-state.ts";
import { frameAll } from "./framing.ts";

/** The keyboard's hand while the drawing has the focus: a number then an arrow, tape steps, next face, Escape. True where the key meant something. */
export function pressKey(hands: HandsContext, event: Pick<KeyboardEvent, "key" | "shiftKey" | "ctrlKey" | "metaKey" | "altKey">, drop: () => void): boolean {
  const { store, role } = hands;
  const state = useViewState.getState();
  const { key } = event;
  if (event.ctrlKey || event.metaKey || event.altKey) return false;
  if (key === "Escape") return leave(drop);
  if (key === "ContextMenu" || (key === "F10" && event.shiftKey)) {
    openMenuAtSelection(hands);
    return true;
  }
  if (key === "Enter" && state.draft) {
    finishDraft(store, role);
    return true;
  }
  if (key === "Home") {
    frameAll(store.state.getState().document);
    return true;
  }
  if (key === "Backspace" && state.typed) {
    state.set({ typed: state.typed.slice(0, -1) });
    return true;
  }
  if (/^[0-9./'" ,+]$/.test(key) && (key !== " " || state.typed)) {
    state.set({ typed: state.typed + key, saying: null });
    return true;
  }
  if (key.startsWith("Arrow") || key === "PageUp" || key === "PageDown") return arrow(hands, key as Arrow, event.shiftKey);
  if ((key === "Delete" || key === "Backspace") && state.selection.length > 0) {
    removeSelection(store, role);
    return true;
  }
  if (!state.letters || state.selection.length === 0) return false;
  if (key === "d" || key === "D") {
    twinSelection(store, role);
    return true;
  }
  if (key === "n" || key === "N") return nextNode(hands, key === "N" ? -1 : 1);
  return false;
}

/** Escape: first drops what is in the hand, then puts the tool away, then lets go of what is chosen. */
function leave(drop: () => void): boolean {
  const state = useViewState.getState();
  if (state.preview || state.typed || state.draft || state.measured || state.placing || state.menu) {
    drop();
    letGo();
    state.set({ typed: "", draft: null, measured: null, placing: null, menu: null });
  } else if (state.tool !== "pick") state.set({ tool: "pick", saying: null });
  else if (state.node) state.set({ node: null });
  else {
    select([]);
    state.set({ pair: null, saying: null });
  }
  return true;
}

function arrow(hands: HandsContext, key: Arrow, shift: boolean): boolean {
  const { view, store, role, units } = hands;
  const state = useViewState.getState();
  const layout = store.state.getState().document;
  const direction = directionOf(view, key);
  const word = wordOf(direction);
  if (state.selection.length === 0) {
    if (view === "rear" || (key !== "ArrowLeft" && key !== "ArrowRight")) return false;
    // nothing chosen: the station walks along the tape
    const by = distanceOf(state.typed, units, (shift ? 50 : 10) * tapeStep(units));
    if (by === null) return true;
    state.set({ station: state.station + direction[0] * by, peek: null, typed: "" });
    return true;
  }
  const face = shift ? nextFace(layout, state.selection, direction) : null;
  if (shift && face === null) {
    state.set({ saying: `No face ${word} of it.` });
    return true;
  }
  const distance = face ?? distanceOf(state.typed, units, tapeStep(units));
  if (distance === null) return true;
  const by = direction.map((d) => d * distance + 0) as unknown as Vec3;
  const command = moveCommand(layout, state.selection, state.node, by);
  if (!command) {
    state.set({ saying: "It is locked: free it first.", typed: "" });
    return true;
  }
  if (give(store, role, command)) state.set({ saying: face === null ? moveWords(by, units) : `${word} ${formatLengthWithUnit(face, units)}, to the next face` });
  state.set({ typed: "" });
  return true;
}

function nextNode({ store }: HandsContext, by: 1 | -1): boolean {
  const { selection, node, set } = useViewState.getState();
  const run = selection.length === 1 ? store.state.getState().document.runs.find((one) => one.key === selection[0]) : undefined;
  if (!run) return false;
  const at = run.nodes.findIndex((one) => one.key === node);
  const next = run.nodes[at < 0 ? (by > 0 ? 0 : run.nodes.length - 1) : (at + by + run.nodes.length) % run.nodes.length]!;
  set({ node: next.key, saying: `node ${next.key} of ${run.name}` });
  return true;
}

function openMenuAtSelection({ view, store, element }: HandsContext): void {
  const { selection, camera, set } = useViewState.getState();
  const shape = shapesOf(store.state.getState().document, view).find((one) => selection.includes(one.key));
  const [u, v] = shape ? [0.5 * (shape.box[0] + shape.box[2]), 0.5 * (shape.box[1] + shape.box[3])] : [0, 0];
  const { clientWidth, clientHeight } = element();
  const [x, y] = shape ? toScreen(camera, view, u, v) : [clientWidth / 2, clientHeight / 2];
  set({ menu: { view, x: Math.min(clientWidth - 20, Math.max(0, x)), y: Math.min(clientHeight - 20, Math.max(0, y)), u, v } });
}
