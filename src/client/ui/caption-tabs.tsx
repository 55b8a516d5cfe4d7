import { useId, useRef, type ReactNode } from "react";
import { classes } from "./classes.ts";

export interface CaptionTab<T extends string> {
  readonly value: T;
  readonly label: string;
  /** Beside the word: a count, a number. */
  readonly note?: ReactNode;
}

/** Tabs in the lettering of a drawing sheet. Arrow keys choose; the panel follows. */
export function CaptionTabs<T extends string>({ label, tabs, value, onChange, children, className, barClassName, after }: {
  label: string; tabs: readonly CaptionTab<T>[]; value: T; onChange: (value: T) => void; children: ReactNode; className?: string; barClassName?: string; after?: ReactNode;
}) {
  const id = useId();
  const bar = useRef<HTMLDivElement>(null);
  return (
    <div className={classes("flex min-h-0 flex-col", className)}>
      <div className={classes("flex shrink-0 items-center gap-5", barClassName)}>
        <div
          ref={bar}
          role="tablist"
          aria-label={label}
          className="flex items-stretch gap-5 overflow-x-auto"
          onKeyDown={(event) => {
            const step = event.key === "ArrowRight" ? 1 : event.key === "ArrowLeft" ? -1 : 0;
            if (step === 0) return;
            event.preventDefault();
            const at = tabs.findIndex((tab) => tab.value === value);
            const next = tabs[(at + step + tabs.length) % tabs.length]!;
            onChange(next.value);
            bar.current?.querySelector<HTMLButtonElement>(`[data-tab="${next.value}"]`)?.focus();
          }}
        >
          {tabs.map((tab) => (
            <button
              key={tab.value}
              type="button"
              role="tab"
              id={`${id}-${tab.value}`}
              data-tab={tab.value}
              aria-selected={tab.value === value}
              aria-controls={`${id}-panel`}
              tabIndex={tab.value === value ? 0 : -1}
              className={classes("caption flex min-h-9 items-center gap-2 whitespace-nowrap border-b-2 -outline-offset-2", tab.value === value ? "border-ink" : "border-transparent text-pencil hover:text-ink")}
              onClick={() => onChange(tab.value)}
            >
              {tab.label}
              {tab.note}
            </button>
          ))}
        </div>
        {after}
      </div>
      <div id={`${id}-panel`} role="tabpanel" aria-labelledby={`${id}-${value}`} className="flex min-h-0 flex-1 flex-col">
        {children}
      </div>
    </div>
  );
}
