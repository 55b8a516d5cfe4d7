import { wrap, charactersIn } from "./lettering.ts";
import { heightOf, PENCIL, widthOf, type Hand, type Rect } from "./paper.ts";
import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";

/**
 * The symbol of third-angle projection (ISO 5456-2): a cone frustum from the side, small end to the left, and at the left of it what is seen
 * from there. In third angle a view stands on the side it is seen from, and from the small end both circles are visible.
 */
export function drawProjectionSymbol(pen: Pen, area: Rect, hand: Hand): void {
  const d = Math.min(heightOf(area) * 0.86, widthOf(area) / 2.9);
  const y = (area.top + area.bottom) / 2;
  // ISO 5456-2: small diameter half of the large one, frustum as long as the large one
  const width = d + 0.6 * d + d;
  const x = (area.left + area.right - width) / 2;
  const thick = stroke(Math.min(hand.pens.thick, 0.35));
  const chain = stroke(hand.pens.hair, PENCIL, "chain");
  const cx = x + d / 2;
  pen.arc("title block", [cx, y], d / 2, thick);
  pen.arc("title block", [cx, y], d / 4, thick);
  const from = x + 1.6 * d;
  pen.polyline("title block", [[from, y - d / 4], [from + d, y - d / 2], [from + d, y + d / 2], [from, y + d / 4]], true, thick);
  pen.line("title block", [x - 0.12 * d, y], [x + width + 0.12 * d, y], chain);
  pen.line("title block", [cx, y - 0.62 * d], [cx, y + 0.62 * d], chain);
}

/** Length of the check bar, mm: measured on the print, it tells whether the printer kept the size. */
export const CHECK_BAR = 100;

/** Check bar with a tick every 10 mm, its end ticks the longest; `at` is its left end. Returns its lower edge. */
export function drawCheckBar(pen: Pen, at: readonly [number, number], hand: Hand): void {
  const [x, y] = at;
  const size = hand.letters.note;
  pen.text("check bar", [x, y - 3.4], "CHECK BAR 100 mm", size, { weight: "bold" });
  pen.text("check bar", [x + CHECK_BAR, y - 3.4], "print at 100 %, not \"fit to page\"", size, { align: "right" });
  const thin = stroke(hand.pens.thin);
  for (let i = 0; i <= 10; i++) {
    const tick = i % 10 === 0 ? 2.6 : i === 5 ? 1.8 : 1.2;
    pen.line("check bar", [x + 10 * i, y - tick], [x + 10 * i, y + tick], i % 10 === 0 ? stroke(0.25) : thin);
  }
  pen.line("check bar", [x, y], [x + CHECK_BAR, y], stroke(0.25));
}

export const CAUTIONS = [
  "Estimates from what was drawn: measure on the car before cutting.",
  "Heat, fuel, brakes, steering, battery, lifting, glass, roadworthiness: follow the part maker and the local rules; have a licensed person check.",
] as const;

/** Text in lines from `at` down; returns the baseline below the last one. */
export function drawLines(pen: Pen, layer: string, at: readonly [number, number], width: number, paragraphs: readonly string[], size: number, ink = PENCIL): number {
  let y = at[1];
  for (const paragraph of paragraphs) {
    for (const line of wrap(paragraph, charactersIn(width, size))) {
      pen.text(layer, [at[0], y], line, size, { ink });
      y += 1.4 * size;
    }
  }
  return y;
}
