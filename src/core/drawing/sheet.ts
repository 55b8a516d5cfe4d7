import { groundAt, type Axis, type View } from "../frames.ts";
import type { Layout } from "../layout/schema.ts";
import { arrange, type Arrangement, type Reach, type Wanted } from "./arrange.ts";
import { balloonRadius } from "./balloons.ts";
import { ARROW, drawViews, ordinateTexts, viewTitle, type ViewsInput } from "./draw-views.ts";
import { drawnItems, type DrawnItem } from "./drawn-items.ts";
import { drawFrame } from "./frame.ts";
import { CHECK_BAR } from "./furniture.ts";
import { drawFoot, footHeight } from "./foot.ts";
import { textWidth } from "./lettering.ts";
import { findTextOverlaps } from "./overlaps.ts";
import { frameOf, HAND, inset, type Hand, PAPER_SIZES, rect, STANDARD_SCALES, widthOf, type PaperName, type Rect } from "./paper.ts";
import { createPen, type Pen } from "./pen.ts";
import type { SheetPlan } from "./plan.ts";
import { sheetDatums, stackLabels, zeroOf, type SheetDatum } from "./sheet-datums.ts";
import { unitName, type SheetUnits } from "./sheet-lengths.ts";
import { clearGapsTable, datumsTable, figuresTable, gapsTable, placesTable, runsTable, type SheetReport } from "./sheet-tables.ts";
import { drawTable, headHeight, tableHeight, tableWidths, type Table } from "./table.ts";
import { drawTitleBlock, titleArea, type TitleBlock } from "./title-block.ts";

/** What a sheet is asked for (the query of the sheet endpoint has this shape). */
export interface SheetOptions {
  readonly paper: PaperName;
  readonly scale: "fit" | number;
  readonly units: SheetUnits;
  /** Station of the section, mm; the rear view where absent. */
  readonly station?: number | undefined;
  /** Key of the datum that its axis is measured from. */
  readonly datum?: string | undefined;
}

/** What the title block says beyond the layout: ISO 7200 fields that core cannot know. Absent ones are printed as "not given". */
export interface SheetInfo {
  readonly owner?: string | undefined;
  readonly number?: string | undefined;
  /** Date of issue as it shall be read, for instance 2026-12-01. */
  readonly date?: string | undefined;
  readonly creator?: string | undefined;
  readonly approver?: string | undefined;
  readonly revision?: string | undefined;
  readonly documentType?: string | undefined;
}

/** The views do not go on the paper at the scale asked for. A bad request, not a bad design: nothing is drawn. */
export class SheetError extends Error {
  readonly field: "scale";
  /** The largest standard scale, one in this many, that fits on this paper. */
  readonly fits: number;
  constructor(message: string, fits: number) {
    super(message);
    this.name = "SheetError";
    this.field = "scale";
    this.fits = fits;
  }
}

/** More sheets than these are not made: the rest is named in a remark. */
export const MOST_SHEETS = 60;
const MARGIN = 6.5;

/** The first sheet of `planSheets`. */
export function planSheet(layout: Layout, report: SheetReport, options: SheetOptions, info: SheetInfo = {}): SheetPlan {
  return planSheets(layout, report, options, info)[0]!;
}

/**
 * The general arrangement as sheets: the views with dimensions and numbers on the first (each view on a sheet of its own where they fit only so at the scale asked for),
 * and every table that finds no room there on the sheets that follow. Nothing is cut silently: what could not be done is in `remarks`, and printed.
 * Always at least one sheet. Same input, same plan.
 * Throws SheetError when a view does not fit on the paper at the scale asked for.
 */
