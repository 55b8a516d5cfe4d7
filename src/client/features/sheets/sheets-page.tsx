import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { PAPER_NAMES } from "#core/drawing/paper.ts";
import { sheetDatums } from "#core/drawing/sheet-datums.ts";
import { formatLength } from "#core/units/format-length.ts";
import { parseLength, type LengthUnit } from "#core/units/parse-length.ts";
import { addressOf, call } from "../../api/call.ts";
import { useMe } from "../../app/session.queries.ts";
import { useBench, useDocument, useReports } from "../../editor/bench-context.tsx";
import { useViewState } from "../../editor/view-state.ts";
import { classes } from "../../ui/classes.ts";
import { SelectField, TextField } from "../../ui/field.tsx";
import { Loading, TroubleNote } from "../../ui/states.tsx";
import type { PlanQuestion } from "./plan-worker.ts";
import { usePlannedSheets } from "./use-planned-sheets.ts";

type Paper = (typeof PAPER_NAMES)[number];
const SCALES = ["fit", "1", "2", "5", "10", "20", "50", "100"] as const;
type Scale = (typeof SCALES)[number];
const PAPER_SAYS: Record<Paper, string> = { A4: "A4, 297 x 210", A3: "A3, 420 x 297", A2: "A2, 594 x 420", A1: "A1, 841 x 594", Letter: "Letter, 11 x 8 1/2 in", Tabloid: "Tabloid, 17 x 11 in" };

