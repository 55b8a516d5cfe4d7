import { useState } from "react";
import { Link, useNavigate } from "react-router-dom";
import { toast } from "sonner";
import type { Build } from "#contracts/builds.contract.ts";
import { Header } from "../../app/header.tsx";
import { paths } from "../../app/paths.ts";
import { useTitle } from "../../app/theme.ts";
import { Button } from "../../ui/button.tsx";
import { ConfirmDialog, NameDialog } from "../../ui/dialog.tsx";
import { Menu } from "../../ui/menu.tsx";
import { Empty, Loading, TroubleNote } from "../../ui/states.tsx";
import { Cell, TitleBlock } from "../../ui/title-block.tsx";
import { exactText, whenText } from "../../ui/when.ts";
import { useBuildChanges, useBuilds } from "./builds.queries.ts";

type Asking = { what: "new" } | { what: "rename" | "delete"; build: Build } | null;

/** Every build the person is a member of, each as a title block. */
export default function BuildsPage() {
  const builds = useBuilds();
  const { create, rename, remove } = useBuildChanges();
  const navigate = useNavigate();
  const [asking, setAsking] = useState<Asking>(null);
  useTitle("Builds");
  const ask = (next: Asking) => {
    create.reset();
    rename.reset();
    remove.reset();
    setAsking(next);
  };
  return (
    <>
      <Header />
      <main id="main" className="mx-auto max-w-5xl px-5 py-10 sm:px-8">
        <div className="mb-8 flex flex-wrap items-end justify-between gap-4">
          <div><h1 className="text-3xl font-semibold">Builds</h1><p className="text-pencil">One car each: its layouts, its parts, the people round it.</p></div>
          <Button look="main" onClick={() => ask({ what: "new" })}>Begin a build</Button>
        </div>
        {builds.isPending ? <Loading what="Fetching your builds" lines={5} /> : builds.isError ? <TroubleNote error={builds.error} again={() => void builds.refetch()} title="Your builds could not be fetched" /> : builds.data.builds.length === 0 ? (
          <Empty title="No build yet">A build is one car: its layouts, its parts, the people around it.<div className="mt-4"><Button look="main" onClick={() => ask({ what: "new" })}>Begin one</Button></div></Empty>
        ) : (
          <ul className="space-y-5">
            {builds.data.builds.map((build) => (
              <li key={build.id}>
                <TitleBlock>
                  <Cell label="build" className="grow basis-64"><Link to={paths.build(build.id)} className="block truncate text-2xl font-semibold hover:underline hover:underline-offset-4">{build.name}</Link></Cell>
                  <Cell label="layouts" className="basis-24 max-sm:grow"><span className="num text-lg">{build.layouts}</span></Cell>
                  <Cell label="members" className="basis-24 max-sm:grow"><span className="num text-lg">{build.members}</span></Cell>
                  <Cell label="you are its" className="basis-32 max-sm:grow"><span className="text-lg">{build.role}</span></Cell>
                  <Cell label="last change" className="basis-40 max-sm:grow"><time dateTime={build.updatedAt} title={exactText(build.updatedAt)} className="text-lg">{whenText(build.updatedAt)}</time></Cell>
                  {build.role === "owner" && (
                    <Cell className="basis-20 items-end">
                      <Menu label={`More for ${build.name}`} className="min-h-8 border border-hair px-2 hover:border-ink" items={[{ label: "Rename", act: () => ask({ what: "rename", build }) }, { label: "Delete for good", danger: true, act: () => ask({ what: "delete", build }) }]}>more</Menu>
                    </Cell>
                  )}
                </TitleBlock>
              </li>
            ))}
          </ul>
        )}
      </main>
      {asking?.what === "new" && (
        <NameDialog title="Begin a build" label="Name of the car" action="Begin" busy={create.isPending} error={create.error?.message} onClose={() => setAsking(null)}
          onGive={(name) => create.mutate(name, { onSuccess: (made) => void navigate(paths.build(made.id)) })} />
      )}
      {asking?.what === "rename" && (
        <NameDialog title={`Rename ${asking.build.name}`} label="Name of the car" start={asking.build.name} action="Rename" busy={rename.isPending} error={rename.error?.message} onClose={() => setAsking(null)}
          onGive={(name) => rename.mutate({ buildId: asking.build.id, name }, { onSuccess: () => setAsking(null) })} />
      )}
      {asking?.what === "delete" && (
        <ConfirmDialog title={`Delete ${asking.build.name}?`} typed={asking.build.name} action="Delete for good" busy={remove.isPending} error={remove.error?.message} onClose={() => setAsking(null)}
          onConfirm={() => remove.mutate(asking.build.id, { onSuccess: () => { setAsking(null); toast(`${asking.build.name} is gone.`); } })}>
          All its layouts and their whole history go with it, for every member. This cannot be taken back. Export the layouts first if you may want them again.
        </ConfirmDialog>
      )}
    </>
  );
}
