import type { Vec3 } from "../frames.ts";
import { applyPose, inversePose, multiplyPose, poseOf } from "../geometry/turn.ts";
import type { Command, Diff, ItemChange, ListName, SimpleCommand } from "./commands.ts";
import { applyDiff, isList, itemOf, sameValue } from "./diff.ts";
import type { Fault } from "./fault.ts";
import { findFaults } from "./invariants.ts";
import { renameReferences, referencesTo } from "./references.ts";
import type { Layout, Part, Run } from "./schema.ts";

export type Applied =
  | { readonly ok: true; readonly layout: Layout; readonly diff: Diff }
  | { readonly ok: false; readonly reason: string; readonly fields?: readonly Fault[] };

/**
 * Applies a command: the new layout and the diff that made it, or a refusal in words. Pure; the same in browser and server. The document's
 * invariants hold afterwards or the command is refused; only the items it wrote are looked into closely.
 */
export function applyCommand(layout: Layout, command: Command): Applied {
  let current = layout;
  const changes: ItemChange[] = [];
  for (const one of command.kind === "together" ? command.commands : [command]) {
    const made = changesOf(current, one);
    if (typeof made === "string") return { ok: false, reason: made };
    current = applyDiff(current, made);
    changes.push(...made);
  }
  const diff = merged(changes);
  const faults = findFaults(current, new Set(diff.map((change) => change.key)));
  if (faults.length > 0) return { ok: false, reason: faults[0]!.path ? `${faults[0]!.path}: ${faults[0]!.message}` : faults[0]!.message, fields: faults };
  return { ok: true, layout: current, diff };
}

const nameOfItem = (value: unknown, key: string) => (value as { name?: string } | null)?.name ?? key;
const plus = (a: Vec3, b: Vec3): [number, number, number] => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];

/** Changes of one command, or why not. */
function changesOf(layout: Layout, command: SimpleCommand): ItemChange[] | string {
  switch (command.kind) {
    case "add": {
      if (itemOf(layout, command.list, command.item.key)) return `There is already "${command.item.key}" in ${command.list}.`;
      return [{ list: command.list, key: command.item.key, before: null, after: command.item, positionBefore: null, positionAfter: layout[command.list].length }];
    }
    case "replace":
      return replace(layout, command.list, command.item);
    case "remove": {
      const before = itemOf(layout, command.list, command.key);
      if (!before) return missing(command.list, command.key);
      const users = referencesTo(layout, command.list, command.key);
      if (users.length > 0) return `${nameOfItem(before, command.key)} is still used by ${users.join(", ")}: free it there first.`;
      return [{ list: command.list, key: command.key, before, after: null, positionBefore: positionOf(layout, command.list, command.key), positionAfter: null }];
    }
    case "reorder": {
      const before = itemOf(layout, command.list, command.key);
      if (!before) return missing(command.list, command.key);
      const to = Math.min(command.position, layout[command.list].length - 1);
      return [{ list: command.list, key: command.key, before, after: before, positionBefore: positionOf(layout, command.list, command.key), positionAfter: to }];
    }
    case "rename":
      return renameReferences(layout, command.list, command.key, command.to);
    case "set":
      return [{ list: command.which, key: command.which, before: itemOf(layout, command.which, command.which), after: command.value }];
    case "move":
      return moveItems(layout, command.items, command.by);
    case "place": {
      const part = layout.parts.find((p) => p.key === command.key);
      if (!part) return missing("parts", command.key);
      if (part.locked) return `${part.name} is locked.`;
      return placed(layout, part, { ...part, at: command.at, turn: command.turn ?? part.turn });
    }
    case "move-node": {
      const run = layout.runs.find((r) => r.key === command.run);
      if (!run) return missing("runs", command.run);
      if (run.locked) return `${run.name} is locked.`;
      if (!run.nodes.some((node) => node.key === command.node)) return `${run.name} has no node "${command.node}".`;
      return change(layout, "runs", run, { ...run, nodes: run.nodes.map((node) => (node.key === command.node ? { ...node, at: command.at } : node)) });
    }
    case "status": {
      const part = layout.parts.find((p) => p.key === command.key);
      if (!part) return missing("parts", command.key);
      return change(layout, "parts", part, { ...part, status: command.status });
    }
    case "restore": {
      for (const c of command.changes) {
        const now = itemOf(layout, c.list, c.key);
        if (!sameValue(now ?? null, c.before ?? null)) return `${nameOfItem(now ?? c.before, c.key)} has changed since: this step can no longer be taken back.`;
      }
      return command.changes.map((c) => ({ ...c, before: c.before ?? null, after: c.after ?? null }));
    }
  }
}

function missing(list: string, key: string): string {
  return `There is no "${key}" in ${list} any more.`;
}

function positionOf(layout: Layout, list: ListName, key: string): number {
  return layout[list].findIndex((item) => item.key === key);
}

function change<T extends { key: string }>(layout: Layout, list: ListName, before: { key: string }, after: T): ItemChange[] {
  const position = positionOf(layout, list, before.key);
  return [{ list, key: before.key, before, after, positionBefore: position, positionAfter: position }];
}

