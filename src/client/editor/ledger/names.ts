import { GENERATED_KEYS } from "#core/layout/generated.ts";
import type { Layout } from "#core/layout/schema.ts";

/** Key to the name that people read; a room's is its part's and its own. */
export function namesOf(layout: Layout): (key: string) => string {
  const names = new Map<string, string>();
  for (const list of [layout.parts, layout.runs, layout.spaces, layout.luggage, layout.glass, layout.eyes, layout.shafts]) for (const item of list) names.set(item.key, item.name);
  for (const part of layout.parts) for (const room of part.roomFor) names.set(`${part.key}.${room.key}`, `${room.name} (${part.name})`);
  for (const key of GENERATED_KEYS) if (!names.has(key)) names.set(key, `${key.replace("tyre-", "").replace("-", " ")} tyre`.replace(/^./, (c) => c.toUpperCase()));
  names.set("body", "Body line");
  return (key) => names.get(key) ?? key;
}
