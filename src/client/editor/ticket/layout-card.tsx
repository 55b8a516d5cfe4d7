import { useState } from "react";
import { eyeSchema, glassSchema, luggageSchema, shaftSchema, spaceSchema, type Chassis, type Contact } from "#core/layout/schema.ts";
import type { Command } from "#core/layout/commands.ts";
import { formatLength } from "#core/units/format-length.ts";
import { Button } from "../../ui/button.tsx";
import { mayGive, useBench, useDocument, useShown } from "../bench-context.tsx";
import { Choice, LengthEntry, NumberEntry, TextEntry } from "../forms/entry.tsx";
import { useSingletonForm } from "../forms/item-form.ts";
import { PointsField } from "../forms/points-field.tsx";
import { freeKey } from "../hands.ts";
import { namesOf } from "../ledger/names.ts";
import { select, useViewState } from "../view-state.ts";
import { complain } from "./part-card.tsx";
import { TicketFold, TicketRow, TicketSays } from "./ticket-row.tsx";

const counted = (n: number, what: string): string => `${n === 0 ? "no" : n} ${what}${n === 1 ? "" : "s"}`;

/** With nothing selected the ticket is the layout's own: its chassis, datums, body lines, air, contacts and notes. */
export function LayoutCard() {
  const { units, role } = useBench();
  const form = useSingletonForm("document");
  const chassis = useSingletonForm("chassis");
  const body = useSingletonForm("body");
  const air = useSingletonForm("air");
  const document = useDocument((state) => state.document);
  const counts = useShown((shown) => shown.report.counts);
  const length = (mm: number) => formatLength(mm, units, units === "mm" ? 0 : undefined);
  const wrong = counts.touch + counts.rub + counts.short;
  return (
    <>
      <div className="mb-1 border-b border-hair pb-2">
        <div className="text-xl font-semibold [&_.written]:border-b-transparent [&_.written:focus]:border-b-ink [&_.written:hover]:border-b-hair">
          <TextEntry label="Name of the layout" value={form.value.name} disabled={!form.may} give={(name) => form.put(["name"], name, `Layout renamed to ${name}`)} />
        </div>
        <p className="text-pencil">{counted(document.parts.length, "part")}, {counted(document.runs.length, "run")}, {counted(document.spaces.length, "space")}</p>
      </div>
      <TicketSays label="it says">{document.parts.length + document.runs.length === 0 ? "A bare chassis. Its numbers first, below; then the parts, by their sizes or by their outlines." : wrong === 0 ? "Nothing breaks a rule." : <><b>{wrong}</b> {wrong === 1 ? "gap breaks" : "gaps break"} a rule, {counts.tight} {counts.tight === 1 ? "is" : "are"} tight. Choose a row of the ledger, or a part in the drawing.</>}</TicketSays>
      <TicketFold title="Chassis" note={`wheelbase ${length(chassis.value.wheelbase)}`}><ChassisForm /></TicketFold>
      <TicketFold title="Datums" note={chassis.value.datums.length === 0 ? "axles, centre, ground" : chassis.value.datums.map((datum) => datum.name).join(", ")}><Datums /></TicketFold>
      <TicketFold title="Body lines" note={[body.value.side && "side", body.value.top && "above", body.value.rear && "behind", body.value.sections.length > 0 && `${body.value.sections.length} sections`].filter(Boolean).join(", ") || "not drawn"}><BodyForm /></TicketFold>
      <TicketFold title="Air in the bay" note={`${air.value.temperature} °C`}>
        <TicketRow label="air"><NumberEntry label="Air in the bay" unit="°C" value={air.value.temperature} disabled={!air.may} give={(value) => air.put(["temperature"], value, `Bay air ${value} °C`)} /><NumberEntry label="Air speed" unit="m/s" value={air.value.speed} disabled={!air.may} give={(value) => air.put(["speed"], value, `Air speed ${value} m/s`)} /></TicketRow>
        <TicketRow label="surroundings"><NumberEntry label="Surroundings" unit="°C" value={air.value.surroundings} disabled={!air.may} give={(value) => air.put(["surroundings"], value, `Surroundings ${value} °C`)} /></TicketRow>
      </TicketFold>
      <TicketFold title="Contacts" note={document.contacts.length === 1 ? "one pair meant to touch" : `${document.contacts.length} pairs meant to touch`}><Contacts /></TicketFold>
      <TicketFold title="Add something else" note="space, luggage, glass, eye, shaft"><AddOther /></TicketFold>
      <TicketFold title="Notes" note={form.value.notes.slice(0, 40)}><Notes value={form.value.notes} disabled={!form.may} give={(notes) => form.put(["notes"], notes, "Notes changed")} /></TicketFold>
      {role !== "owner" && <p className="pt-2 text-sm text-pencil">{ROLE_SAYS[role]}</p>}
    </>
  );
}

