import type { ReactNode } from "react";
import { classes } from "./classes.ts";

/** A drawing's title block as a row: ruled cells, each with its small heading. */
export function TitleBlock({ children, className }: { children: ReactNode; className?: string }) {
  return <div className={classes("flex flex-wrap border border-ink bg-lit [&>*]:-mb-px [&>*]:-mr-px", className)}>{children}</div>;
}

export function Cell({ label, children, className }: { label?: string; children: ReactNode; className?: string }) {
  return (
    <div className={classes("flex min-h-[58px] min-w-0 flex-col border-b border-r border-hair px-3 pb-1.5 pt-1", className)}>
      {label && <span className="text-[13px] leading-tight text-pencil">{label}</span>}
      <div className="mt-auto min-w-0">{children}</div>
    </div>
  );
}
