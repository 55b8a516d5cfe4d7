import type { Part } from "#core/layout/schema.ts";
import { Button } from "../../ui/button.tsx";
import { Choice, LengthEntry, NumberEntry, TextEntry } from "../forms/entry.tsx";
import type { Form } from "../forms/item-form.ts";
import { complain } from "./part-card.tsx";
import { TicketRow } from "./ticket-row.tsx";

const PORT_KINDS = ["thread", "tube", "hose", "flange", "plug", "outlet"].map((kind) => [kind, kind] as const);
const WORDS = ["rear", "right", "up"] as const;

/** Ports that runs are bound to, holes it is bolted by, and the ways it is lifted out. Places are from the part's own origin. */
export function PlacesForm({ form }: { form: Form<Part> }) {
  const part = form.value;
  const disabled = !form.may;
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(path, value, `${part.name}: ${what}`);
  const three = (label: string, path: readonly (string | number)[], at: readonly number[], what: string) => (
    <TicketRow label={label}>{WORDS.map((word, k) => <LengthEntry key={word} below label={`${what}, ${label}, ${word}`} suffix={word} mm={at[k]!} disabled={disabled} give={(mm) => put([...path, k], mm, what)} />)}</TicketRow>
  );
  const direction = (path: readonly (string | number)[], at: readonly number[], what: string) => (
    <TicketRow label="points">{WORDS.map((word, k) => <NumberEntry key={word} below label={`${what}, direction, share ${word}`} suffix={word} unit="" decimals={3} value={at[k]!} disabled={disabled} give={(value) => put([...path, k], value, what)} />)}</TicketRow>
  );
  const out = (path: readonly (string | number)[], what: string) => !disabled && <button type="button" className="text-sm text-pencil hover:text-short" onClick={() => complain(put(path, undefined, `${what} taken out`))}>take out</button>;
  const free = (taken: readonly { key: string }[], stem: string) => {
    for (let n = taken.length + 1; ; n++) if (!taken.some((one) => one.key === `${stem}${n}`)) return `${stem}${n}`;
  };
  return (
    <div className="space-y-4">
      {part.ports.map((port, i) => (
        <div key={port.key} className="border-l-2 border-ink pl-3">
          <TicketRow label="port"><TextEntry label="Port key" value={port.key} disabled={disabled} give={(key) => put(["ports", i, "key"], key, "port renamed")} /><Choice label="Port kind" value={port.kind} options={PORT_KINDS} disabled={disabled} give={(kind) => put(["ports", i, "kind"], kind, "port kind")} /></TicketRow>
          {three("place", ["ports", i, "at"], port.at, `port ${port.key}`)}
          {direction(["ports", i, "axis"], port.axis, `port ${port.key}`)}
          {Object.keys(port.spec).length > 0 && <p className="py-1 text-sm text-pencil">{Object.entries(port.spec).map(([key, value]) => `${key} ${String(value)}`).join(", ")}</p>}
          {out(["ports", i], `port ${port.key}`)}
        </div>
      ))}
      {part.mounts.map((mount, i) => (
        <div key={mount.key} className="border-l-2 border-hair pl-3">
          <TicketRow label="mount"><TextEntry label="Mount key" value={mount.key} disabled={disabled} give={(key) => put(["mounts", i, "key"], key, "mount renamed")} /><LengthEntry label={`Mount ${mount.key}, hole diameter`} suffix="hole" mm={mount.diameter} disabled={disabled} give={(mm) => put(["mounts", i, "diameter"], mm, "mount hole")} /></TicketRow>
          {three("place", ["mounts", i, "at"], mount.at, `mount ${mount.key}`)}
          {direction(["mounts", i, "axis"], mount.axis, `mount ${mount.key}`)}
          {out(["mounts", i], `mount ${mount.key}`)}
        </div>
      ))}
      {part.liftOut.map((way, i) => (
        <div key={i} className="border-l-2 border-hair pl-3">
          <TicketRow label="lifts out"><LengthEntry label={`Way out ${i + 1}, distance`} suffix="far" mm={way.distance} disabled={disabled} give={(mm) => put(["liftOut", i, "distance"], mm, "lift-out distance")} /></TicketRow>
          {direction(["liftOut", i, "direction"], way.direction, `way out ${i + 1}`)}
          {out(["liftOut", i], "a way out")}
        </div>
      ))}
      {!disabled && (
        <div className="flex flex-wrap gap-2">
          <Button onClick={() => complain(put(["ports"], [...part.ports, { key: free(part.ports, "port"), at: [0, 0, 0], axis: [1, 0, 0], kind: "plug", spec: {} }], "a port more"))}>Add a port</Button>
          <Button onClick={() => complain(put(["mounts"], [...part.mounts, { key: free(part.mounts, "m"), at: [0, 0, 0], axis: [0, 0, 1], diameter: 8.5 }], "a mount more"))}>Add a mount</Button>
          <Button onClick={() => complain(put(["liftOut"], [...part.liftOut, { direction: [0, 0, 1], distance: 500 }], "a way out more"))}>Add a way out</Button>
        </div>
      )}
      {disabled && part.ports.length + part.mounts.length + part.liftOut.length === 0 && <p className="text-sm text-pencil">None are entered.</p>}
    </div>
  );
}
