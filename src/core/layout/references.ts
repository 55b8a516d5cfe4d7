import { LISTS, type ItemChange, type ListName } from "./commands.ts";
import { itemOf } from "./diff.ts";
import type { Layout, Part, Run } from "./schema.ts";

/** Names of what refers to an item: it cannot go while they do. */
export function referencesTo(layout: Layout, list: ListName, key: string): string[] {
  const users: string[] = [];
  if (list === "parts") {
    for (const part of layout.parts) {
      if (part.carriedBy === key) users.push(`${part.name} (carried by it)`);
      if (part.mirrorOf === key) users.push(`${part.name} (its mirror)`);
    }
    for (const run of layout.runs) {
      if (run.carriedBy === key) users.push(`${run.name} (carried by it)`);
      for (const node of run.nodes) {
        if (ownerOf(node.on) === key) users.push(`${run.name}, node ${node.key} (bound to it)`);
        if (node.clip === key) users.push(`${run.name}, node ${node.key} (clipped to it)`);
      }
    }
    for (const glass of layout.glass) if (glass.part === key) users.push(`${glass.name} (its glass)`);
  }
  if (list === "runs") for (const run of layout.runs) if (run.mirrorOf === key) users.push(`${run.name} (its mirror)`);
  layout.contacts.forEach((contact) => {
    if (contact.between.some((name) => ownerOf(name) === key)) users.push(`the contact ${contact.between.join(" / ")}`);
  });
  return users;
}

const ownerOf = (name: string | undefined) => name?.split(".")[0];

/** Changes that give an item another key and follow it everywhere: carriers, mirrors, nodes, glass, contacts, rules. */
export function renameReferences(layout: Layout, list: ListName, from: string, to: string): ItemChange[] | string {
  const before = itemOf(layout, list, from);
  if (!before) return `There is no "${from}" in ${list} any more.`;
  if (from === to) return [];
  const taken = LISTS.some((name) => layout[name].some((item) => item.key === to)) || layout.chassis.datums.some((datum) => datum.key === to);
  if (taken) return `There is already something with the key "${to}".`;
  const position = layout[list].findIndex((item) => item.key === from);
  const changes: ItemChange[] = [
    { list, key: from, before, after: null, positionBefore: position, positionAfter: null },
    { list, key: to, before: null, after: { ...(before as object), key: to }, positionBefore: null, positionAfter: position },
  ];
  const swap = (key: string | null) => (key === from ? to : key);
  const swapOwner = (name: string | undefined) => (name !== undefined && ownerOf(name) === from ? [to, ...name.split(".").slice(1)].join(".") : name);
  const update = <T extends { key: string }>(name: ListName, items: readonly T[], next: (item: T) => T) => {
    items.forEach((item, i) => {
      if (item.key === from && name === list) return;
      const after = next(item);
      if (after !== item) changes.push({ list: name, key: item.key, before: item, after, positionBefore: i, positionAfter: i });
    });
  };
  if (list === "parts") {
    update("parts", layout.parts, (part: Part) => (part.carriedBy === from || part.mirrorOf === from ? { ...part, carriedBy: swap(part.carriedBy), mirrorOf: swap(part.mirrorOf) } : part));
    update("glass", layout.glass, (glass) => (glass.part === from ? { ...glass, part: to } : glass));
  }
  update("runs", layout.runs, (run: Run) => {
    const carried = list === "parts" && run.carriedBy === from;
    const mirrored = list === "runs" && run.mirrorOf === from;
    const bound = list === "parts" && run.nodes.some((node) => ownerOf(node.on) === from || node.clip === from);
    if (!carried && !mirrored && !bound) return run;
    const nodes = bound ? run.nodes.map((node) => (ownerOf(node.on) === from || node.clip === from ? withoutUndefined({ ...node, on: swapOwner(node.on), clip: node.clip === from ? to : node.clip }) : node)) : run.nodes;
    return { ...run, carriedBy: carried ? to : run.carriedBy, mirrorOf: mirrored ? to : run.mirrorOf, nodes };
  });
  if (layout.contacts.some((contact) => contact.between.some((name) => ownerOf(name) === from))) {
    const after = layout.contacts.map((contact) => ({ ...contact, between: contact.between.map((name) => swapOwner(name)!) as [string, string] }));
    changes.push({ list: "contacts", key: "contacts", before: layout.contacts, after });
  }
  if (layout.rules.pairs.some((rule) => rule.between.includes(`key:${from}`))) {
    const pairs = layout.rules.pairs.map((rule) => ({ ...rule, between: rule.between.map((s) => (s === `key:${from}` ? `key:${to}` : s)) as [string, string] }));
    changes.push({ list: "rules", key: "rules", before: layout.rules, after: { ...layout.rules, pairs } });
  }
  return changes;
}

function withoutUndefined<T extends object>(value: T): T {
  return Object.fromEntries(Object.entries(value).filter(([, v]) => v !== undefined)) as T;
}
