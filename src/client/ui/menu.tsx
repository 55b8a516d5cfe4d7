import { useEffect, useId, useRef, type ReactNode } from "react";
import { classes } from "./classes.ts";
import { useOpen } from "./use-open.ts";

export interface MenuItem {
  readonly label: string;
  readonly act: () => void;
  readonly danger?: boolean;
  /** Why it cannot be done now; said in place of doing it. */
  readonly not?: string | undefined;
}

/** A word that opens a list of things to do: arrows walk it, Escape leaves it, focus comes back. */
export function Menu({ label, children, items, className, align = "right" }: { label: string; children: ReactNode; items: readonly MenuItem[]; className?: string; align?: "left" | "right" }) {
  const { open, setOpen, close, root, button } = useOpen();
  const list = useRef<HTMLDivElement>(null);
  const id = useId();
  useEffect(() => {
    if (open) list.current?.querySelector<HTMLButtonElement>("[role=menuitem]")?.focus();
  }, [open]);
  const walk = (by: number | "first" | "last") => {
    const all = [...(list.current?.querySelectorAll<HTMLButtonElement>("[role=menuitem]") ?? [])];
    const at = all.indexOf(document.activeElement as HTMLButtonElement);
    all[by === "first" ? 0 : by === "last" ? all.length - 1 : (at + by + all.length) % all.length]?.focus();
  };
  return (
    <div ref={root} className="relative">
      <button ref={button} type="button" aria-haspopup="menu" aria-expanded={open} aria-controls={open ? id : undefined} aria-label={label} title={label} className={className} onClick={() => setOpen(!open)}>
        {children}
      </button>
      {open && (
        <div
          ref={list}
          id={id}
          role="menu"
          aria-label={label}
          className={classes("absolute top-full z-30 mt-1 min-w-[190px] border border-ink bg-lit py-1", align === "right" ? "right-0" : "left-0")}
          onKeyDown={(event) => {
            const moves: Record<string, () => void> = { ArrowDown: () => walk(1), ArrowUp: () => walk(-1), Home: () => walk("first"), End: () => walk("last"), Escape: close, Tab: () => setOpen(false) };
            const move = moves[event.key];
            if (!move) return;
            if (event.key !== "Tab") event.preventDefault();
            event.stopPropagation();
            move();
          }}
        >
          {items.map((item) => (
            <button
              key={item.label}
              type="button"
              role="menuitem"
              tabIndex={-1}
              aria-disabled={item.not !== undefined || undefined}
              className={classes("block w-full px-4 py-1.5 text-left hover:bg-part focus:bg-part focus:outline-none pointer-coarse:py-2.5", item.danger && "text-short", item.not !== undefined && "text-pencil")}
              onClick={() => {
                if (item.not !== undefined) return;
                close();
                item.act();
              }}
            >
              {item.label}
              {item.not !== undefined && <span className="block text-sm">{item.not}</span>}
            </button>
          ))}
        </div>
      )}
    </div>
  );
}
