import { PROJECTION } from "#core/frames.ts";
import type { Gap, Verdict } from "#core/gaps/gap.ts";
import { DATUM_STRIP } from "./camera.ts";
import { at, numberFont, type Sheet } from "./sheet.ts";
import type { Spot, Wanting } from "./spots.ts";

export interface Balloon {
  readonly number: number;
  readonly gap: Gap;
  readonly framed: boolean;
  /** It belongs to what is in the hand: its distance stands beside it. */
  readonly inHand: boolean;
}

export const balloonId = ({ gap }: Balloon): string => `${gap.a}|${gap.b}`;
const HALF_HEIGHT = 10;
const halfWidth = (number: number): number => (number > 99 ? 25 : number > 9 ? 21.5 : 18);
/** Room for a distance beside the balloon, pixels: of what is framed or in the hand. */
const tail = ({ gap, framed, inHand }: Balloon): number => (framed || inHand ? gap.distance.toFixed(1).length * 7.3 + 8 : 0);

/** Rows that show in the views: what is not in order, what is framed, what is near what is chosen, worst first. */
export function balloonsFor(gaps: readonly Gap[], pair: string | null, chosen: ReadonlySet<string>, inHand: ReadonlySet<string>): Balloon[] {
  const owner = (name: string) => (name.includes(".") ? name.slice(0, name.indexOf(".")) : name);
  const out: Balloon[] = [];
  let near = 0;
  gaps.forEach((gap, i) => {
    const [a, b] = [owner(gap.a), owner(gap.b)];
    const framed = pair === `${gap.a}|${gap.b}`;
    const bad = gap.verdict === "touch" || gap.verdict === "rub" || gap.verdict === "short";
    const mine = chosen.has(a) !== chosen.has(b);
    const held = mine && inHand.size > 0;
    const shows = framed || (mine ? near < (held ? 3 : 4) || (bad && !held) : bad && out.length < (inHand.size > 0 ? 10 : 24));
    if (mine && shows) near++;
    if (shows) out.push({ number: i + 1, gap, framed, inHand: held });
  });
  return out;
}

/** The middle of a leader in pixels, and how much room its balloon wants; null where it is off the paper. */
export function wantingOf(sheet: Sheet, balloon: Balloon): Wanting | null {
  const { u, v } = PROJECTION[sheet.view];
  const { pointA, pointB } = balloon.gap;
  const [x, y] = at(sheet, 0.5 * (pointA[u] + pointB[u]), 0.5 * (pointA[v] + pointB[v]));
  if (x < -30 || x > sheet.width + 30 || y < -30 || y > sheet.height + 30) return null;
  return { id: balloonId(balloon), x, y, halfWidth: halfWidth(balloon.number) + tail(balloon) / 2, halfHeight: HALF_HEIGHT };
}

/** One mark for each verdict, in a square of 16: as in the ledger. */
const MARKS: Readonly<Record<Verdict, string>> = {
  touch: "M6.6 2v12M9.4 2v12M2 8h12",
  rub: "M1.5 6q2.6-3.6 5.2 0t5.2 0 2.6-1.6M1.5 11q2.6-3.6 5.2 0t5.2 0 2.6-1.6",
  short: "M3 2v12M13 2v12M3 8h3M13 8h-3",
  tight: "M5.5 2v12M10.5 2v12",
  clear: "M2 2v12M14 2v12M4 8h8M6.5 5.5 4 8l2.5 2.5M9.5 5.5 12 8l-2.5 2.5",
};

/** Leaders between closest points, and the balloon of each at its spot: number and mark in the verdict's ink. */
export function paintBalloons(sheet: Sheet, balloons: readonly Balloon[], spots: ReadonlyMap<string, Spot>): void {
  const { ctx, view, inks } = sheet;
  const { u, v } = PROJECTION[view];
  // framed ones last, on top
  for (const balloon of [...balloons].sort((a, b) => Number(a.framed) - Number(b.framed) || b.number - a.number)) {
    const wanting = wantingOf(sheet, balloon);
    if (!wanting) continue;
    const { gap, framed } = balloon;
    const ink = inks.verdict[gap.verdict];
    const [ax, ay] = at(sheet, gap.pointA[u], gap.pointA[v]);
    const [bx, by] = at(sheet, gap.pointB[u], gap.pointB[v]);
    const off = spots.get(wanting.id) ?? { x: 0, y: -28 };
    const x = Math.min(sheet.width - wanting.halfWidth - 3, Math.max(wanting.halfWidth + 3, wanting.x + off.x));
    const y = Math.min(sheet.height - HALF_HEIGHT - 3, Math.max(HALF_HEIGHT + (sheet.view === "plan" ? DATUM_STRIP : 3), wanting.y + off.y));
    ctx.strokeStyle = ink;
    ctx.beginPath();
    ctx.moveTo(wanting.x, wanting.y);
    ctx.lineTo(x - tail(balloon) / 2, y);
    ctx.lineWidth = 0.9;
    ctx.stroke();
    ctx.beginPath();
    ctx.moveTo(ax, ay);
    ctx.lineTo(bx, by);
    ctx.lineWidth = framed ? 3 : 2;
    ctx.stroke();
    ctx.fillStyle = ink;
    ctx.beginPath();
    for (const [px, py] of [[ax, ay], [bx, by]] as const) {
      ctx.moveTo(px + 4, py);
      ctx.arc(px, py, framed ? 4.4 : 3.2, 0, 2 * Math.PI);
    }
    ctx.fill();
    if (framed) {
      ctx.strokeStyle = inks.film;
      ctx.lineWidth = 1;
      ctx.stroke();
    }
    paintBalloon(sheet, balloon, x - tail(balloon) / 2, y, halfWidth(balloon.number), ink);
  }
}

function paintBalloon(sheet: Sheet, { number, gap, framed, inHand }: Balloon, x: number, y: number, half: number, ink: string): void {
  const { ctx, inks } = sheet;
  ctx.fillStyle = framed ? ink : inks.lit;
  ctx.fillRect(x - half, y - HALF_HEIGHT, 2 * half, 2 * HALF_HEIGHT);
  ctx.strokeStyle = ink;
  ctx.lineWidth = 1.5;
  ctx.strokeRect(x - half, y - HALF_HEIGHT, 2 * half, 2 * HALF_HEIGHT);
  const word = framed ? inks.film : ink;
  ctx.font = numberFont(12);
  ctx.textBaseline = "middle";
  ctx.fillStyle = word;
  ctx.fillText(String(number), x - half + 5, y + 0.5);
  ctx.save();
  ctx.translate(x + half - 17, y - 6.5);
  ctx.scale(0.8, 0.8);
  ctx.strokeStyle = word;
  ctx.lineWidth = 1.9;
  ctx.stroke(new Path2D(MARKS[gap.verdict]));
  ctx.restore();
  if (inHand || framed) {
    const text = gap.distance.toFixed(1);
    ctx.font = numberFont(12);
    const w = ctx.measureText(text).width;
    const left = x + half + 3;
    ctx.fillStyle = inks.film;
    ctx.globalAlpha = 0.92;
    ctx.fillRect(left, y - 8, w + 4, 16);
    ctx.globalAlpha = 1;
    ctx.fillStyle = ink;
    ctx.fillText(text, left + 2, y + 0.5);
  }
  ctx.textBaseline = "alphabetic";
}
