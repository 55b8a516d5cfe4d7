import type { Vec3, View } from "#core/frames.ts";
import { groundAt, PROJECTION } from "#core/frames.ts";
import type { Stance } from "#core/body/stance.ts";
import type { Gap } from "#core/gaps/gap.ts";
import type { Layout } from "#core/layout/schema.ts";
import { originOf } from "./camera.ts";
import type { Cut, Shape } from "./shapes.ts";
import type { Inks } from "./theme-inks.ts";
import type { Camera, Draft } from "./view-state.ts";

type Context = CanvasRenderingContext2D;
export interface Sheet {
  readonly ctx: Context;
  readonly view: View;
  readonly camera: Camera;
  readonly width: number;
  readonly height: number;
  readonly inks: Inks;
}

const CHAIN = [14, 4, 2, 4];
const DOUBLE_CHAIN = [12, 3, 2, 3, 2, 3];
const MONO = "'JetBrains Mono', monospace";
const SANS = "'Barlow Semi Condensed', sans-serif";

function trace({ ctx, camera, view }: Sheet, loop: ArrayLike<number>, close = true): void {
  const [left, top] = originOf(camera, view);
  const { scale } = camera;
  for (let i = 0; i + 1 < loop.length; i += 2) {
    const x = (loop[i]! - left) * scale;
    const y = (top - loop[i + 1]!) * scale;
    if (i === 0) ctx.moveTo(x, y);
    else ctx.lineTo(x, y);
  }
  if (close) ctx.closePath();
}

function path(sheet: Sheet, loops: readonly ArrayLike<number>[], close = true): void {
  sheet.ctx.beginPath();
  for (const loop of loops) trace(sheet, loop, close);
}

const flatten = (points: readonly (readonly [number, number])[]) => points.flatMap((p) => [p[0], p[1]]);
const at = (sheet: Sheet, u: number, v: number): [number, number] => {
  const [left, top] = originOf(sheet.camera, sheet.view);
  return [(u - left) * sheet.camera.scale, (top - v) * sheet.camera.scale];
};

/** Body lines, datums, ground, spaces, glass: what lies behind the parts. */
export function paintGround(sheet: Sheet, layout: Layout): void {
  const { ctx, view, inks, width, height, camera } = sheet;
  ctx.clearRect(0, 0, width, height);
  ctx.fillStyle = inks.film;
  ctx.fillRect(0, 0, width, height);
  const outline = view === "plan" ? layout.body.top : view === "side" ? layout.body.side : layout.body.rear;
  ctx.lineJoin = "round";
  if (outline) {
    path(sheet, [flatten(outline)]);
    ctx.strokeStyle = inks.pencil;
    ctx.lineWidth = 1;
    ctx.stroke();
  }
  ctx.setLineDash(CHAIN);
  ctx.strokeStyle = inks.datum;
  ctx.fillStyle = inks.datum;
  ctx.lineWidth = 1;
  ctx.font = `12px ${SANS}`;
  const datums = [
    { axis: "x", at: 0, name: "Front axle" }, { axis: "x", at: layout.chassis.wheelbase, name: "Rear axle" }, { axis: "y", at: 0, name: "Centre" }, ...layout.chassis.datums,
  ];
  let labelEnd = -Infinity;
  for (const datum of [...datums].sort((a, b) => a.at - b.at)) {
    const axis = datum.axis === "x" ? 0 : datum.axis === "y" ? 1 : 2;
    const { u, v } = PROJECTION[view];
    if (axis !== u && axis !== v) continue;
    ctx.beginPath();
    if (axis === u) {
      const [x] = at(sheet, datum.at, 0);
      ctx.moveTo(x, view === "plan" ? 44 : 0);
      ctx.lineTo(x, height);
      ctx.stroke();
      const text = `${datum.name} ${Math.round(datum.at)}`;
      if (view === "plan" && x + 4 > labelEnd) {
        ctx.fillText(text, x + 4, 54);
        labelEnd = x + 10 + ctx.measureText(text).width;
      }
    } else {
      const [, y] = at(sheet, 0, datum.at);
      ctx.moveTo(0, y);
      ctx.lineTo(width, y);
      ctx.stroke();
    }
  }
  ctx.setLineDash([]);
  if (view !== "plan") {
    const x0 = originOf(camera, view)[0];
    const x1 = x0 + width / camera.scale;
    const rear = layout.chassis.wheelbase;
    const points = view === "side" ? [[x0, groundAt(layout.chassis, x0)], [x1, groundAt(layout.chassis, x1)]] : [[x0, groundAt(layout.chassis, rear)], [x1, groundAt(layout.chassis, rear)]];
    path(sheet, [points.flat()], false);
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = 1.6;
    ctx.stroke();
  }
}

