import { CAUTIONS, drawCheckBar, drawLines } from "./furniture.ts";
import { charactersIn, sheetText, textWidth, wrap } from "./lettering.ts";
import { INDIGO, INK, PENCIL, type Hand, type Rect } from "./paper.ts";
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
}

/** Foot of the sheet left of the title block: key of lines, remarks, cautions, check bar. */
export function drawFoot(pen: Pen, area: Rect, remarks: readonly string[], hand: Hand, drawing = true): void {
  const size = hand.letters.note;
  const width = area.right - area.left;
  let y = area.top;
  if (drawing) y = drawKey(pen, area, hand);
  const barHeight = drawing ? size + 7.5 : 0;
  const lines = (paragraphs: readonly string[]) => paragraphs.reduce((sum, p) => sum + wrap(p, charactersIn(width, size)).length, 0) * 1.4 * size;
  y += 0.6 * size + size;
  y = drawLines(pen, "cautions", [area.left, y], width, CAUTIONS, size, INK);
  const said: string[] = [];
  for (const remark of remarks.map(sheetText)) {
    if (y + lines([...said, remark]) > area.bottom - barHeight - size) break;
    said.push(remark);
  }
  if (said.length < remarks.length && said.length > 0) said[said.length - 1] = `${remarks.length - said.length + 1} more remarks are in the file that this was printed from.`;
  drawLines(pen, "remarks", [area.left, y + 0.5 * size], width, said, size, PENCIL);
  if (drawing) drawCheckBar(pen, [area.left, area.bottom - 2.7], hand);
}

function drawKey(pen: Pen, area: Rect, hand: Hand): number {
  const { thick, thin, hair } = hand.pens;
  const samples: Sample[] = [
    { name: "seen", width: thick, ink: INK, type: "continuous" }, { name: "hidden", width: hair, ink: PENCIL, type: "dashed" }, { name: "size estimated", width: thick, ink: INK, type: "dashed" },
    { name: "run", width: thin, ink: INK, type: "continuous", fill: RUN_FILL }, { name: "body line", width: thin, ink: INK, type: "continuous" }, { name: "datum", width: hair, ink: INDIGO, type: "chain" },
    { name: "wheel travel", width: hair, ink: PENCIL, type: "double-chain" }, { name: "luggage space", width: thin, ink: PENCIL, type: "dotted" },
  ];
  const size = hand.letters.note;
  const sample = 9;
  const air = 1.2;
  let x = area.left;
  let y = area.top + 0.5 * size;
  for (const one of samples) {
    const width = sample + air + textWidth(one.name, size);
    if (x > area.left && x + width > area.right) {
      x = area.left;
      y += 1.7 * size;
    }
    if (one.fill) pen.box("key", { left: x, right: x + sample, top: y - 0.6, bottom: y + 0.6 }, stroke(one.width, one.ink), one.fill);
    else pen.line("key", [x, y], [x + sample, y], stroke(one.width, one.ink, one.type));
    pen.text("key", [x + sample + air, y + 0.365 * size], one.name, size, { ink: PENCIL });
    x += width + 4;
  }
  return y + 0.8 * size;
}
