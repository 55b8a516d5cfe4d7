import { charactersIn, sheetText, wrap } from "./lettering.ts";
import { HAIRLINE, PENCIL, type Hand, type Rect } from "./paper.ts";
import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";

export interface Column {
  readonly head: string;
  /** Least and wanted width, characters. Columns that wrap may be given less than they want. */
  readonly least: number;
  readonly wanted: number;
  readonly align?: "left" | "right";
}
export interface Cell {
  readonly text: string;
  readonly ink?: string;
  readonly bold?: boolean;
}
export interface Row {
  readonly cells: readonly (string | Cell)[];
  readonly of?: string;
}
export interface Table {
  readonly title: string;
  readonly columns: readonly Column[];
  readonly rows: readonly Row[];
  /** Said under the title where it belongs to the numbers: unit, rounding. */
  readonly note?: string;
}

const GAP = 2; // characters between columns
const MOST_LINES = 6;
const cellOf = (cell: string | Cell): Cell => (typeof cell === "string" ? { text: cell } : cell);

/** Width a table needs at least and would like, mm at a text size. */
export function tableWidths(table: Table, size: number): { least: number; wanted: number } {
  const sum = (pick: (c: Column) => number) => (table.columns.reduce((w, c) => w + pick(c), 0) + GAP * (table.columns.length - 1)) * 0.6 * size;
  return { least: sum((c) => c.least), wanted: sum((c) => Math.max(c.wanted, c.least)) };
}

/** Characters for each column in a width: the least, then what is left, those that want little first, so that only the widest wrap. */
function fitColumns(table: Table, width: number, size: number): number[] {
  const least = table.columns.reduce((sum, c) => sum + c.least, 0);
  const spare = charactersIn(width, size) - least - GAP * (table.columns.length - 1);
  const wants = table.columns.map((c) => Math.max(0, c.wanted - c.least));
  const given = wants.map(() => 0);
  const order = wants.map((_, i) => i).filter((i) => wants[i]! > 0).sort((a, b) => wants[a]! - wants[b]!);
  let rest = Math.max(0, spare);
  order.forEach((i, place) => {
    given[i] = Math.min(wants[i]!, Math.floor(rest / (order.length - place)));
    rest -= given[i]!;
  });
  return table.columns.map((c, i) => c.least + given[i]!);
}

interface SetRow {
  readonly row: Row;
  readonly lines: readonly (readonly string[])[];
  readonly height: number;
}

const lineHeight = (size: number) => 1.26 * size;
const rowPad = (size: number) => 0.22 * size;
/** Title and column heads. */
export const headHeight = (hand: Hand): number => 1.7 * hand.letters.head + 1.75 * hand.letters.table;

function setRows(table: Table, width: number, size: number): { columns: number[]; rows: SetRow[]; cut: boolean } {
  const columns = fitColumns(table, width, size);
  let cut = false;
  const rows = table.rows.map((row) => {
    const lines = row.cells.map((cell, i) => {
      const wrapped = wrap(sheetText(cellOf(cell).text), columns[i]!);
      if (wrapped.length <= MOST_LINES) return wrapped;
      cut = true;
      const last = [...wrapped[MOST_LINES - 1]!].slice(0, columns[i]! - 1).join("");
      return [...wrapped.slice(0, MOST_LINES - 1), `${last}…`];
    });
    return { row, lines, height: Math.max(1, ...lines.map((l) => l.length)) * lineHeight(size) + 2 * rowPad(size) };
  });
  return { columns, rows, cut };
}

/** Height of the table with its title in a width, mm, for at most `most` rows. */
export function tableHeight(table: Table, width: number, hand: Hand, most = Infinity): number {
  const rows = setRows(table, width, hand.letters.table).rows.slice(0, most);
  return headHeight(hand) + rows.reduce((sum, r) => sum + r.height, 0);
}

export interface Drawn {
  /** Rows inked, from the table's start. */
  readonly rows: number;
  /** Lower edge, mm. */
  readonly bottom: number;
  readonly cut: boolean;
}

/**
 * Inks as many rows as an area holds, under title and heads. Nothing when not one row fits. `continued` adds the word to the title.
 */
export function drawTable(pen: Pen, area: Rect, table: Table, hand: Hand, continued = false): Drawn {
  const size = hand.letters.table;
  const width = area.right - area.left;
  const { columns, rows, cut } = setRows(table, width, size);
  const bottom = area.bottom;
  let y = area.top + headHeight(hand);
  if (rows.length > 0 && y + rows[0]!.height > bottom + 1e-6) return { rows: 0, bottom: area.top, cut: false };

  const title = `${table.title.toUpperCase()}${continued ? ", CONTINUED" : ""}`;
  const titleY = area.top + 0.78 * hand.letters.head;
  pen.text("tables", [area.left, titleY], title, hand.letters.head, { weight: "bold" });
  const titleWidth = [...title].length * 0.6 * hand.letters.head;
  if (table.note && titleWidth + 2 * size + [...table.note].length * 0.6 * hand.letters.note <= width) {
    pen.text("tables", [area.right, titleY], table.note, hand.letters.note, { align: "right", ink: PENCIL });
  }
  const lefts: number[] = [];
  let x = area.left;
  for (const c of columns) {
    lefts.push(x);
    x += (c + GAP) * 0.6 * size;
  }
  // the last column may use the width that is left
  const place = (i: number): { x: number; align: "left" | "right" } =>
    table.columns[i]!.align === "right" ? { x: lefts[i]! + columns[i]! * 0.6 * size, align: "right" } : { x: lefts[i]!, align: "left" };
  const right = Math.min(area.right, x - GAP * 0.6 * size);
  table.columns.forEach((column, i) => {
    const at = place(i);
    pen.text("tables", [at.x, y - 0.55 * size], column.head, Math.min(size, hand.letters.note), { align: at.align, ink: PENCIL });
  });
  pen.line("tables", [area.left, y], [right, y], stroke(hand.pens.thin));
  let inked = 0;
  for (const { row, lines, height } of rows) {
    if (y + height > bottom + 1e-6) break;
    row.cells.forEach((cell, i) => {
      const at = place(i);
      const { ink, bold } = cellOf(cell);
      lines[i]!.forEach((line, n) => pen.text("tables", [at.x, y + rowPad(size) + n * lineHeight(size) + 0.95 * size], line, size, { align: at.align, ...(ink ? { ink } : {}), ...(bold ? { weight: "bold" as const } : {}), ...(row.of ? { of: row.of } : {}) }));
    });
    y += height;
    pen.line("tables", [area.left, y], [right, y], stroke(hand.pens.hair, HAIRLINE));
    inked++;
  }
  return { rows: inked, bottom: y, cut };
}
