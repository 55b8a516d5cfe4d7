import type { Axis, View } from "../frames.ts";
import { balloonRadius, ringHeight } from "./balloons.ts";
import { ordinateReach } from "./ordinates.ts";
import { heightOf, widthOf, type Hand, type Rect } from "./paper.ts";

/** Extents of all that is drawn along x, y, z, mm at full size. */
export type Reach = Readonly<Record<Axis, readonly [low: number, high: number]>>;

export interface Wanted {
  readonly views: readonly View[];
  readonly reach: Reach;
  /** Rows of datum names above the views. */
  readonly nameRows: (scale: number) => number;
  readonly ringRows: 1 | 2;
  /** Widths of the titles of side and rear view, which stand in one row, mm. */
  readonly sideTitle: number;
  readonly rearTitle: number;
  /** Longest value that a dimension may show on each axis, as text. */
  readonly longest: Readonly<Record<Axis, string>>;
}

/** One view's place on paper: its box, and what stands around it. */
export interface Placed {
  readonly view: View;
  readonly box: Rect;
  /** Baseline left of the title. */
  readonly title: readonly [number, number];
  readonly rings: readonly { readonly edge: number; readonly out: -1 | 1; readonly rows: 1 | 2 }[];
}

export interface Arrangement {
  readonly scale: number;
  readonly placed: readonly Placed[];
  /** Lowest edge of the row of datum names, and the names' right limit. */
  readonly names: { readonly bottom: number; readonly right: number };
  /** Dimension lines: x below the lowest view, y right of the plan, z right of the side view, y below the rear view. */
  readonly lines: Readonly<Partial<Record<"x" | "yPlan" | "z" | "yRear", number>>>;
  readonly jog: number;
  /** Free areas: right of the main views down to the rear view's title, right of the rear view, and where the area under everything begins. */
  readonly right: Rect | null;
  readonly beside: Rect | null;
  readonly under: number;
}

export const EDGE = 1.5; // air between a view's box and the rings' leaders' ends
export const JOG = 3.6;
/** Height of one row of datum names, mm of paper. */
export const nameRow = (hand: Hand): number => 1.3 * hand.letters.dimension;

/**
 * The views at a scale within an area, third angle: plan above side, rear at the right of side; null where they do not fit. Any subset of views is
 * arranged by the same rules.
 */
export function arrange(wanted: Wanted, scale: number, area: Rect, hand: Hand): Arrangement | null {
  const { views, reach } = wanted;
  const size = (axis: Axis) => (reach[axis][1] - reach[axis][0]) / scale;
  const has = (view: View) => views.includes(view);
  const radius = balloonRadius(hand);
  const ring = ringHeight(wanted.ringRows, radius) + EDGE;
  const title = 1.5 * hand.letters.head;
  const reachOf = (axis: Axis) => ordinateReach(wanted.longest[axis], JOG, hand.letters.dimension);
  const rows = wanted.ringRows;

  const main = has("plan") || has("side");
  const mainWidth = main ? size("x") : 0;
  const sideLabels = main ? 3 + Math.max(has("plan") ? reachOf("y") : 0, has("side") ? reachOf("z") : 0) : 0;
  const left = area.left + 2;
  const rearLeft = main ? Math.max(left + mainWidth + sideLabels + 8, has("side") ? area.left + wanted.sideTitle + 4 : 0) : left;
  const rearLabels = main ? 0 : 3 + reachOf("z");
  const right = has("rear") ? rearLeft + size("y") + rearLabels : left + mainWidth + sideLabels;
  if (Math.max(right, has("rear") ? rearLeft + wanted.rearTitle : 0) > area.right + 1e-6) return null;

  const placed: Placed[] = [];
  const nameRows = wanted.nameRows(scale);
  const names = nameRows * nameRow(hand) + (nameRows > 0 ? 1.2 : 0);
  let y = area.top;
  let namesBottom = y;
  if (has("plan")) {
    const titleY = y + hand.letters.head;
    namesBottom = y + title + names;
    const top = namesBottom + ring;
    const bottom = top + size("y");
    placed.push({ view: "plan", title: [area.left, titleY], box: { left, right: left + mainWidth, top, bottom }, rings: [{ edge: top - EDGE, out: -1, rows }, { edge: bottom + EDGE, out: 1, rows }] });
    y = bottom + ring + 1.5;
  }
  let bottom = y;
  if (has("side") || has("rear")) {
    const titleY = y + hand.letters.head;
    const ownNames = !has("plan") && has("side");
    if (ownNames) namesBottom = y + title + names;
    const top = y + title + (ownNames ? names : 0) + ring;
    bottom = top + size("z");
    if (has("side")) placed.push({ view: "side", title: [area.left, titleY], box: { left, right: left + mainWidth, top, bottom }, rings: [{ edge: top - EDGE, out: -1, rows }] });
    if (has("rear")) placed.push({ view: "rear", title: [rearLeft, titleY], box: { left: rearLeft, right: rearLeft + size("y"), top, bottom }, rings: [{ edge: top - EDGE, out: -1, rows }] });
  } else {
    bottom = y - 1.5;
  }
  const lineY = bottom + 3.2;
  const dims = Math.max(main ? reachOf("x") : 0, has("rear") ? reachOf("y") : 0);
  const end = lineY + dims + 0.8;
  if (end > area.bottom + 1e-6) return null;
  const lines: { x?: number; yPlan?: number; z?: number; yRear?: number } = {};
  if (main) lines.x = lineY;
  if (has("plan")) lines.yPlan = left + mainWidth + 3;
  if (has("side")) lines.z = left + mainWidth + 3;
  else if (has("rear")) lines.z = rearLeft + size("y") + 3;
  if (has("rear")) lines.yRear = lineY;
  const freeLeft = main ? left + mainWidth + sideLabels + 8 : right + 8;
  const freeBottom = has("rear") && main ? placed.find((p) => p.view === "rear")!.title[1] - hand.letters.head - 3 : area.bottom;
  const free = { left: freeLeft, right: area.right, top: area.top, bottom: freeBottom };
  return {
    scale, placed, names: { bottom: namesBottom, right: left + mainWidth + sideLabels }, lines, jog: JOG,
    right: widthOf(free) > 20 && heightOf(free) > 20 ? free : null,
    beside: has("rear") && main ? { left: Math.max(right, rearLeft + wanted.rearTitle) + 8, right: area.right, top: freeBottom + 3, bottom: area.bottom } : null,
    under: end + 2,
  };
}
