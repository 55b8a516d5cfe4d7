import { PROJECTION, type Vec3 } from "#core/frames.ts";
import { applyPose, poseOf } from "#core/geometry/turn.ts";
import { rolesFor } from "#core/layout/command-access.ts";
import { tapeStep } from "#core/units/format-length.ts";
import { addNode, finishDraft, give } from "./acts.ts";
import { pan, toScreen, toView, zoomAt } from "./camera.ts";
import { clickWithTool } from "./click-tools.ts";
import { moveCommand, moveWords } from "./hands.ts";
import type { HandsContext } from "./hands-context.ts";
import { legNear } from "./nodes.ts";
import { shapesOf, type Shape } from "./shapes.ts";
import { exactPoints, snapMove, snapPoint } from "./snap.ts";
import { turnInView, turnWords } from "./turning.ts";
import { thingsUnder } from "./under.ts";
import { cutStation, letGo, select, useViewState } from "./view-state.ts";

type Gesture =
  | { kind: "pan"; x: number; y: number; moved: boolean; clears: boolean; cycle: string | null }
  | { kind: "move"; from: readonly [number, number]; moved: boolean; node: string | null; box: readonly [number, number, number, number] | null; cycle: string | null }
  | { kind: "turn"; from: number; part: string; middle: readonly [number, number]; moved: boolean }
  | { kind: "sweep"; from: readonly [number, number]; to: readonly [number, number] }
  | { kind: "pinch"; distance: number; x: number; y: number };

const START = 3;
const LONG_PRESS = 550;
const GRIP = { mouse: 8, touch: 20 };

