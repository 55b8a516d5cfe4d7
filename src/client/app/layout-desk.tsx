import { useQuery } from "@tanstack/react-query";
import { Suspense, useEffect, useMemo, useState } from "react";
import { Outlet, useParams } from "react-router-dom";
import { useStore } from "zustand";
import type { Build } from "#contracts/builds.contract.ts";
import type { Layout } from "#core/layout/schema.ts";
import { call, CallError } from "../api/call.ts";
import { BenchContext, type Bench } from "../editor/bench-context.tsx";
import { createDocumentStore, type DocumentStore } from "../editor/document-store.ts";
import { EditorContext, type Editor } from "../editor/editor-context.ts";
import { browserKeeper } from "../editor/keeper.ts";
import { followReports } from "../editor/panels/live-reports.ts";
import { serverLink } from "../editor/server-link.ts";
import { followShown } from "../editor/shown.ts";
import { readInks } from "../editor/theme-inks.ts";
import { useViewState } from "../editor/view-state.ts";
import { ButtonLink } from "../ui/button.tsx";
import { Loading, TroubleNote } from "../ui/states.tsx";
import { Header, initialsOf } from "./header.tsx";
import { NotFound } from "./not-found.tsx";
import { paths } from "./paths.ts";
import { SaveMark } from "./save-mark.tsx";
import { useMe, usePreferences } from "./session.queries.ts";
import { PageLoading } from "./signed-in.tsx";
import { useTheme, useTitle } from "./theme.ts";
import { UndoRedo } from "./undo-redo.tsx";

/** How often others' changes are looked for while the page is seen, ms. */
const LOOK_AGAIN = 8_000;

/** One layout, opened: its document store lives as long as any of its pages is shown. */
export default function LayoutDesk() {
  const { buildId = "", layoutId = "" } = useParams();
  const me = useMe();
  const build = useQuery({ queryKey: ["build", buildId], queryFn: () => call("getBuild", { params: { buildId } }) });
  // read once: from then on the document store is the truth here, and follows the server by its changes
  const layout = useQuery({ queryKey: ["layout", layoutId], queryFn: () => call("getLayout", { params: { buildId, layoutId } }), staleTime: Infinity, gcTime: 0, refetchOnWindowFocus: false, refetchOnReconnect: false });
  const error = build.error ?? layout.error;
  if (error instanceof CallError && error.code === "not-found") return <NotFound what="layout" />;
  if (error) return <><Header /><main id="main" className="mx-auto max-w-2xl px-6 py-16"><TroubleNote error={error} title="The layout could not be opened" again={() => void (build.refetch(), layout.refetch())} /></main></>;
  if (!build.data || !layout.data || !me.data?.person) return <PageLoading />;
  return <Opened key={layoutId} build={build.data} layoutId={layoutId} personId={me.data.person.id} document={layout.data.document} seq={layout.data.seq} archived={layout.data.archived} />;
}

interface Open {
  readonly store: DocumentStore;
  readonly shown: ReturnType<typeof followShown>;
  readonly reports: ReturnType<typeof followReports>;
}

function Opened({ build, layoutId, personId, document, seq, archived }: { build: Build; layoutId: string; personId: string; document: Layout; seq: number; archived: boolean }) {
  const [open, setOpen] = useState<Open | null>(null);
  useEffect(() => {
    const store = createDocumentStore({ document, seq }, serverLink(build.id, layoutId), browserKeeper(layoutId, personId));
    const shown = followShown(store);
    const reports = followReports(shown.state);
    useViewState.getState().set({ selection: [], node: null, pair: null, preview: null, draft: null, typed: "", tool: "pick", hidden: new Set() });
    setOpen({ store, shown, reports });
    const look = () => {
      if (window.document.visibilityState === "visible") void store.catchUp();
    };
    const timer = setInterval(look, LOOK_AGAIN);
    const online = () => store.sendNow();
    const leave = (event: BeforeUnloadEvent) => {
      const { waiting, kept } = store.state.getState();
      if (waiting.length > 0 && !kept) event.preventDefault();
    };
    window.addEventListener("online", online);
    window.addEventListener("beforeunload", leave);
    window.document.addEventListener("visibilitychange", look);
    return () => {
      clearInterval(timer);
      window.removeEventListener("online", online);
      window.removeEventListener("beforeunload", leave);
      window.document.removeEventListener("visibilitychange", look);
      reports.stop();
      shown.stop();
      store.close();
    };
    // the document given is only where the store begins
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [build.id, layoutId, personId]);
  if (!open) return <PageLoading />;
  return <Desk build={build} layoutId={layoutId} archived={archived} open={open} />;
}

function Desk({ build, layoutId, archived, open }: { build: Build; layoutId: string; archived: boolean; open: Open }) {
  const { store, shown, reports } = open;
  const { units } = usePreferences();
  const theme = useTheme();
  const name = useStore(store.state, (state) => state.document.name);
  const unsent = useStore(store.state, (state) => state.waiting.length);
  const spaces = useStore(reports.state, (state) => state.spaces);
  const members = useQuery({ queryKey: ["members", build.id], queryFn: () => call("listMembers", { params: { buildId: build.id } }) });
  useTitle(name, build.name);
  // the theme is on the page after this component's layout effects: the canvas's inks are read then
  const [inks, setInks] = useState(readInks);
  useEffect(() => setInks(readInks()), [theme]);
  const bench = useMemo((): Bench => ({ store, shown: shown.state, reports: reports.state, buildId: build.id, layoutId, role: build.role, archived, units }), [store, shown, reports, build, layoutId, archived, units]);
  const editor = useMemo((): Editor => ({
    store, role: build.role, mayMove: build.role === "owner" && !archived, units, inks, litres: new Map(spaces?.map((space) => [space.key, space.freeLitres])),
    useShown: (selector) => useStore(shown.state, selector),
  }), [store, shown, build.role, archived, units, inks, spaces]);
  return (
    <BenchContext value={bench}>
      <EditorContext value={editor}>
        <div className="flex h-dvh flex-col">
          <Header
            role={build.role}
            unsent={unsent}
            crumbs={[{ to: paths.build(build.id), text: build.name }, { to: paths.bench(build.id, layoutId), text: name }]}
            tabs={[{ to: paths.bench(build.id, layoutId), text: "Bench" }, { to: paths.sheets(build.id, layoutId), text: "Sheets" }, { to: paths.history(build.id, layoutId), text: "History" }]}
          >
            <SaveMark />
            {build.role !== "viewer" && !archived && <UndoRedo />}
            <ul aria-label="Members" className="flex max-[1500px]:hidden">
              {members.data?.members.map((one) => <li key={one.personId} title={`${one.name}, ${one.role}`} className="num -ml-px grid h-8 w-9 place-items-center border border-hair text-sm"><span aria-hidden="true">{initialsOf(one.name)}</span><span className="sr-only">{one.name}, {one.role}</span></li>)}
            </ul>
            <ButtonLink to={paths.sheets(build.id, layoutId)} className="max-lg:hidden">Print sheet</ButtonLink>
          </Header>
          {archived && <p role="status" className="border-b border-hair bg-lit px-4 py-1.5 text-sm">This layout is in the archive: it can be read and printed. Its owner can take it out again.</p>}
          <Suspense fallback={<div className="px-6 py-8"><Loading what="Fetching the page" lines={8} /></div>}>
            <Outlet />
          </Suspense>
        </div>
      </EditorContext>
    </BenchContext>
  );
}
