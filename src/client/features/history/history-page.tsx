import { useInfiniteQuery, useQueryClient } from "@tanstack/react-query";
import { useEffect, useMemo, useRef, useState } from "react";
import { toast } from "sonner";
import type { Change } from "#contracts/layouts.contract.ts";
import { invertDiff, itemOf, sameValue } from "#core/layout/diff.ts";
import type { Command } from "#core/layout/commands.ts";
import type { Layout } from "#core/layout/schema.ts";
import { call } from "../../api/call.ts";
import { mayGive, useBench, useDocument } from "../../editor/bench-context.tsx";
import { Button } from "../../ui/button.tsx";
import { Empty, Loading, TroubleNote } from "../../ui/states.tsx";
import { exactText } from "../../ui/when.ts";
import { ChangedList } from "./changed-list.tsx";

const PAGE = 50;

/** Who changed what and when, newest first. A step can be taken back where everything it wrote still stands as it left it. */
export default function HistoryPage() {
  const bench = useBench();
  const { buildId, layoutId, store } = bench;
  const client = useQueryClient();
  const document = useDocument((state) => state.document);
  const seq = useDocument((state) => state.seq);
  const waiting = useDocument((state) => state.waiting);
  const [text, setText] = useState("");
  const [open, setOpen] = useState<number | null>(null);
  const changes = useInfiniteQuery({
    queryKey: ["changes", layoutId], initialPageParam: undefined as number | undefined,
    queryFn: ({ pageParam }) => call("listChanges", { params: { buildId, layoutId }, query: { limit: PAGE, before: pageParam } }),
    getNextPageParam: (last) => (last.more ? last.changes[last.changes.length - 1]?.seq : undefined),
  });
  const seen = useRef(seq);
  useEffect(() => {
    if (seq === seen.current) return;
    seen.current = seq;
    void client.invalidateQueries({ queryKey: ["changes", layoutId] });
  }, [seq, client, layoutId]);
  const days = useMemo(() => {
    const words = text.trim().toLowerCase().split(/\s+/).filter(Boolean);
    const all = changes.data?.pages.flatMap((page) => page.changes) ?? [];
    const kept = all.filter((change) => words.every((word) => `${change.label} ${change.by.name} ${change.items.map((item) => item.key).join(" ")}`.toLowerCase().includes(word)));
    const byDay = new Map<string, Change[]>();
    for (const change of kept) {
      const day = new Date(change.at).toLocaleDateString([], { weekday: "long", day: "numeric", month: "long", year: "numeric" });
      byDay.set(day, [...(byDay.get(day) ?? []), change]);
    }
    return [...byDay];
  }, [changes.data, text]);
  const takeBack = (change: Change) => {
    const command: Command = { kind: "restore", changes: invertDiff(change.diff) };
    if (store.run(command, `Take back: ${change.label}`.slice(0, 200))) toast(`Taken back: ${change.label}`, { action: { label: "Undo", onClick: () => store.undo() } });
    else toast.error(store.state.getState().refusal ?? "It can no longer be taken back.");
  };
  const empty = changes.data && changes.data.pages[0]?.changes.length === 0;
  return (
    <main id="main" className="min-h-0 flex-1 overflow-y-auto">
      <div className="mx-auto max-w-5xl px-5 py-8 sm:px-8">
        <div className="mb-6 flex flex-wrap items-end justify-between gap-4">
          <div><h1 className="text-3xl font-semibold">History</h1><p className="text-pencil">Every change, who made it and when. Nothing here is ever rewritten; taking a step back is a change of its own.</p></div>
          <input type="search" aria-label="Find in the history" placeholder="find a part or a person" className="written max-w-64" value={text} onChange={(event) => setText(event.target.value)} />
        </div>
        {waiting.length > 0 && (
          <section aria-label="Not sent yet" className="mb-6 border border-tight px-4 py-3">
            <h2 className="font-semibold text-tight">{waiting.length} not sent yet, kept in this browser</h2>
            <ul>{waiting.map((one) => <li key={one.commandId}>{one.label}</li>)}</ul>
          </section>
        )}
        {changes.isPending ? <Loading what="Fetching the history" lines={10} /> : changes.isError ? <TroubleNote error={changes.error} again={() => void changes.refetch()} title="The history could not be fetched" /> : empty ? (
          <Empty title="Nothing has been changed yet">Every move and every number typed on the bench will stand here.</Empty>
        ) : (
          <>
            {days.length === 0 && <p className="py-6 text-pencil">No change that is shown here matches. Earlier ones may: fetch them below.</p>}
            {days.map(([day, list]) => (
              <section key={day} aria-label={day} className="mb-8">
                <h2 className="caption border-b border-ink pb-1">{day}</h2>
                <ol>
                  {list.map((change) => (
                    <li key={change.seq} className="border-b border-hair">
                      <div className="grid grid-cols-[48px_minmax(0,1fr)_auto] items-baseline gap-x-4 py-1.5 sm:grid-cols-[48px_84px_minmax(0,1fr)_160px_104px]">
                        <span className="num text-pencil">{change.seq}</span>
                        <time dateTime={change.at} title={exactText(change.at)} className="num whitespace-nowrap text-sm text-pencil max-sm:hidden">{new Date(change.at).toLocaleTimeString([], { hour: "2-digit", minute: "2-digit" })}</time>
                        <button type="button" aria-expanded={open === change.seq} className="min-w-0 text-left font-semibold hover:underline" onClick={() => setOpen(open === change.seq ? null : change.seq)}>{change.label}</button>
                        <span className="truncate text-pencil max-sm:order-last max-sm:col-start-2">{change.by.name}</span>
                        <span className="text-right"><TakeBack change={change} document={document} may={mayGive(bench, { kind: "restore", changes: invertDiff(change.diff) })} act={() => takeBack(change)} /></span>
                      </div>
                      {open === change.seq && <ChangedList change={change} />}
                    </li>
                  ))}
                </ol>
              </section>
            ))}
          </>
        )}
        {changes.hasNextPage && <Button disabled={changes.isFetchingNextPage} onClick={() => void changes.fetchNextPage()}>{changes.isFetchingNextPage ? "Fetching …" : "Earlier changes"}</Button>}
      </div>
    </main>
  );
}

function TakeBack({ change, document, may, act }: { change: Change; document: Layout; may: boolean; act: () => void }) {
  const stands = useMemo(() => change.diff.every((item) => sameValue(itemOf(document, item.list, item.key) ?? null, item.after ?? null)), [change, document]);
  if (!may) return null;
  if (!stands) return <span className="text-sm text-pencil" title="What it wrote has changed since, so taking it back would undo more than this step.">changed since</span>;
  return <Button look="quiet" onClick={act}>Take back</Button>;
}
