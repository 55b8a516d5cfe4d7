import { useState } from "react";
import { toast } from "sonner";
import { PART_STATUSES, type Part, type Solid } from "#core/layout/schema.ts";
import { formatLength } from "#core/units/format-length.ts";
import { Button } from "../../ui/button.tsx";
import { mayGive, useBench, useDocument } from "../bench-context.tsx";
import { Choice, LengthEntry, MaybeNumberEntry, TextEntry, Tick } from "../forms/entry.tsx";
import { useItemForm, type Form } from "../forms/item-form.ts";
import { heatText, HeatForm, movementText, MovementForm, SourceForm, sourceText } from "../forms/shared-forms.tsx";
import { SolidForm } from "../forms/solid-form.tsx";
import { newSolid, SOLID_TYPES, SOLID_WORDS, solidText } from "../forms/solid-words.ts";
import { CardHead } from "./card-head.tsx";
import { PartPlace } from "./part-place.tsx";
import { PlacesForm } from "./places-form.tsx";
import { TicketFold, TicketRow, TicketSays } from "./ticket-row.tsx";
import { PART_KIND_CHOICES, STATUS_CHOICES } from "./words.ts";
import { WorstOf } from "./worst-of.tsx";

/** A part as a job card: where it stands, what it is, what it does to its neighbours. */
export function PartCard({ partKey }: { partKey: string }) {
  const form = useItemForm("parts", partKey);
  const [solid, setSolid] = useState<number | null>(null);
  if (!form) return null;
  if (solid !== null && form.value.solids[solid]) return <OneSolid form={form} index={solid} back={() => setSolid(null)} />;
  return <Card form={form} openSolid={setSolid} />;
}

function Card({ form, openSolid }: { form: Form<Part>; openSolid: (index: number) => void }) {
  const bench = useBench();
  const { units } = bench;
  const part = form.value;
  const parts = useDocument((state) => state.document.parts);
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(path, value, `${part.name}: ${what}`);
  const carriers = parts.filter((one) => one.key !== part.key);
  const mayStatus = mayGive(bench, { kind: "status", key: part.key, status: part.status });
  const length = (mm: number) => formatLength(mm, units);
  return (
    <>
      <CardHead form={form} list="parts" kind={part.kind} kinds={PART_KIND_CHOICES} mirrorOf={part.mirrorOf} />
      <PartPlace form={form} />
      <TicketSays label="size from">{sourceText(part.source, units)}</TicketSays>
      <TicketRow label="carried by">
        <Choice label="Carried by" value={part.carriedBy ?? ""} options={[["", "the chassis"], ...carriers.map((one) => [one.key, one.name] as const)]} disabled={!form.may} give={(key) => put(["carriedBy"], key || null, "carried by")} />
      </TicketRow>
      <TicketRow label="status">
        <Choice label="Status" value={part.status} options={STATUS_CHOICES} disabled={!mayStatus} give={(status) => {
          const given = PART_STATUSES.find((one) => one === status)!;
          return bench.store.run({ kind: "status", key: part.key, status: given }, `${part.name}: ${given}`) ? null : bench.store.state.getState().refusal;
        }} />
      </TicketRow>
      <WorstOf itemKey={part.key} />
      <TicketFold title="Size and source" note={sourceText(part.source, units)}><SourceForm form={form} /></TicketFold>
      <TicketFold title="Shape" note={part.solids.length === 1 ? solidText(part.solids[0]!, length) : `${part.solids.length} solids`}>
        <ul>
          {part.solids.map((one, i) => (
            <li key={i} className="flex items-center gap-3 border-b border-hair py-1">
              <button type="button" className="min-h-8 flex-1 truncate text-left hover:underline" onClick={() => openSolid(i)}>{solidText(one, length)}</button>
              {form.may && part.solids.length > 1 && <button type="button" aria-label={`Take out solid ${i + 1}`} className="text-sm text-pencil hover:text-short" onClick={() => complain(put(["solids", i], undefined, "a solid less"))}>take out</button>}
            </li>
          ))}
        </ul>
        {form.may && (
          <div className="mt-2 flex items-center gap-2 text-sm">
            <span className="text-pencil">add</span>
            <select aria-label="Add a solid" className="written" value="" onChange={(event) => {
              const made = newSolid(event.target.value as Solid["type"]);
              if (complain(put(["solids"], [...part.solids, made], `a ${SOLID_WORDS[made.type].word} more`))) openSolid(part.solids.length);
            }}>
              <option value="" disabled>choose a solid</option>
              {SOLID_TYPES.map((type) => <option key={type} value={type}>{SOLID_WORDS[type].word}: {SOLID_WORDS[type].when}</option>)}
            </select>
          </div>
        )}
      </TicketFold>
      <TicketFold title="Movement" note={movementText(part.movement, units)}><MovementForm form={form} /></TicketFold>
      <TicketFold title="Mass" note={part.mass === undefined ? "not known" : `${part.mass} kg`}>
        <TicketRow label="mass"><MaybeNumberEntry label="Mass" unit="kg" decimals={3} value={part.mass} disabled={!form.may} give={(kg) => put(["mass"], kg, kg === undefined ? "mass not known" : `mass ${kg} kg`)} /></TicketRow>
        <TicketRow label="its centre">{(["rear", "right", "up"] as const).map((word, k) => <LengthEntry key={word} below label={`Centre of mass, ${word}, from its own origin`} suffix={word} mm={part.massAt[k]!} disabled={!form.may} give={(mm) => put(["massAt", k], mm, "centre of mass")} />)}</TicketRow>
      </TicketFold>
      <TicketFold title="Heat" note={heatText(part.heat)}><HeatForm form={form} /></TicketFold>
      <TicketFold title="Room for" note={part.roomFor.length === 0 ? "nothing kept free" : part.roomFor.map((room) => room.name).join(", ")}><RoomFor form={form} /></TicketFold>
      <TicketFold title="Ports, mounts, lift-out" note={[part.ports.length && `${part.ports.length} ports`, part.mounts.length && `${part.mounts.length} mounts`, part.liftOut.length && `${part.liftOut.length} ways out`].filter(Boolean).join(", ") || "none"}><PlacesForm form={form} /></TicketFold>
      <TicketFold title="Group, key, lock" note={[part.group, part.key, part.locked && "locked"].filter(Boolean).join(" · ")}>
        <TicketRow label="group"><TextEntry label="Group" value={part.group} disabled={!form.may} give={(group) => put(["group"], group, "group")} /></TicketRow>
        <KeyRow list="parts" itemKey={part.key} may={form.may} />
        <Tick label="locked: nothing moves it" value={part.locked} disabled={!form.may} give={(locked) => put(["locked"], locked, locked ? "locked" : "unlocked")} />
      </TicketFold>
    </>
  );
}