/** The pointer's hand in one view: what a press, a drag and a pinch do. */
export function createGestures(hands: () => HandsContext) {
  let gesture: Gesture | null = null;
  let pressing: ReturnType<typeof setTimeout> | undefined;
  let pressed: "long" | null = null;
  const pointers = new Map<number, readonly [number, number]>();
  const state = () => useViewState.getState();
  const place = (event: { clientX: number; clientY: number }): [number, number] => {
    const rect = hands().element().getBoundingClientRect();
    return [event.clientX - rect.left, event.clientY - rect.top];
  };
  const grip = (event: PointerEvent) => (event.pointerType === "touch" ? GRIP.touch : GRIP.mouse);
  const under = (u: number, v: number, slack: number) =>
    thingsUnder(hands().store.state.getState().document, hands().view, u, v, slack / state().camera.scale, cutStation(state()), state().hidden, new Set(state().selection));

  const nodeAt = (px: number, py: number, reach: number): string | null => {
    const { view, store } = hands();
    const { u, v } = PROJECTION[view];
    const { selection, camera } = state();
    const run = selection.length === 1 ? store.state.getState().document.runs.find((one) => one.key === selection[0]) : undefined;
    let best: string | null = null;
    let least = reach + 3;
    for (const node of run?.nodes ?? []) {
      const [x, y] = toScreen(camera, view, node.at[u], node.at[v]);
      const distance = Math.max(Math.abs(x - px), Math.abs(y - py));
      if (distance < least) [best, least] = [node.key, distance];
    }
    return best;
  };

  /** May the chosen things move, by role and lock? */
  const mayMove = (node: string | null): boolean => {
    const command = moveCommand(hands().store.state.getState().document, state().selection, node, [0, 0, 0]);
    return command !== null && rolesFor(command).includes(hands().role);
  };

  const down = (event: PointerEvent): void => {
    const { view, element, painter, context2d } = hands();
    element().focus({ preventScroll: true });
    element().setPointerCapture(event.pointerId);
    const [px, py] = place(event);
    pointers.set(event.pointerId, [px, py]);
    clearTimeout(pressing);
    pressed = null;
    state().set({ menu: null, saying: null });
    if (pointers.size === 2) {
      const [a, b] = [...pointers.values()] as [[number, number], [number, number]];
      gesture = { kind: "pinch", distance: Math.hypot(a[0] - b[0], a[1] - b[1]), x: 0.5 * (a[0] + b[0]), y: 0.5 * (a[1] + b[1]) };
      letGo();
      return;
    }
    const [pu, pv] = toView(state().camera, view, px, py);
    if (event.button === 1) {
      gesture = { kind: "pan", x: px, y: py, moved: false, clears: false, cycle: null };
      return;
    }
    if (event.button === 2) return;
    if (event.pointerType !== "mouse") pressing = setTimeout(() => (pressed = "long"), LONG_PRESS);
    if (state().tool !== "pick") {
      gesture = { kind: "pan", x: px, y: py, moved: false, clears: false, cycle: null };
      return;
    }
    const handle = painter.handle();
    if (handle && Math.hypot(px - handle.x, py - handle.y) < grip(event) + 5) {
      const [cx, cy] = toScreen(state().camera, view, ...handle.middle);
      gesture = { kind: "turn", from: Math.atan2(cy - py, px - cx), part: handle.key, middle: handle.middle, moved: false };
      return;
    }
    const node = nodeAt(px, py, grip(event));
    if (node) {
      state().set({ node });
      gesture = mayMove(node) ? { kind: "move", from: [pu, pv], moved: false, node, box: null, cycle: null } : { kind: "pan", x: px, y: py, moved: false, clears: false, cycle: null };
      return;
    }
    const balloon = painter.balloonAt(px, py, context2d());
    if (balloon) {
      const pair = `${balloon.gap.a}|${balloon.gap.b}`;
      state().set({ pair: state().pair === pair ? null : pair });
      return;
    }
    press(event, px, py, pu, pv);
  };

  const press = (event: PointerEvent, px: number, py: number, pu: number, pv: number): void => {
    const { selection } = state();
    const found = under(pu, pv, event.pointerType === "touch" ? 12 : 5);
    if (event.shiftKey && found.length === 0) {
      gesture = { kind: "sweep", from: [px, py], to: [px, py] };
      return;
    }
    const first = found[0];
    if (!first) {
      gesture = { kind: "pan", x: px, y: py, moved: false, clears: true, cycle: null };
      return;
    }
    if (event.shiftKey || event.ctrlKey || event.metaKey) {
      select(selection.includes(first.key) ? selection.filter((key) => key !== first.key) : [...selection, first.key]);
      return;
    }
    // what is chosen already is what is taken hold of; a click without a drag goes on to what lies under it
    const held = found.find((one) => selection.includes(one.key));
    if (!held) select([first.key]);
    const cycle = held && selection.length === 1 && found.length > 1 ? found[(found.indexOf(held) + 1) % found.length]!.key : null;
    gesture = mayMove(null) && first.list !== "tyres"
      ? { kind: "move", from: [pu, pv], moved: false, node: null, box: selectionBox(), cycle }
      : { kind: "pan", x: px, y: py, moved: false, clears: false, cycle };
  };

  const selectionBox = (): [number, number, number, number] | null => {
    const chosen = new Set(state().selection);
    const own = shapesOf(hands().store.state.getState().document, hands().view).filter((shape: Shape) => chosen.has(shape.key));
    if (own.length === 0) return null;
    return [Math.min(...own.map((s) => s.box[0])), Math.min(...own.map((s) => s.box[1])), Math.max(...own.map((s) => s.box[2])), Math.max(...own.map((s) => s.box[3]))];
  };

  const move = (event: PointerEvent): void => {
    const { view, planHeight, sideHeight, sectionWidth, sweep } = hands();
    const [px, py] = place(event);
    const before = pointers.get(event.pointerId);
    if (before) pointers.set(event.pointerId, [px, py]);
    const g = gesture;
    const { camera } = state();
    if (g?.kind === "pinch") {
      if (pointers.size < 2) return;
      const [a, b] = [...pointers.values()] as [[number, number], [number, number]];
      const [x, y, distance] = [0.5 * (a[0] + b[0]), 0.5 * (a[1] + b[1]), Math.hypot(a[0] - b[0], a[1] - b[1])];
      const zoomed = zoomAt(pan(camera, view, x - g.x, y - g.y), view, x, y, distance / Math.max(1, g.distance), { plan: planHeight, section: sectionWidth, side: sideHeight });
      state().set({ camera: zoomed });
      [g.x, g.y, g.distance] = [x, y, distance];
      return;
    }
    const [pu, pv] = toView(camera, view, px, py);
    if (!g) {
      hover(event, pu, pv);
      return;
    }
    const far = g.kind !== "pan" || Math.hypot(px - g.x, py - g.y) >= START;
    if (far && g.kind === "pan") clearTimeout(pressing);
    if (pressed === "long" && (g.kind === "pan" || g.kind === "move") && !g.moved) {
      gesture = { kind: "sweep", from: [px, py], to: [px, py] };
      return;
    }
    if (g.kind === "pan") {
      if (!g.moved && !far) return;
      g.moved = true;
      state().set({ camera: pan(camera, view, px - g.x, py - g.y) });
      [g.x, g.y] = [px, py];
    } else if (g.kind === "move") drag(event, g, pu, pv);
    else if (g.kind === "turn") turn(event, g, px, py);
    else {
      g.to = [px, py];
      sweep({ from: g.from, to: g.to });
    }
  };

  const hover = (event: PointerEvent, pu: number, pv: number): void => {
    const { view, point } = hands();
    const { tool, draft, measured, camera } = state();
    const change: { hover?: string | null; peek?: number | null } = {};
    if (tool !== "pick") {
      const caught = tool === "part" ? null : caughtAt(pu, pv, 8 / camera.scale);
      point(draft || tool !== "part" || measured ? (caught?.at ?? [pu, pv]) : null);
    }
    if (event.pointerType === "mouse") {
      if (view !== "rear") change.peek = Math.round(pu);
      const found = tool === "pick" ? (under(pu, pv, 5)[0]?.key ?? null) : null;
      if (found !== state().hover) change.hover = found;
    }
    if ("hover" in change || change.peek !== undefined) state().set(change);
  };

  const caughtAt = (u: number, v: number, reach: number) => {
    const { view, store } = hands();
    const layout = store.state.getState().document;
    return snapPoint(layout, shapesOf(layout, view).filter((shape) => !state().hidden.has(shape.key)), exactPoints(layout, (part, local) => applyPose(poseOf(part), local)), view, u, v, reach);
  };

  const drag = (event: PointerEvent, g: Extract<Gesture, { kind: "move" }>, pu: number, pv: number): void => {
    const { view, store, units } = hands();
    const { camera, selection } = state();
    const { u, v, depth } = PROJECTION[view];
    if (!g.moved && Math.hypot(pu - g.from[0], pv - g.from[1]) * camera.scale < START) return;
    clearTimeout(pressing);
    g.moved = true;
    const layout = store.state.getState().document;
    const step = tapeStep(units);
    const by: [number, number, number] = [0, 0, 0];
    by[u] = Math.round((pu - g.from[0]) / step) * step;
    by[v] = Math.round((pv - g.from[1]) / step) * step;
    let witnesses: ReturnType<typeof snapMove>["witnesses"] = [];
    const free = event.altKey || event.ctrlKey || event.metaKey;
    if (g.node !== null && !free) {
      const at = layout.runs.find((one) => one.key === selection[0])?.nodes.find((one) => one.key === g.node)?.at as Vec3 | undefined;
      const others = { ...layout, runs: layout.runs.filter((one) => one.key !== selection[0]) };
      const caught = at && snapPoint(others, shapesOf(others, view), exactPoints(others, (part, local) => applyPose(poseOf(part), local)), view, at[u] + by[u], at[v] + by[v], Math.min(15, 6 / camera.scale));
      if (at && caught?.name) {
        [by[u], by[v]] = [caught.at[0] - at[u], caught.at[1] - at[v]];
        if (caught.depth !== null) by[depth] = caught.depth - at[depth];
        witnesses = [{ axis: u, at: caught.at[0], name: caught.name }, { axis: v, at: caught.at[1], name: "" }];
      }
    } else if (g.box && !free) {
      const snapped = snapMove(layout, shapesOf(layout, view).filter((shape) => !state().hidden.has(shape.key)), new Set(selection), view, g.box, by[u], by[v], Math.min(12, 5 / camera.scale));
      [by[u], by[v]] = [snapped.du, snapped.dv];
      witnesses = snapped.witnesses;
    }
    const rounded = by.map((value) => Math.round(value * 1000) / 1000 + 0) as unknown as Vec3;
    state().set({
      preview: moveCommand(layout, selection, g.node, rounded), witnesses, saying: moveWords(rounded, units), ...(event.pointerType === "mouse" && view !== "rear" ? { peek: Math.round(pu) } : {}),
    });
  };

  const turn = (event: PointerEvent, g: Extract<Gesture, { kind: "turn" }>, px: number, py: number): void => {
    const { view, store } = hands();
    const original = store.state.getState().document.parts.find((one) => one.key === g.part);
    if (!original) return;
    clearTimeout(pressing);
    const { u, v } = PROJECTION[view];
    const [cx, cy] = toScreen(state().camera, view, ...g.middle);
    let angle = ((Math.atan2(cy - py, px - cx) - g.from) * 180) / Math.PI;
    angle -= 360 * Math.round(angle / 360);
    angle = event.shiftKey ? Math.round(angle / 15) * 15 : Math.round(angle * 2) / 2;
    g.moved = true;
    const pivot: [number, number, number] = [...original.at];
    [pivot[u], pivot[v]] = [g.middle[0], g.middle[1]];
    state().set({ preview: turnInView(original, view, angle, pivot), saying: turnWords(view, original.at[1], angle) });
  };

  const up = (event: PointerEvent): void => {
    const { view, sweep } = hands();
    pointers.delete(event.pointerId);
    clearTimeout(pressing);
    const g = gesture;
    if (g?.kind === "pinch" && pointers.size > 0) return;
    gesture = null;
    if (!g) return;
    const [px, py] = place(event);
    const [pu, pv] = toView(state().camera, view, px, py);
    if (pressed === "long" && (g.kind === "pan" || g.kind === "move") && !g.moved) {
      openMenu(px, py);
      return;
    }
    if (g.kind === "pan" && !g.moved && event.button === 0) {
      if (state().tool !== "pick") clickWithTool(hands(), caughtAt(pu, pv, 8 / state().camera.scale), pu, pv);
      else if (g.clears) {
        select([]);
        state().set({ pair: null });
      } else click(g.cycle, pu);
    } else if (g.kind === "move" && !g.moved) click(g.node ? null : g.cycle, pu);
    else if ((g.kind === "move" || g.kind === "turn") && g.moved) release(g);
    else if (g.kind === "sweep") {
      sweep(null);
      gather(g);
    }
  };

  /** A click without a drag: goes on to what lies under, and puts the station where the click was. */
  const click = (cycle: string | null, pu: number): void => {
    if (cycle) select([cycle]);
    if (hands().view !== "rear") state().set({ station: Math.round(pu) });
  };

  const release = (g: Gesture): void => {
    const { preview, saying } = state();
    const { store, role } = hands();
    letGo();
    if (!preview) return;
    const part = g.kind === "turn" ? store.state.getState().document.parts.find((one) => one.key === g.part) : undefined;
    give(store, role, preview, part && saying ? `${part.name}: ${saying}` : undefined);
  };

  const gather = (g: Extract<Gesture, { kind: "sweep" }>): void => {
    const { view, store } = hands();
    const [a, b] = [toView(state().camera, view, ...g.from), toView(state().camera, view, ...g.to)];
    const [u0, u1, v0, v1] = [Math.min(a[0], b[0]), Math.max(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[1], b[1])];
    const inside = shapesOf(store.state.getState().document, view).filter((s) => s.list !== "tyres" && !state().hidden.has(s.key) && s.box[0] >= u0 && s.box[2] <= u1 && s.box[1] >= v0 && s.box[3] <= v1);
    select(inside.map((s) => s.key));
  };

  const openMenu = (px: number, py: number): void => {
    const { view } = hands();
    const [u, v] = toView(state().camera, view, px, py);
    const found = under(u, v, 8);
    if (found[0] && !found.some((one) => state().selection.includes(one.key))) select([found[0].key]);
    state().set({ menu: { view, x: px, y: py, u, v } });
  };

  const drop = (): void => {
    pointers.clear();
    gesture = null;
    clearTimeout(pressing);
    hands().sweep(null);
    letGo();
  };

  return {
    down, move, up, drop, openMenu,
    /** Is something being dragged? */
    busy: () => gesture !== null,
    wheel(event: WheelEvent): void {
      event.preventDefault();
      const { view, planHeight, sideHeight, sectionWidth } = hands();
      const [px, py] = place(event);
      const lines = event.deltaMode === 1 ? 16 : 1;
      const factor = Math.exp(-event.deltaY * lines * (event.ctrlKey ? 0.01 : 0.0015));
      const { camera, set } = state();
      set({ camera: event.shiftKey ? pan(camera, view, -(event.deltaX + event.deltaY) * lines, 0) : zoomAt(camera, view, px, py, factor, { plan: planHeight, section: sectionWidth, side: sideHeight }) });
    },
    doubleClick(event: MouseEvent): void {
      const { view, store, role } = hands();
      if (state().draft) {
        finishDraft(store, role);
        return;
      }
      const { selection, camera } = state();
      const run = selection.length === 1 ? store.state.getState().document.runs.find((one) => one.key === selection[0]) : undefined;
      if (!run) return;
      const [px, py] = place(event);
      const [pu, pv] = toView(camera, view, px, py);
      if (nodeAt(px, py, GRIP.mouse)) return;
      const leg = legNear(run, pu, pv, PROJECTION[view]);
      if (leg && leg.distance * camera.scale < Math.max(10, 0.6 * run.diameter * camera.scale)) addNode(store, role, run.key, leg);
    },
    leave(): void {
      hands().point(null);
      const { hover: over, peek, set } = state();
      if (over !== null || peek !== null) set({ hover: null, peek: null });
    },
  };
}

export type Gestures = ReturnType<typeof createGestures>;
