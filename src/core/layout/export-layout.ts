import { layoutSchema, type Layout } from "./schema.ts";

/**
 * A layout as a file: every default written out, keys in the schema's order, two spaces. parse(export(layout)) is the same layout (a property test).
 */
export function exportLayout(layout: Layout): string {
  return `${JSON.stringify(layoutSchema.parse(layout), null, 2)}\n`;
}

/** One line, keys in order: equal for equal content, whatever order keys were typed in. What a content hash is taken of. */
export function canonicalText(layout: Layout): string {
  return JSON.stringify(sorted(layout));
}

function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted);
  if (typeof value !== "object" || value === null) return value;
  const entries = Object.entries(value).filter(([, v]) => v !== undefined);
  return Object.fromEntries(entries.sort(([a], [b]) => (a < b ? -1 : 1)).map(([key, inner]) => [key, sorted(inner)]));
}
