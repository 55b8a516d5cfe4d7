/** Text that PostgreSQL cannot store (NUL, halves of surrogate pairs) is refused before it gets there: a reviver for JSON.parse. */
export function wellFormed(key: string, value: unknown): unknown {
  for (const text of [key, value]) {
    if (typeof text === "string" && (text.includes("\u0000") || HALF_PAIR.test(text))) throw new SyntaxError("text holds a character that cannot be stored");
  }
  return value;
}

/** Deeper than anything in a layout: data that only wants to overflow a stack further on. */
const DEEPEST = 64;

/** True for a value nested too deep; looks level by level, without recursion. */
export function isTooDeep(json: unknown): boolean {
  let level: unknown[] = [json];
  for (let depth = 0; level.length > 0; depth++) {
    if (depth > DEEPEST) return true;
    level = level.flatMap((value) => (typeof value === "object" && value !== null ? Object.values(value).filter((inner) => typeof inner === "object" && inner !== null) : []));
  }
  return false;
}

const HALF_PAIR = /[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/;
