import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { Link } from "react-router-dom";
import { toast } from "sonner";
import { createBuild, deleteBuild, listBuilds, renameBuild, type Build } from "#contracts/builds.contract.ts";
import { call } from "../../api/call.ts";
import { paths } from "../../app/paths.ts";
import { Header } from "../../app/shell.tsx";
import { Button, Confirm, Dialog, Field, FIELD, Trouble, Waiting } from "../../ui/controls.tsx";

export default function BuildsPage() {
  const client = useQueryClient();
  const builds = useQuery({ queryKey: ["builds"], queryFn: () => call(listBuilds) });
  const [dialog, setDialog] = useState<{ kind: "new" } | { kind: "rename" | "delete"; build: Build } | null>(null);
  const [name, setName] = useState("");
  const refresh = () => client.invalidateQueries({ queryKey: ["builds"] });
  const save = useMutation({
    mutationFn: () => (dialog?.kind === "rename" ? call(renameBuild, { params: { buildId: dialog.build.id }, body: { name } }) : call(createBuild, { body: { name } })),
    onSuccess: async () => {
      setDialog(null);
      await refresh();
    },
  });
  const remove = useMutation({ mutationFn: (buildId: string) => call(deleteBuild, { params: { buildId } }), onSuccess: refresh, onError: (error) => toast.error(error.message) });
  const open = (next: NonNullable<typeof dialog>) => {
    save.reset();
    setName(next.kind === "rename" ? next.build.name : "");
    setDialog(next);
  };
  return (
    <>
      <Header />
      <main className="mx-auto max-w-4xl px-6 py-10">
        <div className="mb-6 flex items-end justify-between"><h1 className="text-3xl font-semibold">Builds</h1><Button onClick={() => open({ kind: "new" })}>New build</Button></div>
        {builds.isPending ? <Waiting what="your builds" /> : builds.isError ? <Trouble error={builds.error} retry={() => void builds.refetch()} /> : builds.data.builds.length === 0 ? (
          <div className="border border-dashed border-pencil p-10 text-center"><p className="mb-1 text-lg font-semibold">No build yet</p><p className="mb-5 text-pencil">A build is one car: its layouts, its parts, the people around it.</p><Button tone="strong" onClick={() => open({ kind: "new" })}>Begin one</Button></div>
        ) : (
          <ul className="border-t border-ink">
            {builds.data.builds.map((build) => (
              <li key={build.id} className="flex flex-wrap items-center gap-x-6 gap-y-1 border-b border-hair py-4">
                <Link to={paths.build(build.id)} className="text-xl font-semibold hover:underline">{build.name}</Link>
                <span className="text-pencil">{build.layouts} {build.layouts === 1 ? "layout" : "layouts"}, {build.members} {build.members === 1 ? "member" : "members"}; you are {build.role}</span>
                <span className="num ml-auto text-sm text-pencil">{new Date(build.updatedAt).toLocaleDateString()}</span>
                {build.role === "owner" && <span className="flex gap-1"><Button tone="quiet" small onClick={() => open({ kind: "rename", build })}>Rename</Button><Button tone="quiet" small onClick={() => open({ kind: "delete", build })}>Delete</Button></span>}
              </li>
            ))}
          </ul>
        )}
      </main>
      {dialog && dialog.kind !== "delete" && (
        <Dialog title={dialog.kind === "new" ? "New build" : "Rename the build"} onClose={() => setDialog(null)}>
          <form className="space-y-5" onSubmit={(event) => { event.preventDefault(); save.mutate(); }}>
            <Field label="Name of the car" error={save.isError ? save.error.message : undefined}>{(id) => <input id={id} autoFocus required maxLength={120} className={FIELD} value={name} onChange={(event) => setName(event.target.value)} />}</Field>
            <div className="flex justify-end"><Button type="submit" tone="strong" disabled={save.isPending}>{dialog.kind === "new" ? "Begin" : "Rename"}</Button></div>
          </form>
        </Dialog>
      )}
      {dialog?.kind === "delete" && <Confirm title={`Delete ${dialog.build.name}`} word={dialog.build.name} action="Delete for good" says="Every layout of it, its history and its sheets go for all members. Export the layouts first if you may want them again." onConfirm={() => remove.mutate(dialog.build.id)} onClose={() => setDialog(null)} />}
    </>
  );
}