/** Luggage spaces dotted, with their litres; glass openings. Over the parts, or they would be hidden. */
export function paintSpaces(sheet: Sheet, layout: Layout, litres: ReadonlyMap<string, number>, selection: ReadonlySet<string>): void {
  const { ctx, view, inks } = sheet;
  for (const space of layout.spaces) {
    const outline = view === "plan" ? space.top : view === "side" ? space.side : (space.rear ?? (space.top && space.side ? rectangleOf(space.top, space.side) : undefined));
    if (!outline) continue;
    path(sheet, [flatten(outline)]);
    ctx.setLineDash([2, 3]);
    ctx.strokeStyle = inks.clear;
    ctx.lineWidth = selection.has(space.key) ? 2.5 : 1.4;
    ctx.stroke();
    ctx.setLineDash([]);
    const free = litres.get(space.key);
    if (free !== undefined && view !== "rear") {
      const us = outline.map((p) => p[0]);
      const vs = outline.map((p) => p[1]);
      const [x, y] = at(sheet, (Math.min(...us) + Math.max(...us)) / 2, view === "plan" ? (Math.min(...vs) + Math.max(...vs)) / 2 : Math.max(...vs) - 60 / 1);
      label(sheet, `${free.toFixed(0)} l`, x, y, inks.clear, "center");
    }
  }
  for (const glass of layout.glass) {
    const { u, v } = PROJECTION[view];
    path(sheet, [glass.opening.flatMap((p) => [p[u], p[v]])]);
    ctx.strokeStyle = inks.pencil;
    ctx.lineWidth = selection.has(glass.key) ? 2.5 : 1;
    ctx.setLineDash([5, 2]);
    ctx.stroke();
    ctx.setLineDash([]);
  }
}

function rectangleOf(top: readonly (readonly [number, number])[], side: readonly (readonly [number, number])[]): (readonly [number, number])[] {
  const [y0, y1] = [Math.min(...top.map((p) => p[1])), Math.max(...top.map((p) => p[1]))];
  const [z0, z1] = [Math.min(...side.map((p) => p[1])), Math.max(...side.map((p) => p[1]))];
  return [[y0, z0], [y1, z0], [y1, z1], [y0, z1]];
}

