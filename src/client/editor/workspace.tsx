import { useEffect, useLayoutEffect, useRef, useState, type PointerEvent as ReactPointerEvent, type ReactNode } from "react";
import type { Gap } from "#core/gaps/gap.ts";
import { formatLength } from "#core/units/format-length.ts";
import { parseLength } from "#core/units/parse-length.ts";
import { fit, toScreen } from "./camera.ts";
import { useEditor } from "./editor-context.ts";
import { extentOf } from "./shapes.ts";
import { useViewState } from "./view-state.ts";
import { ViewPane } from "./view-pane.tsx";

export interface WorkspaceSizes {
  readonly width: number;
  readonly planHeight: number;
  readonly sideHeight: number;
  readonly sectionWidth: number;
}
const TAPE = 30;
let lastSizes: WorkspaceSizes | null = null;

/** Shows everything (or an extent) in all views. */
export function frameAll(layout: Parameters<typeof extentOf>[0]): void {
  if (!lastSizes) return;
  const extent = extentOf(layout);
  if (!Number.isFinite(extent.low[0])) return;
  useViewState.getState().set({ camera: fit(extent, lastSizes) });
}

/** Brings a pair's closest points to the middle of all views, with room about them. */
export function framePair(gap: Gap): void {
  const state = useViewState.getState();
  state.set({ pair: `${gap.a}|${gap.b}`, station: Math.round((gap.pointA[0] + gap.pointB[0]) / 2) });
  if (!lastSizes) return;
  const reach = Math.max(260, gap.distance * 2.2);
  const middle = gap.pointA.map((value, k) => (value + gap.pointB[k]!) / 2);
  const low = middle.map((value) => value - reach) as [number, number, number];
  const high = middle.map((value) => value + reach) as [number, number, number];
  state.set({ camera: fit({ low, high }, lastSizes) });
}

