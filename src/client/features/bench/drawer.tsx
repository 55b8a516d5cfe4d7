import { useState, type KeyboardEvent, type PointerEvent as ReactPointerEvent } from "react";

const KEPT = "handbreadth.drawer";
const LEAST = 96;
const most = () => Math.max(LEAST, window.innerHeight - 420);
const within = (height: number) => Math.round(Math.min(most(), Math.max(LEAST, height)));

export interface Drawer {
  readonly height: number;
  readonly set: (height: number) => void;
}

/** How much of the page the ledger has, px; kept in this browser. */
export function useDrawer(): Drawer {
  const [height, setHeight] = useState(() => {
    const kept = Number(localStorage.getItem(KEPT));
    return within(kept > 0 ? kept : window.innerHeight * 0.27);
  });
  return {
    height,
    set: (next) => {
      const fitted = within(next);
      setHeight(fitted);
      localStorage.setItem(KEPT, String(fitted));
    },
  };
}

/** The line between the drawing and the ledger: dragged, or moved by arrow keys. */
export function Divider({ drawer }: { drawer: Drawer }) {
  const drag = (event: ReactPointerEvent<HTMLDivElement>) => {
    const element = event.currentTarget;
    element.setPointerCapture(event.pointerId);
    const start = drawer.height + event.clientY;
    const move = (next: PointerEvent) => drawer.set(start - next.clientY);
    element.addEventListener("pointermove", move);
    element.addEventListener("lostpointercapture", () => element.removeEventListener("pointermove", move), { once: true });
  };
  const key = (event: KeyboardEvent) => {
    const step = { ArrowUp: 33, ArrowDown: -33, PageUp: 165, PageDown: -165, Home: LEAST - drawer.height, End: most() - drawer.height }[event.key];
    if (step === undefined) return;
    event.preventDefault();
    drawer.set(drawer.height + step);
  };
  return (
    <div
      role="separator"
      aria-orientation="horizontal"
      aria-label="Height of the ledger"
      aria-valuenow={drawer.height}
      aria-valuemin={LEAST}
      aria-valuemax={most()}
      tabIndex={0}
      className="relative h-0 shrink-0 border-t border-ink"
      onKeyDown={key}
    >
      <div className="absolute inset-x-0 -top-1.5 z-10 h-3 cursor-row-resize touch-none pointer-coarse:-top-3 pointer-coarse:h-6" onPointerDown={drag} onDoubleClick={() => drawer.set(window.innerHeight * 0.27)} />
    </div>
  );
}
