import { groundAt, PROJECTION } from "#core/frames.ts";
import type { Layout } from "#core/layout/schema.ts";
import { formatLength } from "#core/units/format-length.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { DATUM_STRIP, originOf } from "./camera.ts";
import { at, CHAIN, label, trace, wordFont, type Sheet } from "./sheet.ts";

export interface DatumLine {
  readonly axis: 0 | 1 | 2;
  readonly at: number;
  readonly name: string;
}

/** The lines that everything is measured from: axles, the centre plane and the layout's own. One that lies on another is drawn once. */
export function datumLines(layout: Layout): DatumLine[] {
  const all: DatumLine[] = [
    { axis: 0, at: 0, name: "Front axle" }, { axis: 0, at: layout.chassis.wheelbase, name: "Rear axle" }, { axis: 1, at: 0, name: "Centre" },
    ...layout.chassis.datums.map((datum): DatumLine => ({ axis: datum.axis === "x" ? 0 : datum.axis === "y" ? 1 : 2, at: datum.at, name: datum.name })),
  ];
  return all.filter((line, i) => all.findIndex((other) => other.axis === line.axis && Math.abs(other.at - line.at) < 0.5) === i);
}

/** The film, body lines, datums and the ground: what lies under everything. */
export function paintPaper(sheet: Sheet, layout: Layout, station: number): void {
  const { ctx, view, inks, width, height } = sheet;
  ctx.fillStyle = inks.film;
  ctx.fillRect(0, 0, width, height);
  paintBody(sheet, layout, station);
  paintDatums(sheet, layout);
  if (view !== "plan") paintEarth(sheet, layout);
}

function paintBody(sheet: Sheet, layout: Layout, station: number): void {
  const { ctx, view, inks } = sheet;
  const outline = view === "plan" ? layout.body.top : view === "side" ? layout.body.side : layout.body.rear;
  ctx.lineJoin = "round";
  ctx.strokeStyle = inks.pencil;
  ctx.lineWidth = 1;
  if (outline) {
    trace(sheet, outline, true);
    ctx.stroke();
  }
  if (view !== "rear" || layout.body.sections.length === 0) return;
  // the given section nearest to the station, where it is near
  const nearest = [...layout.body.sections].sort((a, b) => Math.abs(a.x - station) - Math.abs(b.x - station))[0]!;
  if (Math.abs(nearest.x - station) > 250) return;
  trace(sheet, nearest.line, false);
  ctx.lineWidth = 1.4;
  ctx.stroke();
}

function paintDatums(sheet: Sheet, layout: Layout): void {
  const { ctx, view, inks, width, height } = sheet;
  const { u, v } = PROJECTION[view];
  const lines = datumLines(layout).filter((line) => line.axis === u || line.axis === v);
  ctx.setLineDash(CHAIN);
  ctx.strokeStyle = inks.datum;
  ctx.lineWidth = 1;
  ctx.beginPath();
  for (const line of lines) {
    if (line.axis === u) {
      const [x] = at(sheet, line.at, 0);
      ctx.moveTo(x, view === "plan" ? DATUM_STRIP - 16 : view === "rear" ? 34 : 0);
      ctx.lineTo(x, height);
    } else {
      const [, y] = at(sheet, 0, line.at);
      ctx.moveTo(0, y);
      ctx.lineTo(width, y);
    }
  }
  ctx.stroke();
  ctx.setLineDash([]);
}

/** The datums' names, over everything else that stands still, each on a patch of film: never on a line. */
export function paintDatumNames(sheet: Sheet, layout: Layout, units: LengthUnit): void {
  const { ctx, view, inks, height } = sheet;
  const { u, v } = PROJECTION[view];
  const lines = datumLines(layout).filter((line) => line.axis === u || line.axis === v);
  const look = { ink: inks.datum, words: true } as const;
  ctx.font = wordFont(13);
  if (view === "plan") {
    // names stand beside their own line, as flags; one that would cover the next is left to the tape's numbers
    const across = lines.filter((line) => line.axis === u).sort((a, b) => a.at - b.at);
    across.forEach((line, i) => {
      const [x] = at(sheet, line.at, 0);
      const text = `${line.name} ${formatLength(line.at, units, units === "mm" ? 0 : undefined)}`;
      const next = across[i + 1];
      const room = next ? at(sheet, next.at, 0)[0] - x - 8 : Infinity;
      const fits = [text, line.name].find((one) => ctx.measureText(one).width + 8 < room);
      if (fits) label(sheet, fits, x + 5, DATUM_STRIP - 8, look);
    });
  }
  let above = -Infinity;
  for (const line of lines.filter((one) => one.axis === v).sort((a, b) => b.at - a.at)) {
    const [, y] = at(sheet, 0, line.at);
    if (y < 70 || y > height - 6 || y - above < 20) continue;
    above = y;
    label(sheet, line.name, 12, y - 11, look);
  }
}

/** The ground as the car stands on it. */
function paintEarth(sheet: Sheet, layout: Layout): void {
  const { ctx, view, inks, width, camera } = sheet;
  const left = originOf(camera, view)[0];
  const right = left + width / camera.scale;
  const level = groundAt(layout.chassis, layout.chassis.wheelbase);
  const ends: [number, number][] = view === "side" ? [[left, groundAt(layout.chassis, left)], [right, groundAt(layout.chassis, right)]] : [[left, level], [right, level]];
  trace(sheet, ends, false);
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 1.6;
  ctx.stroke();
}
