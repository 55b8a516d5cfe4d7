import type { ReactNode } from "react";

/** One line of the card: what it is at the left, what is written at the right, a hairline beneath. */
export function TicketRow({ label, children }: { label: ReactNode; children: ReactNode }) {
  return (
    <div className="grid grid-cols-[104px_minmax(0,1fr)] items-start gap-x-2 border-b border-hair py-1 last:border-b-0">
      <div className="pt-1.5 leading-tight text-pencil">{label}</div>
      <div className="grid auto-cols-fr grid-flow-col items-start gap-2">{children}</div>
    </div>
  );
}

/** Lines that only say something. */
export function TicketSays({ label, children }: { label: ReactNode; children: ReactNode }) {
  return <TicketRow label={label}><div className="min-h-[30px] pt-1.5 leading-tight">{children}</div></TicketRow>;
}

/** Part of the card that is opened when it is wanted. */
export function TicketFold({ title, note, open, children }: { title: string; note?: ReactNode; open?: boolean; children: ReactNode }) {
  return (
    <details open={open} className="group border-b border-hair last:border-b-0">
      <summary className="flex min-h-9 cursor-pointer list-none items-center justify-between gap-3 py-1.5 hover:bg-film [&::-webkit-details-marker]:hidden">
        <span className="caption text-[12px]">{title}</span>
        <span className="flex min-w-0 items-center gap-2 text-sm text-pencil"><span className="truncate">{note}</span><span aria-hidden="true" className="num group-open:hidden">+</span><span aria-hidden="true" className="num hidden group-open:inline">-</span></span>
      </summary>
      <div className="pb-3">{children}</div>
    </details>
  );
}
