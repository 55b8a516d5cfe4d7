import type Konva from "konva";
import { memo, useEffect, useLayoutEffect, useMemo, useRef, useState } from "react";
import { Layer, Shape, Stage } from "react-konva/lib/ReactKonvaCore.js";
import type { View } from "#core/frames.ts";
import { rolesFor } from "#core/layout/command-access.ts";
import { formatLength } from "#core/units/format-length.ts";
import { useStore } from "zustand";
import { originOf } from "./camera.ts";
import { useEditor } from "./editor-context.ts";
import { createGestures } from "./gestures.ts";
import type { HandsContext } from "./hands-context.ts";
import { pressKey } from "./keys.ts";
import { createPainter, type PaneInput } from "./pane-painter.ts";
import { PaperMenu } from "./paper-menu.tsx";
import { WorstInHand } from "./worst-in-hand.tsx";
import { cutStation, useViewState } from "./view-state.ts";

const TITLES: Readonly<Record<View, string>> = { plan: "Plan", side: "Side", rear: "Section" };

export interface PaneProps {
  readonly view: View;
  readonly width: number;
  readonly height: number;
  readonly planHeight: number;
  readonly sideHeight: number;
  readonly sectionWidth: number;
}

/**
 * One view of the sheet: three films of Konva over each other, the pointer's and the keyboard's hands, a caption. React draws again when the document or the size changes;
 * pointer moves, hovering, the station and the camera go from the view state straight to the films.
 */
