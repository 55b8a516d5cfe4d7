import { useRef, useState, type PointerEvent as ReactPointerEvent } from "react";
import { formatLength, formatLengthWithUnit, tapeStep } from "#core/units/format-length.ts";
import { parseLength } from "#core/units/parse-length.ts";
import { toScreen } from "./camera.ts";
import { useEditor } from "./editor-context.ts";
import { useViewState } from "./view-state.ts";

/** Height of the tape, pixels. */
export const TAPE = 32;
const HOOK = 74;

/** The tape between plan and side: ticks, numbers, and a hook that is the station. What is typed, and what the hand does, is said back on it before it moves anything. */
export function Tape({ width }: { width: number }) {
  return (
    <div className="relative overflow-hidden border-y border-hair bg-lit" style={{ height: TAPE }}>
      <Ticks width={width} />
      <Peek />
      <Hook width={width} />
      <Saying />
    </div>
  );
}

function Ticks({ width }: { width: number }) {
  const { units } = useEditor();
  const camera = useViewState((s) => s.camera);
  const set = useViewState((s) => s.set);
  const hook = useViewState((s) => (s.station - s.camera.x) * s.camera.scale);
  const inch = units !== "mm";
  const step = niceStep(64 / camera.scale, inch);
  const first = Math.floor(camera.x / step) * step;
  const last = camera.x + width / camera.scale;
  const numbers: number[] = [];
  for (let x = first; x < last; x += step) numbers.push(x);
  const parts = inch ? 4 : 10;
  const fine = (step / parts) * camera.scale;
  let long = "";
  let short = "";
  for (const x of numbers) {
    const [px] = toScreen(camera, "side", x, 0);
    long += `M${px.toFixed(1)} 0V11`;
    for (let k = 1; k < parts; k++) short += `M${(px + k * fine).toFixed(1)} 0V${k * 2 === parts ? 8 : 5}`;
  }
  return (
    <svg width={width} height={TAPE - 2} className="absolute inset-0" aria-hidden="true" onPointerDown={(event) => set({ station: Math.round(camera.x + event.nativeEvent.offsetX / camera.scale), peek: null })}>
      <rect width={width} height={TAPE} fill="transparent" />
      <path d={short} stroke="var(--pencil)" strokeWidth={0.8} />
      <path d={long} stroke="var(--ink)" strokeWidth={1.1} />
      {numbers.filter((x) => clearOf(hook, (x - camera.x) * camera.scale)).map((x) => (
        <text key={x} x={toScreen(camera, "side", x, 0)[0]} y={24} textAnchor="middle" className="num" fontSize={12} fill="var(--pencil-word)">{inch ? inches(x) : Math.round(x)}</text>
      ))}
    </svg>
  );
}

/** Would a number show beside the hook, not half under it? */
const clearOf = (hook: number, x: number): boolean => x < hook - 18 || x > hook + HOOK + 18;

const inches = (mm: number): string => {
  const value = Math.round((mm / 25.4) * 4) / 4;
  return Object.is(value, -0) ? "0" : String(value);
};

/** A light mark where the pointer is. */
function Peek() {
  const peek = useViewState((s) => s.peek);
  const x = useViewState((s) => (s.peek === null ? 0 : (s.peek - s.camera.x) * s.camera.scale));
  if (peek === null) return null;
  return <div className="pointer-events-none absolute top-0 h-full w-px bg-ink" style={{ transform: `translateX(${x}px)` }} aria-hidden="true" />;
}

