import { useState } from "react";
import { toast } from "sonner";
import type { Command, SimpleCommand } from "#core/layout/commands.ts";
import { Button } from "../../ui/button.tsx";
import { mayGive, useBench, useDocument } from "../bench-context.tsx";
import { LengthEntry, TextEntry } from "../forms/entry.tsx";
import { listOf, movable, twinCommand } from "../hands.ts";
import { namesOf } from "../ledger/names.ts";
import { select } from "../view-state.ts";
import { TicketRow } from "./ticket-row.tsx";

/** Several things at once: moved together, grouped, locked, removed. */
export function ManyCard({ keys }: { keys: readonly string[] }) {
  const bench = useBench();
  const { store } = bench;
  const document = useDocument((state) => state.document);
  const name = namesOf(document);
  const [by, setBy] = useState<[number, number, number]>([0, 0, 0]);
  const items = movable(document, keys);
  const move: Command = { kind: "move", items: items.length > 0 ? items : [{ list: "parts", key: keys[0]! }], by };
  const may = items.length > 0 && mayGive(bench, move);
  const lockable = keys.flatMap((key): SimpleCommand[] => {
    const list = listOf(document, key);
    const item = list === "parts" ? document.parts.find((one) => one.key === key) : list === "runs" ? document.runs.find((one) => one.key === key) : undefined;
    return item ? [{ kind: "replace", list, item } as SimpleCommand] : [];
  });
  const change = (label: string, edit: (item: Record<string, unknown>) => Record<string, unknown>) => {
    const commands = lockable.map((command) => ({ ...command, item: edit((command as { item: Record<string, unknown> }).item) }) as SimpleCommand);
    return store.run({ kind: "together", label, commands }, label) ? null : (store.state.getState().refusal ?? "This cannot be done.");
  };
  const locked = lockable.length > 0 && lockable.every((command) => (command as { item: { locked: boolean } }).item.locked);
  const mayChange = lockable.length > 0 && lockable.every((command) => mayGive(bench, command));
  const run = (command: Command, label: string) => store.run(command, label) || (toast.error(store.state.getState().refusal ?? "This cannot be done."), false);
  return (
    <>
      <h3 className="text-xl font-semibold">{keys.length} things</h3>
      <p className="mb-1 border-b border-hair pb-2 text-pencil">{keys.slice(0, 6).map(name).join(", ")}{keys.length > 6 ? ` and ${keys.length - 6} more` : ""}</p>
      {may && (
        <>
          <TicketRow label="move by">{(["rear", "right", "up"] as const).map((word, k) => <LengthEntry key={word} below label={`Move by, ${word}`} suffix={word} mm={by[k]!} give={(mm) => void setBy(by.map((value, i) => (i === k ? mm : value)) as [number, number, number])} />)}</TicketRow>
          <div className="my-2 flex gap-3">
            <Button look="main" disabled={by.every((value) => value === 0)} onClick={() => run(move, `Move ${keys.length} things`) && setBy([0, 0, 0])}>Move them</Button>
            <Button onClick={() => {
              const twin = twinCommand(document, keys);
              if (twin && run(twin.command, `Twin ${keys.length} things`)) select(twin.keys);
            }}>Twin them</Button>
          </div>
        </>
      )}
      {mayChange && (
        <>
          <TicketRow label="group"><TextEntry label="Group of all" value="" placeholder="a name for all of them" give={(group) => change(`Group ${group}`, (item) => ({ ...item, group }))} /></TicketRow>
          <div className="my-2 flex gap-3">
            <Button onClick={() => void change(locked ? "Unlock them" : "Lock them", (item) => ({ ...item, locked: !locked }))}>{locked ? "Unlock" : "Lock in place"}</Button>
            <Button look="danger" onClick={() => {
              const commands = keys.flatMap((key): SimpleCommand[] => {
                const list = listOf(document, key);
                return list ? [{ kind: "remove", list, key }] : [];
              });
              if (run({ kind: "together", label: `Remove ${commands.length} things`, commands }, `Remove ${commands.length} things`)) select([]);
            }}>Remove</Button>
          </div>
        </>
      )}
      <Button look="quiet" onClick={() => select([])}>Select nothing</Button>
    </>
  );
}
