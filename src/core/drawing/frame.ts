import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";
import { frameOf, INK, type Hand, type PaperName, PAPER_SIZES, PENCIL, type Rect } from "./paper.ts";

/** ISO 5457: fields of the grid reference, mm, counted from the axes of symmetry of the trimmed sheet. */
export const FIELD = 50;
/** Width of the grid reference border, outside the frame. */
export const GRID_BORDER = 5;
/** How far a centring mark reaches into the drawing space. */
export const CENTRING_REACH = 4;

/** Letters of the grid: I and O look like figures. */
const LETTERS = "ABCDEFGHJKLMNPQRSTUVWXYZ";

/**
 * Borders of the grid fields along one side: 50 mm steps both ways from the middle of the sheet; what is left over belongs to the corner
 * fields, so that no field is shorter than 50 mm less nothing.
 * @param low first edge of the frame, @param high its other edge, @param middle the sheet's axis of symmetry, all mm
 */
export function fieldBorders(low: number, high: number, middle: number): number[] {
  const borders: number[] = [];
  const before = Math.max(0, Math.floor((middle - low) / FIELD + 1e-9) - 1);
  const after = Math.max(0, Math.floor((high - middle) / FIELD + 1e-9) - 1);
  for (let i = before; i >= -after; i--) borders.push(middle - i * FIELD);
  return borders;
}

/** Frame, centring marks and grid reference of ISO 5457 (on A4 the grid stands at the top and the right only). */
export function drawFrame(pen: Pen, paper: PaperName, hand: Hand, title: Rect): Rect {
  const [width, height] = PAPER_SIZES[paper];
  const frame = frameOf(paper);
  const thin = stroke(hand.pens.thin, PENCIL);
  const every = paper !== "A4";

  const across = fieldBorders(frame.left, frame.right, width / 2);
  const down = fieldBorders(frame.top, frame.bottom, height / 2);
  const size = 2.47;
  const label = (at: readonly [number, number], text: string) => pen.text("frame", [at[0], at[1] + 0.365 * size], text, size, { align: "centre", ink: PENCIL });
  const sidesAcross = every ? [frame.top - GRID_BORDER, frame.bottom] : [frame.top - GRID_BORDER];
  const sidesDown = every ? [frame.left - GRID_BORDER, frame.right] : [frame.right];
  for (const top of sidesAcross) for (const x of across) pen.line("frame", [x, top], [x, top + GRID_BORDER], thin);
  for (const left of sidesDown) for (const y of down) pen.line("frame", [left, y], [left + GRID_BORDER, y], thin);
  const fields = (low: number, high: number, borders: readonly number[]) => [low, ...borders].map((from, i) => (from + (borders[i] ?? high)) / 2);
  fields(frame.left, frame.right, across).forEach((x, i) => sidesAcross.forEach((top) => label([x, top + GRID_BORDER / 2], String(i + 1))));
  fields(frame.top, frame.bottom, down).forEach((y, i) => sidesDown.forEach((left) => label([left + GRID_BORDER / 2, y], LETTERS[i % LETTERS.length]!)));

  pen.box("frame", frame, stroke(hand.pens.frame));
  const mark = stroke(hand.pens.frame, INK);
  const [cx, cy] = [width / 2, height / 2];
  pen.line("frame", [cx, frame.top - GRID_BORDER], [cx, frame.top + CENTRING_REACH], mark);
  // on small sheets the title block stands over the middle
  pen.line("frame", [cx, frame.bottom + GRID_BORDER], [cx, cx > title.left - 1 ? frame.bottom : frame.bottom - CENTRING_REACH], mark);
  pen.line("frame", [frame.left - GRID_BORDER, cy], [frame.left + CENTRING_REACH, cy], mark);
  pen.line("frame", [frame.right + GRID_BORDER, cy], [frame.right - CENTRING_REACH, cy], mark);
  return frame;
}
