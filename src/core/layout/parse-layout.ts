import type { z } from "zod";
import { pathText, type Fault } from "./fault.ts";
import { findFaults, MOST_FAULTS } from "./invariants.ts";
import { layoutSchema, LIMITS, type Layout } from "./schema.ts";

export type ParsedLayout = { readonly ok: true; readonly layout: Layout } | { readonly ok: false; readonly faults: readonly Fault[] };

/**
 * A layout file's content, checked: shape, ranges, unknown keys, then keys, references, trees and outlines. Every fault names its path, what was
 * expected and what was found; at most 50. Never throws for any JSON value.
 */
export function parseLayout(json: unknown): ParsedLayout {
  const deep = tooDeep(json);
  if (deep !== null) return { ok: false, faults: [{ path: deep, message: `nested more than ${DEEPEST} levels deep` }] };
  const tooMany = overLimits(json);
  if (tooMany.length > 0) return { ok: false, faults: tooMany };
  const parsed = layoutSchema.safeParse(json);
  if (!parsed.success) return { ok: false, faults: faultsOf(parsed.error, json) };
  const faults = findFaults(parsed.data);
  return faults.length > 0 ? { ok: false, faults } : { ok: true, layout: parsed.data };
}

const DEEPEST = 64;

/** Path of the first value that lies too deep, without recursion. */
function tooDeep(json: unknown): string | null {
  let level: { value: object; path: string }[] = typeof json === "object" && json !== null ? [{ value: json, path: "" }] : [];
  for (let depth = 1; level.length > 0; depth++) {
    if (depth > DEEPEST) return level[0]!.path;
    const next: { value: object; path: string }[] = [];
    for (const { value, path } of level) {
      for (const [key, inner] of Object.entries(value)) {
        // paths only along the first branch: they are for a message, not worth a string per value
        if (typeof inner === "object" && inner !== null) next.push({ value: inner, path: next.length === 0 ? pathText([path, Array.isArray(value) ? Number(key) : key].filter((s) => s !== "")) : "" });
      }
    }
    level = next;
  }
  return null;
}

/** Lists that are plainly too long, found before anything is looked into. */
function overLimits(json: unknown): Fault[] {
  const faults: Fault[] = [];
  const lists = json as { parts?: unknown; runs?: unknown } | null;
  if (Array.isArray(lists?.parts) && lists.parts.length > LIMITS.parts) faults.push({ path: "parts", message: `expected at most ${LIMITS.parts} parts, found ${lists.parts.length}` });
  if (Array.isArray(lists?.runs) && lists.runs.length > LIMITS.runs) faults.push({ path: "runs", message: `expected at most ${LIMITS.runs} runs, found ${lists.runs.length}` });
  return faults;
}

/** zod's issues as faults in plain words: path, expected, found. */
export function faultsOf(error: z.ZodError, input: unknown): Fault[] {
  return error.issues.slice(0, MOST_FAULTS).flatMap((issue) => flatten(issue, [], input)).slice(0, MOST_FAULTS);
}

function flatten(issue: z.core.$ZodIssue, before: readonly PropertyKey[], input: unknown): Fault[] {
  const path = [...before, ...issue.path];
  if (issue.code === "invalid_union" && issue.errors.length > 0) {
    // the branch that got farthest tells most
    const best = [...issue.errors].sort((a, b) => farthest(b) - farthest(a) || a.length - b.length)[0]!;
    return best.flatMap((inner) => flatten(inner, path, input));
  }
  if (issue.code === "unrecognized_keys") {
    return issue.keys.slice(0, 5).map((key) => ({ path: pathText([...path, key]), message: `unknown key "${key}": only "extra" may hold other things` }));
  }
  return [{ path: pathText(path), message: describe(issue, valueAt(input, path)) }];
}

function farthest(issues: readonly z.core.$ZodIssue[]): number {
  return Math.max(0, ...issues.map((issue) => issue.path.length));
}

function describe(issue: z.core.$ZodIssue, found: unknown): string {
  const is = found === undefined ? "nothing" : show(found);
  switch (issue.code) {
    case "invalid_type":
      return `expected ${issue.expected === "int" ? "a whole number" : article(issue.expected)}, found ${is}`;
    case "too_small":
      return issue.origin === "array" || issue.origin === "string"
        ? `expected at least ${issue.minimum} ${issue.origin === "array" ? "entries" : "characters"}, found ${sizeOf(found)}`
        : `expected ${issue.inclusive === false ? "more than" : "at least"} ${issue.minimum}, found ${is}`;
    case "too_big":
      return issue.origin === "array" || issue.origin === "string"
        ? `expected at most ${issue.maximum} ${issue.origin === "array" ? "entries" : "characters"}, found ${sizeOf(found)}`
        : `expected at most ${issue.maximum}, found ${is}`;
    case "invalid_value":
      return `expected ${issue.values.length > 1 ? "one of " : ""}${issue.values.map(String).join(", ")}, found ${is}`;
    case "invalid_union":
      return `expected another shape, found ${is}`;
    default:
      return `${issue.message}, found ${is}`;
  }
}

function article(type: string): string {
  return type === "array" || type === "object" ? `an ${type}` : type === "tuple" ? "a list of coordinates" : `a ${type}`;
}

function sizeOf(found: unknown): string {
  return Array.isArray(found) || typeof found === "string" ? String(found.length) : show(found);
}

function show(value: unknown): string {
  if (Array.isArray(value)) return `a list of ${value.length}`;
  if (typeof value === "object" && value !== null) return "an object";
  if (typeof value === "string") return `"${value.length > 40 ? `${value.slice(0, 40)}…` : value}"`;
  return String(value);
}

function valueAt(input: unknown, path: readonly PropertyKey[]): unknown {
  let at: unknown = input;
  for (const step of path) {
    if (typeof at !== "object" || at === null || !Object.hasOwn(at, step)) return undefined;
    at = (at as Record<PropertyKey, unknown>)[step];
  }
  return at;
}
