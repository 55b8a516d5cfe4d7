import type { Vec3 } from "#core/frames.ts";
import { rolesFor } from "#core/layout/command-access.ts";
import { labelFor } from "#core/layout/command-labels.ts";
import type { Command, Role } from "#core/layout/commands.ts";
import { partSchema, runSchema, spaceSchema, type Layout, type Part } from "#core/layout/schema.ts";
import type { DocumentStore } from "./document-store.ts";
import { freeKey, listOf, twinCommand } from "./hands.ts";
import { withNode, withoutNode } from "./nodes.ts";
import { select, useViewState, type Draft } from "./view-state.ts";

/** What the drawing does to the document: each act is one labelled command, refused in words where it cannot be. */

const say = (saying: string | null): void => useViewState.getState().set({ saying });
const layoutOf = (store: DocumentStore): Layout => store.state.getState().document;

export function give(store: DocumentStore, role: Role, command: Command, label?: string): boolean {
  if (!rolesFor(command).includes(role)) {
    say(`As ${role} you may not do that here.`);
    return false;
  }
  return store.run(command, label ?? labelFor(command, layoutOf(store)));
}

/** Takes away what is chosen: a node of a run where one is, else the things themselves. */
export function removeSelection(store: DocumentStore, role: Role): boolean {
  const layout = layoutOf(store);
  const { selection, node, set } = useViewState.getState();
  const run = selection.length === 1 ? layout.runs.find((one) => one.key === selection[0]) : undefined;
  if (run && node) {
    const less = withoutNode(run, node);
    if (!less) {
      say(run.nodes.length <= 2 ? "A run keeps two nodes: take the run away instead." : "Legs meet at that node: take them away first.");
      return false;
    }
    const done = give(store, role, { kind: "replace", list: "runs", item: less }, `Take node ${node} out of ${run.name}`);
    if (done) set({ node: null });
    return done;
  }
  const commands = selection.flatMap((key) => {
    const list = listOf(layout, key);
    return list ? [{ kind: "remove" as const, list, key }] : [];
  });
  if (commands.length === 0) return false;
  const done = give(store, role, commands.length === 1 ? commands[0]! : { kind: "together", label: `Remove ${commands.length} things`, commands });
  if (done) select([]);
  return done;
}

/** Twins what is chosen, beside itself. */
export function twinSelection(store: DocumentStore, role: Role): boolean {
  const twin = twinCommand(layoutOf(store), useViewState.getState().selection);
  if (!twin || !give(store, role, twin.command)) return false;
  select(twin.keys);
  return true;
}

/** Locks what is chosen where anything of it is free, else frees it. */
export function lockSelection(store: DocumentStore, role: Role): boolean {
  const layout = layoutOf(store);
  const { selection } = useViewState.getState();
  const parts = layout.parts.filter((one) => selection.includes(one.key));
  const runs = layout.runs.filter((one) => selection.includes(one.key));
  const locked = ![...parts, ...runs].every((one) => one.locked);
  const commands = [
    ...parts.map((item) => ({ kind: "replace" as const, list: "parts" as const, item: { ...item, locked } })),
    ...runs.map((item) => ({ kind: "replace" as const, list: "runs" as const, item: { ...item, locked } })),
  ];
  if (commands.length === 0) return false;
  const label = `${locked ? "Lock" : "Free"} ${commands.length === 1 ? commands[0]!.item.name : `${commands.length} things`}`;
  return give(store, role, commands.length === 1 ? commands[0]! : { kind: "together", label, commands }, label);
}

export function addNode(store: DocumentStore, role: Role, key: string, leg: { from: string; to: string; at: Vec3 }): boolean {
  const run = layoutOf(store).runs.find((one) => one.key === key);
  if (!run || run.locked) return false;
  const more = withNode(run, leg.from, leg.to, leg.at);
  const done = give(store, role, { kind: "replace", list: "runs", item: more.run }, `Put a node into ${run.name}`);
  if (done) useViewState.getState().set({ node: more.node });
  return done;
}

/** Puts a part on the paper: its origin where the click was. */
export function placePart(store: DocumentStore, role: Role, part: Part, at: Vec3): boolean {
  const item = { ...part, key: freeKey(layoutOf(store), part.key), at: [at[0], at[1], at[2]] as [number, number, number] };
  const done = give(store, role, { kind: "add", list: "parts", item }, `Add ${part.name}`);
  if (done) {
    select([item.key]);
    useViewState.getState().set({ placing: null, tool: "pick" });
  }
  return done;
}

type Flat = readonly (readonly [number, number])[];

/** Ends what is being drawn by clicks, where it is complete; says what is missing where not. */
export function finishDraft(store: DocumentStore, role: Role): boolean {
  const { draft, set } = useViewState.getState();
  if (!draft) return false;
  const points = draft.points.filter((p, i) => i === 0 || p.some((value, k) => Math.abs(value - draft.points[i - 1]![k]!) > 0.05));
  if (draft.tool === "run") return finishRun(store, role, points);
  if (points.length < 3) {
    say("An outline needs three corners at least.");
    return false;
  }
  if (!draft.top) {
    set({ draft: { tool: draft.tool, view: "side", points: [], top: points.map((p) => [p[0], p[1]] as const) }, saying: "Now the side outline, in the side view; Enter ends it." });
    return true;
  }
  return finishOutlines(store, role, draft, draft.top, points.map((p) => [p[0], p[2]] as const));
}

function finishRun(store: DocumentStore, role: Role, points: Draft["points"]): boolean {
  if (points.length < 2) {
    say("A run needs two nodes at least.");
    return false;
  }
  const layout = layoutOf(store);
  const item = runSchema.parse({ key: freeKey(layout, "run"), name: "New run", kind: "harness", diameter: 20, bendRadius: 40, nodes: points.map((p, i) => ({ key: `n${i + 1}`, at: p })) });
  if (!give(store, role, { kind: "add", list: "runs", item }, "Draw a run")) return false;
  select([item.key]);
  useViewState.getState().set({ draft: null, tool: "pick", saying: "Drawn: name, diameter and bend radius stand on the ticket." });
  return true;
}

function finishOutlines(store: DocumentStore, role: Role, draft: Draft, top: Flat, side: Flat): boolean {
  const layout = layoutOf(store);
  const lowest = (outline: Flat, k: 0 | 1) => Math.min(...outline.map((p) => p[k]));
  if (draft.tool === "space") {
    const item = spaceSchema.safeParse({ key: freeKey(layout, "space"), name: "Luggage space", top, side });
    if (!item.success || !give(store, role, { kind: "add", list: "spaces", item: item.data }, "Draw a luggage space")) return false;
    select([item.data.key]);
  } else {
    const at = [lowest(top, 0), lowest(top, 1), lowest(side, 1)] as const;
    const item = partSchema.safeParse({
      key: freeKey(layout, "part"), name: "New part", kind: "other", at, source: { how: "estimate", plusMinus: 10 },
      solids: [{ type: "outlines", top: top.map((p) => [p[0] - at[0], p[1] - at[1]]), side: side.map((p) => [p[0] - at[0], p[1] - at[2]]) }],
    });
    if (!item.success) {
      say(item.error.issues[0]?.message ?? "That outline is no part.");
      return false;
    }
    if (!give(store, role, { kind: "add", list: "parts", item: item.data }, "Draw a part by two outlines")) return false;
    select([item.data.key]);
  }
  useViewState.getState().set({ draft: null, tool: "pick", saying: null });
  return true;
}