/** The drawing sheet: plan over side, the section beside the side view, the tape between, the ticket in the free quadrant. */
export function Workspace({ ticket, tools }: { ticket: ReactNode; tools: ReactNode }) {
  const { store } = useEditor();
  const frame = useRef<HTMLDivElement>(null);
  const [size, setSize] = useState({ width: 0, height: 0 });
  useLayoutEffect(() => {
    const element = frame.current!;
    const observer = new ResizeObserver(() => setSize({ width: element.clientWidth, height: element.clientHeight }));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  const sectionWidth = Math.round(Math.min(460, Math.max(270, size.width * 0.29)));
  const sizes: WorkspaceSizes = { width: size.width - sectionWidth - 1, planHeight: Math.round((size.height - TAPE) * 0.54), sideHeight: size.height - TAPE - Math.round((size.height - TAPE) * 0.54) - 2, sectionWidth };
  const ready = size.width > 300 && size.height > 200;
  const fitted = useRef(false);
  useEffect(() => {
    if (!ready) return;
    lastSizes = sizes;
    if (!fitted.current) {
      fitted.current = true;
      frameAll(store.state.getState().document);
    }
  });
  const shared = { planHeight: sizes.planHeight, sectionWidth };
  return (
    <div ref={frame} className="relative min-h-0 flex-1 overflow-hidden">
      {ready && (
        <div className="grid h-full" style={{ gridTemplateColumns: `${sizes.width}px 1px ${sectionWidth}px`, gridTemplateRows: `${sizes.planHeight}px ${TAPE}px ${sizes.sideHeight + 2}px` }}>
          <div className="relative min-w-0">
            <ViewPane view="plan" width={sizes.width} height={sizes.planHeight} {...shared} />
            <div className="absolute right-3 top-2">{tools}</div>
          </div>
          <div className="row-span-3 bg-hair" />
          <div className="min-h-0 overflow-y-auto">{ticket}</div>
          <Tape width={sizes.width} />
          <div className="border-b border-hair" />
          <ViewPane view="side" width={sizes.width} height={sizes.sideHeight} {...shared} />
          <ViewPane view="rear" width={sectionWidth} height={sizes.sideHeight} {...shared} />
        </div>
      )}
    </div>
  );
}

/** The tape between plan and side: ticks, numbers, and a hook that is the station. What is typed is said back here before it moves anything. */
function Tape({ width }: { width: number }) {
  const { units } = useEditor();
  const { camera, station, typed, selection, set } = useViewState();
  const [editing, setEditing] = useState<string | null>(null);
  const inch = units !== "mm";
  const step = niceStep(64 / camera.scale, inch);
  const first = Math.ceil(camera.x / step) * step;
  const ticks: number[] = [];
  for (let x = first; x < camera.x + width / camera.scale; x += step) ticks.push(x);
  const [hook] = toScreen(camera, "side", station, 0);
  const read = typed ? parseLength(typed, units) : null;
  const drag = (event: ReactPointerEvent<HTMLButtonElement>) => {
    const element = event.currentTarget;
    element.setPointerCapture(event.pointerId);
    const start = station - event.clientX / camera.scale;
    const move = (next: PointerEvent) => set({ station: Math.round(start + next.clientX / camera.scale) });
    element.addEventListener("pointermove", move);
    element.addEventListener("pointerup", () => element.removeEventListener("pointermove", move), { once: true });
  };
  return (
    <div className="relative overflow-hidden border-y border-hair bg-lit">
      <svg width={width} height={28} className="absolute inset-0" aria-hidden="true">
        {ticks.map((x) => {
          const [px] = toScreen(camera, "side", x, 0);
          return (
            <g key={x}>
              {[0.2, 0.4, 0.6, 0.8].map((share) => <line key={share} x1={px + share * step * camera.scale} x2={px + share * step * camera.scale} y1={0} y2={5} stroke="var(--pencil)" strokeWidth={0.7} />)}
              <line x1={px} x2={px} y1={0} y2={9} stroke="var(--ink)" />
              <text x={px} y={22} textAnchor="middle" className="num" fontSize={12} fill="var(--pencil)">{inch ? Math.round(x / 25.4) : Math.round(x)}</text>
            </g>
          );
        })}
      </svg>
      {editing === null ? (
        <button
          type="button"
          className="num absolute top-0 h-[28px] min-w-[64px] cursor-ew-resize touch-none bg-ink px-2 text-left text-[14px] text-film"
          style={{ left: Math.min(Math.max(0, hook), width - 66) }}
          aria-label={`Station ${formatLength(station, units)}. Drag, use the arrow keys, or press Enter to type it.`}
          title="The station: drag, arrows, or Enter to type"
          onPointerDown={drag}
          onDoubleClick={() => setEditing(formatLength(station, units))}
          onKeyDown={(event) => {
            if (event.key === "ArrowLeft" || event.key === "ArrowRight") {
              event.preventDefault();
              set({ station: station + (event.key === "ArrowLeft" ? -1 : 1) * (event.shiftKey ? 50 : 10) });
            } else if (event.key === "Enter") {
              event.preventDefault();
              setEditing(formatLength(station, units));
            }
          }}
        >
          {formatLength(station, units, units === "mm" ? 0 : undefined)}
        </button>
      ) : (
        <input
          autoFocus
          aria-label="Station"
          className="num absolute top-0 h-[28px] w-[92px] border border-ink bg-film px-2 text-[14px]"
          style={{ left: Math.min(Math.max(0, hook), width - 92) }}
          value={editing}
          onChange={(event) => setEditing(event.target.value)}
          onBlur={() => setEditing(null)}
          onKeyDown={(event) => {
            if (event.key === "Escape") setEditing(null);
            if (event.key !== "Enter") return;
            const value = parseLength(editing, units);
            if (value.ok) set({ station: value.mm });
            setEditing(null);
          }}
        />
      )}
      <div aria-live="polite" className="pointer-events-none absolute right-0 top-0 h-full">
        {typed && (
          <div className="flex h-full items-center gap-3 border-l border-hair bg-lit px-4 text-sm">
            <span className="num text-[15px] font-semibold">{typed}</span>
            {read?.ok ? <span>then an arrow: <span className="num">{read.mm.toFixed(1)} mm</span>{selection.length === 0 && " (nothing selected)"}</span> : <span className="text-short">{read && !read.ok ? read.message : ""}</span>}
          </div>
        )}
      </div>
    </div>
  );
}

function niceStep(least: number, inch: boolean): number {
  const unit = inch ? 25.4 : 1;
  for (const n of inch ? [1, 2, 3, 6, 12, 24, 60, 120] : [10, 20, 50, 100, 200, 500, 1000, 2000, 5000]) if (n * unit >= least) return n * unit;
  return 10_000;
}
