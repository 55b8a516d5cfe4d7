import { useRef, useState } from "react";
import { Link, useNavigate, useParams } from "react-router-dom";
import { toast } from "sonner";
import type { LayoutSummary } from "#contracts/layouts.contract.ts";
import { addressOf, CallError } from "../../api/call.ts";
import { Header, initialsOf } from "../../app/header.tsx";
import { NotFound } from "../../app/not-found.tsx";
import { paths } from "../../app/paths.ts";
import { useTitle } from "../../app/theme.ts";
import { Button } from "../../ui/button.tsx";
import { NameDialog } from "../../ui/dialog.tsx";
import { Menu, type MenuItem } from "../../ui/menu.tsx";
import { Segmented } from "../../ui/segmented.tsx";
import { Empty, Loading, TroubleNote } from "../../ui/states.tsx";
import { Cell, TitleBlock } from "../../ui/title-block.tsx";
import { exactText, whenText } from "../../ui/when.ts";
import { FileFaults } from "./file-faults.tsx";
import { useBuild, useLayoutChanges, useLayouts, useMembers } from "./layouts.queries.ts";

type Asking = { what: "new" } | { what: "duplicate" | "rename"; one: LayoutSummary } | null;

/** A build's layouts: begun, brought in from a file, duplicated, renamed, put away, taken out as files. */
export default function LayoutsPage() {
  const { buildId = "" } = useParams();
  const build = useBuild(buildId);
  const members = useMembers(buildId);
  const [archived, setArchived] = useState(false);
  const layouts = useLayouts(buildId, archived);
  const { create, duplicate, rename, archive, bringIn } = useLayoutChanges(buildId);
  const navigate = useNavigate();
  const [asking, setAsking] = useState<Asking>(null);
  const [faults, setFaults] = useState<{ error: Error; file: string } | null>(null);
  const input = useRef<HTMLInputElement>(null);
  useTitle(build.data?.name);
  if (build.error instanceof CallError && build.error.code === "not-found") return <NotFound what="build" />;
  const owner = build.data?.role === "owner";
  const open = (one: LayoutSummary) => void navigate(paths.bench(buildId, one.id));
  const ask = (next: Asking) => {
    for (const mutation of [create, duplicate, rename]) mutation.reset();
    setAsking(next);
  };
  const take = (file: File | undefined) => {
    if (!file) return;
    bringIn.mutate(file, {
      onSuccess: (made) => toast(`${made.name} is in, with ${made.parts} parts and ${made.runs} runs.`, { action: { label: "Open it", onClick: () => open(made) } }),
      onError: (error) => setFaults({ error, file: file.name }),
    });
  };
  const items = (one: LayoutSummary): MenuItem[] => [
    { label: "Export the layout file", act: () => location.assign(addressOf("exportLayout", { buildId, layoutId: one.id })) },
    ...(owner ? [
      { label: "Duplicate", act: () => ask({ what: "duplicate", one }) },
      { label: "Rename", act: () => ask({ what: "rename", one }), not: one.archived ? "take it out of the archive first" : undefined },
      { label: one.archived ? "Take out of the archive" : "Put into the archive", act: () => archive.mutate(one, {
        onSuccess: () => toast(one.archived ? `${one.name} is at work again.` : `${one.name} is in the archive.`, { action: { label: "Undo", onClick: () => archive.mutate({ ...one, archived: !one.archived }) } }),
        onError: (error) => toast.error(error.message),
      }) },
    ] : []),
  ];
  return (
    <div
      className="min-h-full"
      onDragOver={(event) => owner && event.preventDefault()}
      onDrop={(event) => {
        if (!owner) return;
        event.preventDefault();
        take(event.dataTransfer.files[0]);
      }}
    >
      <Header crumbs={build.data ? [{ to: paths.build(buildId), text: build.data.name }] : []} role={build.data?.role} />
      <main id="main" className="mx-auto max-w-5xl px-5 py-10 sm:px-8">
        <div className="mb-8 flex flex-wrap items-end justify-between gap-4">
          <div>
            <h1 className="text-3xl font-semibold">{build.data?.name ?? "\u00a0"}</h1>
            <p className="text-pencil">{build.data ? <>You are its {build.data.role}. {!owner && "Layouts are begun, brought in and put away by the owner."}</> : "\u00a0"}</p>
          </div>
          {owner && (
            <div className="flex flex-wrap gap-3">
              <Button disabled={bringIn.isPending} onClick={() => input.current?.click()} title="Or drop the file anywhere on this page">{bringIn.isPending ? "Reading the file …" : "Bring in a layout file"}</Button>
              <Button look="main" onClick={() => ask({ what: "new" })}>Begin a layout</Button>
              <input ref={input} type="file" accept=".json,application/json" className="hidden" aria-label="Layout file" onChange={(event) => {
                take(event.target.files?.[0]);
                event.target.value = "";
              }} />
            </div>
          )}
        </div>
        <div className="mb-5"><Segmented label="Which layouts" small value={archived ? "archive" : "work"} onChange={(value) => setArchived(value === "archive")} options={[{ value: "work", label: "at work" }, { value: "archive", label: "archive" }]} /></div>
        {build.isError || layouts.isError ? <TroubleNote error={build.error ?? layouts.error} again={() => void (build.refetch(), layouts.refetch())} title="The layouts could not be fetched" /> : !layouts.data ? <Loading what="Fetching the layouts" lines={6} /> : layouts.data.layouts.length === 0 ? (
          <Empty title={archived ? "The archive is empty" : "No layout yet"}>{archived ? "Layouts that are put away stand here; nothing of them is lost." : owner ? "A layout is one arrangement of the car's parts. Begin with a bare chassis, or bring in a layout file." : "The owner has not begun one yet."}</Empty>
        ) : (
          <ul className="space-y-5">
            {layouts.data.layouts.map((one) => (
              <li key={one.id}>
                <TitleBlock>
                  <Cell label="layout" className="grow basis-72"><Link to={paths.bench(buildId, one.id)} className="block truncate text-xl font-semibold hover:underline hover:underline-offset-4" title={one.name}>{one.name}</Link></Cell>
                  <Cell label="parts" className="basis-20 max-sm:grow"><span className="num text-lg">{one.parts}</span></Cell>
                  <Cell label="runs" className="basis-20 max-sm:grow"><span className="num text-lg">{one.runs}</span></Cell>
                  <Cell label="change" className="basis-24 max-sm:grow"><Link to={paths.history(buildId, one.id)} className="num text-lg hover:underline" title="Its history">{one.seq}</Link></Cell>
                  <Cell label={`last change${one.updatedBy ? `, ${one.updatedBy}` : ""}`} className="basis-52 max-sm:grow"><time dateTime={one.updatedAt} title={exactText(one.updatedAt)} className="text-lg">{whenText(one.updatedAt)}</time></Cell>
                  <Cell className="basis-20 items-end"><Menu label={`More for ${one.name}`} className="min-h-8 border border-hair px-2 hover:border-ink" items={items(one)}>more</Menu></Cell>
                </TitleBlock>
              </li>
            ))}
          </ul>
        )}
        <section aria-labelledby="people" className="mt-14">
          <h2 id="people" className="caption mb-3">Members</h2>
          {members.isError ? <p className="text-pencil">They could not be fetched.</p> : !members.data ? <Loading what="Fetching the members" lines={2} /> : (
            <ul className="grid gap-x-8 gap-y-2 sm:grid-cols-2">
              {members.data.members.map((one) => (
                <li key={one.personId} className="flex items-center gap-3 border-b border-hair py-1.5">
                  <span aria-hidden="true" className="num grid h-8 w-9 place-items-center border border-hair text-sm">{initialsOf(one.name)}</span>
                  <span className="font-semibold">{one.name}</span><span className="text-pencil">{one.role}</span>
                </li>
              ))}
            </ul>
          )}
        </section>
      </main>
      {asking?.what === "new" && <NameDialog title="Begin a layout" label="What is this arrangement called?" action="Begin" busy={create.isPending} error={create.error?.message} onClose={() => setAsking(null)} onGive={(name) => create.mutate(name, { onSuccess: open })} />}
      {asking?.what === "duplicate" && <NameDialog title={`Duplicate ${asking.one.name}`} label="Name of the new one" start={`${asking.one.name}, next try`} action="Duplicate" busy={duplicate.isPending} error={duplicate.error?.message} onClose={() => setAsking(null)} onGive={(name) => duplicate.mutate({ like: asking.one, name }, { onSuccess: open })} />}
      {asking?.what === "rename" && <NameDialog title={`Rename ${asking.one.name}`} label="Name of the layout" start={asking.one.name} action="Rename" busy={rename.isPending} error={rename.error?.message} onClose={() => setAsking(null)} onGive={(name) => rename.mutate({ one: asking.one, name }, { onSuccess: () => setAsking(null) })} />}
      {faults && <FileFaults {...faults} onClose={() => setFaults(null)} />}
    </div>
  );
}
