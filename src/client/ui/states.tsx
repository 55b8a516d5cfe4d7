import type { ReactNode } from "react";
import { CallError } from "../api/call-error.ts";
import { Button } from "./button.tsx";

/** Lines that will be written on: keeps the place of what is on its way, and says so to a screen reader. */
export function Loading({ what, lines = 4, className }: { what: string; lines?: number; className?: string }) {
  return (
    <div role="status" className={className}>
      <span className="sr-only">{what} …</span>
      <div aria-hidden="true" className="ruled" style={{ height: lines * 35 }} />
    </div>
  );
}

/** Nothing here yet: what this place is for, and how to begin. */
export function Empty({ title, children }: { title: string; children?: ReactNode }) {
  return (
    <div className="border border-dashed border-hair px-6 py-8 text-center">
      <p className="text-lg font-semibold">{title}</p>
      {children && <div className="mx-auto mt-2 max-w-[52ch] text-pencil">{children}</div>}
    </div>
  );
}

/** What went wrong, what to do about it, and the number to tell us. */
export function TroubleNote({ error, again, title = "This could not be loaded" }: { error: unknown; again?: () => void; title?: string }) {
  const message = error instanceof Error ? error.message : String(error);
  const requestId = error instanceof CallError ? error.requestId : null;
  return (
    <div role="alert" className="border border-short px-5 py-4">
      <p className="font-semibold text-short">{title}</p>
      <p className="mt-1">{message}</p>
      <div className="mt-3 flex flex-wrap items-center gap-4">
        {again && <Button onClick={again}>Try again</Button>}
        {requestId && <span className="text-sm text-pencil">Request <span className="num">{requestId}</span></span>}
      </div>
    </div>
  );
}
