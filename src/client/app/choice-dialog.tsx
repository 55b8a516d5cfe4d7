import { formatLength } from "#core/units/format-length.ts";
import { useBench } from "../editor/bench-context.tsx";
import type { Trouble } from "../editor/document-store.ts";
import { Button } from "../ui/button.tsx";
import { Dialog } from "../ui/dialog.tsx";
import { changedPlaces } from "./changed-places.ts";

/** Mine and theirs beside each other, place by place; nothing is overwritten before somebody says which. */
export function ChoiceDialog({ trouble, onClose }: { trouble: Trouble; onClose: () => void }) {
  const { store, units } = useBench();
  const conflict = trouble.kind === "conflict";
  const settle = (choice: "mine" | "theirs") => {
    store.settle(choice);
    onClose();
  };
  const show = (value: unknown): string => {
    if (value === undefined || value === null) return "nothing";
    if (typeof value === "number") return formatLength(value, "mm").replace(/\.0$/, "");
    if (typeof value === "string") return value || "empty";
    const text = JSON.stringify(value);
    return text.length > 90 ? `${text.slice(0, 90)} …` : text;
  };
  return (
    <Dialog title={conflict ? "Two versions of the same thing" : "This edit was refused"} onClose={onClose} wide>
      <p className="font-semibold">{trouble.waiting.label}</p>
      <p className="mb-4 text-pencil">{trouble.message} {conflict ? "Until you choose, yours is kept here and nothing after it is sent." : "It is kept here until you drop it. What you did after it is sent then."}</p>
      {conflict && trouble.theirs.map((item) => {
        const mine = trouble.waiting.diff.find((change) => change.list === item.list && change.key === item.key);
        const rows = changedPlaces(mine?.before, mine?.after, item.value);
        const name = (item.value as { name?: string } | null)?.name ?? (mine?.after as { name?: string } | null)?.name ?? item.key;
        return (
          <table key={`${item.list}/${item.key}`} className="mb-4 w-full text-left">
            <caption className="mb-1 text-left font-semibold">{name}{item.value === null && <span className="font-normal text-short">: they removed it</span>}{mine && mine.after === null && <span className="font-normal text-short">: you removed it</span>}</caption>
            <thead><tr className="border-b border-ink text-sm text-pencil"><th className="py-1 pr-4 font-normal">place</th><th className="pr-4 font-normal">yours</th><th className="font-normal">stored now</th></tr></thead>
            <tbody>
              {rows.slice(0, 30).map((row) => <tr key={row.path} className="border-b border-hair align-top"><td className="num py-1 pr-4 text-sm">{row.path || "all of it"}</td><td className="num break-words py-1 pr-4 text-sm">{show(row.mine)}</td><td className="num break-words py-1 text-sm">{show(row.theirs)}</td></tr>)}
            </tbody>
          </table>
        );
      })}
      {conflict && units !== "mm" && <p className="mb-4 text-sm text-pencil">Lengths here are in mm, as they are stored.</p>}
      <div className="flex flex-wrap justify-end gap-3">
        <Button onClick={onClose}>Decide later</Button>
        <Button onClick={() => settle("theirs")}>{conflict ? "Take theirs" : "Drop my edit"}</Button>
        {conflict && <Button look="main" onClick={() => settle("mine")}>Put mine on top</Button>}
      </div>
    </Dialog>
  );
}
