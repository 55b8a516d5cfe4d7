import { fitText, sheetText } from "./lettering.ts";
import { PENCIL, rect, widthOf, type Hand, type Rect } from "./paper.ts";
import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";
import { drawProjectionSymbol } from "./furniture.ts";

/** What the title block says (fields of ISO 7200, and what a one-off car needs beside them). */
export interface TitleBlock {
  readonly owner: string;
  readonly number: string;
  readonly date: string;
  readonly sheet: number;
  readonly sheets: number;
  readonly title: string;
  readonly layout: string;
  readonly approver: string;
  readonly creator: string;
  readonly documentType: string;
  readonly revision: string;
  readonly scale: string;
  readonly paper: string;
  readonly loadState: string;
  readonly notMeasured: string;
  readonly zero: string;
}

interface Cell {
  readonly label: string;
  readonly value: string;
  /** Share of the row's width. */
  readonly share: number;
  readonly big?: boolean;
  readonly symbol?: boolean;
}

/** ISO 7200: at most 180 mm wide, in the lower right corner of the frame. */
export const TITLE_WIDTH = 180;
/** Height of one of its rows, mm of paper. */
export const titleRowHeight = (hand: Hand): number => Math.max(7.8, hand.letters.table * 3.2);
/** Of all five rows, mm of paper. */
export const titleHeight = (hand: Hand): number => 5 * titleRowHeight(hand);

/** Area of the title block: narrower than 180 mm only where the check bar would otherwise find no room beside it. */
export function titleArea(frame: Rect, hand: Hand, beside: number): Rect {
  const width = Math.min(TITLE_WIDTH, widthOf(frame) - beside);
  return rect(frame.right - width, frame.bottom - titleHeight(hand), frame.right, frame.bottom);
}

/** Inks the block; returns remarks on texts that were cut. */
export function drawTitleBlock(pen: Pen, area: Rect, block: TitleBlock, hand: Hand): string[] {
  const remarks: string[] = [];
  const rows: Cell[][] = [
    [{ label: "title", value: block.title, share: 0.62, big: true }, { label: "legal owner", value: block.owner, share: 0.38 }],
    [{ label: "layout", value: block.layout, share: 0.62 }, { label: "load state", value: block.loadState, share: 0.38 }],
    [{ label: "creator", value: block.creator, share: 0.24 }, { label: "approver", value: block.approver, share: 0.2 }, { label: "zero of dimensions", value: block.zero, share: 0.36 }, { label: "parts not yet measured", value: block.notMeasured, share: 0.2 }],
    [{ label: "document type", value: block.documentType, share: 0.24 }, { label: "date of issue", value: block.date, share: 0.2 }, { label: "scale", value: block.scale, share: 0.18 }, { label: "paper", value: block.paper, share: 0.18 }, { label: "sheet", value: `${block.sheet} / ${block.sheets}`, share: 0.2 }],
    [{ label: "number", value: block.number, share: 0.24 }, { label: "revision", value: block.revision, share: 0.2 }, { label: "projection", value: "third angle", share: 0.36, symbol: true }, { label: "printed from", value: "Handbreadth", share: 0.2 }],
  ];
  const height = (area.bottom - area.top) / rows.length;
  const thin = stroke(hand.pens.thin, PENCIL);
  const label = Math.min(2.2, height * 0.215);
  const pad = 1.4;
  rows.forEach((row, r) => {
    const top = area.top + r * height;
    if (r > 0) pen.line("title block", [area.left, top], [area.right, top], thin);
    let left = area.left;
    row.forEach((cell, c) => {
      const right = left + cell.share * widthOf(area);
      if (c > 0) pen.line("title block", [left, top], [left, top + height], thin);
      const size = cell.big ? hand.letters.title : hand.letters.dimension;
      const room = right - left - 2 * pad - (cell.symbol ? height * 2.6 : 0);
      const name = fitText(cell.label, right - left - 2 * pad, label, 1);
      pen.text("title block", [left + pad, top + 0.13 * height + 0.73 * label], name.text, name.size, { ink: PENCIL });
      const value = fitText(sheetText(cell.value), room, Math.min(size, height * (cell.big ? 0.5 : 0.38)), 1.75);
      if (value.cut) remarks.push(`The ${cell.label} is too long for the title block and was cut: ${cell.value}`);
      pen.text("title block", [left + pad, top + 0.83 * height], value.text, value.size, { weight: cell.big ? "bold" : "regular" });
      if (cell.symbol) drawProjectionSymbol(pen, rect(right - height * 2.6, top + 0.8, right - pad, top + height - 0.8), hand);
      left = right;
    });
  });
  pen.box("title block", area, stroke(hand.pens.frame * 0.72));
  return remarks;
}
