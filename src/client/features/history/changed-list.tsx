import type { Change } from "#contracts/layouts.contract.ts";
import { changedPlaces } from "../../app/changed-places.ts";

const MOST = 40;

/** What one change wrote, place by place; lengths in mm, as stored. */
export function ChangedList({ change }: { change: Change }) {
  return (
    <div className="mb-3 overflow-x-auto border-l-2 border-ink pl-4 sm:ml-[112px]">
      {change.diff.map((item) => {
        const name = ((item.after ?? item.before) as { name?: string } | null)?.name ?? item.key;
        if (!item.before || !item.after) return <p key={`${item.list}/${item.key}`} className="py-0.5">{name} <span className="text-pencil">{item.before ? "removed" : "added"}</span></p>;
        const places = changedPlaces(item.before, item.before, item.after);
        const moved = item.positionBefore !== item.positionAfter;
        return (
          <table key={`${item.list}/${item.key}`} className="mb-2 text-left text-sm">
            <caption className="py-0.5 text-left text-base">{name}{moved && places.length === 0 && <span className="text-pencil"> moved in its list</span>}</caption>
            <tbody>
              {places.slice(0, MOST).map((place) => (
                <tr key={place.path}><th scope="row" className="num pr-6 font-normal text-pencil">{place.path}</th><td className="num pr-3">{text(place.mine)}</td><td className="pr-3 text-pencil">to</td><td className="num font-semibold">{text(place.theirs)}</td></tr>
              ))}
            </tbody>
          </table>
        );
      })}
      <p className="text-sm text-pencil">Lengths in mm, as stored.</p>
    </div>
  );
}

function text(value: unknown): string {
  if (value === undefined || value === null) return "nothing";
  if (typeof value === "number") return String(Math.round(value * 1000) / 1000);
  if (typeof value === "string") return value === "" ? "empty" : value;
  const json = JSON.stringify(value);
  return json.length > 70 ? `${json.slice(0, 70)} …` : json;
}
