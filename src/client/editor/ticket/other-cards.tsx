import type { Eye, Glass, Luggage, Shaft, Space } from "#core/layout/schema.ts";
import { formatLength } from "#core/units/format-length.ts";
import { useBench, useDocument, useReports } from "../bench-context.tsx";
import { Choice, LengthEntry, MaybeLengthEntry, MaybeNumberEntry, NumberEntry, Tick } from "../forms/entry.tsx";
import { useItemForm, type Form, type Path } from "../forms/item-form.ts";
import { PointsField } from "../forms/points-field.tsx";
import { CardHead } from "./card-head.tsx";
import { KeyRow } from "./part-card.tsx";
import { TicketFold, TicketRow, TicketSays } from "./ticket-row.tsx";
import { WHEEL_CHOICES } from "./words.ts";
import { WorstOf } from "./worst-of.tsx";

const WORDS = ["rear", "right", "up"] as const;

function Three({ label, at, give, disabled }: { label: string; at: readonly number[]; give: (index: number, mm: number) => string | null; disabled: boolean }) {
  return <TicketRow label={label}>{WORDS.map((word, k) => <LengthEntry key={word} below label={`${label}, ${word}`} suffix={word} mm={at[k]!} disabled={disabled} give={(mm) => give(k, mm)} />)}</TicketRow>;
}
const putter = <T extends { name: string }>(form: Form<T>) => (path: Path, value: unknown, what: string) => form.put(path, value, `${form.value.name}: ${what}`);

export function SpaceCard({ itemKey }: { itemKey: string }) {
  const form = useItemForm("spaces", itemKey);
  return form && <SpaceBody form={form} />;
}

function SpaceBody({ form }: { form: Form<Space> }) {
  const space = form.value;
  const put = putter(form);
  const litres = useReports((reports) => reports.spaces?.find((one) => one.key === space.key));
  const behind = useReports((reports) => reports.spacesBehind);
  return (
    <>
      <CardHead form={form} list="spaces" />
      <TicketSays label="free">
        {litres ? <span className={behind ? "opacity-60" : ""}><span className="num text-lg font-semibold">{litres.freeLitres.toFixed(1)}</span> litres <span className="text-pencil">of {litres.grossLitres.toFixed(1)}{behind ? ", being computed again" : ""}</span></span> : <span className="text-pencil">being computed …</span>}
      </TicketSays>
      {litres?.findings?.map((finding) => <p key={finding} className="py-1 text-sm text-tight">{finding}</p>)}
      <TicketRow label="kept from">
        <LengthEntry label="Kept from its own walls" suffix="walls" mm={space.wallGap} disabled={!form.may} give={(mm) => put(["wallGap"], mm, "kept from walls")} />
        <LengthEntry label="Kept from parts" suffix="parts" mm={space.partGap} disabled={!form.may} give={(mm) => put(["partGap"], mm, "kept from parts")} />
      </TicketRow>
      <TicketFold title="Outlines" note={[space.top && "above", space.side && "side", space.rear && "behind"].filter(Boolean).join(", ")} open>
        <PointsField optional label="from above" columns={["x", "y"]} points={space.top} disabled={!form.may} give={(points) => put(["top"], points, "outline from above")} />
        <PointsField optional label="from the side" columns={["x", "z"]} points={space.side} disabled={!form.may} give={(points) => put(["side"], points, "outline from the side")} />
        <PointsField optional label="from behind" columns={["y", "z"]} points={space.rear} disabled={!form.may} give={(points) => put(["rear"], points, "outline from behind")} />
      </TicketFold>
      <TicketFold title="Opening" note={space.opening ? `${space.opening.length} corners` : "not drawn"}>
        <PointsField optional sketch={false} label="loop that things go in through" columns={["x", "y", "z"]} points={space.opening} disabled={!form.may} give={(points) => put(["opening"], points, "opening")} />
      </TicketFold>
      <KeyRow list="spaces" itemKey={space.key} may={form.may} />
    </>
  );
}

export function LuggageCard({ itemKey }: { itemKey: string }) {
  const form = useItemForm("luggage", itemKey);
  return form && <LuggageBody form={form} />;
}

function LuggageBody({ form }: { form: Form<Luggage> }) {
  const put = putter(form);
  const one = form.value;
  return (
    <>
      <CardHead form={form} list="luggage" />
      <TicketRow label="size">{[0, 1, 2].map((k) => <LengthEntry key={k} label={`Side ${k + 1}`} mm={one.size[k]!} disabled={!form.may} give={(mm) => put(["size", k], mm, "size")} />)}</TicketRow>
      <TicketRow label="how many"><NumberEntry label="How many" unit="" decimals={0} value={one.count} disabled={!form.may} give={(count) => put(["count"], count, `${count} of it`)} /></TicketRow>
      <Tick label="stays upright" value={one.upright} disabled={!form.may} give={(upright) => put(["upright"], upright, upright ? "stays upright" : "may lie")} />
      <KeyRow list="luggage" itemKey={one.key} may={form.may} />
    </>
  );
}

