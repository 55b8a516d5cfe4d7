import { at, DASHED, DOUBLE_CHAIN, inMillimetres, lineOf, pathOf, type Sheet } from "./sheet.ts";
import type { Cut, Shape } from "./shapes.ts";

const tube = (shape: Shape): boolean => shape.lines.length > 0;
const wire = (kind: string): boolean => kind === "harness" || kind === "cable";

/** Is any of a thing on the paper that shows? */
function inSight(sheet: Sheet, shape: Shape): boolean {
  const [x0, y1] = at(sheet, shape.box[0], shape.box[1]);
  const [x1, y0] = at(sheet, shape.box[2], shape.box[3]);
  return x1 > -60 && x0 < sheet.width + 60 && y1 > -60 && y0 < sheet.height + 60;
}

/** Parts, runs, tyres and shafts, farthest first. `lifted` is drawn as chosen. */
export function paintShapes(sheet: Sheet, shapes: readonly Shape[], chosen: ReadonlySet<string>, hover: string | null): void {
  for (const shape of shapes) if (inSight(sheet, shape)) paintShape(sheet, shape, chosen.has(shape.key), hover === shape.key);
  for (const shape of shapes) if (chosen.has(shape.key)) cornerTicks(sheet, shape.box);
}

/** One thing: every piece stroked at twice the width, then all filled, so that pieces join into one outline. */
function paintShape(sheet: Sheet, shape: Shape, chosen: boolean, hovered: boolean): void {
  const { inks } = sheet;
  inMillimetres(sheet, shape.shift, (ctx, px) => {
    ctx.lineJoin = "round";
    const outline = pathOf(shape.loops);
    if (shape.rooms.length > 0) {
      ctx.setLineDash([3 * px, 3 * px]);
      ctx.strokeStyle = inks.pencil;
      ctx.lineWidth = 0.9 * px;
      ctx.stroke(pathOf(shape.rooms));
      ctx.setLineDash([]);
    }
    if (shape.kind === "glass") {
      ctx.strokeStyle = chosen || hovered ? inks.ink : inks.pencil;
      ctx.lineWidth = (chosen ? 2.4 : 1) * px;
      ctx.stroke(outline);
      lightStrokes(ctx, px, shape, inks.pencil);
      return;
    }
    if (shape.list === "tyres" || shape.kind === "tyre") {
      for (const [du, dv] of shape.extremes) {
        ctx.save();
        ctx.translate(du, dv);
        ctx.setLineDash(DOUBLE_CHAIN.map((d) => d * px));
        ctx.strokeStyle = inks.pencil;
        ctx.lineWidth = 0.8 * px;
        ctx.stroke(outline);
        ctx.restore();
      }
      ctx.strokeStyle = inks.ink;
      ctx.lineWidth = (hovered ? 1.9 : 1.2) * px;
      ctx.stroke(outline);
      return;
    }
    if (tube(shape)) {
      paintTube(ctx, px, sheet, shape, chosen ? 2.2 : hovered ? 1.7 : 0.9);
      return;
    }
    const fill = shape.hot ? inks.hotFill : chosen ? inks.lit : inks.part;
    const width = chosen ? 2.2 : hovered ? 1.9 : 1.15;
    if (shape.guessed) ctx.setLineDash(DASHED.map((d) => d * px));
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = 2 * width * px;
    ctx.stroke(outline);
    ctx.setLineDash([]);
    ctx.fillStyle = fill;
    ctx.fill(outline);
    if (chosen) doubleOutline(ctx, px, outline, inks.ink, fill);
  });
}

/** A run or shaft: its lines as wide as it is, ink under filling; a chain line along the middle of what is hollow. */
function paintTube(ctx: CanvasRenderingContext2D, px: number, sheet: Sheet, shape: Shape, edge: number): void {
  const { inks } = sheet;
  const solid = wire(shape.kind);
  ctx.lineJoin = "miter";
  const passes: { ink: string; more: number }[] = [{ ink: inks.ink, more: 2 * edge * px }, { ink: shape.hot ? inks.hotFill : solid ? inks.loom : inks.lit, more: 0 }];
  for (const { ink, more } of passes) {
    ctx.strokeStyle = ink;
    shape.lines.forEach((line, i) => {
      ctx.lineWidth = Math.max(shape.widths[i]!, 0.8 * px) + more;
      ctx.stroke(lineOf(line));
    });
  }
  if (solid || sheet.camera.scale <= 0.1) return;
  ctx.setLineDash([10 * px, 3 * px, 2 * px, 3 * px]);
  ctx.strokeStyle = shape.hot ? inks.heat : inks.pencil;
  ctx.lineWidth = 0.7 * px;
  for (const line of shape.lines) ctx.stroke(lineOf(line));
  ctx.setLineDash([]);
}

