import { useEffect, useMemo, useRef, useState, type KeyboardEvent as ReactKeyboardEvent, type PointerEvent as ReactPointerEvent } from "react";
import { Layer, Shape as KonvaShape, Stage } from "react-konva";
import type Konva from "konva";
import { PROJECTION, type Vec3, type View } from "#core/frames.ts";
import { measureStance } from "#core/body/stance.ts";
import type { Command } from "#core/layout/commands.ts";
import { labelFor } from "#core/layout/command-labels.ts";
import type { Layout } from "#core/layout/schema.ts";
import { formatLength, tapeStep } from "#core/units/format-length.ts";
import { useEditor } from "./editor-context.ts";
import { originOf, pan, toScreen, toView, zoomAt } from "./camera.ts";
import { directionOf, distanceOf, movable, nextFace, turnInView, twinCommand, type Arrow } from "./hands.ts";
import { paintCuts, paintDraft, paintGaps, paintGround, paintNodes, paintShapes, paintSpaces, paintStance, paintStation, type Balloon } from "./paint.ts";
import { cutsAt, pick, shapesOf } from "./shapes.ts";
import { select, useViewState } from "./view-state.ts";

type Gesture =
  | { kind: "pan"; x: number; y: number; moved: boolean; clears: boolean }
  | { kind: "move"; from: [number, number]; moved: boolean; node: string | null; key: string }
  | { kind: "turn"; from: number; part: string; moved: boolean }
  | { kind: "sweep"; from: [number, number]; to: [number, number] }
  | { kind: "pinch"; distance: number };

const TITLES: Readonly<Record<View, string>> = { plan: "Plan", side: "Side", rear: "Section" };
const HANDLE = 26;