export function planSheets(layout: Layout, report: SheetReport, options: SheetOptions, info: SheetInfo = {}): SheetPlan[] {
  const { paper, units } = options;
  const hand = HAND[paper];
  const { items, remarks: undrawn } = drawnItems(layout);
  const datums = sheetDatums(layout);
  const { zero, known } = zeroOf(datums, options.datum);
  const remarks = [...undrawn];
  if (!known) remarks.push(`There is no datum ${options.datum}: measured from ${zero.names.join(", ")}.`);
  const station = options.station ?? null;
  const reach = reachOf(layout, items, station);

  const frame = frameOf(paper);
  const title = titleArea(frame, hand, CHECK_BAR + 2 * MARGIN + 4);
  const content = inset(frame, MARGIN);
  const codes = datums.filter((d) => d.axis !== "x" && d.at >= reach[d.axis][0] && d.at <= reach[d.axis][1]).map((d) => `${d.code} ${d.name}`);
  const about = { datumNames: codes.length === 0 ? "" : `Datums: ${codes.join(", ")}.` };
  const footRight = title.left - 4;
  const forViews = rect(content.left, content.top, content.right, Math.min(title.top, content.bottom - footHeight(footRight - content.left, hand, about)) - 3);
  const lines = datums.filter((d) => d.axis === "x" && d.at >= reach.x[0] && d.at <= reach.x[1]).map((datum) => ({ datum, at: datum.at, leftward: 0 }));
  if (station !== null) lines.push({ datum: { key: "section", code: "A", name: "A", axis: "x", at: station }, at: station, leftward: ARROW });
  const input: ViewsInput = { layout, items, gaps: report.gaps, datums, zero, units, station, reach };
  const longest = (axis: Axis): string => ordinateTexts(input, axis).reduce((a, b) => (b.length > a.length ? b : a), "");
  const wanted: Wanted = { views: ["plan", "side", "rear"], reach, nameRows: (scale) => nameRowsOf(lines, scale, hand), sideTitle: textWidth(viewTitle("side", station, zero, units), hand.letters.head), rearTitle: textWidth(viewTitle("rear", station, zero, units), hand.letters.head), ringRows: 1, longest: { x: longest("x"), y: longest("y"), z: longest("z") } };
  const { scale, groups } = groupViews(wanted, options.scale, forViews, items, paper);

  const tables = [placesTable(layout, items, zero, units), gapsTable(layout, report, units), figuresTable(layout, report, zero, units), runsTable(layout, units), datumsTable(datums, zero, units), clearGapsTable(layout, report, units)].filter((t): t is Table => t !== null && t.rows.length > 0);
  const pages: { pen: Pen; remarks: string[]; drawing: boolean }[] = [];
  const flow = startFlow(tables);
  groups.forEach((arrangement, index) => {
    const pen = createPen();
    drawFrame(pen, paper, hand, title);
    const own = drawViews(pen, arrangement, input, hand);
    if (index === 0) own.unshift(...remarks);
    const footTop = drawFoot(pen, rect(content.left, arrangement.under, footRight, content.bottom), own, hand, about);
    fillDrawing(pen, flow, arrangement, title, content, footTop);
    pages.push({ pen, remarks: own, drawing: true });
  });
  while (flow.some((entry) => entry.done < entry.table.rows.length)) {
    if (pages.length === MOST_SHEETS) {
      pages.at(-1)!.remarks.push(`Only ${MOST_SHEETS} sheets are made: ${flow.map((entry) => `${entry.table.rows.length - entry.done} rows of ${entry.table.title}`).join(", ")} are left out.`);
      break;
    }
    const pen = createPen();
    drawFrame(pen, paper, hand, title);
    drawFoot(pen, rect(content.left, title.top, footRight, content.bottom), [], hand, null);
    const boxes = [rect(content.left, content.top, content.right, title.top - 4)];
    const before = rowsLeft(flow);
    for (const entry of flow) if (entry.done < entry.table.rows.length) placeInBoxes(pen, entry, boxes, false);
    if (rowsLeft(flow) === before) throw new Error("a table found no room on an empty sheet");
    pages.push({ pen, remarks: [], drawing: false });
  }
  const notMeasured = layout.parts.filter((part) => part.source.how !== "measured").length;
  return pages.map((page, index) => {
    const block: TitleBlock = {
      owner: info.owner ?? "not given", number: info.number ?? "not given", date: info.date ?? "not given", sheet: index + 1, sheets: pages.length,
      title: page.drawing ? "General arrangement" : "Tables to the general arrangement", layout: layout.name, approver: info.approver ?? "not yet", creator: info.creator ?? "not given",
      documentType: info.documentType ?? (page.drawing ? "arrangement drawing" : "table"), revision: info.revision ?? "working copy", scale: page.drawing ? `1 : ${scale}` : "none",
      paper: `${paper}, ${unitName(units)}`, loadState: "as drawn, at ride height", notMeasured: `${notMeasured} of ${layout.parts.length}`, zero: zero.names.join(" / "),
    };
    const cut = drawTitleBlock(page.pen, title, block, hand);
    return { paper: { name: paper, width: PAPER_SIZES[paper][0], height: PAPER_SIZES[paper][1] }, title: `${layout.name}, ${block.title.toLowerCase()}`, scale, sheet: index + 1, sheets: pages.length, marks: page.pen.marks, remarks: [...page.remarks, ...cut] };
  });

  function fillDrawing(pen: Pen, entries: Entry[], arrangement: Arrangement, block: Rect, area: Rect, footTop: number): void {
    const boxes: Rect[] = [];
    if (arrangement.right) boxes.push(arrangement.right);
    if (arrangement.beside) boxes.push(arrangement.beside);
    // beside the title block down to the foot, or above both over the whole width: whichever is larger
    const right = arrangement.beside ? arrangement.beside.left - 8 : area.right;
    const left = rect(area.left, arrangement.under, Math.min(right, block.left - 4), footTop - 4);
    const whole = rect(area.left, arrangement.under, right, Math.min(block.top, footTop) - 4);
    const room = (r: Rect) => Math.max(0, r.bottom - r.top - headHeight(hand)) * widthOf(r);
    const under = room(left) > room(whole) ? left : whole;
    if (under.bottom - under.top > headHeight(hand) + 8) boxes.push(under);
    for (const entry of entries) {
      if (entry.done >= entry.table.rows.length) continue;
      placeInBoxes(pen, entry, boxes, true);
    }
  }

  function placeInBoxes(pen: Pen, entry: Entry, boxes: Rect[], onDrawing: boolean): void {
    const widths = tableWidths(entry.table, hand.letters.table);
    const rest = restOf(entry);
    const fitting = boxes.map((box, i) => ({ box, i, width: Math.min(widthOf(box), widths.wanted) })).filter(({ box }) => widthOf(box) >= widths.least);
    const whole = fitting.find(({ box, width }) => tableHeight(rest, width, hand) <= box.bottom - box.top);
    // a table that must break is begun only where a good part of it fits, in the order in which one reads
    const part = !onDrawing || rest.rows.length > WHOLE_ROWS ? fitting.find(({ box, width }) => tableHeight(rest, width, hand, LEAST_ROWS) <= box.bottom - box.top) : undefined;
    const chosen = whole ?? part;
    if (!chosen) return;
    const { box, i, width } = chosen;
    const drawn = drawTable(pen, rect(box.left, box.top, box.left + width, box.bottom), rest, hand, entry.done > 0);
    entry.done += drawn.rows;
    const beside = rect(box.left + width + 8, box.top, box.right, box.bottom);
    const below = rect(box.left, drawn.bottom + 6, box.left + width, box.bottom);
    boxes.splice(i, 1, below, ...(widthOf(beside) > 30 ? [beside] : []));
    if (entry.done < entry.table.rows.length) placeInBoxes(pen, entry, boxes, onDrawing);
  }
}