/** Parts, runs, tyres and shafts, farthest first: each stroked at twice the width, then filled, so that pieces join into one outline. */
export function paintShapes(sheet: Sheet, shapes: readonly Shape[], selection: ReadonlySet<string>, hover: string | null, hidden: ReadonlySet<string>): void {
  const { ctx, inks } = sheet;
  ctx.lineJoin = "round";
  for (const shape of shapes) {
    if (hidden.has(shape.key)) continue;
    const selected = selection.has(shape.key);
    const tube = shape.list === "runs" || shape.list === "shafts";
    if (shape.extremes.length > 0) {
      path(sheet, shape.extremes);
      ctx.setLineDash(DOUBLE_CHAIN);
      ctx.strokeStyle = inks.pencil;
      ctx.lineWidth = 0.8;
      ctx.stroke();
      ctx.setLineDash([]);
    }
    if (shape.rooms.length > 0) {
      path(sheet, shape.rooms);
      ctx.setLineDash([3, 3]);
      ctx.strokeStyle = inks.pencil;
      ctx.lineWidth = 0.9;
      ctx.stroke();
      ctx.setLineDash([]);
    }
    path(sheet, shape.loops);
    const emphasis = selected ? 2.2 : hover === shape.key ? 1.9 : 1.15;
    if (shape.kind === "glass") {
      ctx.strokeStyle = inks.pencil;
      ctx.lineWidth = selected ? 2 : 0.7;
      ctx.stroke();
      continue;
    }
    if (shape.list === "tyres") {
      ctx.strokeStyle = inks.ink;
      ctx.lineWidth = 1.2;
      ctx.stroke();
      continue;
    }
    if (shape.guessed) ctx.setLineDash([6, 4]);
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = (tube ? 0.9 : emphasis) * 2;
    if (tube && selected) ctx.lineWidth = 3.6;
    ctx.stroke();
    ctx.setLineDash([]);
    ctx.fillStyle = shape.hot ? inks.hotFill : tube ? (shape.kind === "harness" || shape.kind === "cable" ? inks.loom : inks.lit) : inks.part;
    ctx.fill();
    if (selected && !tube) {
      // doubled outline: a second line inside the first
      ctx.save();
      ctx.clip();
      ctx.strokeStyle = inks.ink;
      ctx.lineWidth = 9;
      ctx.stroke();
      ctx.strokeStyle = shape.hot ? inks.hotFill : inks.lit;
      ctx.lineWidth = 6.4;
      ctx.stroke();
      ctx.fillStyle = shape.hot ? inks.hotFill : inks.lit;
      ctx.fill();
      ctx.restore();
    }
    if (tube && sheet.camera.scale > 0.12) {
      path(sheet, shape.lines, false);
      ctx.setLineDash([10, 3, 2, 3]);
      ctx.strokeStyle = shape.hot ? inks.heat : inks.pencil;
      ctx.lineWidth = 0.6;
      if (shape.kind !== "harness" && shape.kind !== "cable") ctx.stroke();
      ctx.setLineDash([]);
    }
  }
  for (const shape of shapes) if (selection.has(shape.key)) cornerTicks(sheet, shape);
}

/** Ticks at the corners of what is selected. */
function cornerTicks(sheet: Sheet, shape: Shape): void {
  const { ctx, inks } = sheet;
  const [x0, y1] = at(sheet, shape.box[0], shape.box[1]);
  const [x1, y0] = at(sheet, shape.box[2], shape.box[3]);
  const t = 9;
  const o = 5;
  ctx.beginPath();
  for (const [x, dx] of [[x0 - o, 1], [x1 + o, -1]] as const) {
    for (const [y, dy] of [[y0 - o, 1], [y1 + o, -1]] as const) {
      ctx.moveTo(x + dx * t, y);
      ctx.lineTo(x, y);
      ctx.lineTo(x, y + dy * t);
    }
  }
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 2;
  ctx.stroke();
}

/** What the plane of the section cuts: filled, hatched, outlined thick. */
export function paintCuts(sheet: Sheet, cuts: readonly Cut[], selection: ReadonlySet<string>): void {
  const { ctx, inks, width, height } = sheet;
  for (const cut of cuts) {
    path(sheet, cut.loops);
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = selection.has(cut.key) ? 5.6 : 3;
    ctx.stroke();
    ctx.fillStyle = cut.hot ? inks.hotFill : cut.list === "tyres" ? inks.film : inks.lit;
    ctx.fill();
    if (cut.list === "tyres") continue;
    ctx.save();
    ctx.clip();
    ctx.beginPath();
    const step = cut.hot ? 4 : 6;
    for (let x = -height; x < width; x += step) {
      ctx.moveTo(x, height);
      ctx.lineTo(x + height, 0);
    }
    ctx.strokeStyle = cut.hot ? inks.heat : inks.pencil;
    ctx.lineWidth = 0.6;
    ctx.stroke();
    ctx.restore();
  }
}

