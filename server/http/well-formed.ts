/** Text that PostgreSQL cannot store (NUL, halves of surrogate pairs) is refused before it gets there: a reviver for JSON.parse. */
export function wellFormed(key: string, value: unknown): unknown {
  for (const text of [key, value]) {
    if (typeof text === "string" && (text.includes("\u0000") || HALF_PAIR.test(text))) throw new SyntaxError("text holds a character that cannot be stored");
  }
  return value;
}

const HALF_PAIR = /[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/;