/** Says a refusal where no field is at hand. @returns whether it was taken */
export function complain(refused: string | null): boolean {
  if (refused) toast.error(refused);
  return refused === null;
}

/** The key that names a thing in files and rules; a change follows everywhere it is used. */
export function KeyRow({ list, itemKey, may }: { list: "parts" | "runs" | "spaces" | "luggage" | "glass" | "eyes" | "shafts"; itemKey: string; may: boolean }) {
  const { store } = useBench();
  return (
    <TicketRow label="key in files">
      <TextEntry label="Key in files" value={itemKey} disabled={!may} give={(to) => {
        if (!store.run({ kind: "rename", list, key: itemKey, to }, `Key ${itemKey} becomes ${to}`)) return store.state.getState().refusal ?? "This key cannot be taken.";
        return null;
      }} />
    </TicketRow>
  );
}

function OneSolid({ form, index, back }: { form: Form<Part>; index: number; back: () => void }) {
  const part = form.value;
  return (
    <div>
      <button type="button" className="mb-2 min-h-8 text-pencil hover:text-ink" onClick={back}>back to {part.name}</button>
      <h3 className="mb-1 text-lg font-semibold">{SOLID_WORDS[part.solids[index]!.type].word}{part.solids.length > 1 && <span className="font-normal text-pencil"> · solid {index + 1} of {part.solids.length}</span>}</h3>
      <SolidForm solid={part.solids[index]!} disabled={!form.may} give={(next) => form.put(["solids", index], next, `${part.name}: shape`)} />
    </div>
  );
}

function RoomFor({ form }: { form: Form<Part> }) {
  const part = form.value;
  return (
    <div className="space-y-4">
      <p className="text-sm text-pencil">Space that must stay free of everything else: to pull a plug, swing a spanner, lift a filter out. It is drawn and checked like the part.</p>
      {part.roomFor.map((room, i) => (
        <div key={room.key} className="border-l-2 border-ink pl-3">
          <TicketRow label="for"><TextEntry label="Room for" value={room.name} disabled={!form.may} give={(name) => form.put(["roomFor", i, "name"], name, `${part.name}: room renamed`)} /></TicketRow>
          {room.solids.map((solid, k) => <SolidForm key={k} solid={solid} disabled={!form.may} give={(next) => form.put(["roomFor", i, "solids", k], next, `${part.name}: ${room.name}`)} />)}
          {form.may && <button type="button" className="text-sm text-pencil hover:text-short" onClick={() => complain(form.put(["roomFor", i], undefined, `${part.name}: ${room.name} taken out`))}>take this room out</button>}
        </div>
      ))}
      {form.may && <Button onClick={() => complain(form.put(["roomFor"], [...part.roomFor, { key: freeRoomKey(part), name: "Room to reach it", solids: [newSolid("box")] }], `${part.name}: room kept free`))}>Keep room free</Button>}
    </div>
  );
}

function freeRoomKey(part: Part): string {
  const taken = new Set(part.roomFor.map((room) => room.key));
  for (let n = 1; ; n++) if (!taken.has(`room-${n}`)) return `room-${n}`;
}