function replace(layout: Layout, list: ListName, item: { key: string }): ItemChange[] | string {
  const before = itemOf(layout, list, item.key) as { key: string } | null;
  if (!before) return missing(list, item.key);
  const wasLocked = (before as { locked?: boolean }).locked === true && (item as { locked?: boolean }).locked === true;
  if (wasLocked && !sameValue({ at: (before as Partial<Part>).at, turn: (before as Partial<Part>).turn }, { at: (item as Partial<Part>).at, turn: (item as Partial<Part>).turn })) {
    return `${nameOfItem(before, item.key)} is locked.`;
  }
  if (list === "parts") return placed(layout, before as Part, item as Part);
  return change(layout, list, before, item);
}

/** A part at its new place, and the run nodes bound to it carried along by the same motion. */
function placed(layout: Layout, before: Part, after: Part): ItemChange[] {
  const changes = change(layout, "parts", before, after);
  if (sameValue(before.at, after.at) && sameValue(before.turn, after.turn)) return changes;
  const motion = multiplyPose(poseOf(after), inversePose(poseOf(before)));
  const shift: Vec3 | null = sameValue(before.turn, after.turn) ? [after.at[0] - before.at[0], after.at[1] - before.at[1], after.at[2] - before.at[2]] : null;
  for (const run of layout.runs) {
    if (!run.nodes.some((node) => isBound(node, before.key))) continue;
    // a plain move adds the same numbers, so that moving back gives the same numbers
    const nodes = run.nodes.map((node) => (isBound(node, before.key) ? { ...node, at: shift ? plus(node.at, shift) : applyPose(motion, node.at) } : node));
    changes.push(...change(layout, "runs", run, { ...run, nodes }));
  }
  return changes;
}

function isBound(node: Run["nodes"][number], part: string): boolean {
  return node.on === part || node.on?.startsWith(`${part}.`) === true;
}

function moveItems(layout: Layout, items: readonly { list: ListName; key: string }[], by: Vec3): ItemChange[] | string {
  const changes: ItemChange[] = [];
  const movedParts = new Set(items.filter((item) => item.list === "parts").map((item) => item.key));
  const movedRuns = new Set(items.filter((item) => item.list === "runs").map((item) => item.key));
  for (const { list, key } of items) {
    const before = itemOf(layout, list, key) as ({ key: string; locked?: boolean } & Record<string, unknown>) | null;
    if (!before) return missing(list, key);
    if (before.locked) return `${nameOfItem(before, key)} is locked.`;
    if (list === "runs") continue;
    const after = shifted(list, before, by);
    if (!after) return `${nameOfItem(before, key)} has no place to move.`;
    changes.push(...change(layout, list, before, after));
  }
  for (const run of layout.runs) {
    const whole = movedRuns.has(run.key);
    const follows = (node: Run["nodes"][number]) => {
      const owner = node.on?.split(".")[0];
      return owner !== undefined ? movedParts.has(owner) : whole;
    };
    if (!run.nodes.some(follows)) continue;
    changes.push(...change(layout, "runs", run, { ...run, nodes: run.nodes.map((node) => (follows(node) ? { ...node, at: plus(node.at, by) } : node)) }));
  }
  return changes;
}

/** An item moved by a vector: every coordinate it has. */
function shifted(list: ListName, item: Record<string, unknown> & { key: string }, by: Vec3): { key: string } | null {
  const flat = (outline: unknown, u: number, v: number) => (outline as [number, number][] | undefined)?.map((p): [number, number] => [p[0] + by[u]!, p[1] + by[v]!]);
  const loop = (points: unknown) => (points as Vec3[] | undefined)?.map((p) => plus(p, by));
  switch (list) {
    case "parts":
    case "eyes":
      return { ...item, at: plus(item["at"] as Vec3, by) } as { key: string };
    case "spaces":
      return defined({ ...item, top: flat(item["top"], 0, 1), side: flat(item["side"], 0, 2), rear: flat(item["rear"], 1, 2), opening: loop(item["opening"]) }) as { key: string };
    case "glass":
      return { ...item, opening: loop(item["opening"]) } as { key: string };
    case "shafts":
      return { ...item, inboard: plus(item["inboard"] as Vec3, by), outboard: plus(item["outboard"] as Vec3, by) } as { key: string };
    default:
      return null;
  }
}

function defined<T extends object>(value: T): T {
  return Object.fromEntries(Object.entries(value).filter(([, v]) => v !== undefined)) as T;
}

/** One change an item: the first before, the last after. Items that end as they began are left out. */
function merged(changes: readonly ItemChange[]): ItemChange[] {
  const byItem = new Map<string, ItemChange>();
  for (const c of changes) {
    const name = `${c.list}/${c.key}`;
    const known = byItem.get(name);
    byItem.set(name, known ? { ...c, before: known.before, ...(isList(c.list) ? { positionBefore: known.positionBefore ?? null } : {}) } : c);
  }
  return [...byItem.values()].filter((c) => !(sameValue(c.before, c.after) && c.positionBefore === c.positionAfter));
}
