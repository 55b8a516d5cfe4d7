import { PROJECTION, type View } from "#core/frames.ts";
import type { Layout } from "#core/layout/schema.ts";
import { placePart } from "./acts.ts";
import { distanceOf } from "./hands.ts";
import type { HandsContext } from "./hands-context.ts";
import { measuredText } from "./paint-hand.ts";
import { shapesOf } from "./shapes.ts";
import type { Caught } from "./snap.ts";
import { thingsUnder } from "./under.ts";
import { cutStation, useViewState, type Draft } from "./view-state.ts";

/** A click while a tool other than Pick is in the hand. */
export function clickWithTool(hands: HandsContext, caught: Caught, pu: number, pv: number): void {
  const { tool } = useViewState.getState();
  if (tool === "tape") measure(hands, caught);
  else if (tool === "part") putPart(hands, pu, pv);
  else if (tool === "run" || tool === "space" || tool === "outline") addPoint(hands, tool, caught);
}

/** The tape: first click, second click, and from the start again. A coordinate that neither end knows is left out. */
function measure({ view, units }: HandsContext, caught: Caught): void {
  const { measured, set } = useViewState.getState();
  const { u, v, depth } = PROJECTION[view];
  const point: [number, number, number] = [0, 0, 0];
  [point[u], point[v]] = [caught.at[0], caught.at[1]];
  point[depth] = caught.depth ?? Number.NaN;
  if (!measured || measured.to || measured.view !== view) {
    const first = { view, from: point, to: null, names: [caught.name, null] as const };
    set({ measured: first, saying: measuredText(first, units) });
    return;
  }
  const from: [number, number, number] = [measured.from[0], measured.from[1], measured.from[2]];
  if (Number.isNaN(from[depth]) || Number.isNaN(point[depth])) {
    const known = [from[depth], point[depth]].find((value) => !Number.isNaN(value)) ?? 0;
    from[depth] = point[depth] = known;
  }
  const both = { view, from, to: point, names: [measured.names[0], caught.name] as const };
  set({ measured: both, saying: measuredText(both, units) });
}

/** What the unseen coordinate of a click is: what is typed, else that of a port or node it was put on, else the middle of what is under it, else as the point before. */
function unseen({ view, store, units }: HandsContext, caught: Caught, before: number | undefined): number {
  const { typed, camera, station } = useViewState.getState();
  if (view === "rear") return station;
  if (typed.trim() !== "") {
    const given = distanceOf(typed, units, 0);
    if (given !== null) return given;
  }
  if (caught.depth !== null) return caught.depth;
  return middleUnder(store.state.getState().document, view, caught.at[0], caught.at[1], 3 / camera.scale) ?? before ?? (view === "plan" ? 200 : 0);
}

function middleUnder(layout: Layout, view: View, u: number, v: number, slack: number): number | null {
  const found = thingsUnder(layout, view, u, v, slack, 0, new Set(), new Set())[0];
  if (!found) return null;
  const other = shapesOf(layout, view === "plan" ? "side" : "plan").find((shape) => shape.key === found.key);
  return other ? 0.5 * (other.box[1] + other.box[3]) : null;
}

function addPoint(hands: HandsContext, tool: Draft["tool"], caught: Caught): void {
  const { view } = hands;
  const state = useViewState.getState();
  const before = state.draft?.tool === tool ? state.draft : null;
  const wanted = tool === "run" ? view : before?.top ? "side" : "plan";
  if (view !== wanted) {
    state.set({ saying: wanted === "plan" ? "The outline begins in the plan." : "This outline belongs in the side view." });
    return;
  }
  const { u, v, depth } = PROJECTION[view];
  const last = before?.points[before.points.length - 1];
  const point: [number, number, number] = [0, 0, 0];
  point[u] = Math.round(caught.at[0] * 10) / 10;
  point[v] = Math.round(caught.at[1] * 10) / 10;
  point[depth] = Math.round(unseen(hands, caught, last?.[depth]) * 10) / 10;
  const name = caught.name ? ` on ${caught.name}` : "";
  const words = PROJECTION[view].depth === 2 ? "up" : depth === 1 ? "right" : "rear";
  state.set({
    typed: "", draft: { tool, view, points: [...(before?.points ?? []), point], ...(before?.top ? { top: before.top } : {}) },
    saying: tool === "run" ? `node${name}, ${words} ${point[depth]}` : `corner${name}`,
  });
}

/** The next click puts the part that the form has made on the paper; the coordinate not seen stays as the form has it, or as typed. */
function putPart(hands: HandsContext, pu: number, pv: number): void {
  const { view, store, role } = hands;
  const { placing, typed, set } = useViewState.getState();
  if (!placing) return;
  const { u, v, depth } = PROJECTION[view];
  const at: [number, number, number] = [...placing.at];
  [at[u], at[v]] = [Math.round(pu), Math.round(pv)];
  const given = typed.trim() === "" ? null : distanceOf(typed, hands.units, 0);
  if (view === "rear") at[0] = cutStation(useViewState.getState());
  else if (given !== null) at[depth] = given;
  if (placePart(store, role, placing, at)) set({ typed: "" });
}
