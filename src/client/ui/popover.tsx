import { useEffect, useId, useRef, useState, type ReactNode } from "react";
import { classes } from "./classes.ts";

/** A word that opens a small sheet beneath it; Escape and a click elsewhere close it. */
export function Popover({ label, face, children, className, panelClassName, align = "right" }: { label: string; face: ReactNode; children: (close: () => void) => ReactNode; className?: string; panelClassName?: string; align?: "left" | "right" }) {
  const [open, setOpen] = useState(false);
  const root = useRef<HTMLDivElement>(null);
  const button = useRef<HTMLButtonElement>(null);
  const id = useId();
  useEffect(() => {
    if (!open) return;
    const outside = (event: PointerEvent) => {
      if (!root.current?.contains(event.target as Node)) setOpen(false);
    };
    document.addEventListener("pointerdown", outside);
    return () => document.removeEventListener("pointerdown", outside);
  }, [open]);
  const close = () => {
    setOpen(false);
    button.current?.focus();
  };
  return (
    <div
      ref={root}
      className="relative"
      onKeyDown={(event) => {
        if (event.key !== "Escape" || !open) return;
        event.stopPropagation();
        close();
      }}
    >
      <button ref={button} type="button" aria-expanded={open} aria-controls={open ? id : undefined} aria-label={label} title={label} className={className} onClick={() => setOpen(!open)}>
        {face}
      </button>
      {open && <div id={id} className={classes("absolute top-full z-30 mt-1 w-max max-w-[min(360px,92vw)] border border-ink bg-lit p-4", align === "right" ? "right-0" : "left-0", panelClassName)}>{children(close)}</div>}
    </div>
  );
}
