import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useRef, useState } from "react";
import { Link, useNavigate, useParams } from "react-router-dom";
import { toast } from "sonner";
import { getBuild, listMembers } from "#contracts/builds.contract.ts";
import { archiveLayout, createLayout, duplicateLayout, exportLayout, importLayout, listLayouts, type LayoutSummary } from "#contracts/layouts.contract.ts";
import { addressOf, call, CallError } from "../../api/call.ts";
import { paths } from "../../app/paths.ts";
import { Header } from "../../app/shell.tsx";
import { Button, Dialog, Field, FIELD, Trouble, Waiting } from "../../ui/controls.tsx";

const LARGEST = 20 * 1024 * 1024;

export default function LayoutsPage() {
  const { buildId = "" } = useParams();
  const client = useQueryClient();
  const navigate = useNavigate();
  const [archived, setArchived] = useState(false);
  const build = useQuery({ queryKey: ["build", buildId], queryFn: () => call(getBuild, { params: { buildId } }) });
  const members = useQuery({ queryKey: ["members", buildId], queryFn: () => call(listMembers, { params: { buildId } }) });
  const layouts = useQuery({ queryKey: ["layouts", buildId, archived], queryFn: () => call(listLayouts, { params: { buildId }, query: { archived: archived ? "yes" : "no" } }) });
  const [naming, setNaming] = useState<{ like: LayoutSummary | null } | null>(null);
  const [name, setName] = useState("");
  const [faults, setFaults] = useState<CallError | null>(null);
  const file = useRef<HTMLInputElement>(null);
  const refresh = () => client.invalidateQueries({ queryKey: ["layouts", buildId] });
  const save = useMutation({
    mutationFn: () => (naming?.like ? call(duplicateLayout, { params: { buildId, layoutId: naming.like.id }, body: { name } }) : call(createLayout, { params: { buildId }, body: { name } })),
    onSuccess: async (made) => {
      setNaming(null);
      await refresh();
      void navigate(paths.bench(buildId, made.id));
    },
  });
  const archive = useMutation({ mutationFn: (one: LayoutSummary) => call(archiveLayout, { params: { buildId, layoutId: one.id }, body: { archived: !one.archived } }), onSuccess: refresh, onError: (error) => toast.error(error.message) });
  const bringIn = useMutation({
    mutationFn: async (given: File) => {
      if (given.size > LARGEST) throw new CallError("too-large", "A layout file is at most 20 MB.");
      return call(importLayout, { params: { buildId }, text: await given.text() });
    },
    onSuccess: async (made) => {
      await refresh();
      toast.success(`${made.name} is in.`);
    },
    onError: (error) => setFaults(error instanceof CallError ? error : new CallError("failed", String(error))),
  });
  if (build.isPending) return <><Header /><Waiting what="the build" /></>;
  if (build.isError) return <><Header /><Trouble error={build.error} retry={() => void build.refetch()} /></>;
  const owner = build.data.role === "owner";
  const ask = (like: LayoutSummary | null) => {
    save.reset();
    setName(like ? `${like.name}, next try` : "");
    setNaming({ like });
  };
  return (
    <>
      <Header crumbs={[{ to: paths.build(buildId), text: build.data.name }]} />
      <main className="mx-auto grid max-w-5xl gap-12 px-6 py-10 md:grid-cols-[1fr_240px]">
        <div>
          <div className="mb-6 flex flex-wrap items-end justify-between gap-3">
            <h1 className="text-3xl font-semibold">{build.data.name}</h1>
            {owner && (
              <div className="flex gap-3">
                <Button onClick={() => file.current?.click()} disabled={bringIn.isPending}>{bringIn.isPending ? "Reading …" : "Import a layout file"}</Button>
                <Button tone="strong" onClick={() => ask(null)}>New layout</Button>
                <input ref={file} type="file" accept=".json,application/json" className="hidden" aria-label="Layout file" onChange={(event) => { const given = event.target.files?.[0]; if (given) bringIn.mutate(given); event.target.value = ""; }} />
              </div>
            )}
          </div>
          <div className="mb-2 flex gap-5 text-sm"><button type="button" className={archived ? "text-pencil" : "font-semibold underline underline-offset-4"} onClick={() => setArchived(false)}>At work</button><button type="button" className={archived ? "font-semibold underline underline-offset-4" : "text-pencil"} onClick={() => setArchived(true)}>Archived</button></div>
          {layouts.isPending ? <Waiting what="the layouts" /> : layouts.isError ? <Trouble error={layouts.error} retry={() => void layouts.refetch()} /> : layouts.data.layouts.length === 0 ? (
            <p className="border border-dashed border-pencil p-8 text-center text-pencil">{archived ? "Nothing is archived." : owner ? "No layout yet: begin a new one, or import a layout file." : "No layout yet."}</p>
          ) : (
            <ul className="border-t border-ink">
              {layouts.data.layouts.map((one) => (
                <li key={one.id} className="flex flex-wrap items-center gap-x-5 gap-y-1 border-b border-hair py-4">
                  <Link to={paths.bench(buildId, one.id)} className="text-lg font-semibold hover:underline">{one.name}</Link>
                  <span className="text-sm text-pencil">{one.parts} parts, {one.runs} runs; change {one.seq}{one.updatedBy ? `, ${one.updatedBy}` : ""}, {new Date(one.updatedAt).toLocaleString([], { dateStyle: "medium", timeStyle: "short" })}</span>
                  <span className="ml-auto flex gap-1">
                    <a className="min-h-7 px-2 text-sm font-semibold text-pencil hover:text-ink" href={addressOf(exportLayout, { buildId, layoutId: one.id })} download>Export</a>
                    {owner && <><Button tone="quiet" small onClick={() => ask(one)}>Duplicate</Button><Button tone="quiet" small onClick={() => archive.mutate(one)}>{one.archived ? "Take out of the archive" : "Archive"}</Button></>}
                  </span>
                </li>
              ))}
            </ul>
          )}
        </div>
        <aside>
          <h2 className="caption mb-3">People</h2>
          <ul className="space-y-2">{members.data?.members.map((one) => <li key={one.personId}><span className="font-semibold">{one.name}</span> <span className="text-pencil">{one.role}</span></li>)}</ul>
        </aside>
      </main>
      {naming && (
        <Dialog title={naming.like ? `Duplicate ${naming.like.name}` : "New layout"} onClose={() => setNaming(null)}>
          <form className="space-y-5" onSubmit={(event) => { event.preventDefault(); save.mutate(); }}>
            <Field label="Name of the layout" error={save.isError ? save.error.message : undefined}>{(id) => <input id={id} autoFocus required maxLength={200} className={FIELD} value={name} onChange={(event) => setName(event.target.value)} />}</Field>
            <div className="flex justify-end"><Button type="submit" tone="strong" disabled={save.isPending}>{naming.like ? "Duplicate" : "Begin"}</Button></div>
          </form>
        </Dialog>
      )}
      {faults && (
        <Dialog title="The file cannot be taken" onClose={() => setFaults(null)} wide>
          <p className="mb-4">{faults.message} Nothing was stored.</p>
          {faults.fields.length > 0 && <table className="w-full text-left"><thead><tr className="border-b border-ink text-sm text-pencil"><th className="py-1 pr-6 font-normal">place in the file</th><th className="font-normal">what is wrong</th></tr></thead><tbody>{faults.fields.map((fault, i) => <tr key={i} className="border-b border-hair align-top"><td className="num py-1 pr-6 text-sm">{fault.path || "whole file"}</td><td className="py-1">{fault.message}</td></tr>)}</tbody></table>}
        </Dialog>
      )}
    </>
  );
}