const ROLE_SAYS = { designer: "As designer you change body lines, glass, luggage spaces and limits; parts and runs are the owner's.", fabricator: "As fabricator you set the status of parts; the layout itself is the owner's to change.", viewer: "As viewer you read and print; changing is for the owner, the designer and the fabricator." } as const;

function ChassisForm() {
  const form = useSingletonForm("chassis");
  const { wheelbase } = form.value;
  const length = (path: readonly (string | number)[], mm: number, label: string, suffix: string) => <LengthEntry label={label} suffix={suffix} mm={mm} disabled={!form.may} give={(value) => form.put(path, value, `Chassis: ${label}`)} />;
  return (
    <>
      <TicketRow label="wheelbase">{length(["wheelbase"], wheelbase, "wheelbase", "")}</TicketRow>
      {(["front", "rear"] as const).map((end) => {
        const axle: Chassis["front"] = form.value[end];
        return (
          <div key={end}>
            <p className="pt-2 font-semibold">{end === "front" ? "Front axle" : "Rear axle"}</p>
            <TicketRow label="track">{length([end, "track"], axle.track, `${end} track`, "")}</TicketRow>
            <TicketRow label="ride height">{length([end, "rideHeight"], axle.rideHeight, `${end} ride height: chassis zero plane above ground`, "zero plane")}</TicketRow>
            <TicketRow label="travel">{length([end, "bump"], axle.bump, `${end} bump`, "bump")}{length([end, "droop"], axle.droop, `${end} droop`, "droop")}</TicketRow>
            <TicketRow label="steers"><NumberEntry label={`${end} steering angle each way`} unit="°" value={axle.steer} disabled={!form.may} give={(value) => form.put([end, "steer"], value, `Chassis: ${end} steer ${value}°`)} /></TicketRow>
            <TicketRow label="tyre">{length([end, "tyre", "diameter"], axle.tyre.diameter, `${end} tyre, free diameter`, "dia.")}{length([end, "tyre", "width"], axle.tyre.width, `${end} tyre width`, "wide")}</TicketRow>
            <TicketRow label="loaded radius">{length([end, "tyre", "loadedRadius"], axle.tyre.loadedRadius, `${end} tyre, wheel centre to ground`, "to ground")}</TicketRow>
            {axle.rim && <TicketRow label="rim">{length([end, "rim", "diameter"], axle.rim.diameter, `${end} rim diameter`, "dia.")}{length([end, "rim", "width"], axle.rim.width, `${end} rim width`, "wide")}{length([end, "rim", "offset"], axle.rim.offset, `${end} rim offset`, "offset")}</TicketRow>}
          </div>
        );
      })}
    </>
  );
}

const AXIS_CHOICES = [["x", "front to rear"], ["y", "side to side"], ["z", "up and down"]] as const;

function Datums() {
  const form = useSingletonForm("chassis");
  const document = useDocument((state) => state.document);
  const { datums } = form.value;
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(["datums", ...path], value, what);
  return (
    <div className="space-y-1">
      <p className="text-sm text-pencil">Planes that people measure from, beside the axles, the centre plane, the chassis zero plane and the ground.</p>
      {datums.map((datum, i) => (
        <div key={datum.key} className="grid grid-cols-[1.4fr_1fr_1fr_auto] items-start gap-2 border-b border-hair py-1">
          <TextEntry label={`Datum ${i + 1} name`} value={datum.name} disabled={!form.may} give={(name) => put([i, "name"], name, `Datum ${name}`)} />
          <Choice label={`${datum.name} square to`} value={datum.axis} options={AXIS_CHOICES} disabled={!form.may} give={(axis) => put([i, "axis"], axis, `Datum ${datum.name}`)} />
          <LengthEntry label={`${datum.name} lies at`} mm={datum.at} disabled={!form.may} give={(at) => put([i, "at"], at, `Datum ${datum.name} moved`)} />
          {form.may && <button type="button" aria-label={`Take out datum ${datum.name}`} className="min-h-[30px] px-1 text-pencil hover:text-short" onClick={() => complain(put([i], undefined, `Datum ${datum.name} taken out`))}>out</button>}
        </div>
      ))}
      {form.may && <Button onClick={() => complain(put([datums.length], { key: freeKey(document, "datum"), name: "New datum", axis: "x", at: Math.round(useViewState.getState().station) }, "Datum at the station"))}>Add one at the station</Button>}
    </div>
  );
}