export const ViewPane = memo(function ViewPane({ view, width, height, planHeight, sideHeight, sectionWidth }: PaneProps) {
  const editor = useEditor();
  const { store, inks, units, litres, role } = editor;
  const shown = editor.useShown((s) => s);
  const still = useStore(store.state, (s) => s.document);
  const box = useRef<HTMLDivElement>(null);
  const films = [useRef<Konva.Layer>(null), useRef<Konva.Layer>(null), useRef<Konva.Layer>(null)] as const;
  const [sweep, setSweep] = useState<Parameters<HandsContext["sweep"]>[0]>(null);
  const [pointer] = useState(() => ({ at: null as readonly [number, number] | null }));

  const input = useRef<PaneInput>(null as unknown as PaneInput);
  const mayMove = rolesFor({ kind: "place", key: "any", at: [0, 0, 0] }).includes(role);
  input.current = { view, width, height, inks, units, litres, mayMove, still, shown, pointer: pointer.at };
  const painter = useMemo(() => createPainter(() => ({ ...input.current, pointer: pointer.at })), [pointer]);
  const context = useRef<HandsContext>(null as unknown as HandsContext);
  context.current = {
    view, store, role, units, painter, planHeight, sideHeight, sectionWidth,
    element: () => box.current!,
    context2d: () => films[2].current!.getContext()._context,
    point: (at) => {
      if (pointer.at === null && at === null) return;
      pointer.at = at;
      films[2].current?.batchDraw();
    },
    sweep: setSweep,
  };
  const gestures = useMemo(() => createGestures(() => context.current), []);

  // what moves is drawn at once, in the frame that computed it; the rest with the next one
  const heldBefore = useRef("");
  useLayoutEffect(() => {
    const held = shown.previewing ? painter.held() : "";
    if (held !== heldBefore.current || !shown.previewing) films[0].current?.draw();
    heldBefore.current = held;
    films[1].current?.draw();
    films[2].current?.draw();
  });
  // the stance in the hand: at most eight times a second
  const following = useRef(0);
  useEffect(() => {
    if (!shown.previewing || view !== "side" || following.current !== 0) return;
    following.current = window.setTimeout(() => {
      following.current = 0;
      if (painter.followStance()) films[1].current?.batchDraw();
    }, 125);
  });
  useEffect(() => {
    let rest: ReturnType<typeof setTimeout> | undefined;
    const settle = () => {
      clearTimeout(rest);
      rest = setTimeout(() => {
        if (films[2].current && !useViewState.getState().preview && painter.settle(films[2].current.getContext()._context)) films[2].current.batchDraw();
      }, 160);
    };
    // where the paper lies, for whoever looks from outside (journeys): mm at the left and top edge, pixels per mm
    const tell = () => {
      const { camera } = useViewState.getState();
      const [left, top] = originOf(camera, view);
      Object.assign(box.current!.dataset, { left, top, scale: camera.scale });
    };
    tell();
    settle();
    const stop = useViewState.subscribe((next, before) => {
      const camera = next.camera !== before.camera;
      if (camera) tell();
      const cut = view === "rear" && cutStation(next) !== cutStation(before);
      const chosen = next.selection !== before.selection || next.hidden !== before.hidden;
      if (camera || cut || next.hidden !== before.hidden) films[0].current?.batchDraw();
      if (camera || cut || chosen || next.hover !== before.hover) films[1].current?.batchDraw();
      if (camera || cut || chosen || next.station !== before.station || next.peek !== before.peek || next.node !== before.node || next.pair !== before.pair || next.draft !== before.draft
        || next.witnesses !== before.witnesses || next.measured !== before.measured || next.tool !== before.tool) films[2].current?.batchDraw();
      if (camera || chosen || next.pair !== before.pair || next.preview !== before.preview) settle();
    });
    return () => {
      clearTimeout(rest);
      stop();
    };
    // films are refs: they stay the same
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [painter, view, still, litres, width, height]);

  // letters are measured and drawn anew when the faces have come
  useEffect(() => {
    let there = true;
    const faces = ["600 13px 'JetBrains Mono'", "400 13px 'Barlow Semi Condensed'"].map((face) => document.fonts.load(face));
    void Promise.all(faces).then(() => {
      if (there) for (const film of films) film.current?.batchDraw();
    });
    return () => {
      there = false;
    };
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, []);

  useEffect(() => {
    const element = box.current!;
    const wheel = (event: WheelEvent) => gestures.wheel(event);
    element.addEventListener("wheel", wheel, { passive: false });
    return () => element.removeEventListener("wheel", wheel);
  }, [gestures]);

  return (
    <div
      ref={box}
      tabIndex={0}
      role="application"
      aria-roledescription="drawing view"
      aria-label={`${TITLES[view]}. Type a distance, then an arrow, to move what is chosen; the parts list holds everything drawn here.`}
      className="relative h-full w-full cursor-default touch-none select-none overflow-hidden outline-none focus-visible:outline-2 focus-visible:-outline-offset-2 focus-visible:outline-ink"
      onPointerDown={(event) => gestures.down(event.nativeEvent)}
      onPointerMove={(event) => gestures.move(event.nativeEvent)}
      onPointerUp={(event) => gestures.up(event.nativeEvent)}
      onPointerCancel={() => gestures.drop()}
      onPointerLeave={() => gestures.leave()}
      onDoubleClick={(event) => gestures.doubleClick(event.nativeEvent)}
      onContextMenu={(event) => {
        event.preventDefault();
        const rect = box.current!.getBoundingClientRect();
        if (event.button === 2) gestures.openMenu(event.clientX - rect.left, event.clientY - rect.top);
      }}
      onKeyDown={(event) => {
        if (event.target !== box.current || !pressKey(context.current, event, () => gestures.drop())) return;
        event.preventDefault();
        event.stopPropagation();
      }}
      data-view={view}
    >
      <Stage width={width} height={height} listening={false} className="pointer-events-none absolute inset-0">
        <Layer ref={films[0]} listening={false}><Shape listening={false} perfectDrawEnabled={false} sceneFunc={(ctx) => painter.still(ctx._context)} /></Layer>
        <Layer ref={films[1]} listening={false}><Shape listening={false} perfectDrawEnabled={false} sceneFunc={(ctx) => painter.moving(ctx._context)} /></Layer>
        <Layer ref={films[2]} listening={false}><Shape listening={false} perfectDrawEnabled={false} sceneFunc={(ctx) => painter.hand(ctx._context)} /></Layer>
      </Stage>
      {sweep && <div className="pointer-events-none absolute border border-dashed border-ink" style={{ left: Math.min(sweep.from[0], sweep.to[0]), top: Math.min(sweep.from[1], sweep.to[1]), width: Math.abs(sweep.to[0] - sweep.from[0]), height: Math.abs(sweep.to[1] - sweep.from[1]) }} />}
      <Caption view={view} />
      <UnderPointer view={view} />
      {shown.previewing && <WorstInHand view={view} />}
      <PaperMenu view={view} width={width} height={height} back={() => box.current?.focus({ preventScroll: true })} />
    </div>
  );
});

function Caption({ view }: { view: View }) {
  const { units } = useEditor();
  const scale = useViewState((s) => (view === "plan" ? s.camera.scale : 0));
  const station = useViewState((s) => (view === "rear" ? cutStation(s) : 0));
  return (
    <div className="pointer-events-none absolute left-3 top-2 flex items-baseline gap-3 bg-film pr-2">
      <span className="caption">{TITLES[view]}</span>
      <span className="text-sm text-pencil">
        {view === "plan" ? <>1 : <span className="num">{ratio(scale)}</span> on this screen</> : view === "side" ? "from the left" : <>at <span className="num">{formatLength(station, units, units === "mm" ? 0 : undefined)}</span>, looking forward</>}
      </span>
    </div>
  );
}

/** How many mm of the car one mm of the screen shows, at 96 CSS pixels to the inch. */
const ratio = (scale: number): string => {
  const value = 96 / 25.4 / scale;
  return value < 10 ? value.toFixed(1) : value.toFixed(0);
};

/** The name of what is under the pointer. */
function UnderPointer({ view }: { view: View }) {
  const { useShown } = useEditor();
  const hover = useViewState((s) => (view === "side" ? s.hover : null));
  const name = useShown((s) => {
    if (!hover) return null;
    for (const list of ["parts", "runs", "shafts", "spaces", "glass", "eyes"] as const) {
      const found = (s.document[list] as readonly { key: string; name: string }[]).find((one) => one.key === hover);
      if (found) return found.name;
    }
    return null;
  });
  if (!name) return null;
  return <div className="pointer-events-none absolute bottom-1.5 left-3 bg-film px-1 text-sm" aria-hidden="true">{name}</div>;
}
