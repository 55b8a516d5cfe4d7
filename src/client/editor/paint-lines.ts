import type { Stance } from "#core/body/stance.ts";
import { groundAt, PROJECTION } from "#core/frames.ts";
import type { Glass, Layout, Space } from "#core/layout/schema.ts";
import { at, DASHED, DOTTED, label, numberFont, trace, type Sheet } from "./sheet.ts";

type Outline = readonly (readonly [number, number])[];

/** A luggage space as a view shows it; the section of one without a rear outline is its widest rectangle. */
export function spaceOutline(space: Space, view: Sheet["view"]): Outline | null {
  if (view === "plan") return space.top ?? null;
  if (view === "side") return space.side ?? null;
  if (space.rear) return space.rear;
  if (!space.top || !space.side) return null;
  const [y0, y1] = reach(space.top);
  const [z0, z1] = reach(space.side);
  return [[y0, z0], [y1, z0], [y1, z1], [y0, z1]];
}
const reach = (outline: Outline): [number, number] => [Math.min(...outline.map((p) => p[1])), Math.max(...outline.map((p) => p[1]))];

export function glassOutline(glass: Glass, view: Sheet["view"]): Outline {
  const { u, v } = PROJECTION[view];
  return glass.opening.map((p) => [p[u], p[v]] as const);
}

/** Luggage spaces dotted; glass openings; eyes. Over the parts, or they would be hidden. */
export function paintSpaces(sheet: Sheet, layout: Layout, chosen: ReadonlySet<string>, hover: string | null): void {
  const { ctx, view, inks } = sheet;
  for (const space of layout.spaces) {
    const outline = spaceOutline(space, view);
    if (!outline) continue;
    trace(sheet, outline, true);
    ctx.setLineDash(DOTTED);
    ctx.lineCap = "round";
    ctx.strokeStyle = inks.clear;
    ctx.lineWidth = chosen.has(space.key) ? 3 : hover === space.key ? 2.2 : 1.5;
    ctx.stroke();
    ctx.lineCap = "butt";
    ctx.setLineDash([]);
  }
  for (const glass of layout.glass) {
    trace(sheet, glassOutline(glass, view), true);
    ctx.strokeStyle = inks.pencil;
    ctx.lineWidth = chosen.has(glass.key) ? 2.5 : hover === glass.key ? 1.8 : 0.9;
    ctx.setLineDash([5, 2]);
    ctx.stroke();
    ctx.setLineDash([]);
  }
  for (const eye of layout.eyes) {
    const { u, v } = PROJECTION[view];
    paintEye(sheet, ...at(sheet, eye.at[u], eye.at[v]), chosen.has(eye.key));
  }
}

function paintEye(sheet: Sheet, x: number, y: number, chosen: boolean): void {
  const { ctx, inks } = sheet;
  // never half of it: one that looks from outside the paper is on the list
  if (x < 9 || y < 9 || x > sheet.width - 9 || y > sheet.height - 9) return;
  ctx.beginPath();
  ctx.moveTo(x - 8, y);
  ctx.quadraticCurveTo(x, y - 8, x + 8, y);
  ctx.quadraticCurveTo(x, y + 8, x - 8, y);
  ctx.closePath();
  ctx.fillStyle = inks.film;
  ctx.fill();
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = chosen ? 2.4 : 1.1;
  ctx.stroke();
  ctx.beginPath();
  ctx.arc(x, y, 2.4, 0, 2 * Math.PI);
  ctx.fillStyle = inks.ink;
  ctx.fill();
}

/** Litres in the middle of a space, on a patch of paper. Pixels, for the map of ink as well. */
export function litreLabels(sheet: Sheet, layout: Layout, litres: ReadonlyMap<string, number>): { text: string; x: number; y: number }[] {
  return layout.spaces.flatMap((space) => {
    const outline = spaceOutline(space, sheet.view);
    const free = litres.get(space.key);
    if (!outline || free === undefined || sheet.view === "rear") return [];
    const us = outline.map((p) => p[0]);
    const vs = outline.map((p) => p[1]);
    const [x, y] = at(sheet, 0.5 * (Math.min(...us) + Math.max(...us)), sheet.view === "plan" ? 0.5 * (Math.min(...vs) + Math.max(...vs)) : 0.28 * Math.min(...vs) + 0.72 * Math.max(...vs));
    return [{ text: `${free.toFixed(0)} l`, x, y }];
  });
}

