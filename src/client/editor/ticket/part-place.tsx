import { useMemo, useState } from "react";
import type { Axis } from "#core/frames.ts";
import { datumsAlong, facesOf, heightAboveGround, leanOf, sideOf, turnOfLean, type Faces, type Lean, type Side, type TapeDatum } from "#core/body/places-by-tape.ts";
import type { Part } from "#core/layout/schema.ts";
import { formatLength } from "#core/units/format-length.ts";
import { useBench, useShown } from "../bench-context.tsx";
import { LengthEntry, NumberEntry } from "../forms/entry.tsx";
import type { Form } from "../forms/item-form.ts";
import { TicketRow } from "./ticket-row.tsx";

/** Which datum each axis is read from; kept while the page is open, for all parts alike. */
const chosen: Record<Axis, string | null> = { x: null, y: null, z: null };

/** Where a part stands, in numbers to type: faces from a datum, height above ground, lean and turn. Follows the hand while it is dragged. */
export function PartPlace({ form }: { form: Form<Part> }) {
  const { store, units } = useBench();
  const document = useShown((shown) => shown.document);
  const part = document.parts.find((one) => one.key === form.value.key) ?? form.value;
  const chassis = document.chassis;
  const faces = useMemo(() => measured(part), [part]);
  const [picked, pick] = useState({ ...chosen });
  if (!faces) return <p role="alert" className="py-2 text-short">This part has no shape that can be placed: look at its solids.</p>;
  const side = sideOf(faces);
  const locked = part.locked;
  const disabled = !form.may || locked;
  const place = (change: Partial<Pick<Part, "at" | "turn">>, label: string) =>
    store.run({ kind: "place", key: part.key, at: change.at ?? part.at, turn: change.turn ?? part.turn }, `${part.name}: ${label}`) ? null : (store.state.getState().refusal ?? "This cannot be taken.");
  const shift = (axis: 0 | 1 | 2, by: number, label: string) => place({ at: part.at.map((value, k) => (k === axis ? round(value + by) : value)) as [number, number, number] }, label);
  const say = (mm: number) => formatLength(mm, units);
  const datumOf = (axis: Axis, fallback: (all: readonly TapeDatum[]) => TapeDatum): TapeDatum => {
    const all = datumsAlong(axis, chassis);
    return all.find((datum) => datum.key === picked[axis]) ?? fallback(all);
  };
  const x = datumOf("x", (all) => nearest(all, faces.low[0]));
  const y = datumOf("y", (all) => all[0]!);
  const z = datumOf("z", (all) => all[0]!);
  const datum = (axis: Axis, now: TapeDatum, before: string) => (
    <DatumPick before={before} now={now} all={datumsAlong(axis, chassis)} pick={(key) => {
      chosen[axis] = key;
      pick({ ...chosen });
    }} />
  );
  const lowest = z.ground ? heightAboveGround(part, chassis) : faces.low[2] - z.at;
  // on the left, lengths from the centre count outward to the left
  const mirror = side === "left" && y.at === 0 ? -1 : 1;
  const [inner, outer] = mirror < 0 ? [faces.high[1], faces.low[1]] : [faces.low[1], faces.high[1]];
  const lean = leanOf(part.turn, side);
  const leanTo = (change: Partial<Lean>, label: string) => place({ turn: turnOfLean({ ...lean, ...change }, side).map(round) as [number, number, number] }, label);
  return (
    <div>
      <TicketRow label={datum("x", x, "rear of")}>
        <LengthEntry label={`rear of ${x.name}, front face`} suffix="front face" mm={faces.low[0] - x.at} disabled={disabled} give={(to) => shift(0, to - (faces.low[0] - x.at), `front face ${say(to)} rear of ${x.name}`)} />
        <LengthEntry label={`rear of ${x.name}, rear face`} suffix="rear face" mm={faces.high[0] - x.at} disabled={disabled} give={(to) => shift(0, to - (faces.high[0] - x.at), `rear face ${say(to)} rear of ${x.name}`)} />
      </TicketRow>
      <TicketRow label={datum("y", y, mirror < 0 ? "left of" : "right of")}>
        <LengthEntry label={`${mirror < 0 ? "left" : "right"} of ${y.name}, ${side === "middle" ? "left face" : "inner face"}`} suffix={side === "middle" ? "left face" : "inner"} mm={mirror * (inner - y.at)} disabled={disabled}
          give={(to) => shift(1, mirror * to - (inner - y.at), `${side === "middle" ? "left face" : "inner face"} ${say(to)} ${mirror < 0 ? "left" : "right"} of ${y.name}`)} />
        <LengthEntry label={`${mirror < 0 ? "left" : "right"} of ${y.name}, ${side === "middle" ? "right face" : "outer face"}`} suffix={side === "middle" ? "right face" : "outer"} mm={mirror * (outer - y.at)} disabled={disabled}
          give={(to) => shift(1, mirror * to - (outer - y.at), `${side === "middle" ? "right face" : "outer face"} ${say(to)} ${mirror < 0 ? "left" : "right"} of ${y.name}`)} />
      </TicketRow>
      <TicketRow label={datum("z", z, "above")}>
        <LengthEntry label={`above ${z.name}, lowest point`} suffix="lowest" mm={lowest} disabled={disabled} give={(to) => shift(2, to - lowest, `lowest point ${say(to)} above ${z.name}`)} />
        {!z.ground && <LengthEntry label={`above ${z.name}, highest point`} suffix="highest" mm={faces.high[2] - z.at} disabled={disabled} give={(to) => shift(2, to - (faces.high[2] - z.at), `highest point ${say(to)} above ${z.name}`)} />}
      </TicketRow>
      <TicketRow label={<span title={LEAN_SAYS[side]}>lean {side === "middle" ? "right" : "out"} · back · turn</span>}>
        <NumberEntry label={`lean ${side === "middle" ? "right" : "out"}, degrees`} unit="°" decimals={2} value={lean.out} disabled={disabled} give={(to) => leanTo({ out: to }, `lean ${side === "middle" ? "right" : "out"} ${to}°`)} />
        <NumberEntry label="lean back, degrees" unit="°" decimals={2} value={lean.back} disabled={disabled} give={(to) => leanTo({ back: to }, `lean back ${to}°`)} />
        <NumberEntry label={`turn, rear end ${side === "middle" ? "right" : "out"}, degrees`} unit="°" decimals={2} value={lean.swing} disabled={disabled} give={(to) => leanTo({ swing: to }, `turn ${to}°, rear end ${side === "middle" ? "right" : "out"}`)} />
      </TicketRow>
      {locked && <p className="py-1 text-sm text-pencil">Locked: it stays where it is until it is unlocked.</p>}
    </div>
  );
}

