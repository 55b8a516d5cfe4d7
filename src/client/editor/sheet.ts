import type { View } from "#core/frames.ts";
import { originOf } from "./camera.ts";
import type { FlatLoop } from "./shapes.ts";
import type { Inks } from "./theme-inks.ts";
import type { Camera } from "./view-state.ts";

/** One view being drawn: where it inks and how mm become pixels. */
export interface Sheet {
  readonly ctx: CanvasRenderingContext2D;
  readonly view: View;
  readonly camera: Camera;
  readonly width: number;
  readonly height: number;
  readonly inks: Inks;
}

/** Line types after ISO 128: chain for centres and datums, double chain for extreme positions. Pixels. */
export const CHAIN = [14, 4, 2, 4];
export const DOUBLE_CHAIN = [12, 3, 2, 3, 2, 3];
export const DASHED = [6, 4];
export const DOTTED = [1.6, 3.4];
const MONO = "'JetBrains Mono', monospace";
const SANS = "'Barlow Semi Condensed', sans-serif";
export const numberFont = (size: number, weight = 600): string => `${weight} ${size}px ${MONO}`;
export const wordFont = (size: number, weight = 400): string => `${weight} ${size}px ${SANS}`;

/** A place in a view, in pixels. */
export function at(sheet: Sheet, u: number, v: number): [number, number] {
  const [left, top] = originOf(sheet.camera, sheet.view);
  return [(u - left) * sheet.camera.scale, (top - v) * sheet.camera.scale];
}

const paths = new WeakMap<readonly FlatLoop[], Path2D>();

/** Loops as a path in mm; made once for loops that stay the same. */
export function pathOf(loops: readonly FlatLoop[]): Path2D {
  const known = paths.get(loops);
  if (known) return known;
  const path = new Path2D();
  for (const loop of loops) {
    follow(path, loop);
    path.closePath();
  }
  paths.set(loops, path);
  return path;
}

const openPaths = new WeakMap<FlatLoop, Path2D>();

/** One open line as a path in mm, kept likewise. */
export function lineOf(line: FlatLoop): Path2D {
  const known = openPaths.get(line);
  if (known) return known;
  const path = new Path2D();
  follow(path, line);
  openPaths.set(line, path);
  return path;
}

function follow(path: Path2D, loop: FlatLoop): void {
  for (let i = 0; i + 1 < loop.length; i += 2) {
    if (i === 0) path.moveTo(loop[0]!, loop[1]!);
    else path.lineTo(loop[i]!, loop[i + 1]!);
  }
}

/** Draws in mm of the view, shifted; widths and dashes go through `px`, which gives mm for pixels. */
export function inMillimetres(sheet: Sheet, shift: readonly [number, number], draw: (ctx: CanvasRenderingContext2D, px: number) => void): void {
  const { ctx, camera } = sheet;
  const [x, y] = at(sheet, shift[0], shift[1]);
  ctx.save();
  ctx.transform(camera.scale, 0, 0, -camera.scale, x, y);
  draw(ctx, 1 / camera.scale);
  ctx.restore();
}

/** Traces points of a view in pixels. */
export function trace(sheet: Sheet, points: readonly (readonly [number, number])[], close: boolean): void {
  const { ctx } = sheet;
  ctx.beginPath();
  points.forEach((p, i) => {
    const [x, y] = at(sheet, p[0], p[1]);
    if (i === 0) ctx.moveTo(x, y);
    else ctx.lineTo(x, y);
  });
  if (close) ctx.closePath();
}

export interface LabelLook {
  readonly ink: string;
  readonly align?: CanvasTextAlign;
  readonly size?: number;
  readonly words?: boolean;
  readonly ground?: string;
}

/** Text on a patch of paper, so that it never lies on a line. */
export function label(sheet: Sheet, text: string, x: number, y: number, { ink, align = "left", size = 13, words = false, ground }: LabelLook): void {
  const { ctx, inks } = sheet;
  ctx.font = words ? wordFont(size) : numberFont(size);
  ctx.textAlign = "left";
  ctx.textBaseline = "middle";
  const w = ctx.measureText(text).width;
  const left = align === "center" ? x - w / 2 : align === "right" ? x - w : x;
  ctx.fillStyle = ground ?? inks.film;
  ctx.globalAlpha = 0.92;
  ctx.fillRect(left - 3, y - size * 0.66, w + 6, size * 1.32);
  ctx.globalAlpha = 1;
  ctx.fillStyle = ink;
  ctx.fillText(text, left, y + 0.5);
  ctx.textBaseline = "alphabetic";
}
