import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";

/** What poppler, a reader that shares no code with the writer, finds in a PDF. Lengths in mm of paper, x to the right, y down. */
export interface ReadPdf {
  readonly pages: number;
  readonly size: readonly [width: number, height: number];
  readonly text: string;
  /** Names and whether embedded and subset, as pdffonts says. */
  readonly fonts: readonly { readonly name: string; readonly embedded: boolean; readonly subset: boolean }[];
  readonly images: number;
  /** Straight strokes of the first page. */
  readonly lines: readonly { readonly from: readonly [number, number]; readonly to: readonly [number, number]; readonly width: number }[];
}

const MM = 25.4 / 72;

export function readPdf(bytes: Buffer): ReadPdf {
  const place = mkdtempSync(join(tmpdir(), "pdf-"));
  try {
    const file = join(place, "sheet.pdf");
    writeFileSync(file, bytes);
    const run = (command: string, ...args: string[]) => execFileSync(command, args, { encoding: "utf8", maxBuffer: 64e6 });
    const info = run("pdfinfo", file);
    const pages = Number(/^Pages:\s+(\d+)/mu.exec(info)![1]);
    const page = /^Page size:\s+([\d.]+) x ([\d.]+) pts/mu.exec(info)!;
    const fonts = run("pdffonts", file).trim().split("\n").slice(2).map((row) => {
      const [embedded, subset] = /\s(yes|no)\s+(yes|no)\s+(yes|no)\s/u.exec(row)!.slice(1);
      return { name: row.trim().split(/\s+/u)[0]!, embedded: embedded === "yes", subset: subset === "yes" };
    });
    const images = run("pdfimages", "-list", file).trim().split("\n").length - 2;
    const drawing = join(place, "page.svg");
    run("pdftocairo", "-svg", "-nocenter", "-noshrink", "-f", "1", "-l", "1", file, drawing);
    return { pages, size: [Number(page[1]) * MM, Number(page[2]) * MM], text: run("pdftotext", "-layout", file, "-"), fonts, images, lines: linesOf(readFileSync(drawing, "utf8")) };
  } finally {
    rmSync(place, { recursive: true, force: true });
  }
}

function linesOf(svg: string): ReadPdf["lines"] {
  const lines: { from: [number, number]; to: [number, number]; width: number }[] = [];
  for (const [, style, d, matrix] of svg.matchAll(/<path style="([^"]*)" d="([^"]*)" transform="matrix\(([^)]*)\)"/gu)) {
    const [a, b, c, e, f, g] = matrix!.split(",").map(Number) as [number, number, number, number, number, number];
    const width = Number(/stroke-width:([\d.]+)/u.exec(style!)?.[1] ?? 0) * Math.hypot(a, b) * MM;
    const put = (x: number, y: number): [number, number] => [(a * x + c * y + f) * MM, (b * x + e * y + g) * MM];
    let here: [number, number] | null = null;
    for (const [, letter, x, y] of d!.matchAll(/([ML]) (-?[\d.]+) (-?[\d.]+)/gu)) {
      const next = put(Number(x), Number(y));
      if (letter === "L" && here) lines.push({ from: here, to: next, width });
      here = next;
    }
  }
  return lines;
}