function label(sheet: Sheet, text: string, x: number, y: number, ink: string, align: CanvasTextAlign = "left", size = 13): void {
  const { ctx, inks } = sheet;
  ctx.font = `600 ${size}px ${MONO}`;
  ctx.textAlign = align;
  ctx.textBaseline = "middle";
  const w = ctx.measureText(text).width;
  ctx.fillStyle = inks.film;
  ctx.globalAlpha = 0.86;
  ctx.fillRect(align === "center" ? x - w / 2 - 3 : x - 3, y - size * 0.68, w + 6, size * 1.36);
  ctx.globalAlpha = 1;
  ctx.fillStyle = ink;
  ctx.fillText(text, x, y);
  ctx.textAlign = "left";
  ctx.textBaseline = "alphabetic";
}

/** Overhang limit and the lines of the angles, with their numbers. */
export function paintStance(sheet: Sheet, stance: Stance, layout: Layout): void {
  if (sheet.view !== "side") return;
  const { ctx, inks } = sheet;
  const { report, points } = stance;
  const contact = (x: number): [number, number] => [x, groundAt(layout.chassis, x)];
  const angle = (name: "approachAngle" | "departureAngle", wheelX: number) => {
    const point = points[name];
    const value = report[name];
    if (!point || value === null) return;
    const sign = name === "departureAngle" ? 1 : -1;
    const radius = name === "departureAngle" ? layout.chassis.rear.tyre.loadedRadius : layout.chassis.front.tyre.loadedRadius;
    const a = (value * Math.PI) / 180;
    // the line leaves the ground r tan(a / 2) beyond the contact point
    const [cx, cz] = contact(wheelX);
    const start = cx + sign * radius * Math.tan(a / 2);
    const reach = Math.abs(point[0] - start) * 1.25 + 120;
    const ends: [number, number][] = [[start, cz], [start + sign * reach * Math.cos(a), cz + reach * Math.sin(a)]];
    path(sheet, [ends.flat()], false);
    ctx.setLineDash([7, 4]);
    ctx.strokeStyle = inks.tight;
    ctx.lineWidth = 1.2;
    ctx.stroke();
    ctx.setLineDash([]);
    const [x, y] = at(sheet, ends[1]![0], ends[1]![1]);
    label(sheet, `${value.toFixed(1)}°`, x + (sign > 0 ? -30 : 4), y - 10, inks.tight);
  };
  angle("departureAngle", layout.chassis.wheelbase);
  angle("approachAngle", 0);
  const limit = layout.body.overhangLimit;
  if (limit) {
    const x = layout.chassis.wheelbase * (1 + limit.share);
    const over = report.findings.some((finding) => finding.code === "over-limit");
    const [px, low] = at(sheet, x, groundAt(layout.chassis, x));
    const [, high] = at(sheet, x, groundAt(layout.chassis, x) + 760);
    ctx.beginPath();
    ctx.moveTo(px, low);
    ctx.lineTo(px, high);
    ctx.strokeStyle = over ? inks.verdict.short : inks.pencil;
    ctx.lineWidth = 1.3;
    ctx.stroke();
    const excess = (report.rearOverhang ?? 0) - limit.share * layout.chassis.wheelbase;
    label(sheet, over ? `${excess.toFixed(0)} over limit` : "overhang limit", px + 6, high + 8, over ? inks.verdict.short : inks.pencil, "left", 12);
  }
}

export interface Balloon {
  readonly number: number;
  readonly gap: Gap;
  readonly framed: boolean;
}

