import { useQuery } from "@tanstack/react-query";
import { useEffect, useState } from "react";
import { useParams } from "react-router-dom";
import { getBuild } from "#contracts/builds.contract.ts";
import { getLayout } from "#contracts/layouts.contract.ts";
import { getReport, getSheet, PAPERS } from "#contracts/reports.contract.ts";
import type { SheetReport } from "#core/drawing/sheet-tables.ts";
import { parseLength, type LengthUnit } from "#core/units/parse-length.ts";
import { addressOf, call } from "../../api/call.ts";
import { paths } from "../../app/paths.ts";
import { useMe, usePreferences } from "../../app/session.queries.ts";
import { Header } from "../../app/shell.tsx";
import { SelectField, TextField } from "../../ui/field.tsx";
import { Loading, TroubleNote } from "../../ui/states.tsx";
import type { PlanAnswer, PlanQuestion } from "./plan-worker.ts";

const SCALES = ["fit", "1", "2", "5", "10", "20", "50"] as const;
type Paper = (typeof PAPERS)[number];

/** The general arrangement as it will be printed: the same plan as the PDF's, on the screen. */
export default function SheetsPage() {
  const { buildId = "", layoutId = "" } = useParams();
  const params = { buildId, layoutId };
  const { units: mine } = usePreferences();
  const me = useMe();
  const build = useQuery({ queryKey: ["build", buildId], queryFn: () => call(getBuild, { params: { buildId } }) });
  const layout = useQuery({ queryKey: ["sheet-layout", layoutId], queryFn: () => call(getLayout, { params }), staleTime: 0 });
  const report = useQuery({ queryKey: ["sheet-report", layoutId, layout.data?.seq], queryFn: () => call(getReport, { params }), enabled: layout.isSuccess });
  const [paper, setPaper] = useState<Paper>("A3");
  const [scale, setScale] = useState<(typeof SCALES)[number]>("fit");
  const [units, setUnits] = useState<LengthUnit>(mine);
  const [station, setStation] = useState("");
  const [answer, setAnswer] = useState<PlanAnswer | null>(null);
  const [busy, setBusy] = useState(false);
  const read = station.trim() === "" ? null : parseLength(station, units);
  const at = read?.ok ? read.mm : undefined;
  useEffect(() => {
    if (!layout.data || !report.data || !build.data) return;
    const worker = new Worker(new URL("./plan-worker.ts", import.meta.url), { type: "module" });
    worker.onmessage = ({ data }: MessageEvent<PlanAnswer>) => {
      setAnswer(data);
      setBusy(false);
    };
    worker.onerror = () => {
      setAnswer({ ok: false, message: "The sheet could not be planned." });
      setBusy(false);
    };
    setBusy(true);
    const question: PlanQuestion = {
      layout: layout.data.document, report: report.data as unknown as SheetReport, options: { paper, scale: scale === "fit" ? "fit" : Number(scale), units, station: at },
      info: { owner: build.data.name, number: `${build.data.name.slice(0, 3).toUpperCase()}-GA-${layout.data.seq}`, date: new Date().toISOString().slice(0, 10), creator: me.data?.person?.name, revision: "working copy", documentType: "general arrangement" },
    };
    worker.postMessage(question);
    return () => worker.terminate();
  }, [layout.data, report.data, build.data, me.data, paper, scale, units, at]);
  const error = build.error ?? layout.error ?? report.error;
  const query = { paper, scale: scale === "fit" ? "fit" : Number(scale), units, station: at };
  return (
    <div className="flex min-h-full flex-col">
      <Header
        crumbs={build.data && layout.data ? [{ to: paths.build(buildId), text: build.data.name }, { to: paths.bench(buildId, layoutId), text: layout.data.document.name }] : []}
        tabs={[{ to: paths.bench(buildId, layoutId), text: "Bench" }, { to: paths.sheets(buildId, layoutId), text: "Sheets" }, { to: paths.history(buildId, layoutId), text: "History" }]}
      />
      <main className="grid flex-1 gap-8 p-6 lg:grid-cols-[230px_1fr]">
        <form className="space-y-5" onSubmit={(event) => event.preventDefault()} aria-label="The sheet">
          <h1 className="text-2xl font-semibold">General arrangement</h1>
          <SelectField<Paper> label="Paper" value={paper} options={PAPERS.map((name) => ({ value: name, label: name }))} onChange={setPaper} />
          <SelectField label="Scale" value={scale} options={SCALES.map((one) => ({ value: one, label: one === "fit" ? "largest that fits" : `1 : ${one}` }))} onChange={setScale} />
          <SelectField<LengthUnit> label="Dimensions in" value={units} options={[{ value: "mm", label: "millimetres" }, { value: "in", label: "inches, decimal" }, { value: "in-fraction", label: "inches, 1/16" }]} onChange={setUnits} />
          <TextField label="Section at" hint="Empty: the view from behind" value={station} onChange={setStation} error={read && !read.ok ? read.message : undefined} placeholder="e.g. 2700" />
          <a className="flex min-h-9 w-full items-center justify-center border border-ink bg-ink font-semibold text-film hover:bg-film hover:text-ink" href={addressOf(getSheet, params, query)} target="_blank" rel="noreferrer">Open as PDF, to print</a>
          <p className="text-sm text-pencil">Print at 100 %, not "fit to page", then measure the 100 mm bar. Estimates from what was drawn: measure on the car before cutting.</p>
          {answer?.ok && answer.remarks.map((remark) => <p key={remark} className="border border-hair p-2 text-sm">{remark}</p>)}
        </form>
        <div className="min-w-0 space-y-6" aria-busy={busy}>
          {error ? <TroubleNote error={error} again={() => { void build.refetch(); void layout.refetch(); void report.refetch(); }} /> : answer === null ? <Loading what="Drawing the sheet" lines={12} /> : !answer.ok ? <TroubleNote error={new Error(answer.message)} title="This sheet cannot be drawn so" /> : answer.sheets.map((sheet, i) => (
            <figure key={i} className={busy ? "opacity-60" : ""}>
              <div className="border border-hair bg-white [&>svg]:h-auto [&>svg]:w-full" dangerouslySetInnerHTML={{ __html: sheet.svg }} />
              <figcaption className="mt-1 text-sm text-pencil">Sheet {i + 1} of {answer.sheets.length}, {paper}, 1 : {sheet.scale}</figcaption>
            </figure>
          ))}
        </div>
      </main>
    </div>
  );
}