function BodyForm() {
  const form = useSingletonForm("body");
  const body = form.value;
  const station = useViewState((state) => state.station);
  return (
    <>
      <TicketRow label="skin"><LengthEntry label="Skin thickness" suffix="thick" mm={body.skin} disabled={!form.may} give={(mm) => form.put(["skin"], mm, "Skin thickness")} /><LengthEntry label="Kept between skin and parts" suffix="kept free" mm={body.skinGap} disabled={!form.may} give={(mm) => form.put(["skinGap"], mm, "Kept between skin and parts")} /></TicketRow>
      <TicketRow label="rear overhang at most">
        <NumberEntry label="Rear overhang at most, share of the wheelbase; 0 for no limit" suffix="of wheelbase" unit="" decimals={3} step={0.01} value={body.overhangLimit?.share ?? 0} disabled={!form.may}
          give={(share) => form.put(["overhangLimit"], share === 0 ? undefined : { share, why: body.overhangLimit?.why ?? "" }, "Overhang limit")} />
      </TicketRow>
      {body.overhangLimit && <TicketRow label="because"><TextEntry label="Why that limit" value={body.overhangLimit.why} disabled={!form.may} give={(why) => form.put(["overhangLimit", "why"], why, "Overhang limit: why")} /></TicketRow>}
      <PointsField optional label="from the side" columns={["x", "z"]} points={body.side} disabled={!form.may} give={(points) => form.put(["side"], points, "Body line from the side")} />
      <PointsField optional label="from above" columns={["x", "y"]} points={body.top} disabled={!form.may} give={(points) => form.put(["top"], points, "Body line from above")} />
      <PointsField optional label="from behind" columns={["y", "z"]} points={body.rear} disabled={!form.may} give={(points) => form.put(["rear"], points, "Body line from behind")} />
      {body.sections.map((section, i) => (
        <div key={i} className="border-l-2 border-hair pl-3">
          <TicketRow label="section at"><LengthEntry label={`Section ${i + 1}, station`} mm={section.x} disabled={!form.may} give={(mm) => form.put(["sections", i, "x"], mm, "Body section moved")} /></TicketRow>
          <PointsField optional closed={false} label="line" columns={["y", "z"]} points={section.line} disabled={!form.may} give={(points) => (points === undefined ? form.put(["sections", i], undefined, "Body section taken out") : form.put(["sections", i, "line"], points, "Body section"))} />
        </div>
      ))}
      {form.may && <Button className="mt-2" onClick={() => complain(form.put(["sections", body.sections.length], { x: station, line: [[-600, 0], [0, 800], [600, 0]] }, "Body section at the station"))}>Add a section at the station</Button>}
      <p className="pt-2 text-sm text-pencil">Overhang and lamp rules differ from place to place: ask your authority before cutting.</p>
    </>
  );
}

