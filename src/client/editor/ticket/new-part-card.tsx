import { useState } from "react";
import { facesOf } from "#core/body/places-by-tape.ts";
import { groundAt } from "#core/frames.ts";
import { partSchema, type Part, type PartKind, type Solid } from "#core/layout/schema.ts";
import { Button } from "../../ui/button.tsx";
import { useBench, useDocument } from "../bench-context.tsx";
import { Choice, LengthEntry, TextEntry } from "../forms/entry.tsx";
import { SolidForm } from "../forms/solid-form.tsx";
import { newSolid } from "../forms/solid-words.ts";
import { freeKey } from "../hands.ts";
import { select, useViewState } from "../view-state.ts";
import { TicketRow } from "./ticket-row.tsx";
import { PART_KIND_CHOICES, SOURCE_CHOICES } from "./words.ts";

/** A blank card: what it is, its shape, where it stands. Nothing of it exists before it is placed. */
export function NewPartCard() {
  const { store } = useBench();
  const document = useDocument((state) => state.document);
  const station = useViewState((state) => state.station);
  const set = useViewState((state) => state.set);
  const [name, setName] = useState("New part");
  const [kind, setKind] = useState<PartKind>("other");
  const [how, setHow] = useState<Part["source"]["how"]>("measured");
  const [solid, setSolid] = useState<Solid>(() => newSolid("box"));
  const [front, setFront] = useState(() => Math.round(station));
  const [middle, setMiddle] = useState(0);
  const [lowest, setLowest] = useState(() => Math.round(groundAt(document.chassis, station) + 300));
  const [wrong, setWrong] = useState<string | null>(null);
  const place = () => {
    const key = freeKey(document, name);
    try {
      const made = partOf(solid, key, name, kind, how);
      const faces = facesOf(made);
      const at = [front - faces.low[0], middle - (faces.low[1] + faces.high[1]) / 2, lowest - faces.low[2]];
      const part = partSchema.parse({ ...made, at });
      if (!store.run({ kind: "add", list: "parts", item: part }, `Add ${name}`)) return setWrong(store.state.getState().refusal);
      set({ tool: "pick" });
      select([key]);
    } catch (error) {
      setWrong(error instanceof Error ? error.message : String(error));
    }
  };
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        place();
      }}
    >
      <h3 className="text-xl font-semibold">A part to be placed</h3>
      <p className="mb-1 border-b border-hair pb-2 text-pencil">Its sizes now, the finer points once it stands.</p>
      <TicketRow label="name"><TextEntry label="Name" value={name} give={(to) => (to ? void setName(to) : "it needs a name")} /></TicketRow>
      <TicketRow label="kind"><Choice label="Kind" value={kind} options={PART_KIND_CHOICES} give={(to) => void setKind(to)} /></TicketRow>
      <TicketRow label="size from"><Choice label="Size from" value={how} options={SOURCE_CHOICES} give={(to) => void setHow(to)} /></TicketRow>
      <SolidForm solid={solid} placed={false} give={(next) => {
        const wrongShape = faultOf(next);
        if (!wrongShape) setSolid(next);
        return wrongShape;
      }} />
      <TicketRow label="rear of Front axle"><LengthEntry label="Front face, rear of Front axle" suffix="front face" mm={front} give={(mm) => void setFront(mm)} /></TicketRow>
      <TicketRow label="right of centre"><LengthEntry label="Its middle, right of centre" suffix="middle" mm={middle} give={(mm) => void setMiddle(mm)} /></TicketRow>
      <TicketRow label="above zero plane"><LengthEntry label="Lowest point above the chassis zero plane" suffix="lowest" mm={lowest} give={(mm) => void setLowest(mm)} /></TicketRow>
      {wrong && <p role="alert" className="py-2 text-short">{wrong}</p>}
      <div className="mt-3 flex gap-3">
        <Button type="submit" look="main">Place it</Button>
        <Button onClick={() => set({ tool: "pick" })}>Leave it</Button>
      </div>
    </form>
  );
}

/** A part of one solid at the origin. */
const partOf = (solid: Solid, key: string, name: string, kind: PartKind, how: Part["source"]["how"]): Part => partSchema.parse({ key, name, kind, solids: [solid], at: [0, 0, 0], source: { how, plusMinus: 0 } });

/** Why a shape cannot be: an outline that crosses itself, outlines with nothing in common. Said at its field, before it is placed. */
function faultOf(solid: Solid): string | null {
  try {
    facesOf(partOf(solid, "part", "part", "other", "measured"));
    return null;
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}