export function GlassCard({ itemKey }: { itemKey: string }) {
  const form = useItemForm("glass", itemKey);
  return form && <GlassBody form={form} />;
}

function GlassBody({ form }: { form: Form<Glass> }) {
  const put = putter(form);
  const glass = form.value;
  const parts = useDocument((state) => state.document.parts);
  return (
    <>
      <CardHead form={form} list="glass" />
      <TicketRow label="its part"><Choice label="The part that it is" value={glass.part ?? ""} options={[["", "none"], ...parts.map((part) => [part.key, part.name] as const)]} disabled={!form.may} give={(key) => put(["part"], key || undefined, "its part")} /></TicketRow>
      <TicketRow label="black edge"><LengthEntry label="Width of the black edge" mm={glass.frit} disabled={!form.may} give={(mm) => put(["frit"], mm, "black edge")} /></TicketRow>
      <PointsField sketch={false} label="edge of the opening" columns={["x", "y", "z"]} points={glass.opening} disabled={!form.may} give={(points) => put(["opening"], points, "opening")} />
      <KeyRow list="glass" itemKey={glass.key} may={form.may} />
      <p className="pt-2 text-sm text-pencil">What is seen through it comes with a later sheet. Glass on the road has rules of its own: ask the authority.</p>
    </>
  );
}

export function EyeCard({ itemKey }: { itemKey: string }) {
  const form = useItemForm("eyes", itemKey);
  return form && <EyeBody form={form} />;
}

function EyeBody({ form }: { form: Form<Eye> }) {
  const put = putter(form);
  return (
    <>
      <CardHead form={form} list="eyes" />
      <Three label="eye at" at={form.value.at} disabled={!form.may} give={(k, mm) => put(["at", k], mm, "moved")} />
      <KeyRow list="eyes" itemKey={form.value.key} may={form.may} />
    </>
  );
}

export function ShaftCard({ itemKey }: { itemKey: string }) {
  const form = useItemForm("shafts", itemKey);
  return form && <ShaftBody form={form} />;
}

function ShaftBody({ form }: { form: Form<Shaft> }) {
  const { units } = useBench();
  const put = putter(form);
  const shaft = form.value;
  const disabled = !form.may;
  const span = shaft.outboard.map((value, k) => value - shaft.inboard[k]!);
  const length = Math.hypot(...span);
  const angle = (Math.atan2(Math.hypot(span[0]!, span[2]!), Math.abs(span[1]!)) * 180) / Math.PI;
  return (
    <>
      <CardHead form={form} list="shafts" />
      <TicketSays label="as drawn"><span className="num font-semibold">{formatLength(length, units)}</span> long, <span className={`num font-semibold ${shaft.maxAngle !== undefined && angle > shaft.maxAngle ? "text-short" : ""}`}>{angle.toFixed(1)}°</span>{shaft.maxAngle !== undefined && <span className="text-pencil"> of at most {shaft.maxAngle}°</span>}</TicketSays>
      <Three label="inboard" at={shaft.inboard} disabled={disabled} give={(k, mm) => put(["inboard", k], mm, "inboard joint")} />
      <Three label="outboard" at={shaft.outboard} disabled={disabled} give={(k, mm) => put(["outboard", k], mm, "outboard joint")} />
      <TicketRow label="diameter"><MaybeLengthEntry label="Diameter" none="not checked for gaps" mm={shaft.diameter} disabled={disabled} give={(mm) => put(["diameter"], mm, "diameter")} /></TicketRow>
      <TicketRow label="wheel"><Choice label="Wheel that it drives" value={shaft.wheel ?? ""} options={[["", "none"], ...WHEEL_CHOICES]} disabled={disabled} give={(wheel) => put(["wheel"], wheel || undefined, "wheel")} /></TicketRow>
      <TicketRow label="swings on"><MaybeLengthEntry label="Radius that the outboard joint swings on" suffix="arm" none="straight" mm={shaft.arm} disabled={disabled} give={(mm) => put(["arm"], mm, "arm")} /></TicketRow>
      <TicketRow label="joints allow">
        <MaybeNumberEntry label="Largest joint angle" unit="°" value={shaft.maxAngle} disabled={disabled} give={(value) => put(["maxAngle"], value, "largest angle")} />
        <MaybeLengthEntry label="Plunge available" suffix="plunge" none="not known" mm={shaft.plunge} disabled={disabled} give={(mm) => put(["plunge"], mm, "plunge")} />
      </TicketRow>
      <WorstOf itemKey={shaft.key} />
      <KeyRow list="shafts" itemKey={shaft.key} may={form.may} />
    </>
  );
}