function Contacts() {
  const form = useSingletonForm("contacts");
  const document = useDocument((state) => state.document);
  const name = namesOf(document);
  const contacts = form.value;
  const choices = [...document.parts, ...document.runs, ...document.shafts].map((one) => [one.key, one.name] as const);
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(path, value, what);
  const [from, setFrom] = useState("");
  const [to, setTo] = useState("");
  return (
    <div>
      <p className="text-sm text-pencil">Pairs that are meant to touch: welded, bolted, resting on each other. They are left out of the ledger.</p>
      <ul className="max-h-56 overflow-y-auto">
        {contacts.map((contact: Contact, i: number) => (
          <li key={`${contact.between.join("|")}${i}`} className="grid grid-cols-[1fr_92px_auto] items-start gap-2 border-b border-hair py-1">
            <span className="pt-1 leading-tight">{name(contact.between[0])} <span className="text-pencil">and</span> {name(contact.between[1])}</span>
            <TextEntry label={`Why ${name(contact.between[0])} and ${name(contact.between[1])} touch`} value={contact.why} disabled={!form.may} give={(why) => put([i, "why"], why, "Contact: why")} />
            {form.may && <button type="button" aria-label={`Take out the contact of ${name(contact.between[0])} and ${name(contact.between[1])}`} className="min-h-[30px] px-1 text-pencil hover:text-short" onClick={() => complain(put([i], undefined, "Contact taken out"))}>out</button>}
          </li>
        ))}
      </ul>
      {form.may && (
        <div className="mt-2 grid grid-cols-[1fr_1fr_auto] items-end gap-2">
          <Choice label="One of the pair" value={from} options={[["", "one"], ...choices]} give={setFrom} />
          <Choice label="The other of the pair" value={to} options={[["", "the other"], ...choices]} give={setTo} />
          <Button disabled={!from || !to || from === to} onClick={() => complain(put([contacts.length], { between: [from, to], why: "" }, `Contact ${name(from)} and ${name(to)}`)) && (setFrom(""), setTo(""))}>They touch</Button>
        </div>
      )}
    </div>
  );
}

/** Things that have no tool of their own in the drawing. */
function AddOther() {
  const bench = useBench();
  const { store } = bench;
  const document = useDocument((state) => state.document);
  const station = useViewState((state) => state.station);
  const x = Math.round(station);
  const kinds: { word: string; make: () => Extract<Command, { kind: "add" }> }[] = [
    { word: "Luggage space", make: () => ({ kind: "add", list: "spaces", item: spaceSchema.parse({ key: freeKey(document, "space"), name: "Luggage space", top: [[x, -400], [x + 700, -400], [x + 700, 400], [x, 400]], side: [[x, 250], [x + 700, 250], [x + 700, 600], [x, 600]] }) }) },
    { word: "Case", make: () => ({ kind: "add", list: "luggage", item: luggageSchema.parse({ key: freeKey(document, "case"), name: "Case", size: [550, 400, 230] }) }) },
    { word: "Glass", make: () => ({ kind: "add", list: "glass", item: glassSchema.parse({ key: freeKey(document, "glass"), name: "Glass", opening: [[x, -500, 900], [x, 500, 900], [x + 600, 450, 700], [x + 600, -450, 700]] }) }) },
    { word: "Eye", make: () => ({ kind: "add", list: "eyes", item: eyeSchema.parse({ key: freeKey(document, "eye"), name: "Eye", at: [x, 0, 1400] }) }) },
    { word: "Shaft", make: () => ({ kind: "add", list: "shafts", item: shaftSchema.parse({ key: freeKey(document, "shaft"), name: "Shaft", inboard: [document.chassis.wheelbase, 150, 180], outboard: [document.chassis.wheelbase, 620, 180], diameter: 28 }) }) },
  ];
  const allowed = kinds.filter(({ make }) => mayGive(bench, make()));
  if (allowed.length === 0) return <p className="text-sm text-pencil">Adding is for the owner; spaces, luggage, glass and eyes for the designer too.</p>;
  return (
    <div className="flex flex-wrap gap-2">
      {allowed.map(({ word, make }) => (
        <Button key={word} onClick={() => {
          const command = make();
          if (complain(store.run(command, `Add ${command.item.name}`) ? null : store.state.getState().refusal)) select([command.item.key]);
        }}>{word}</Button>
      ))}
    </div>
  );
}

function Notes({ value, give, disabled }: { value: string; give: (text: string) => string | null; disabled: boolean }) {
  const [typed, setTyped] = useState<string | null>(null);
  return (
    <textarea
      aria-label="Notes" disabled={disabled} rows={6} className="w-full border border-hair bg-film px-2 py-1" value={typed ?? value}
      onChange={(event) => setTyped(event.target.value)}
      onBlur={() => {
        if (typed !== null && typed !== value && !complain(give(typed))) return;
        setTyped(null);
      }}
    />
  );
}