export function ViewPane({ view, width, height, planHeight, sectionWidth }: { view: View; width: number; height: number; planHeight: number; sectionWidth: number }) {
  const { store, useShown, inks, units, litres, mayMove } = useEditor();
  const document = useShown((s) => s.document);
  const report = useShown((s) => s.report);
  const { camera, selection, node, hover, station, pair, draft, hidden } = useViewState();
  const gesture = useRef<Gesture | null>(null);
  const pointers = useRef(new Map<number, [number, number]>());
  const [pointer, setPointer] = useState<[number, number] | null>(null);
  const [sweep, setSweep] = useState<{ from: [number, number]; to: [number, number] } | null>(null);
  const box = useRef<HTMLDivElement>(null);

  const chosen = useMemo(() => new Set(selection), [selection]);
  const shapes = useMemo(() => shapesOf(document, view), [document, view]);
  const cuts = useMemo(() => (view === "rear" ? cutsAt(document, station) : []), [document, station, view]);
  const stance = useMemo(() => (view === "side" ? measureStance(document) : null), [document, view]);
  const balloons = useMemo((): Balloon[] => {
    const framed = (gap: { a: string; b: string }) => pair === `${gap.a}|${gap.b}`;
    return report.gaps
      .map((gap, i) => ({ number: i + 1, gap, framed: framed(gap) }))
      .filter(({ gap, framed: f }) => f || (gap.verdict !== "clear" && gap.verdict !== "tight") || (gap.verdict === "tight" && (chosen.has(gap.a) || chosen.has(gap.b))))
      .slice(0, 24);
  }, [report, pair, chosen]);
  const run = selection.length === 1 ? document.runs.find((one) => one.key === selection[0]) : undefined;
  const part = selection.length === 1 ? document.parts.find((one) => one.key === selection[0]) : undefined;
  const handle = useMemo((): [number, number] | null => {
    if (!part || part.locked || !mayMove) return null;
    const shape = shapes.find((one) => one.key === part.key);
    return shape ? (([x, y]) => [x + HANDLE, y - HANDLE] as [number, number])(toScreen(camera, view, shape.box[2], shape.box[3])) : null;
  }, [part, shapes, camera, view, mayMove]);

  const sheet = (ctx: Konva.Context) => ({ ctx: ctx._context, view, camera, width, height, inks });
  const place = (event: { clientX: number; clientY: number }): [number, number] => {
    const rect = box.current!.getBoundingClientRect();
    return [event.clientX - rect.left, event.clientY - rect.top];
  };

  const give = (command: Command) => store.run(command, labelFor(command, store.state.getState().document));
  const { u, v, depth } = PROJECTION[view];
  const byOf = (du: number, dv: number): Vec3 => {
    const by: [number, number, number] = [0, 0, 0];
    const step = tapeStep(units);
    by[u] = Math.round(du / step) * step;
    by[v] = Math.round(dv / step) * step;
    return by;
  };

  const moveCommand = (layout: Layout, g: Extract<Gesture, { kind: "move" }>, by: Vec3): Command | null => {
    if (g.node !== null) {
      const at = layout.runs.find((one) => one.key === g.key)?.nodes.find((one) => one.key === g.node)?.at;
      return at ? { kind: "move-node", run: g.key, node: g.node, at: [at[0] + by[0], at[1] + by[1], at[2] + by[2]] } : null;
    }
    const items = movable(layout, useViewState.getState().selection);
    return items.length > 0 ? { kind: "move", items, by: [by[0], by[1], by[2]] } : null;
  };

  const onPointerDown = (event: ReactPointerEvent) => {
    box.current!.focus({ preventScroll: true });
    const [px, py] = place(event);
    pointers.current.set(event.pointerId, [px, py]);
    box.current!.setPointerCapture(event.pointerId);
    if (pointers.current.size === 2) {
      const [a, b] = [...pointers.current.values()] as [[number, number], [number, number]];
      gesture.current = { kind: "pinch", distance: Math.hypot(a[0] - b[0], a[1] - b[1]) };
      useViewState.getState().set({ preview: null });
      return;
    }
    const state = useViewState.getState();
    const [pu, pv] = toView(camera, view, px, py);
    if (state.tool === "run" || state.tool === "space") {
      drawPoint(pu, pv);
      return;
    }
    if (event.button === 1) {
      gesture.current = { kind: "pan", x: px, y: py, moved: false, clears: false };
      return;
    }
    if (handle && Math.hypot(px - handle[0], py - handle[1]) < 12 && part) {
      const [cx, cy] = toScreen(camera, view, part.at[u]!, part.at[v]!);
      gesture.current = { kind: "turn", from: Math.atan2(cy - py, px - cx), part: part.key, moved: false };
      return;
    }
    const grabbed = run && nodeAt(px, py);
    if (run && grabbed && mayMove && !run.locked) {
      state.set({ node: grabbed });
      gesture.current = { kind: "move", from: [pu, pv], moved: false, node: grabbed, key: run.key };
      return;
    }
    const hit = view === "rear" ? (pick(cutShapes(), pu, pv, 4 / camera.scale) ?? pick(shapes, pu, pv, 4 / camera.scale)) : pick(shapes.filter((s) => !hidden.has(s.key)), pu, pv, 5 / camera.scale);
    if (event.shiftKey && !hit) {
      gesture.current = { kind: "sweep", from: [px, py], to: [px, py] };
      return;
    }
    if (hit) {
      if (event.shiftKey || event.ctrlKey || event.metaKey) {
        select(chosen.has(hit.key) ? selection.filter((key) => key !== hit.key) : [...selection, hit.key]);
        return;
      }
      if (!chosen.has(hit.key)) select([hit.key]);
      gesture.current = mayMove && hit.list !== "tyres" ? { kind: "move", from: [pu, pv], moved: false, node: null, key: hit.key } : { kind: "pan", x: px, y: py, moved: false, clears: false };
      return;
    }
    gesture.current = { kind: "pan", x: px, y: py, moved: false, clears: true };
  };

  const cutShapes = () => {
    const keys = new Set(cuts.map((cut) => cut.key));
    return shapes.filter((shape) => keys.has(shape.key));
  };
  const nodeAt = (px: number, py: number): string | null => {
    const near = run?.nodes.find((one) => {
      const [x, y] = toScreen(camera, view, one.at[u]!, one.at[v]!);
      return Math.abs(x - px) < 11 && Math.abs(y - py) < 11;
    });
    return near?.key ?? null;
  };

  const drawPoint = (pu: number, pv: number) => {
    const state = useViewState.getState();
    const before = state.draft && state.draft.tool === state.tool ? state.draft : null;
    const point: [number, number, number] = [0, 0, 0];
    point[u] = Math.round(pu);
    point[v] = Math.round(pv);
    // the unseen direction: what is typed, else the middle of what is under the pointer, else as the point before
    const typed = state.typed.trim() === "" ? null : distanceOf(state.typed, units, 0);
    const under = pick(shapesOf(document, view), pu, pv, 2);
    const other = under && shapesOf(document, view === "plan" ? "side" : "plan").find((one) => one.key === under.key);
    const middle = other ? (view === "plan" ? (other.box[1] + other.box[3]) / 2 : view === "side" ? (other.box[1] + other.box[3]) / 2 : station) : null;
    point[depth] = Math.round(typed ?? middle ?? before?.points[before.points.length - 1]?.[depth] ?? (view === "plan" ? 200 : 0));
    if (view === "rear") point[0] = Math.round(station);
    const tool = state.tool as "run" | "space";
    state.set({ typed: "", draft: { tool, view, points: [...(before && before.view === view || tool === "run" ? (before?.points ?? []) : []), point], ...(before?.top ? { top: before.top } : {}) } });
  };

  const onPointerMove = (event: ReactPointerEvent) => {
    const [px, py] = place(event);
    if (pointers.current.has(event.pointerId)) pointers.current.set(event.pointerId, [px, py]);
    const g = gesture.current;
    const state = useViewState.getState();
    const [pu, pv] = toView(camera, view, px, py);
    if (g?.kind === "pinch" && pointers.current.size === 2) {
      const [a, b] = [...pointers.current.values()] as [[number, number], [number, number]];
      const distance = Math.hypot(a[0] - b[0], a[1] - b[1]);
      state.set({ camera: zoomAt(state.camera, view, (a[0] + b[0]) / 2, (a[1] + b[1]) / 2, distance / g.distance, { plan: planHeight, section: sectionWidth }) });
      g.distance = distance;
      return;
    }
    if (!g) {
      if (draft) setPointer([pu, pv]);
      if (state.stationFollows && view !== "rear") state.set({ station: Math.round(pu) });
      if (event.pointerType === "mouse") {
        const hit = pick(shapes, pu, pv, 5 / camera.scale);
        if ((hit?.key ?? null) !== state.hover) state.set({ hover: hit?.key ?? null });
      }
      return;
    }
    if (g.kind === "pan") {
      if (!g.moved && Math.hypot(px - g.x, py - g.y) < 3) return;
      g.moved = true;
      state.set({ camera: pan(state.camera, view, px - g.x, py - g.y) });
      g.x = px;
      g.y = py;
    } else if (g.kind === "move") {
      if (!g.moved && Math.hypot(pu - g.from[0], pv - g.from[1]) * camera.scale < 3) return;
      g.moved = true;
      state.set({ preview: moveCommand(store.state.getState().document, g, byOf(pu - g.from[0], pv - g.from[1])) });
    } else if (g.kind === "turn") {
      const original = store.state.getState().document.parts.find((one) => one.key === g.part);
      if (!original) return;
      const [cx, cy] = toScreen(camera, view, original.at[u]!, original.at[v]!);
      let angle = ((Math.atan2(cy - py, px - cx) - g.from) * 180) / Math.PI;
      angle = Math.round((event.shiftKey ? Math.round(angle / 15) * 15 : angle) * 2) / 2;
      g.moved = true;
      state.set({ preview: turnInView(original, view, angle) });
    } else if (g.kind === "sweep") {
      g.to = [px, py];
      setSweep({ from: g.from, to: g.to });
    }
  };

  const onPointerUp = (event: ReactPointerEvent) => {
    pointers.current.delete(event.pointerId);
    const g = gesture.current;
    if (g?.kind === "pinch" && pointers.current.size > 0) return;
    gesture.current = null;
    const state = useViewState.getState();
    if (!g) return;
    if (g.kind === "pan" && !g.moved && g.clears) {
      select([]);
      state.set({ pair: null });
    }
    if ((g.kind === "move" || g.kind === "turn") && g.moved && state.preview) {
      const command = state.preview;
      give(command);
      state.set({ preview: null });
    }
    if (g.kind === "sweep") {
      setSweep(null);
      const [a, b] = [toView(camera, view, ...g.from), toView(camera, view, ...g.to)];
      const [u0, u1, v0, v1] = [Math.min(a[0], b[0]), Math.max(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[1], b[1])];
      select(shapes.filter((s) => s.list !== "tyres" && s.box[0] >= u0 && s.box[2] <= u1 && s.box[1] >= v0 && s.box[3] <= v1).map((s) => s.key));
    }
  };

  useEffect(() => {
    const element = box.current!;
    const onWheel = (event: WheelEvent) => {
      event.preventDefault();
      const rect = element.getBoundingClientRect();
      const state = useViewState.getState();
      const factor = Math.exp(-event.deltaY * (event.ctrlKey ? 0.01 : 0.0015));
      state.set({ camera: zoomAt(state.camera, view, event.clientX - rect.left, event.clientY - rect.top, factor, { plan: planHeight, section: sectionWidth }) });
    };
    element.addEventListener("wheel", onWheel, { passive: false });
    return () => element.removeEventListener("wheel", onWheel);
  }, [view, planHeight, sectionWidth]);

  const finishDraft = () => {
    const state = useViewState.getState();
    if (state.draft) window.dispatchEvent(new CustomEvent("handbreadth:finish-draft"));
  };

  const onKeyDown = (event: ReactKeyboardEvent) => {
    const state = useViewState.getState();
    const layout = store.state.getState().document;
    const { key } = event;
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const handled = () => {
      event.preventDefault();
      event.stopPropagation();
    };
    if (key === "Escape") {
      handled();
      gesture.current = null;
      if (state.preview || state.typed || state.draft) state.set({ preview: null, typed: "", draft: null });
      else if (state.tool !== "pick") state.set({ tool: "pick" });
      else select([]);
      return;
    }
    if (key === "Enter" && state.draft) {
      handled();
      finishDraft();
      return;
    }
    if (key === "Backspace" && state.typed) {
      handled();
      state.set({ typed: state.typed.slice(0, -1) });
      return;
    }
    if (/^[0-9./'" ,+]$/.test(key) && (key !== " " || state.typed) && (state.selection.length > 0 || state.draft)) {
      handled();
      state.set({ typed: state.typed + key });
      return;
    }
    if (key.startsWith("Arrow") || key === "PageUp" || key === "PageDown") {
      if (state.selection.length === 0) {
        if (view !== "rear" && (key === "ArrowLeft" || key === "ArrowRight")) {
          handled();
          state.set({ station: state.station + (key === "ArrowLeft" ? -1 : 1) * (event.shiftKey ? 50 : 10) });
        }
        return;
      }
      handled();
      if (!mayMove) return;
      const direction = directionOf(view, key as Arrow);
      const distance = event.shiftKey ? nextFace(layout, state.selection, direction) : distanceOf(state.typed, units, tapeStep(units));
      if (distance === null) return;
      const by = direction.map((d) => d * distance + 0) as unknown as Vec3;
      const command = moveCommand(layout, { kind: "move", from: [0, 0], moved: true, node: run ? state.node : null, key: state.selection[0]! }, by);
      if (command) give(command);
      state.set({ typed: "" });
      return;
    }
    if ((key === "Delete" || key === "Backspace") && state.selection.length > 0 && mayMove) {
      handled();
      window.dispatchEvent(new CustomEvent("handbreadth:remove"));
      return;
    }
    if ((key === "d" || key === "D") && state.selection.length > 0 && mayMove) {
      handled();
      const twin = twinCommand(layout, state.selection);
      if (twin && give(twin.command)) select(twin.keys);
    }
  };

  const under = hover ? (document.parts.find((p) => p.key === hover) ?? document.runs.find((r) => r.key === hover) ?? document.shafts.find((s) => s.key === hover))?.name : null;
  return (
    <div
      ref={box}
      tabIndex={0}
      role="application"
      aria-label={`${TITLES[view]} view. ${selection.length} selected. Type a distance, then an arrow, to move; the parts list holds everything drawn here.`}
      className="relative h-full w-full cursor-default touch-none overflow-hidden outline-none focus-visible:outline-2 focus-visible:-outline-offset-2"
      onPointerDown={onPointerDown}
      onPointerMove={onPointerMove}
      onPointerUp={onPointerUp}
      onPointerCancel={() => {
        pointers.current.clear();
        gesture.current = null;
        setSweep(null);
        useViewState.getState().set({ preview: null });
      }}
      onPointerLeave={() => useViewState.getState().set({ hover: null })}
      onDoubleClick={finishDraft}
      onKeyDown={onKeyDown}
      data-view={view}
      data-origin={originOf(camera, view).map(Math.round).join()}
    >
      <Stage width={width} height={height} listening={false} className="pointer-events-none">
        <Layer listening={false}>
          <KonvaShape listening={false} perfectDrawEnabled={false} sceneFunc={(ctx) => paintGround(sheet(ctx), document)} />
          <KonvaShape
            listening={false}
            perfectDrawEnabled={false}
            sceneFunc={(ctx) => {
              if (view === "rear") {
                paintShapes(sheet(ctx), shapes.filter((s) => s.list === "tyres" && document.chassis.wheelbase / 2 < station === s.key.includes("rear")), chosen, hover, hidden);
                paintCuts(sheet(ctx), cuts, chosen);
              } else paintShapes(sheet(ctx), shapes, chosen, hover, hidden);
              paintSpaces(sheet(ctx), document, litres, chosen);
              if (stance) paintStance(sheet(ctx), stance, document);
            }}
          />
        </Layer>
        <Layer listening={false}>
          <KonvaShape
            listening={false}
            perfectDrawEnabled={false}
            sceneFunc={(ctx) => {
              paintStation(sheet(ctx), station);
              if (run) paintNodes(sheet(ctx), run.nodes, node);
              paintGaps(sheet(ctx), view === "rear" ? balloons.filter(({ gap, framed }) => framed || Math.abs((gap.pointA[0] + gap.pointB[0]) / 2 - station) < 160) : balloons);
              if (draft) paintDraft(sheet(ctx), draft, pointer);
              if (handle) paintHandle(ctx._context, handle, inks.ink, inks.lit);
            }}
          />
        </Layer>
      </Stage>
      {sweep && <div className="pointer-events-none absolute border border-dashed border-ink" style={{ left: Math.min(sweep.from[0], sweep.to[0]), top: Math.min(sweep.from[1], sweep.to[1]), width: Math.abs(sweep.to[0] - sweep.from[0]), height: Math.abs(sweep.to[1] - sweep.from[1]) }} />}
      {under && !draft && <div className="pointer-events-none absolute bottom-1 left-3 bg-film/85 px-1 text-sm text-pencil">{under}</div>}
      <div className="pointer-events-none absolute left-3 top-2 flex items-baseline gap-3">
        <span className="caption">{TITLES[view]}</span>
        <span className="text-sm text-pencil">
          {view === "plan" ? <>1 : <span className="num">{(3.7795 / camera.scale).toFixed(0)}</span> on this screen</> : view === "side" ? "from the left" : <>at <span className="num">{formatLength(station, units, units === "mm" ? 0 : undefined)}</span>, looking forward</>}
        </span>
      </div>
    </div>
  );
}

function paintHandle(ctx: CanvasRenderingContext2D, [x, y]: [number, number], ink: string, lit: string): void {
  ctx.strokeStyle = ink;
  ctx.lineWidth = 1.6;
  ctx.beginPath();
  ctx.arc(x, y, 8, -0.4 * Math.PI, 1.2 * Math.PI);
  ctx.stroke();
  ctx.beginPath();
  ctx.arc(x, y, 3, 0, 2 * Math.PI);
  ctx.fillStyle = lit;
  ctx.fill();
  ctx.stroke();
}
