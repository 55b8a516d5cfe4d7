import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";
import { textWidth } from "./lettering.ts";
import { HAIRLINE, INDIGO, INK, PENCIL, type Hand } from "./paper.ts";

/** One running dimension: where it lies along the dimension line, mm of paper, and what it says. */
export interface Ordinate {
  readonly at: number;
  readonly text: string;
  /** The higher, the sooner it gets a place. */
  readonly weight: number;
  readonly of?: string;
  readonly datum?: boolean;
  /** Where the extension line starts (paper, across the dimension line's direction). */
  readonly start: number;
}

/** Distance between labels: their ink and a little air. */
export const labelPitch = (size: number): number => 1.3 * size;

/**
 * Places for labels in order, each at least `pitch` from the next and within [low, high], with the least sum of squared shifts: pool adjacent
 * violators (Ayer et al. 1955) on at - i pitch, then held within the bounds, which keeps it the optimum.
 * @param at wanted places, ascending. Throws nothing: with too little room the labels run past `high`, so ask no more than fit.
 */
export function spreadLabels(at: readonly number[], pitch: number, low: number, high: number): number[] {
  const pools: { sum: number; count: number }[] = [];
  at.forEach((p, i) => {
    pools.push({ sum: p - i * pitch, count: 1 });
    for (;;) {
      const last = pools.at(-1)!;
      const before = pools.at(-2);
      if (!before || before.sum / before.count <= last.sum / last.count) break;
      pools.pop();
      before.sum += last.sum;
      before.count += last.count;
    }
  });
  const shifted = pools.flatMap((pool) => Array.from({ length: pool.count }, () => pool.sum / pool.count));
  const most = high - (at.length - 1) * pitch;
  return shifted.map((q, i) => Math.max(low, Math.min(most, q)) + i * pitch);
}

export interface Chosen {
  readonly kept: readonly (Ordinate & { readonly label: number })[];
  /** How many wanted ones found no place. */
  readonly left: number;
}

/**
 * The weightiest ordinates that find room: those that say the same are one; no more than `most`; none shifted farther than `farthest`.
 */
export function chooseOrdinates(wanted: readonly Ordinate[], pitch: number, low: number, high: number, most: number, farthest: number): Chosen {
  const byText = new Map<string, Ordinate>();
  for (const one of wanted) {
    const other = byText.get(one.text);
    if (!other || one.weight > other.weight) byText.set(one.text, one);
  }
  const room = Math.max(0, Math.min(most, Math.floor((high - low) / pitch + 1e-9) + 1));
  let kept = [...byText.values()].sort((a, b) => b.weight - a.weight || a.at - b.at).slice(0, room).sort((a, b) => a.at - b.at);
  let labels = spreadLabels(kept.map((o) => o.at), pitch, low, high);
  for (;;) {
    const shifted = kept.map((o, i) => ({ o, shift: Math.abs(labels[i]! - o.at) })).filter(({ shift }) => shift > farthest + 1e-9);
    if (shifted.length === 0) break;
    const least = shifted.reduce((a, b) => (b.o.weight < a.o.weight ? b : a)).o;
    kept = kept.filter((o) => o !== least);
    labels = spreadLabels(kept.map((o) => o.at), pitch, low, high);
  }
  return { kept: kept.map((o, i) => ({ ...o, label: labels[i]! })), left: byText.size - kept.length };
}

export interface OrdinateLine {
  /** "across": along x of the paper, labels below, reading upward; "up": along y, labels at the right. */
  readonly runs: "across" | "up";
  /** Where the dimension line lies, across its direction. */
  readonly at: number;
  /** Length of the jog between line and label. */
  readonly jog: number;
  /** The origin of the measures along the line, paper; null when it is off the drawing. */
  readonly origin: number | null;
}

/** Inks the dimension line with its origin circle (ISO 129-1, running dimensions), extension lines, jogs and values. */
export function drawOrdinates(pen: Pen, line: OrdinateLine, chosen: Chosen, hand: Hand): void {
  const size = hand.letters.dimension;
  const thin = stroke(hand.pens.hair, PENCIL);
  const faint = stroke(hand.pens.hair, HAIRLINE);
  const point = (along: number, across: number): [number, number] => (line.runs === "across" ? [along, across] : [across, along]);
  const all = chosen.kept.map((o) => o.at).concat(line.origin === null ? [] : [line.origin]);
  if (all.length === 0) return;
  pen.line("dimensions", point(Math.min(...all), line.at), point(Math.max(...all), line.at), thin);
  if (line.origin !== null) pen.arc("dimensions", point(line.origin, line.at), 0.8, stroke(hand.pens.thin, INK), "#FFFFFF");
  for (const one of chosen.kept) {
    const ink = one.datum ? INDIGO : INK;
    if (Math.abs(one.start - line.at) > 1.5) pen.line("dimensions", point(one.at, one.start), point(one.at, line.at - 1.5), faint, one.of);
    const near = line.at + 1;
    const far = near + line.jog;
    pen.polyline("dimensions", [point(one.at, Math.max(one.start, line.at - 1.5)), point(one.at, near), point(one.label, far), point(one.label, far + 0.9)], false, thin, null, one.of);
    // oblique terminator
    const tick = 0.55;
    if (line.origin === null || Math.abs(one.at - line.origin) > 0.9) {
      const [x, y] = point(one.at, line.at);
      pen.line("dimensions", [x - tick, y + tick], [x + tick, y - tick], stroke(hand.pens.thin, ink), one.of);
    }
    const start = far + 0.9 + 0.25 * size;
    if (line.runs === "across") pen.text("dimensions", [one.label + 0.365 * size, start], one.text, size, { turn: 90, align: "right", ink, ...(one.of ? { of: one.of } : {}) });
    else pen.text("dimensions", [start, one.label + 0.365 * size], one.text, size, { ink, ...(one.of ? { of: one.of } : {}) });
  }
}

/** Room the labels need beyond the dimension line, mm. */
export const ordinateReach = (longest: string, jog: number, size: number): number => 1 + jog + 0.9 + 0.25 * size + textWidth(longest, size);
