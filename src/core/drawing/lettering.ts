import type { Mark } from "./plan.ts";
import type { Rect } from "./paper.ts";

/** Text on a sheet is JetBrains Mono: every character this share of the em wide, so that core lays out without the font. */
export const CHARACTER = 0.6;
/** Ink above and below the baseline, shares of the em: capitals 0.73, accents and brackets a little over, descenders. */
export const ABOVE = 0.8;
export const BELOW = 0.22;

export type TextMark = Extract<Mark, { kind: "text" }>;

/** Width of a text at an em height, mm of paper: exact for the sheet's font, in which every character is alike. */
export const textWidth = (text: string, size: number): number => [...text].length * CHARACTER * size;
/** How many characters stand in a width. */
export const charactersIn = (width: number, size: number): number => Math.max(0, Math.floor(width / (CHARACTER * size) + 1e-9));

/** What the font lacks and how it is written instead (checked against the font's own table by a test). */
const WRITTEN_AS: ReadonlyMap<string, string> = new Map([
  ["⌀", "Ø"], ["∅", "Ø"], ["⅛", "1/8"], ["⅜", "3/8"], ["⅝", "5/8"], ["⅞", "7/8"], ["→", "to"], ["←", "from"], ["≤", "at most"], ["≥", "at least"],
  ["√", "root"], ["Ω", "Ohm"], ["≈", "about"], ["≠", "not"], ["∠", "angle"], ["℃", "°C"], ["㎜", "mm"],
]);
/** Ranges of which every printable character is in the shipped files of the font: Latin with accents, Greek, Cyrillic, common punctuation. */
const DRAWN: readonly (readonly [number, number])[] = [
  [0x20, 0x7e], [0xa1, 0xac], [0xae, 0x131], [0x134, 0x17f], [0x391, 0x3a1], [0x3a3, 0x3cf], [0x401, 0x40c], [0x40e, 0x44f], [0x451, 0x45c], [0x45e, 0x45f], [0x490, 0x491], [0x1ea0, 0x1ef9],
  [0x2013, 0x2014], [0x2018, 0x201a], [0x201c, 0x201e], [0x2020, 0x2020], [0x2022, 0x2022], [0x2026, 0x2026], [0x2032, 0x2033], [0x2039, 0x203a], [0x20ac, 0x20ac], [0x2116, 0x2116],
  [0x2122, 0x2122], [0x2191, 0x2191], [0x2193, 0x2193], [0x2212, 0x2212],
];

/**
 * A text as the sheet can print it: one line, composed characters, marks that the font lacks written in letters, anything else a "?".
 * @example sheetText("⌀22 ≤ 5⅜") is "Ø22 at most 53/8"
 */
export function sheetText(text: string): string {
  let out = "";
  // combining marks that compose with nothing have no cell of their own
  for (const c of text.normalize("NFC").replace(/\p{M}/gu, "")) {
    const code = c.codePointAt(0)!;
    const written = WRITTEN_AS.get(c);
    if (written !== undefined) out += written;
    else if (DRAWN.some(([low, high]) => code >= low && code <= high)) out += c;
    else out += /\s/u.test(c) || /\p{C}/u.test(c) ? " " : "?";
  }
  return out.replace(/ +/g, " ").trim();
}

/** Where the ink of a text lies on paper. Texts stand at 0 or 90 degrees. */
export function textBox(mark: Pick<TextMark, "at" | "text" | "size" | "align" | "turn">): Rect {
  const width = textWidth(mark.text, mark.size);
  const start = mark.align === "left" ? 0 : mark.align === "centre" ? -width / 2 : -width;
  const [x, y] = mark.at;
  const up = ABOVE * mark.size;
  const down = BELOW * mark.size;
  if (mark.turn === 0) return { left: x + start, right: x + start + width, top: y - up, bottom: y + down };
  // turned 90 degrees anticlockwise: reads upward, ascenders to the left
  return { left: x - up, right: x + down, top: y - start - width, bottom: y - start };
}

/** Breaks a text into lines of at most `characters`, at spaces where it can, inside words where it must. */
export function wrap(text: string, characters: number): string[] {
  const most = Math.max(1, characters);
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ")) {
    let rest = [...word];
    const joined = line === "" ? rest.length : [...line].length + 1 + rest.length;
    if (joined <= most) {
      line = line === "" ? word : `${line} ${word}`;
      continue;
    }
    if (line !== "") lines.push(line);
    while (rest.length > most) {
      lines.push(rest.slice(0, most).join(""));
      rest = rest.slice(most);
    }
    line = rest.join("");
  }
  if (line !== "" || lines.length === 0) lines.push(line);
  return lines;
}

/** A text on one line of a width: smaller down to `least`, then cut with an ellipsis and `cut` true. */
export function fitText(text: string, width: number, size: number, least: number): { text: string; size: number; cut: boolean } {
  const count = [...text].length;
  const fitting = count === 0 ? size : width / (CHARACTER * count);
  if (fitting >= size) return { text, size, cut: false };
  if (fitting >= least) return { text, size: Math.floor(fitting * 100) / 100, cut: false };
  return { text: `${[...text].slice(0, Math.max(0, charactersIn(width, least) - 1)).join("").trimEnd()}…`, size: least, cut: true };
}
