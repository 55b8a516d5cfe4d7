import { toast } from "sonner";
import type { Command, ListName } from "#core/layout/commands.ts";
import type { Part, Run } from "#core/layout/schema.ts";
import { Menu, type MenuItem } from "../../ui/menu.tsx";
import { mayGive, useBench, useDocument } from "../bench-context.tsx";
import type { Form } from "../forms/item-form.ts";
import { twinCommand } from "../hands.ts";
import { select, useViewState } from "../view-state.ts";
import { TextEntry } from "../forms/entry.tsx";
import { kindWord } from "./words.ts";

/** Removes things after a word with the person's own undo at hand. */
export function useRemove(): (list: ListName, key: string, name: string) => void {
  const { store } = useBench();
  return (list, key, name) => {
    if (store.run({ kind: "remove", list, key }, `Remove ${name}`)) {
      select([]);
      toast(`${name} is removed.`, { action: { label: "Undo", onClick: () => store.undo() } });
    } else toast.error(store.state.getState().refusal ?? "It cannot be removed.");
  };
}

/** Name to write over, kind to choose, and what else can be done with it. */
export function CardHead({ form, list, kind, kinds, mirrorOf }: {
  form: Form<Part> | Form<Run> | Form<{ key: string; name: string }>; list: ListName; kind?: string; kinds?: readonly (readonly [string, string])[]; mirrorOf?: string | null;
}) {
  const bench = useBench();
  const { store } = bench;
  const remove = useRemove();
  const item = form.value as { key: string; name: string; locked?: boolean };
  const mirrored = useDocument((state) => (mirrorOf ? [...state.document.parts, ...state.document.runs].find((one) => one.key === mirrorOf)?.name : undefined));
  const mayRemove = mayGive(bench, { kind: "remove", list, key: item.key });
  const put = (path: readonly string[], value: unknown, label: string) => (form as Form<Part>).put(path, value, `${item.name}: ${label}`);
  const items: MenuItem[] = [];
  if (form.may && list !== "luggage") items.push({ label: "Twin beside it (D)", act: () => {
    const twin = twinCommand(store.state.getState().document, [item.key]);
    if (twin && store.run(twin.command as Command, `Twin ${item.name}`)) select(twin.keys);
  } });
  const hidden = useViewState((state) => state.hidden);
  items.push({ label: hidden.has(item.key) ? "Show in the drawing" : "Hide in the drawing", act: () => {
    const next = new Set(hidden);
    if (!next.delete(item.key)) next.add(item.key);
    useViewState.getState().set({ hidden: next });
  } });
  if (form.may && item.locked !== undefined) items.push({ label: item.locked ? "Unlock" : "Lock in place", act: () => void put(["locked"], !item.locked, item.locked ? "unlocked" : "locked") });
  if (mayRemove) items.push({ label: "Remove", danger: true, act: () => remove(list, item.key, item.name) });
  return (
    <div className="mb-1 border-b border-hair pb-2">
      <div className="flex items-start gap-2">
        <div className="min-w-0 flex-1 text-xl font-semibold [&_.written]:border-b-transparent [&_.written:focus]:border-b-ink [&_.written:hover]:border-b-hair">
          <TextEntry label="Name" value={item.name} disabled={!form.may} give={(name) => (form as Form<Part>).put(["name"], name, `${item.name} becomes ${name}`)} />
        </div>
        {items.length > 0 && <Menu label={`More for ${item.name}`} items={items} className="min-h-8 border border-hair px-2 text-sm hover:border-ink">more</Menu>}
      </div>
      <div className="flex items-baseline gap-1.5 text-pencil">
        {kinds && kind !== undefined && (form.may ? (
          <select aria-label="Kind" className="min-h-6 cursor-pointer appearance-none border-b border-dotted border-pencil bg-transparent" value={kind} onChange={(event) => void put(["kind"], event.target.value, "kind")}>
            {kinds.map(([key, word]) => <option key={key} value={key} className="bg-lit">{word}</option>)}
          </select>
        ) : <span>{kindWord(kind)}</span>)}
        {mirrored && <span>· mirror of {mirrored}</span>}
        {item.locked && <span>· locked</span>}
      </div>
    </div>
  );
}