/** The general arrangement as it will be printed: core's plan inked on the screen, the same plan that the server inks as a PDF. */
export default function SheetsPage() {
  const { buildId, layoutId, units: mine } = useBench();
  const me = useMe();
  const build = useQuery({ queryKey: ["build", buildId], queryFn: () => call("getBuild", { params: { buildId } }) });
  const document = useDocument((state) => state.document);
  const report = useDocument((state) => state.report);
  const seq = useDocument((state) => state.seq);
  const unsent = useDocument((state) => state.waiting.length);
  const { body, mass, spaces, spacesBehind, stanceBehind, failed } = useReports((reports) => reports);
  const bench = useViewState((state) => state.station);
  const [paper, setPaper] = useState<Paper>("A3");
  const [scale, setScale] = useState<Scale>("fit");
  const [units, setUnits] = useState<LengthUnit>(mine);
  const [station, setStation] = useState("");
  const [datum, setDatum] = useState("");
  const read = station.trim() === "" ? null : parseLength(station, units);
  const at = read?.ok ? read.mm : undefined;
  const owner = build.data?.name;
  const creator = me.data?.person?.name;
  const question = useMemo((): PlanQuestion | null => {
    if (!owner || !body || !mass || !spaces || stanceBehind || spacesBehind) return null;
    return {
      layout: document, report: { ...report, body, mass, spaces }, options: { paper, scale: scale === "fit" ? "fit" : Number(scale), units, station: at, datum: datum || undefined },
      info: { owner, number: `${owner.slice(0, 3).toUpperCase()}-GA-${seq}`, date: new Date().toISOString().slice(0, 10), creator, revision: "working copy", documentType: "general arrangement" },
    };
  }, [document, report, body, mass, spaces, stanceBehind, spacesBehind, paper, scale, units, at, datum, owner, creator, seq]);
  const { answer, busy } = usePlannedSheets(question);
  const address = addressOf("getSheet", { buildId, layoutId }, { paper, scale: scale === "fit" ? "fit" : Number(scale), units, station: at, datum: datum || undefined });
  const datums = useMemo(() => sheetDatums(document), [document]);
  const [zoom, setZoom] = useState<"page" | "width" | "true">("width");
  return (
    <main id="main" className="grid min-h-0 flex-1 overflow-auto lg:grid-cols-[264px_minmax(0,1fr)] lg:overflow-hidden">
      <form className="space-y-4 overflow-y-auto border-hair px-5 py-5 lg:border-r" onSubmit={(event) => event.preventDefault()} aria-label="The sheet">
        <h1 className="text-2xl font-semibold">General arrangement</h1>
        <SelectField<Paper> label="Paper" value={paper} options={PAPER_NAMES.map((name) => ({ value: name, label: PAPER_SAYS[name] }))} onChange={setPaper} />
        <SelectField<Scale> label="Scale" value={scale} options={SCALES.map((one) => ({ value: one, label: one === "fit" ? "the largest that fits" : `1 : ${one}` }))} onChange={setScale} />
        <SelectField<LengthUnit> label="Dimensions in" value={units} options={[{ value: "mm", label: "millimetres" }, { value: "in", label: "inches, decimal" }, { value: "in-fraction", label: "inches, to 1/16" }]} onChange={setUnits} />
        <SelectField label="Dimensions from" value={datum} options={[{ value: "", label: "front axle, centre, zero plane" }, ...datums.map((one) => ({ value: one.key, label: one.name }))]} onChange={setDatum} />
        <div>
          <TextField label="Section at" hint="Empty: seen from behind, uncut" value={station} onChange={setStation} error={read && !read.ok ? read.message : undefined} placeholder="seen from behind" />
          <button type="button" className="mt-1 border-b border-hair text-sm hover:border-ink" onClick={() => setStation(formatLength(bench, units))}>as on the bench, <span className="num">{formatLength(bench, units, units === "mm" ? 0 : undefined)}</span></button>
        </div>
        <a className="flex min-h-10 w-full items-center justify-center border border-ink bg-ink font-semibold text-film hover:bg-film hover:text-ink" href={address} target="_blank" rel="noreferrer">Open as PDF, to print</a>
        <a className="flex min-h-10 w-full items-center justify-center border border-ink font-semibold hover:bg-ink hover:text-film" href={address} download={`${document.name}.pdf`}>Download the PDF</a>
        <p className="text-sm text-pencil">The server draws the PDF anew after a change: a few seconds before it begins.</p>
        {unsent > 0 && <p role="status" className="text-sm text-tight">{unsent} {unsent === 1 ? "edit is" : "edits are"} not with the server yet: this preview has {unsent === 1 ? "it" : "them"}, the PDF has not.</p>}
        <p className="text-sm text-pencil">Print at 100 %, not "fit to page", then hold a ruler to the 100 mm bar. Estimates from what was drawn: measure on the car before cutting; with heat, fuel, brakes, steering and glass follow the part maker and the local rules.</p>
        {answer?.ok && answer.remarks.map((remark) => <p key={remark} className="border border-hair px-3 py-2 text-sm">{remark}</p>)}
      </form>
      <div className="flex min-h-0 min-w-0 flex-col">
        <div className="flex shrink-0 flex-wrap items-center gap-x-5 border-b border-hair px-5 py-2 text-sm text-pencil">
          <span role="status">{answer?.ok ? `${answer.sheets.length} ${answer.sheets.length === 1 ? "sheet" : "sheets"}, ${paper}, 1 : ${answer.sheets[0]?.scale ?? ""}` : ""}{busy || !question ? " drawing …" : ""}</span>
          <span className="ml-auto flex gap-4" role="group" aria-label="Size on the screen">
            {([["page", "whole page"], ["width", "fill the width"], ["true", "true size"]] as const).map(([value, word]) => <button key={value} type="button" aria-pressed={zoom === value} className={classes("min-h-7", zoom === value ? "border-b border-ink text-ink" : "hover:text-ink")} onClick={() => setZoom(value)}>{word}</button>)}
          </span>
        </div>
        <div role="region" aria-label="The sheets as they print" tabIndex={0} className="min-h-0 flex-1 space-y-6 overflow-auto bg-part p-5 -outline-offset-2" aria-busy={busy}>
          {failed ? <TroubleNote error={new Error(failed)} title="The sheet cannot be drawn" /> : answer === null ? <div className="bg-white"><Loading what="Drawing the sheet" lines={14} /></div> : !answer.ok ? <TroubleNote error={new Error(answer.message)} title="This sheet cannot be drawn so" /> : answer.sheets.map((sheet, i) => (
            <figure key={i} className={classes(busy && "opacity-60", zoom === "true" ? "w-max" : zoom === "page" ? "mx-auto w-fit" : "")}>
              <div
                className={classes("border border-ink bg-white", zoom === "width" ? "[&>svg]:h-auto [&>svg]:w-full" : zoom === "page" ? "[&>svg]:h-[calc(100dvh-210px)] [&>svg]:w-auto" : "")}
                dangerouslySetInnerHTML={{ __html: sheet.svg }}
              />
              <figcaption className="mt-1 text-sm text-pencil">Sheet {i + 1} of {answer.sheets.length}</figcaption>
            </figure>
          ))}
        </div>
      </div>
    </main>
  );
}