const LEAN_SAYS: Record<Side, string> = {
  left: "out: its top away from the centre of the car; back: its top rearward; turn: its rear end outward. Minus is the other way.",
  right: "out: its top away from the centre of the car; back: its top rearward; turn: its rear end outward. Minus is the other way.",
  middle: "right: its top to the car's right; back: its top rearward; turn: its rear end to the right. Minus is the other way.",
};

function measured(part: Part): Faces | null {
  try {
    return facesOf(part);
  } catch {
    return null;
  }
}

/** Typed places are kept to a millionth: what is typed comes back as typed. */
const round = (value: number) => Math.round(value * 1e6) / 1e6 + 0;
const nearest = (all: readonly TapeDatum[], to: number) => all.reduce((best, datum) => (Math.abs(to - datum.at) < Math.abs(to - best.at) ? datum : best));

/** "rear of Rear axle": the datum is a word in the line that can be changed. */
export function DatumPick({ before, now, all, pick }: { before: string; now: TapeDatum; all: readonly TapeDatum[]; pick: (key: string) => void }) {
  return (
    <span>
      {before}{" "}
      <select aria-label={`${before}: read from`} title="Read from another datum" className="max-w-full cursor-pointer appearance-none border-b border-dotted border-pencil bg-transparent text-ink" value={now.key} onChange={(event) => pick(event.target.value)}>
        {all.map((datum) => <option key={datum.key} value={datum.key} className="bg-lit">{datum.name}</option>)}
      </select>
    </span>
  );
}
