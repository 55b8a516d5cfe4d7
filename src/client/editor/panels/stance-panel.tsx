import { useMemo, type ReactNode } from "react";
import type { GovernedNumber } from "#core/body/stance.ts";
import { formatLength } from "#core/units/format-length.ts";
import { classes } from "../../ui/classes.ts";
import { Loading } from "../../ui/states.tsx";
import { useBench, useReports, useShown } from "../bench-context.tsx";
import { namesOf } from "../ledger/names.ts";
import { select, useViewState } from "../view-state.ts";

/** Overhangs, angles and clearance with what governs each; mass and axle loads; litres. Live: computed beside the page's thread while the hand moves. */
export function StancePanel() {
  const { units } = useBench();
  const document = useShown((shown) => shown.document);
  const body = useReports((reports) => reports.body);
  const mass = useReports((reports) => reports.mass);
  const spaces = useReports((reports) => reports.spaces);
  const spacesBehind = useReports((reports) => reports.spacesBehind);
  const failed = useReports((reports) => reports.failed);
  const name = useMemo(() => namesOf(document), [document]);
  if (failed) return <p role="alert" className="px-4 py-6 text-short">{failed}</p>;
  if (!body || !mass) return <div className="px-4 py-3"><Loading what="stance and mass" lines={6} /></div>;
  const length = (mm: number | null) => (mm === null ? "cannot be computed" : formatLength(mm, units));
  const angle = (deg: number | null) => (deg === null ? "nothing limits it" : `${deg.toFixed(1)}°`);
  const by = (number: GovernedNumber): ReactNode => {
    const key = body.governs[number];
    return key === undefined ? null : <Governs name={name(key)} itemKey={key} />;
  };
  const limit = document.body.overhangLimit;
  const share = body.rearOverhangShare;
  const over = limit !== undefined && share !== null && share > limit.share;
  return (
    <div className="grid min-h-0 flex-1 content-start gap-x-12 gap-y-6 overflow-auto px-4 py-3 md:grid-cols-2 xl:grid-cols-3">
      <section aria-label="Stance">
        <h3 className="caption border-b border-ink pb-1">Stance, as drawn</h3>
        <dl>
          <Line word="length" value={length(body.length)} note="over everything rigid" />
          <Line word="wheelbase" value={length(body.wheelbase)} />
          <Line word="front overhang" value={length(body.frontOverhang)} note={by("frontOverhang")} />
          <Line word="rear overhang" value={length(body.rearOverhang)} bad={over} note={by("rearOverhang")} />
          {share !== null && (
            <Line word="of the wheelbase" value={`${(share * 100).toFixed(1)} %`} bad={over} note={limit ? <span className={over ? "text-short" : ""}>{over ? `over the limit of ${percent(limit.share)}` : `limit ${percent(limit.share)}`}{limit.why && <>: {limit.why}</>}</span> : "no limit set"} />
          )}
          <Line word="approach angle" value={angle(body.approachAngle)} note={by("approachAngle")} />
          <Line word="breakover angle" value={angle(body.breakoverAngle)} note={by("breakoverAngle")} />
          <Line word="departure angle" value={angle(body.departureAngle)} note={by("departureAngle")} />
          <Line word="ground clearance" value={length(body.groundClearance)} bad={body.groundClearance !== null && body.groundClearance < 0} note={by("groundClearance")} />
        </dl>
        {body.findings.map((finding) => (
          <p key={finding.message} className={classes("mt-2 border px-3 py-2 text-sm", finding.code === "over-limit" || finding.code === "below-ground" ? "border-short text-short" : "border-hair text-pencil")}>{finding.message}</p>
        ))}
        <p className="mt-2 text-sm text-pencil">Tyres and brakes are left out of angles and clearance. A limit here is what you entered; ask your authority, and measure the finished car.</p>
      </section>
      <section aria-label="Mass">
        <h3 className="caption border-b border-ink pb-1">Mass</h3>
        <dl>
          <Line word="total" value={`${mass.total.toFixed(1)} kg`} note={mass.missing.length > 0 ? `without ${mass.missing.length} ${mass.missing.length === 1 ? "part" : "parts"}` : "every part has a mass"} />
          <Line word="front axle" value={`${mass.frontAxle.toFixed(1)} kg`} note={mass.total > 0 ? percent(mass.frontAxle / mass.total) : null} />
          <Line word="rear axle" value={`${mass.rearAxle.toFixed(1)} kg`} note={mass.total > 0 ? percent(mass.rearAxle / mass.total) : null} />
          {mass.centre ? (
            <>
              <Line word="centre" value={length(mass.centre[0])} note="rear of the front axle" />
              <Line word="" value={length(Math.abs(mass.centre[1]))} note={mass.centre[1] < 0 ? "left of centre" : "right of centre"} />
              <Line word="" value={length(mass.centre[2])} note="above the chassis zero plane" />
            </>
          ) : <Line word="centre" value="cannot be computed" note="no part has a mass yet" />}
        </dl>
        {mass.missing.length > 0 && (
          <p className="mt-2 text-sm text-tight">
            No mass yet, so everything above is too little: {mass.missing.map((key, i) => <span key={key}>{i > 0 && ", "}<button type="button" className="border-b border-dotted border-current" onClick={() => select([key])}>{name(key)}</button></span>)}.
          </p>
        )}
        {mass.total > 0 && mass.total < 500 && <p className="mt-2 text-sm text-pencil">Only what is drawn counts: body, trim, fluids and people are in it only as parts.</p>}
      </section>
      <section aria-label="Spaces">
        <h3 className="caption border-b border-ink pb-1">Luggage spaces</h3>
        {document.spaces.length === 0 ? <p className="py-2 text-pencil">None is drawn yet. Take the tool "Space".</p> : !spaces ? <Loading what="litres" lines={2} /> : (
          <dl className={spacesBehind ? "opacity-60" : undefined} aria-busy={spacesBehind}>
            {spaces.map((space) => <Line key={space.key} word={<Governs name={name(space.key)} itemKey={space.key} />} value={`${space.freeLitres.toFixed(1)} l`} note={`free of ${space.grossLitres.toFixed(1)} l${spacesBehind ? ", being computed again" : ""}`} />)}
          </dl>
        )}
        {spaces?.flatMap((space) => space.findings ?? []).map((finding) => <p key={finding} className="mt-2 text-sm text-tight">{finding}</p>)}
        <p className="mt-2 text-sm text-pencil">Free is what is left between parts as drawn, each kept off by the space's own gap. It is a volume: a case is stiff and square, so less of it can be used.</p>
      </section>
    </div>
  );
}

const percent = (share: number) => `${(share * 100).toFixed(1).replace(/\.0$/, "")} %`;

function Line({ word, value, note, bad = false }: { word: ReactNode; value: string; note?: ReactNode; bad?: boolean }) {
  return (
    <div className="grid grid-cols-[132px_112px_minmax(0,1fr)] items-baseline gap-x-3 border-b border-hair py-1">
      <dt className="text-pencil">{word}</dt>
      <dd className={classes("text-right", /\d/.test(value) ? "num font-semibold" : "text-sm text-pencil", bad && "text-short")}>{value}</dd>
      <dd className="min-w-0 text-sm text-pencil">{note}</dd>
    </div>
  );
}

function Governs({ name, itemKey }: { name: string; itemKey: string }) {
  const set = useViewState((state) => state.set);
  if (itemKey === "body") return <>{name}</>;
  return <button type="button" className="max-w-full truncate border-b border-dotted border-pencil text-left" onClick={() => select([itemKey])} onPointerEnter={() => set({ hover: itemKey })} onPointerLeave={() => set({ hover: null })}>{name}</button>;
}