/** A table of up to so many rows is not broken to begin on a drawing. */
const WHOLE_ROWS = 20;
/** Rows a table shows at least where it is begun or gone on with. */
const LEAST_ROWS = 5;

interface Entry {
  readonly table: Table;
  done: number;
}
const rowsLeft = (entries: readonly Entry[]): number => entries.reduce((sum, entry) => sum + entry.table.rows.length - entry.done, 0);
const startFlow = (tables: readonly Table[]): Entry[] => tables.map((table) => ({ table, done: 0 }));
const restOf = (entry: Entry): Table => ({ ...entry.table, rows: entry.table.rows.slice(entry.done) });

/** Extents of all that is drawn, with the ground and the wheels' travel; a plain box about the wheels where nothing is. */
function reachOf(layout: Layout, items: readonly DrawnItem[], station: number | null): Reach {
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  const take = (c: number, value: number) => {
    low[c] = Math.min(low[c]!, value);
    high[c] = Math.max(high[c]!, value);
  };
  for (const item of items) {
    for (let c = 0; c < 3; c++) {
      take(c, item.extent.low[c]!);
      take(c, item.extent.high[c]!);
    }
    if (item.is === "tyre") {
      const axle = item.key.includes("front") ? layout.chassis.front : layout.chassis.rear;
      take(2, item.extent.high[2] + axle.bump);
      take(2, item.extent.low[2] - axle.droop);
    }
  }
  const flat = (points: readonly (readonly [number, number])[] | undefined, a: number, b: number) => {
    for (const p of points ?? []) {
      take(a, p[0]);
      take(b, p[1]);
    }
  };
  for (const one of [layout.body, ...layout.spaces]) {
    flat(one.top, 0, 1);
    flat(one.side, 0, 2);
    flat(one.rear, 1, 2);
  }
  for (const section of layout.body.sections) flat(section.line, 1, 2);
  for (const pane of layout.glass) for (const p of pane.opening) p.forEach((value, c) => take(c, value));
  for (const x of [low[0]!, high[0]!]) take(2, groundAt(layout.chassis, x));
  if (station !== null && station >= low[0]! - 500 && station <= high[0]! + 500) take(0, station);
  take(0, 0);
  take(1, 0);
  take(2, 0);
  return { x: [low[0]!, high[0]!], y: [low[1]!, high[1]!], z: [low[2]!, high[2]!] };
}

