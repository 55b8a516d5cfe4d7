import { lazy, Suspense, useEffect, useState } from "react";
import { toast } from "sonner";
import { useDocument, useReports, useShown } from "../../editor/bench-context.tsx";
import { GapLedger, LedgerFind, VerdictCounts, WHOLE_LEDGER, type LedgerView } from "../../editor/ledger/gap-ledger.tsx";
import { Ticket } from "../../editor/ticket/ticket.tsx";
import { Workspace } from "../../editor/workspace.tsx";
import { CaptionTabs } from "../../ui/caption-tabs.tsx";
import { Loading } from "../../ui/states.tsx";
import { Divider, useDrawer } from "./drawer.tsx";
import { useNarrow } from "./use-narrow.ts";

const PartsList = lazy(() => import("../../editor/panels/parts-list.tsx").then((module) => ({ default: module.PartsList })));
const StancePanel = lazy(() => import("../../editor/panels/stance-panel.tsx").then((module) => ({ default: module.StancePanel })));
const RulesPanel = lazy(() => import("../../editor/panels/rules-panel.tsx").then((module) => ({ default: module.RulesPanel })));

type Desk = "drawing" | "ticket" | "ledger" | "parts" | "stance" | "rules";

/** The bench: the drawing sheet with its ticket, and beneath it the ledger and what else is read off the drawing. On a narrow screen each has the page to itself. */
export default function BenchPage() {
  const narrow = useNarrow();
  const [view, setView] = useState<LedgerView>(WHOLE_LEDGER);
  useRefusals();
  return narrow ? <Narrow view={view} setView={setView} /> : <Wide view={view} setView={setView} />;
}

type Views = { view: LedgerView; setView: (view: LedgerView) => void };

function Wide({ view, setView }: Views) {
  const [desk, setDesk] = useState<Desk>("ledger");
  const drawer = useDrawer();
  return (
    <main id="main" className="flex min-h-0 flex-1 flex-col">
      <h1 className="sr-only">Bench</h1>
      <div className="flex min-h-0 flex-1 flex-col"><Workspace ticket={<Ticket />} /></div>
      <Divider drawer={drawer} />
      <div className="flex min-h-0 flex-col" style={{ height: drawer.height }}>
        <CaptionTabs<Desk>
          label="Read off the drawing"
          className="flex-1"
          barClassName="px-4"
          value={desk}
          onChange={setDesk}
          tabs={[{ value: "ledger", label: "Gap ledger" }, { value: "parts", label: "Parts list" }, { value: "stance", label: "Stance and mass" }, { value: "rules", label: "Rules" }]}
          after={desk === "ledger" ? (
            <>
              <VerdictCounts view={view} setView={setView} />
              <div className="ml-auto max-lg:hidden"><LedgerFind view={view} setView={setView} /></div>
            </>
          ) : desk === "stance" ? <StanceLine /> : null}
        >
          <Pane desk={desk} view={view} setView={setView} />
        </CaptionTabs>
      </div>
    </main>
  );
}

function Narrow({ view, setView }: Views) {
  const [desk, setDesk] = useState<Desk>("drawing");
  const wrong = useShown((shown) => shown.report.counts.touch + shown.report.counts.rub + shown.report.counts.short);
  return (
    <main id="main" className="flex min-h-0 flex-1 flex-col">
      <h1 className="sr-only">Bench</h1>
      <CaptionTabs<Desk>
        label="The bench"
        className="flex-1"
        barClassName="border-b border-hair px-4"
        value={desk}
        onChange={setDesk}
        tabs={[{ value: "drawing", label: "Drawing" }, { value: "ticket", label: "Ticket" }, { value: "ledger", label: "Ledger", note: wrong > 0 && <span className="num text-short">{wrong}</span> }, { value: "parts", label: "Parts" }, { value: "stance", label: "Stance" }, { value: "rules", label: "Rules" }]}
      >
        {desk === "drawing" ? <Workspace ticket={null} /> : desk === "ticket" ? <div className="min-h-0 flex-1 overflow-y-auto"><Ticket /></div> : (
          <>
            {desk === "ledger" && <div className="flex shrink-0 flex-wrap gap-x-4 px-3 py-1"><VerdictCounts view={view} setView={setView} /><LedgerFind view={view} setView={setView} /></div>}
            <Pane desk={desk} view={view} setView={setView} />
          </>
        )}
      </CaptionTabs>
    </main>
  );
}

function Pane({ desk, view, setView }: Views & { desk: Desk }) {
  return (
    <Suspense fallback={<div className="px-4 py-2"><Loading what="Fetching" lines={4} /></div>}>
      {desk === "ledger" ? <GapLedger view={view} setView={setView} /> : desk === "parts" ? <PartsList /> : desk === "stance" ? <StancePanel /> : <RulesPanel />}
    </Suspense>
  );
}

function StanceLine() {
  const behind = useReports((reports) => reports.stanceBehind);
  return <span role="status" className="text-sm text-pencil">{behind ? "following the drawing …" : "as drawn now"}</span>;
}

/** Says why an edit was not taken, where it was not a field that says so itself. */
function useRefusals(): void {
  const refusal = useDocument((state) => state.refusal);
  useEffect(() => {
    if (!refusal || document.activeElement?.closest("[data-says-refusals], .torn, table, dialog")) return;
    toast.error(refusal);
  }, [refusal]);
}
