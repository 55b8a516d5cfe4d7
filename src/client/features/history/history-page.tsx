import { useInfiniteQuery, useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { useParams } from "react-router-dom";
import { toast } from "sonner";
import { getBuild } from "#contracts/builds.contract.ts";
import { getLayout, listChanges, postCommand, type Change } from "#contracts/layouts.contract.ts";
import { rolesFor } from "#core/layout/command-access.ts";
import { invertDiff } from "#core/layout/diff.ts";
import { call } from "../../api/call.ts";
import { paths } from "../../app/paths.ts";
import { Header } from "../../app/shell.tsx";
import { Button } from "../../ui/button.tsx";
import { Empty, Loading, TroubleNote } from "../../ui/states.tsx";

/** Who changed what and when, newest first; a step can be taken back where what it left still stands. */
export default function HistoryPage() {
  const { buildId = "", layoutId = "" } = useParams();
  const params = { buildId, layoutId };
  const client = useQueryClient();
  const [text, setText] = useState("");
  const build = useQuery({ queryKey: ["build", buildId], queryFn: () => call(getBuild, { params: { buildId } }) });
  const layout = useQuery({ queryKey: ["history-layout", layoutId], queryFn: () => call(getLayout, { params }) });
  const changes = useInfiniteQuery({
    queryKey: ["changes", layoutId], initialPageParam: undefined as number | undefined,
    queryFn: ({ pageParam }) => call(listChanges, { params, query: { limit: 50, before: pageParam } }),
    getNextPageParam: (last) => (last.more ? last.changes[last.changes.length - 1]?.seq : undefined),
  });
  const takeBack = useMutation({
    mutationFn: (change: Change) => call(postCommand, { params, body: { commandId: crypto.randomUUID(), base: layout.data?.seq ?? change.seq, label: `Take back: ${change.label}`.slice(0, 200), command: { kind: "restore", changes: invertDiff(change.diff) } } }),
    onSuccess: async (_, change) => {
      toast.success(`Taken back: ${change.label}`);
      await Promise.all([client.invalidateQueries({ queryKey: ["changes", layoutId] }), client.invalidateQueries({ queryKey: ["history-layout", layoutId] }), client.invalidateQueries({ queryKey: ["layout", layoutId] })]);
    },
    onError: (error) => toast.error(error.message),
  });
  const all = changes.data?.pages.flatMap((page) => page.changes) ?? [];
  const words = text.trim().toLowerCase();
  const shown = words === "" ? all : all.filter((change) => `${change.label} ${change.by.name} ${change.items.map((item) => item.key).join(" ")}`.toLowerCase().includes(words));
  const mayTakeBack = (change: Change) => build.data !== undefined && build.data.role !== "viewer" && rolesFor({ kind: "restore", changes: invertDiff(change.diff) }).includes(build.data.role);
  return (
    <>
      <Header
        crumbs={build.data && layout.data ? [{ to: paths.build(buildId), text: build.data.name }, { to: paths.bench(buildId, layoutId), text: layout.data.document.name }] : []}
        tabs={[{ to: paths.bench(buildId, layoutId), text: "Bench" }, { to: paths.sheets(buildId, layoutId), text: "Sheets" }, { to: paths.history(buildId, layoutId), text: "History" }]}
      />
      <main className="mx-auto max-w-4xl px-6 py-8">
        <div className="mb-5 flex flex-wrap items-end justify-between gap-4">
          <h1 className="text-3xl font-semibold">History</h1>
          <input type="search" aria-label="Find in the history" placeholder="find a part, a person" className="w-64 border-b border-ink bg-transparent px-1 py-1" value={text} onChange={(event) => setText(event.target.value)} />
        </div>
        {changes.isPending ? <Loading what="Fetching the history" lines={8} /> : changes.isError ? <TroubleNote error={changes.error} again={() => void changes.refetch()} /> : all.length === 0 ? <Empty title="Nothing has been changed yet">Every move, every number typed on the bench stands here, with who did it and when.</Empty> : (
          <ol className="border-t border-ink">
            {shown.map((change) => (
              <li key={change.seq} className="grid grid-cols-[56px_1fr_auto] items-baseline gap-4 border-b border-hair py-2">
                <span className="num text-pencil">{change.seq}</span>
                <span><span className="font-semibold">{change.label}</span><span className="block text-sm text-pencil">{change.by.name}, <time dateTime={change.at}>{new Date(change.at).toLocaleString([], { dateStyle: "medium", timeStyle: "short" })}</time>{change.items.length > 1 && `; ${change.items.map((item) => item.key).join(", ")}`}</span></span>
                {mayTakeBack(change) && <Button look="quiet" disabled={takeBack.isPending} onClick={() => takeBack.mutate(change)}>Take back</Button>}
              </li>
            ))}
            {shown.length === 0 && <li className="py-6 text-pencil">No change matches.</li>}
          </ol>
        )}
        {changes.hasNextPage && <Button className="mt-6" disabled={changes.isFetchingNextPage} onClick={() => void changes.fetchNextPage()}>Earlier ones</Button>}
      </main>
    </>
  );
}
