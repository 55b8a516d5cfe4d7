/** What a typed length says, mm, or why it cannot be read. */
export type ParsedLength = { readonly ok: true; readonly mm: number } | { readonly ok: false; readonly message: string };

/** Units a person may have lengths shown in. */
export type LengthUnit = "mm" | "in" | "in-fraction";

/** mm in a unit, as whole numbers over and under the line: 3 in is 3 x 254 / 10 = 76.2 and not 76.19999999999999. */
const MM_PER: Readonly<Record<string, readonly [over: number, under: number]>> = { mm: [1, 1], cm: [10, 1], m: [1000, 1], in: [254, 10], ft: [3048, 10] };

/**
 * Reads a length as people write it: `310`, `310mm`, `31 cm`, `12 3/8"`, `12.375 in`, `1' 2"`, `1' 2 3/8"`, and sums and differences of such.
 * A bare number is in the unit the person has chosen (inches for both inch displays). Feet and inches of one term add; a sign applies to its
 * whole term. A decimal comma is a decimal point. `19.5/8` is refused: a fraction has whole numbers.
 *
 * @param text what was typed
 * @param unit what a bare number means
 * @example parseLength(`12 3/8"`, "mm") is 314.325 mm; parseLength("2 + 1/2 in", "in") is 63.5 mm
 */
export function parseLength(text: string, unit: LengthUnit): ParsedLength {
  const plain = text
    .trim()
    .toLowerCase()
    .replace(/[\u2032\u2019\u00b4`]/g, "'")
    .replace(/[\u2033\u201c\u201d]|''/g, '"')
    .replace(/[\u2212\u2013]/g, "-")
    .replace(/[\u00bc\u00bd\u00be\u215b\u215c\u215d\u215e]/g, (c) => ` ${VULGAR[c]}`)
    .replace(/(\d),(\d)/g, "$1.$2");
  if (plain === "") return { ok: false, message: "a length is needed, such as 310, 31 cm or 12 3/8\"" };
  const terms = plain.match(/[+-]?[^+-]+|[+-]/g) ?? [];
  let mm = 0;
  for (const term of terms) {
    const sign = term.startsWith("-") ? -1 : 1;
    const value = readTerm(term.replace(/^[+-]/, "").trim(), unit);
    if (typeof value !== "number") return { ok: false, message: value.message };
    mm += sign * value;
  }
  if (!Number.isFinite(mm)) return { ok: false, message: "that is more than a car can hold" };
  return { ok: true, mm };
}

const VULGAR: Readonly<Record<string, string>> = { "¼": "1/4", "½": "1/2", "¾": "3/4", "⅛": "1/8", "⅜": "3/8", "⅝": "5/8", "⅞": "7/8" };
const NUMBER = /^(?:(?<over>\d+)\/(?<under>\d+)|(?<whole>\d+(?:\.\d*)?|\.\d+)(?:\s+(?<over2>\d+)\/(?<under2>\d+))?)\s*/;
const UNIT = /^(mm|cm|m|in|inch|inches|ft|feet|foot|"|')\s*/;

function readTerm(term: string, unit: LengthUnit): number | { message: string } {
  let rest = term;
  let mm = 0;
  let feet = false;
  let count = 0;
  while (rest !== "") {
    const number = NUMBER.exec(rest);
    if (!number) return { message: `"${term}" is not a length: numbers with mm, cm, m, in, " or ' are` };
    rest = rest.slice(number[0].length);
    if (rest.startsWith("/")) return { message: `"${term}": a fraction has whole numbers, such as 19 5/8` };
    const { whole, over = number.groups!["over2"], under = number.groups!["under2"] } = number.groups!;
    if (under !== undefined && Number(under) === 0) return { message: `"${term}": a fraction cannot be over 0` };
    if (under !== undefined && whole?.includes(".")) return { message: `"${term}": either decimals or a fraction, not both` };
    const value = Number(whole ?? 0) + (under !== undefined ? Number(over) / Number(under) : 0);
    const given = UNIT.exec(rest);
    rest = given ? rest.slice(given[0].length) : rest;
    const name: string = given ? nameOf(given[1]!) : feet ? "in" : unit === "mm" ? "mm" : "in";
    if (count > 0 && !(feet && name === "in")) return { message: `"${term}": only feet and inches go together without a plus sign` };
    const [by, per] = MM_PER[name]!;
    mm += (value * by) / per;
    feet = name === "ft";
    count++;
  }
  return count === 0 ? { message: "a number is missing after the sign" } : mm;
}

function nameOf(written: string): string {
  if (written === '"' || written.startsWith("inch")) return "in";
  if (written === "'" || written === "feet" || written === "foot") return "ft";
  return written;
}
