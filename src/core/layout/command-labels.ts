import { AXES, DIRECTION_WORDS, type Vec3 } from "../frames.ts";
import { formatLength } from "../units/format-length.ts";
import type { Command, SimpleCommand } from "./commands.ts";
import { itemOf } from "./diff.ts";
import type { Layout } from "./schema.ts";

const SINGLETON_WORDS = { document: "name and notes", chassis: "chassis", body: "body lines", air: "bay air", rules: "rules", contacts: "contacts" } as const;

/** What a command does, in the trade's words, for history and undo: "Move Left muffler 12.0 rear". Needs the layout before it. */
export function labelFor(command: Command, layout: Layout): string {
  if (command.kind === "together") return command.label;
  return simpleLabel(command, layout);
}

function simpleLabel(command: SimpleCommand, layout: Layout): string {
  const name = (list: string, key: string) => (itemOf(layout, list, key) as { name?: string } | null)?.name ?? key;
  switch (command.kind) {
    case "add": return `Add ${command.item.name}`;
    case "replace": return `Change ${command.item.name}`;
    case "remove": return `Remove ${name(command.list, command.key)}`;
    case "reorder": return `Move ${name(command.list, command.key)} in the list`;
    case "rename": return `Give ${name(command.list, command.key)} the key ${command.to}`;
    case "set": return `Change ${SINGLETON_WORDS[command.which]}`;
    case "move": {
      const first = command.items[0]!;
      const what = command.items.length === 1 ? name(first.list, first.key) : `${command.items.length} things`;
      return `Move ${what} ${directionText(command.by)}`;
    }
    case "place": return `Place ${name("parts", command.key)}`;
    case "move-node": return `Move node ${command.node} of ${name("runs", command.run)}`;
    case "status": return `${name("parts", command.key)}: ${command.status}`;
    case "restore": {
      const names = command.changes.map((change) => (change.after as { name?: string } | null)?.name ?? (change.before as { name?: string } | null)?.name ?? change.key);
      return `Take back a change of ${names.slice(0, 2).join(", ")}${names.length > 2 ? ` and ${names.length - 2} more` : ""}`;
    }
  }
}

/** A displacement in words: "12.0 rear, 4.0 up". */
export function directionText(by: Vec3): string {
  const words = AXES.flatMap((axis, i) => (Math.abs(by[i]!) < 0.05 ? [] : [`${formatLength(Math.abs(by[i]!), "mm")} ${DIRECTION_WORDS[axis][by[i]! < 0 ? 0 : 1]}`]));
  return words.length > 0 ? words.join(", ") : "nowhere";
}
