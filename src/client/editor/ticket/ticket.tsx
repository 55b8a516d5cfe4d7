import { lazy, Suspense } from "react";
import { GENERATED_KEYS } from "#core/layout/generated.ts";
import { formatLength } from "#core/units/format-length.ts";
import { Loading } from "../../ui/states.tsx";
import { useBench, useDocument } from "../bench-context.tsx";
import { listOf } from "../hands.ts";
import { namesOf } from "../ledger/names.ts";
import { useViewState } from "../view-state.ts";
import { LayoutCard } from "./layout-card.tsx";
import { PartCard } from "./part-card.tsx";
import { TicketSays } from "./ticket-row.tsx";
import { WorstOf } from "./worst-of.tsx";

const RunCard = lazy(() => import("./run-card.tsx").then((module) => ({ default: module.RunCard })));
const ManyCard = lazy(() => import("./many-card.tsx").then((module) => ({ default: module.ManyCard })));
const NewPartCard = lazy(() => import("./new-part-card.tsx").then((module) => ({ default: module.NewPartCard })));
const other = (name: "SpaceCard" | "LuggageCard" | "GlassCard" | "EyeCard" | "ShaftCard") => lazy(() => import("./other-cards.tsx").then((module) => ({ default: module[name] })));
const OTHER = { spaces: other("SpaceCard"), luggage: other("LuggageCard"), glass: other("GlassCard"), eyes: other("EyeCard"), shafts: other("ShaftCard") };

/** What is selected, as a job card torn off a pad; with nothing selected, the layout's own. */
export function Ticket() {
  const tool = useViewState((state) => state.tool);
  const selection = useViewState((state) => state.selection);
  const note = tool === "part" ? "not placed yet" : selection.length === 0 ? "the whole layout" : selection.length === 1 ? "fold here, pin to the car" : `${selection.length} selected`;
  return (
    <section aria-label="Ticket" className="flex min-h-full flex-col px-4 pb-5 pt-2">
      <h2 className="mb-3 flex items-baseline gap-3"><span className="caption">Ticket</span><span className="text-sm text-pencil">{note}</span></h2>
      <div className="torn px-4 pb-4 pt-5">
        <Suspense fallback={<Loading what="the ticket" lines={6} />}>
          <Card tool={tool} selection={selection} />
        </Suspense>
      </div>
    </section>
  );
}

function Card({ tool, selection }: { tool: string; selection: readonly string[] }) {
  const document = useDocument((state) => state.document);
  if (tool === "part") return <NewPartCard />;
  const known = selection.filter((key) => GENERATED_KEYS.has(key) || document.luggage.some((one) => one.key === key) || listOf(document, key) !== null);
  const [key] = known;
  if (key === undefined) return <LayoutCard />;
  if (known.length > 1) return <ManyCard keys={known} />;
  if (GENERATED_KEYS.has(key) && !document.parts.some((part) => part.key === key)) return <TyreCard tyreKey={key} />;
  const list = document.luggage.some((one) => one.key === key) ? "luggage" : listOf(document, key)!;
  // a card keeps what is typed into it: another thing is another card
  if (list === "parts") return <PartCard key={key} partKey={key} />;
  if (list === "runs") return <RunCard key={key} runKey={key} />;
  const Other = OTHER[list];
  return <Other key={key} itemKey={key} />;
}

/** A tyre that the chassis implies: its numbers are the chassis's. */
function TyreCard({ tyreKey }: { tyreKey: string }) {
  const { units } = useBench();
  const document = useDocument((state) => state.document);
  const set = useViewState((state) => state.set);
  const axle = tyreKey.includes("front") ? document.chassis.front : document.chassis.rear;
  const length = (mm: number) => formatLength(mm, units);
  return (
    <>
      <h3 className="text-xl font-semibold">{namesOf(document)(tyreKey)}</h3>
      <p className="mb-1 border-b border-hair pb-2 text-pencil">drawn from the chassis</p>
      <TicketSays label="size"><span className="num font-semibold">{length(axle.tyre.diameter)}</span> free diameter, <span className="num font-semibold">{length(axle.tyre.width)}</span> wide</TicketSays>
      <TicketSays label="travel"><span className="num font-semibold">{length(axle.bump)}</span> bump, <span className="num font-semibold">{length(axle.droop)}</span> droop</TicketSays>
      {axle.steer > 0 && <TicketSays label="steers"><span className="num font-semibold">{axle.steer}°</span> each way. Its sweep is not covered yet: such gaps are never better than tight.</TicketSays>}
      <WorstOf itemKey={tyreKey} />
      <button type="button" className="mt-2 border-b border-hair hover:border-ink" onClick={() => set({ selection: [] })}>Change it with the chassis</button>
    </>
  );
}