export function paintLitres(sheet: Sheet, labels: readonly { text: string; x: number; y: number }[]): void {
  for (const { text, x, y } of labels) label(sheet, text, x, y, { ink: sheet.inks.clear, align: "center" });
}

export interface StanceLine {
  readonly from: readonly [number, number];
  readonly to: readonly [number, number];
  readonly text: string;
  readonly over: boolean;
  readonly kind: "angle" | "limit";
}

/** Approach and departure lines, tangent to the loaded tyre, and the overhang limit, in mm of the side view. */
export function stanceLines(stance: Stance, layout: Layout): StanceLine[] {
  const { report, points } = stance;
  const lines: StanceLine[] = [];
  const ends = [
    { name: "departureAngle", wheel: layout.chassis.wheelbase, sign: 1, radius: layout.chassis.rear.tyre.loadedRadius },
    { name: "approachAngle", wheel: 0, sign: -1, radius: layout.chassis.front.tyre.loadedRadius },
  ] as const;
  const tilt = Math.atan2(groundAt(layout.chassis, layout.chassis.wheelbase) - groundAt(layout.chassis, 0), layout.chassis.wheelbase);
  for (const { name, wheel, sign, radius } of ends) {
    const point = points[name];
    const value = report[name];
    if (!point || value === null) continue;
    const a = (value * Math.PI) / 180;
    // tangent to a circle that stands on the ground: it meets the ground r tan(a / 2) beyond the contact point
    const start = wheel + sign * radius * Math.tan(a / 2);
    const length = Math.abs(point[0] - start) * 1.18 + 150;
    const slope = a + sign * tilt;
    const low = groundAt(layout.chassis, start);
    lines.push({ from: [start, low], to: [start + sign * length * Math.cos(slope), low + length * Math.sin(slope)], text: `${value.toFixed(1)}°`, over: false, kind: "angle" });
  }
  const limit = layout.body.overhangLimit;
  if (limit) {
    const x = layout.chassis.wheelbase * (1 + limit.share);
    const over = report.findings.some((finding) => finding.code === "over-limit");
    const excess = (report.rearOverhang ?? 0) - limit.share * layout.chassis.wheelbase;
    lines.push({ from: [x, groundAt(layout.chassis, x)], to: [x, groundAt(layout.chassis, x) + 780], text: over ? `${excess.toFixed(0)} over limit` : "overhang limit", over, kind: "limit" });
  }
  return lines;
}

export function paintStance(sheet: Sheet, lines: readonly StanceLine[]): void {
  const { ctx, inks } = sheet;
  for (const line of lines) {
    const ink = line.kind === "angle" ? inks.tight : line.over ? inks.verdict.short : inks.pencil;
    trace(sheet, [line.from, line.to], false);
    ctx.setLineDash(line.kind === "angle" ? DASHED : []);
    ctx.strokeStyle = ink;
    ctx.lineWidth = 1.3;
    ctx.stroke();
    ctx.setLineDash([]);
    const [x, y] = at(sheet, line.to[0], line.to[1]);
    const size = line.kind === "limit" ? 12 : 13;
    ctx.font = numberFont(size);
    const wide = ctx.measureText(line.text).width + 5;
    const leftward = line.kind === "angle" && line.to[0] < line.from[0];
    // beyond the end of its line; at the edge of the paper, where the end is outside, still to be read
    const left = leftward ? x - 7 - wide : x + 7;
    if (left > -wide && left < sheet.width) label(sheet, line.text, Math.max(6, Math.min(sheet.width - wide - 3, left)), line.kind === "limit" ? y + 4 : y, { ink, size });
  }
}