/** Leaders between closest points and square numbered balloons; balloons step aside so that they never cover one another. */
export function paintGaps(sheet: Sheet, balloons: readonly Balloon[]): { number: number; x: number; y: number }[] {
  const { ctx, view, inks, width, height } = sheet;
  const { u, v } = PROJECTION[view];
  const placed: { number: number; x: number; y: number }[] = [];
  for (const { number, gap, framed } of balloons) {
    const ink = inks.verdict[gap.verdict];
    const [ax, ay] = at(sheet, gap.pointA[u], gap.pointA[v]);
    const [bx, by] = at(sheet, gap.pointB[u], gap.pointB[v]);
    if (Math.max(ax, bx) < -40 || Math.min(ax, bx) > width + 40 || Math.max(ay, by) < -40 || Math.min(ay, by) > height + 40) continue;
    ctx.strokeStyle = ink;
    ctx.fillStyle = ink;
    ctx.lineWidth = framed ? 2.6 : 1.8;
    ctx.beginPath();
    ctx.moveTo(ax, ay);
    ctx.lineTo(bx, by);
    ctx.stroke();
    for (const [x, y] of [[ax, ay], [bx, by]] as const) {
      ctx.beginPath();
      ctx.arc(x, y, framed ? 4 : 3, 0, 2 * Math.PI);
      ctx.fill();
    }
    const [mx, my] = [(ax + bx) / 2, (ay + by) / 2];
    const half = 9;
    let spot: [number, number] | null = null;
    for (let ring = 0; ring < 5 && !spot; ring++) {
      for (let k = 0; k < 8 && !spot; k++) {
        const a = (-Math.PI / 2) + (k * Math.PI) / 4;
        const distance = 30 + ring * 22;
        const x = mx + distance * Math.cos(a);
        const y = my + distance * Math.sin(a);
        const free = x > half + 2 && x < width - half - 2 && y > half + 58 && y < height - half - 2 && placed.every((other) => Math.abs(other.x - x) > 22 || Math.abs(other.y - y) > 22);
        if (free) spot = [x, y];
      }
    }
    const [x, y] = spot ?? [Math.min(width - 12, Math.max(12, mx)), Math.min(height - 12, Math.max(12, my - 30))];
    placed.push({ number, x, y });
    ctx.beginPath();
    ctx.moveTo(mx, my);
    ctx.lineTo(x, y);
    ctx.lineWidth = 0.9;
    ctx.stroke();
    ctx.fillStyle = framed ? ink : inks.lit;
    ctx.fillRect(x - half, y - half, 2 * half, 2 * half);
    ctx.lineWidth = 1.6;
    ctx.strokeRect(x - half, y - half, 2 * half, 2 * half);
    ctx.font = `600 12px ${MONO}`;
    ctx.fillStyle = framed ? inks.film : ink;
    ctx.textAlign = "center";
    ctx.textBaseline = "middle";
    ctx.fillText(String(number), x, y + 0.5);
    ctx.textAlign = "left";
    ctx.textBaseline = "alphabetic";
  }
  return placed;
}

/** Nodes of the selected run, to be taken hold of. */
export function paintNodes(sheet: Sheet, nodes: readonly { readonly key: string; readonly at: Vec3 }[], chosen: string | null): void {
  const { ctx, view, inks } = sheet;
  const { u, v } = PROJECTION[view];
  for (const node of nodes) {
    const [x, y] = at(sheet, node.at[u], node.at[v]);
    ctx.beginPath();
    ctx.rect(x - 5, y - 5, 10, 10);
    ctx.fillStyle = node.key === chosen ? inks.ink : inks.lit;
    ctx.fill();
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = 1.6;
    ctx.stroke();
  }
}

/** What is being drawn right now: points so far and the line to the pointer. */
export function paintDraft(sheet: Sheet, draft: Draft, pointer: readonly [number, number] | null): void {
  const { ctx, view, inks } = sheet;
  const { u, v } = PROJECTION[view];
  const points = draft.points.map((p): [number, number] => [p[u], p[v]]);
  const all = pointer && draft.view === view ? [...points, pointer] : points;
  path(sheet, [flatten(all)], false);
  ctx.strokeStyle = inks.ink;
  ctx.setLineDash([4, 3]);
  ctx.lineWidth = 1.6;
  ctx.stroke();
  ctx.setLineDash([]);
  for (const [pu, pv] of points) {
    const [x, y] = at(sheet, pu, pv);
    ctx.fillStyle = inks.ink;
    ctx.fillRect(x - 3, y - 3, 6, 6);
  }
}

export function paintStation(sheet: Sheet, station: number): void {
  const { ctx, inks, height } = sheet;
  if (sheet.view === "rear") return;
  const [x] = at(sheet, station, 0);
  ctx.beginPath();
  ctx.moveTo(x, 0);
  ctx.lineTo(x, height);
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 1;
  ctx.stroke();
}

