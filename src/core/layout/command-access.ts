import type { Command, Role, SimpleCommand } from "./commands.ts";
import { ROLES } from "./commands.ts";
import type { Layout } from "./schema.ts";

/** One item by list and key; a singleton's list and key are both its name. */
export interface ItemName {
  readonly list: string;
  readonly key: string;
}

const OWNER: readonly Role[] = ["owner"];
const OWNER_AND_DESIGNER: readonly Role[] = ["owner", "designer"];
const DESIGNER_LISTS: ReadonlySet<string> = new Set(["spaces", "luggage", "glass", "eyes", "body"]);

/** Roles that may give a command. Together: those that may give every one of its commands. */
export function rolesFor(command: Command): readonly Role[] {
  switch (command.kind) {
    case "together":
      return ROLES.filter((role) => command.commands.every((c) => rolesFor(c).includes(role)));
    case "status":
      return ["owner", "fabricator"];
    case "set":
      return DESIGNER_LISTS.has(command.which) ? OWNER_AND_DESIGNER : OWNER;
    case "add":
    case "replace":
    case "remove":
    case "reorder":
    case "rename":
      return DESIGNER_LISTS.has(command.list) ? OWNER_AND_DESIGNER : OWNER;
    case "move":
      return command.items.every((item) => DESIGNER_LISTS.has(item.list)) ? OWNER_AND_DESIGNER : OWNER;
    case "restore": {
      if (command.changes.every((change) => DESIGNER_LISTS.has(change.list))) return OWNER_AND_DESIGNER;
      if (command.changes.every(isStatusChange)) return ["owner", "fabricator"];
      return OWNER;
    }
    case "place":
    case "move-node":
      return OWNER;
  }
}

/** A change of one part's status and nothing else: what undoing a status command is. */
function isStatusChange(change: { list: string; before?: unknown; after?: unknown }): boolean {
  if (change.list !== "parts" || !change.before || !change.after) return false;
  const plain = (value: unknown) => JSON.stringify({ ...(value as object), status: null });
  return plain(change.before) === plain(change.after);
}

/** Items a command looks at or writes, in this layout: it conflicts only with later changes of these. */
export function readsAndWrites(command: Command, layout: Layout): ItemName[] {
  const names = new Map<string, ItemName>();
  const add = (list: string, key: string) => names.set(`${list}/${key}`, { list, key });
  for (const one of command.kind === "together" ? command.commands : [command]) namesOf(one, layout, add);
  return [...names.values()];
}

function namesOf(command: SimpleCommand, layout: Layout, add: (list: string, key: string) => void): void {
  switch (command.kind) {
    case "add":
    case "replace":
      return add(command.list, command.item.key);
    case "remove":
    case "reorder":
      return add(command.list, command.key);
    case "rename":
      add(command.list, command.key);
      return add(command.list, command.to);
    case "set":
      return add(command.which, command.which);
    case "move":
      for (const item of command.items) {
        add(item.list, item.key);
        if (item.list === "parts") for (const run of runsBoundTo(layout, item.key)) add("runs", run);
      }
      return;
    case "place":
      add("parts", command.key);
      for (const run of runsBoundTo(layout, command.key)) add("runs", run);
      return;
    case "move-node":
      return add("runs", command.run);
    case "status":
      return add("parts", command.key);
    case "restore":
      for (const change of command.changes) add(change.list, change.key);
  }
}

/** Keys of runs with a node bound to a part or one of its ports. */
export function runsBoundTo(layout: Layout, part: string): string[] {
  return layout.runs.filter((run) => run.nodes.some((node) => node.on === part || node.on?.startsWith(`${part}.`))).map((run) => run.key);
}