/** The hook: the station. Drag it, walk it with the arrow keys, or type it. */
function Hook({ width }: { width: number }) {
  const { units } = useEditor();
  const station = useViewState((s) => s.station);
  const peek = useViewState((s) => s.peek);
  const x = useViewState((s) => (s.station - s.camera.x) * s.camera.scale);
  const set = useViewState((s) => s.set);
  const [editing, setEditing] = useState<string | null>(null);
  const button = useRef<HTMLButtonElement>(null);
  const shown = formatLength(station, units, units === "mm" ? 0 : undefined);
  const left = Math.min(Math.max(0, x), width - HOOK);
  const drag = (event: ReactPointerEvent<HTMLButtonElement>) => {
    const element = event.currentTarget;
    element.setPointerCapture(event.pointerId);
    const { camera } = useViewState.getState();
    const start = station - event.clientX / camera.scale;
    const move = (next: PointerEvent) => set({ station: Math.round(start + next.clientX / camera.scale), peek: null });
    element.addEventListener("pointermove", move);
    const end = () => element.removeEventListener("pointermove", move);
    element.addEventListener("pointerup", end, { once: true });
    element.addEventListener("pointercancel", end, { once: true });
  };
  const finish = (text: string | null) => {
    const value = text === null ? null : parseLength(text, units);
    if (value?.ok) set({ station: value.mm, peek: null });
    setEditing(null);
    requestAnimationFrame(() => button.current?.focus({ preventScroll: true }));
  };
  if (editing !== null) {
    return (
      <input
        autoFocus
        aria-label="Station, from the front axle"
        className="num absolute top-0 h-full w-[104px] border border-ink bg-film px-2 text-[14px]"
        style={{ left: Math.min(left, width - 104) }}
        value={editing}
        onFocus={(event) => event.target.select()}
        onChange={(event) => setEditing(event.target.value)}
        onBlur={() => setEditing(null)}
        onKeyDown={(event) => {
          event.stopPropagation();
          if (event.key === "Escape") finish(null);
          if (event.key === "Enter") finish(editing);
        }}
      />
    );
  }
  return (
    <button
      ref={button}
      type="button"
      className={`num absolute top-0 h-full cursor-ew-resize touch-none border-l-2 border-ink px-2 text-left text-[14px] focus-visible:outline-2 focus-visible:outline-offset-[-4px] focus-visible:outline-film ${peek === null ? "bg-ink text-film" : "border border-ink bg-film text-ink"}`}
      style={{ left, width: HOOK }}
      aria-label={`Station ${formatLengthWithUnit(station, units)}. Drag, use the arrow keys, or press Enter to type it.`}
      title="The station, where the section is cut: drag, arrow keys, Enter to type"
      onPointerDown={drag}
      onDoubleClick={() => setEditing(shown)}
      onKeyDown={(event) => {
        if (event.key === "ArrowLeft" || event.key === "ArrowRight") set({ station: station + (event.key === "ArrowLeft" ? -1 : 1) * (event.shiftKey ? 50 : 10) * tapeStep(units), peek: null });
        else if (event.key === "Enter") setEditing(shown);
        else return;
        event.preventDefault();
      }}
    >
      {shown}
    </button>
  );
}

/** What is typed or what the hand does, at the end of the tape. */
function Saying() {
  const { units } = useEditor();
  const typed = useViewState((s) => s.typed);
  const saying = useViewState((s) => s.saying);
  const nothing = useViewState((s) => s.selection.length === 0 && !s.draft && !s.placing);
  const read = typed ? parseLength(typed, units) : null;
  return (
    <div role="status" className="pointer-events-none absolute right-0 top-0 h-full max-w-[70%]">
      {(typed || saying) && (
        <div className="flex h-full items-center gap-3 overflow-hidden whitespace-nowrap border-l border-ink bg-lit px-4 text-sm">
          {typed ? (
            <>
              <span className="num text-[15px] font-semibold">{typed}{units !== "mm" && /[\d]$/.test(typed) ? "\"" : ""}</span>
              {read?.ok ? <span>{nothing ? "then an arrow walks the station: " : "then an arrow: "}<span className="num">{read.mm.toFixed(1)} mm</span></span> : <span className="text-short">{read && !read.ok ? read.message : ""}</span>}
            </>
          ) : <span className="num truncate">{saying}</span>}
        </div>
      )}
    </div>
  );
}

function niceStep(least: number, inch: boolean): number {
  const unit = inch ? 25.4 : 1;
  for (const n of inch ? [0.25, 0.5, 1, 2, 4, 6, 12, 24, 60, 120] : [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000]) if (n * unit >= least) return n * unit;
  return 10_000;
}
