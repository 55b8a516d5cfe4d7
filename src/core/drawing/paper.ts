/** Papers, frames, scales, text heights and pens: the numbers of a sheet, mm. */
export const PAPER_NAMES = ["A4", "A3", "A2", "A1", "Letter", "Tabloid"] as const;
export type PaperName = (typeof PAPER_NAMES)[number];

export interface Rect {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}
/** mm of paper, whose y runs down. */
export const widthOf = (r: Rect): number => r.right - r.left;
/** mm of paper. */
export const heightOf = (r: Rect): number => r.bottom - r.top;
/** From left and top to right and bottom edge, mm of paper. */
export const rect = (left: number, top: number, right: number, bottom: number): Rect => ({ left, top, right, bottom });
/** The same smaller by so much on every side, mm. */
export const inset = (r: Rect, by: number): Rect => rect(r.left + by, r.top + by, r.right - by, r.bottom - by);

/** Lying sheets: ISO 216 sizes and the two inch sizes (ASME Y14.1 A and B), mm. */
export const PAPER_SIZES: Readonly<Record<PaperName, readonly [width: number, height: number]>> = {
  A4: [297, 210], A3: [420, 297], A2: [594, 420], A1: [841, 594],
  Letter: [279.4, 215.9], Tabloid: [431.8, 279.4],
};

/** ISO 5457: 20 mm at the left for filing, 10 mm elsewhere. */
export const FILING_EDGE = 20;
export const OTHER_EDGE = 10;
export function frameOf(paper: PaperName): Rect {
  const [width, height] = PAPER_SIZES[paper];
  return rect(FILING_EDGE, OTHER_EDGE, width - OTHER_EDGE, height - OTHER_EDGE);
}

/** ISO 5455 reductions, one in this many. A sheet that is fitted takes the first at which the views find room. */
export const STANDARD_SCALES = [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000] as const;

/** Line widths, mm: one group of ISO 128-20 (thick to thin 2 : 1), the frame of ISO 5457. */
export interface Pens {
  readonly thick: number;
  readonly thin: number;
  readonly hair: number;
  readonly frame: number;
}
/** Heights of the em, mm. Capitals of JetBrains Mono are 0.73 em: 2.47, 3.42, 4.79, 6.85 give 1.8, 2.5, 3.5, 5 of ISO 3098. */
export interface Letters {
  readonly note: number;
  readonly table: number;
  readonly dimension: number;
  readonly head: number;
  readonly title: number;
}
export interface Hand {
  readonly pens: Pens;
  readonly letters: Letters;
}
const SMALL: Hand = { pens: { thick: 0.25, thin: 0.13, hair: 0.1, frame: 0.7 }, letters: { note: 2.2, table: 2.47, dimension: 2.47, head: 2.9, title: 4.79 } };
const MEDIUM: Hand = { pens: { thick: 0.4, thin: 0.2, hair: 0.13, frame: 0.7 }, letters: { note: 2.2, table: 2.47, dimension: 3, head: 3.42, title: 4.79 } };
const LARGE: Hand = { pens: { thick: 0.5, thin: 0.25, hair: 0.18, frame: 0.7 }, letters: { note: 2.47, table: 2.9, dimension: 3.42, head: 4.2, title: 6.85 } };
const LARGEST: Hand = { pens: { thick: 0.5, thin: 0.25, hair: 0.18, frame: 0.7 }, letters: { note: 2.9, table: 3.42, dimension: 4.2, head: 4.79, title: 6.85 } };
export const HAND: Readonly<Record<PaperName, Hand>> = { A4: SMALL, Letter: SMALL, A3: MEDIUM, Tabloid: MEDIUM, A2: LARGE, A1: LARGEST };

export const INK = "#20242A";
export const PENCIL = "#69727A";
export const HAIRLINE = "#C9CEC6";
export const INDIGO = "#3F4C9A";
export const PAPER_WHITE = "#FFFFFF";
/** State inks; the word always stands beside them. */
export const VERDICT_INK = { touch: "#B0126B", rub: "#7A3E8E", short: "#C8420C", tight: "#9A6A00", clear: "#1B6B57" } as const;
