import { useId, type ReactNode } from "react";
import { classes } from "./classes.ts";
import { useOpen } from "./use-open.ts";

/** A word that opens a small sheet beneath it; Escape and a click elsewhere close it. */
export function Popover({ label, face, children, className, panelClassName, align = "right" }: { label: string; face: ReactNode; children: (close: () => void) => ReactNode; className?: string; panelClassName?: string; align?: "left" | "right" }) {
  const { open, setOpen, close, root, button } = useOpen();
  const id = useId();
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