/** A second line inside the first. */
function doubleOutline(ctx: CanvasRenderingContext2D, px: number, outline: Path2D, ink: string, fill: string): void {
  ctx.save();
  ctx.clip(outline);
  ctx.strokeStyle = ink;
  ctx.lineWidth = 8.4 * px;
  ctx.stroke(outline);
  ctx.strokeStyle = fill;
  ctx.lineWidth = 5.4 * px;
  ctx.stroke(outline);
  ctx.fillStyle = fill;
  ctx.fill(outline);
  ctx.restore();
}

/** Three short strokes that mean glass: light on it. */
function lightStrokes(ctx: CanvasRenderingContext2D, px: number, shape: Shape, ink: string): void {
  const [u0, v0, u1, v1] = [shape.box[0] - shape.shift[0], shape.box[1] - shape.shift[1], shape.box[2] - shape.shift[0], shape.box[3] - shape.shift[1]];
  const size = Math.min(u1 - u0, v1 - v0) * 0.3;
  if (size < 8 * px) return;
  const [cu, cv] = [u0 + 0.34 * (u1 - u0), v0 + 0.5 * (v1 - v0)];
  ctx.save();
  ctx.clip(pathOf(shape.loops));
  ctx.beginPath();
  for (const [step, share] of [[-1, 0.5], [0, 1], [1, 0.6]] as const) {
    ctx.moveTo(cu + step * size * 0.3 - size * 0.5 * share, cv - size * 0.5 * share);
    ctx.lineTo(cu + step * size * 0.3 + size * 0.5 * share, cv + size * 0.5 * share);
  }
  ctx.strokeStyle = ink;
  ctx.lineWidth = 0.9 * px;
  ctx.stroke();
  ctx.restore();
}

/** Ticks at the corners of what is chosen. */
export function cornerTicks(sheet: Sheet, box: readonly [number, number, number, number]): void {
  const { ctx, inks } = sheet;
  const [x0, y1] = at(sheet, box[0], box[1]);
  const [x1, y0] = at(sheet, box[2], box[3]);
  const arm = 9;
  const off = 6;
  ctx.beginPath();
  for (const [x, dx] of [[x0 - off, 1], [x1 + off, -1]] as const) {
    for (const [y, dy] of [[y0 - off, 1], [y1 + off, -1]] as const) {
      ctx.moveTo(x + dx * arm, y);
      ctx.lineTo(x, y);
      ctx.lineTo(x, y + dy * arm);
    }
  }
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 2;
  ctx.stroke();
}

/** What the plane of the section cuts: filled, hatched, outlined thick. */
export function paintCuts(sheet: Sheet, cuts: readonly Cut[], chosen: ReadonlySet<string>, hover: string | null): void {
  const { inks } = sheet;
  for (const cut of cuts) {
    inMillimetres(sheet, cut.shift, (ctx, px) => {
      ctx.lineJoin = "round";
      const outline = pathOf(cut.loops);
      const picked = chosen.has(cut.key);
      ctx.strokeStyle = inks.ink;
      ctx.lineWidth = (picked ? 6 : hover === cut.key ? 4.2 : 2.8) * px;
      ctx.stroke(outline);
      ctx.fillStyle = cut.hot ? inks.hotFill : cut.list === "tyres" || cut.kind === "tyre" ? inks.film : inks.lit;
      ctx.fill(outline);
      if (cut.list === "tyres" || cut.kind === "tyre") return;
      ctx.clip(outline);
      ctx.beginPath();
      hatch(ctx, cut, (cut.hot ? 4.5 : 6.5) * px, wire(cut.kind));
      ctx.strokeStyle = cut.hot ? inks.heat : wire(cut.kind) ? inks.loom : inks.pencil;
      ctx.lineWidth = 0.7 * px;
      ctx.stroke();
    });
  }
}

/** Lines at 45 degrees over the box of a cut; looms crossed. */
function hatch(ctx: CanvasRenderingContext2D, cut: Cut, step: number, crossed: boolean): void {
  let [u0, v0, u1, v1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const loop of cut.loops) {
    for (let i = 0; i < loop.length; i += 2) {
      u0 = Math.min(u0, loop[i]!);
      u1 = Math.max(u1, loop[i]!);
      v0 = Math.min(v0, loop[i + 1]!);
      v1 = Math.max(v1, loop[i + 1]!);
    }
  }
  const pitch = step * Math.SQRT2;
  const rise = v1 - v0;
  for (let k = Math.floor((u0 - rise) / pitch); k * pitch < u1; k++) {
    ctx.moveTo(k * pitch, v0);
    ctx.lineTo(k * pitch + rise, v1);
    if (!crossed) continue;
    ctx.moveTo(k * pitch + rise, v0);
    ctx.lineTo(k * pitch, v1);
  }
}
