import { CAUTIONS, CHECK_BAR, drawCheckBar, drawLines } from "./furniture.ts";
import { charactersIn, sheetText, textWidth, wrap } from "./lettering.ts";
import { INDIGO, INK, PENCIL, VERDICT_INK, type Hand, type Rect } from "./paper.ts";
import type { LineType } from "./plan.ts";
import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";
import { RUN_FILL } from "./view-lines.ts";

interface Sample {
  readonly name: string;
  readonly width: number;
  readonly ink: string;
  readonly type: LineType;
  readonly fill?: string;
  /** A numbered disc or square instead of a line. */
  readonly tag?: "disc" | "square";
}

/** What stands in the foot besides the remarks, mm of height. */
interface Standing {
  /** Of the check bar and the cautions. */
  readonly below: number;
  /** Of the cautions alone. */
  readonly cautions: number;
  readonly cautionsWidth: number;
  /** True where the cautions stand beside the check bar. */
  readonly beside: boolean;
  readonly all: number;
}

const pitchOf = (size: number): number => 1.4 * size;
const linesHigh = (paragraphs: readonly string[], width: number, size: number): number => paragraphs.reduce((sum, p) => sum + wrap(p, charactersIn(width, size)).length, 0) * pitchOf(size);

function standingIn(width: number, hand: Hand, drawing: { readonly datumNames: string } | null): Standing {
  const size = hand.letters.note;
  const bar = drawing ? size + 6.5 : 0;
  const beside = drawing !== null && width > CHECK_BAR + 8 + 60 * 0.6 * size;
  const cautionsWidth = beside ? width - CHECK_BAR - 8 : width;
  const cautions = linesHigh(CAUTIONS, cautionsWidth, size);
  const below = beside ? Math.max(bar, cautions) : bar + cautions + (drawing ? 0.6 * size : 0);
  const keyRows = drawing ? keyLines(width, hand) : 0;
  return { below, cautions, cautionsWidth, beside, all: below + keyRows * KEY_PITCH * size + linesHigh(aboutOf(drawing), width, size) + 1.2 * size };
}
const aboutOf = (drawing: { readonly datumNames: string } | null): string[] => (drawing && drawing.datumNames !== "" ? [drawing.datumNames] : []);

/** Height that a foot of this width needs at least, mm: key, check bar and cautions, and one line that counts the remarks left out. */
export const footHeight = (width: number, hand: Hand, drawing: { readonly datumNames: string } | null): number => standingIn(width, hand, drawing).all + pitchOf(hand.letters.note);

/**
 * Foot of the sheet left of the title block, standing on its lower edge: key of lines, remarks, then the check bar with the cautions beside it (above it
 * on narrow sheets). Returns its upper edge, which is above the area only where the area is lower than footHeight: remarks that find no room are counted
 * in the last line.
 * @param datumNames what the codes beside dimensions mean
 */
export function drawFoot(pen: Pen, area: Rect, remarks: readonly string[], hand: Hand, drawing: { readonly datumNames: string } | null): number {
  const size = hand.letters.note;
  const width = area.right - area.left;
  const standing = standingIn(width, hand, drawing);
  const room = area.bottom - area.top - standing.all;
  const all = remarks.map(sheetText);
  const said: string[] = [];
  for (const remark of all) {
    const last = said.length === all.length - 1;
    if (linesHigh([...said, remark], width, size) + (last ? 0 : pitchOf(size)) > room) break;
    said.push(remark);
  }
  const unsaid = all.length - said.length;
  if (unsaid > 0) said.push(`${unsaid} more ${unsaid === 1 ? "remark is" : "remarks are"} shown on the screen.`);
  const top = area.bottom - standing.all - linesHigh(said, width, size);
  let y = top;
  if (drawing) y = drawKey(pen, { ...area, top: y }, hand);
  y = drawLines(pen, "key", [area.left, y + size], width, aboutOf(drawing), size, PENCIL);
  drawLines(pen, "remarks", [area.left, y], width, said, size, INK);
  const first = area.bottom - standing.below + size;
  drawLines(pen, "cautions", [standing.beside ? area.left + CHECK_BAR + 8 : area.left, standing.beside ? area.bottom - standing.cautions + size : first], standing.cautionsWidth, CAUTIONS, size, INK);
  if (drawing) drawCheckBar(pen, [area.left, area.bottom - 2.7], hand);
  return top;
}

const KEY_PITCH = 1.7;
const SAMPLE = 9;
const AIR = 1.2;
const BETWEEN = 4;
const sampleOf = (one: Sample) => (one.tag ? 2.4 : SAMPLE);
const keyWidth = (one: Sample, size: number) => sampleOf(one) + AIR + textWidth(one.name, size);
function keyLines(width: number, hand: Hand): number {
  let rows = 1;
  let x = 0;
  for (const one of samplesOf(hand)) {
    const own = keyWidth(one, hand.letters.note);
    if (x > 0 && x + own > width) {
      rows++;
      x = 0;
    }
    x += own + BETWEEN;
  }
  return rows;
}

function samplesOf(hand: Hand): Sample[] {
  const { thick, thin, hair } = hand.pens;
  return [
    { name: "seen", width: thick, ink: INK, type: "continuous" }, { name: "hidden", width: hair, ink: PENCIL, type: "dashed" }, { name: "size estimated", width: thick, ink: INK, type: "dashed" },
    { name: "run", width: thin, ink: INK, type: "continuous", fill: RUN_FILL }, { name: "body line", width: thin, ink: INK, type: "continuous" }, { name: "datum", width: hair, ink: INDIGO, type: "chain" },
    { name: "wheel travel", width: hair, ink: PENCIL, type: "double-chain" }, { name: "luggage space", width: thin, ink: PENCIL, type: "dotted" },
    { name: "number of a part, run R, shaft S", width: thin, ink: INK, type: "continuous", tag: "disc" }, { name: "number of a gap", width: thin, ink: VERDICT_INK.short, type: "continuous", tag: "square" },
  ];
}

function drawKey(pen: Pen, area: Rect, hand: Hand): number {
  const size = hand.letters.note;
  let x = area.left;
  let y = area.top + 0.85 * size;
  for (const one of samplesOf(hand)) {
    const width = keyWidth(one, size);
    if (x > area.left && x + width > area.right) {
      x = area.left;
      y += KEY_PITCH * size;
    }
    const sample = sampleOf(one);
    if (one.tag === "disc") pen.arc("key", [x + 1.2, y], 1.2, stroke(one.width, one.ink));
    else if (one.tag === "square") pen.box("key", { left: x, right: x + 2.4, top: y - 1.2, bottom: y + 1.2 }, stroke(one.width, one.ink));
    else if (one.fill) pen.box("key", { left: x, right: x + sample, top: y - 0.6, bottom: y + 0.6 }, stroke(one.width, one.ink), one.fill);
    else pen.line("key", [x, y], [x + sample, y], stroke(one.width, one.ink, one.type));
    pen.text("key", [x + sample + AIR, y + 0.365 * size], one.name, size, { ink: PENCIL });
    x += width + BETWEEN;
  }
  return y + 0.85 * size;
}