/** Most rows of datum names above a view. */
const MOST_NAME_ROWS = 5;
function nameRowsOf(lines: readonly { readonly datum: SheetDatum; readonly at: number; readonly leftward: number }[], scale: number, hand: Hand): number {
  const { labels } = stackLabels(lines.map(({ datum, at, leftward }) => ({ datum, x: at / scale, leftward })), hand.letters.dimension, Infinity, MOST_NAME_ROWS);
  return labels.reduce((most, label) => Math.max(most, label.row + 1), 0);
}

/** Scale and sheets of views: all on one at the scale asked for or the largest that fits; else each on its own sheet; else SheetError. */
function groupViews(wanted: Wanted, asked: "fit" | number, area: Rect, items: readonly DrawnItem[], paper: PaperName): { scale: number; groups: Arrangement[] } {
  const hand = HAND[paper];
  const count = items.filter((item) => item.label !== "").length;
  const radius = balloonRadius(hand);
  const at = (views: readonly View[], scale: number): Arrangement | null => {
    const oneRow = ((wanted.reach.x[1] - wanted.reach.x[0]) / scale / (2 * radius + 0.7)) * 3 * 0.55;
    const both = count > oneRow ? ([2, 1] as const) : ([1] as const);
    for (const ringRows of both) {
      const found = arrange({ ...wanted, views, ringRows }, scale, area, hand);
      if (found) return found;
    }
    return null;
  };
  const largest = STANDARD_SCALES.find((scale) => at(wanted.views, scale) !== null) ?? STANDARD_SCALES.at(-1)!;
  if (asked === "fit") {
    const found = at(wanted.views, largest);
    if (!found) throw new SheetError(`Nothing this large goes on ${paper} at 1 : ${largest}.`, largest);
    return { scale: largest, groups: [found] };
  }
  const together = at(wanted.views, asked);
  if (together) return { scale: asked, groups: [together] };
  const alone = wanted.views.map((view) => at([view], asked));
  if (alone.every((one) => one !== null)) return { scale: asked, groups: alone };
  throw new SheetError(`At 1 : ${asked} the views do not fit on ${paper}; the largest standard scale that does is 1 : ${largest}.`, largest);
}

/** For tests and development: a plan must never let texts overlap. */
export const sheetIsClean = (plan: SheetPlan): boolean => findTextOverlaps(plan.marks).length === 0;
