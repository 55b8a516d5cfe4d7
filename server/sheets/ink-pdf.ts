import { createRequire } from "node:module";
import PDFDocument from "pdfkit";
import { arcPoints } from "#core/drawing/overlaps.ts";
import { dashesOf, type Mark, type SheetPlan, type Stroke } from "#core/drawing/plan.ts";

/** What the file says about itself. */
export interface PdfInfo {
  readonly title?: string;
  readonly author?: string;
  readonly subject?: string;
  /** Stamped as creation date: the same date gives the same bytes. */
  readonly created: Date;
}

/** Points (1/72 inch) in a millimetre. */
const POINTS = 72 / 25.4;
const require = createRequire(import.meta.url);
/** The font comes in files of a script each; every character of one text is drawn with the first that has it. */
const SUBSETS = ["latin", "latin-ext", "greek", "cyrillic", "vietnamese"] as const;
const WEIGHTS = { regular: 400, bold: 700 } as const;
// ligatures off: sequences such as -> would be one glyph, and pdfkit fails on theirs; the space between characters stays 0.6 em
const PLAIN: PDFKit.Mixins.TextOptions = { features: { calt: false, liga: false, clig: false } as unknown as PDFKit.Mixins.OpenTypeFeatures[], lineBreak: false };

const fontFile = (subset: string, weight: 400 | 700) => require.resolve(`@fontsource/jetbrains-mono/files/jetbrains-mono-${subset}-${weight}-normal.woff`);

/** Inks sheet plans as one PDF, a page each, at their exact size. Decides nothing: every line, place and letter is the plan's. */
export function inkPdf(plans: SheetPlan | readonly SheetPlan[], info: PdfInfo): Promise<Buffer> {
  const sheets = Array.isArray(plans) ? (plans as readonly SheetPlan[]) : [plans as SheetPlan];
  const first = sheets[0];
  if (!first) return Promise.reject(new Error("no sheet to ink"));
  const document = new PDFDocument({
    autoFirstPage: false, margin: 0, compress: true, pdfVersion: "1.7", lang: "en",
    info: { Title: info.title ?? first.title, Author: info.author ?? "", Subject: info.subject ?? `1 : ${first.scale}, print at 100 %`, Creator: "Handbreadth", Producer: "Handbreadth", CreationDate: info.created, ModDate: info.created },
  });
  const chunks: Buffer[] = [];
  document.on("data", (chunk: Buffer) => chunks.push(chunk));
  const done = new Promise<Buffer>((resolve, reject) => {
    document.on("end", () => resolve(Buffer.concat(chunks)));
    document.on("error", reject);
  });
  const letters = letterer(document);
  for (const sheet of sheets) {
    document.addPage({ size: [sheet.paper.width * POINTS, sheet.paper.height * POINTS], margin: 0 });
    document.save().scale(POINTS).lineCap("butt").lineJoin("round");
    for (const mark of sheet.marks) inkMark(document, mark, letters);
    document.restore();
  }
  document.end();
  return done;
}

type Doc = PDFKit.PDFDocument;
type Letters = (text: string, bold: boolean) => readonly { readonly font: string; readonly text: string }[];

function inkMark(document: Doc, mark: Mark, letters: Letters): void {
  if (mark.kind === "text") {
    inkText(document, mark, letters);
    return;
  }
  if (mark.kind === "line") document.moveTo(...mark.from).lineTo(...mark.to);
  else if (mark.kind === "polyline") {
    mark.points.forEach((p, i) => (i === 0 ? document.moveTo(p[0], p[1]) : document.lineTo(p[0], p[1])));
    if (mark.closed) document.closePath();
  } else if (mark.sweep === 360) document.circle(mark.centre[0], mark.centre[1], mark.radius);
  else arcPoints(mark).forEach((p, i) => (i === 0 ? document.moveTo(p[0], p[1]) : document.lineTo(p[0], p[1])));
  const fill = mark.kind === "line" ? null : mark.fill;
  if (mark.stroke) pen(document, mark.stroke);
  if (fill && mark.stroke) document.fillAndStroke(fill, mark.stroke.ink);
  else if (fill) document.fill(fill);
  else if (mark.stroke) document.stroke();
}

function pen(document: Doc, stroke: Stroke): void {
  document.lineWidth(stroke.width).strokeColor(stroke.ink);
  const dashes = dashesOf(stroke);
  // a dash array can only be set for the lines that follow: the plain pen takes it off again
  if (dashes.length > 0) (document as unknown as { dash(lengths: readonly number[], options: { phase: number }): Doc }).dash(dashes, { phase: 0 });
  else document.undash();
}

function inkText(document: Doc, mark: Extract<Mark, { kind: "text" }>, letters: Letters): void {
  const advance = 0.6 * mark.size;
  const width = [...mark.text].length * advance;
  const start = mark.align === "left" ? 0 : mark.align === "centre" ? -width / 2 : -width;
  document.save().translate(mark.at[0], mark.at[1]);
  if (mark.turn !== 0) document.rotate(-mark.turn);
  document.fillColor(mark.ink).fontSize(mark.size);
  let x = start;
  for (const stretch of letters(mark.text, mark.weight === "bold")) {
    document.font(stretch.font);
    document.text(stretch.text, x, 0, { ...PLAIN, baseline: "alphabetic" });
    x += [...stretch.text].length * advance;
  }
  document.restore();
}

/** Splits a text by the font files that hold its characters; registers each file when it is first needed, so that only used ones are embedded. */
function letterer(document: Doc): Letters {
  const registered = new Set<string>();
  const glyphs = new Map<string, (code: number) => boolean>();
  const open = (subset: string, weight: 400 | 700): string => {
    const name = `${subset}-${weight}`;
    if (!registered.has(name)) {
      document.registerFont(name, fontFile(subset, weight));
      registered.add(name);
    }
    return name;
  };
  const has = (name: string, code: number): boolean => {
    let known = glyphs.get(name);
    if (!known) {
      document.font(name);
      const font = (document as unknown as { _font: { font: { hasGlyphForCodePoint(code: number): boolean } } })._font.font;
      known = (c) => font.hasGlyphForCodePoint(c);
      glyphs.set(name, known);
    }
    return known(code);
  };
  return (text, bold) => {
    const weight = bold ? WEIGHTS.bold : WEIGHTS.regular;
    const out: { font: string; text: string }[] = [];
    for (const c of text) {
      const code = c.codePointAt(0)!;
      const subset = SUBSETS.find((one) => has(open(one, weight), code));
      if (!subset) throw new Error(`the font has no character U+${code.toString(16).padStart(4, "0")}: sheetText writes it otherwise`);
      const font = open(subset, weight);
      const last = out.at(-1);
      if (last && last.font === font) last.text += c;
      else out.push({ font, text: c });
    }
    return out;
  };
}
