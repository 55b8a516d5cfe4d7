import { PROJECTION, type Vec3 } from "#core/frames.ts";
import { directionText } from "#core/layout/command-labels.ts";
import { formatLength } from "#core/units/format-length.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { at, label, trace, type Sheet } from "./sheet.ts";
import type { Draft, Measured, Witness } from "./view-state.ts";

/** What is in the hand: handles, nodes, what is being drawn, what is being measured. All of it over everything else. */

export function paintStation(sheet: Sheet, station: number, peek: number | null): void {
  const { ctx, inks, height } = sheet;
  if (sheet.view === "rear") return;
  ctx.strokeStyle = inks.ink;
  const [x] = at(sheet, station, 0);
  ctx.beginPath();
  ctx.moveTo(x, sheet.view === "plan" ? 62 : 0);
  ctx.lineTo(x, height);
  ctx.lineWidth = peek === null ? 1.3 : 0.6;
  ctx.stroke();
  if (peek === null) return;
  const [p] = at(sheet, peek, 0);
  ctx.beginPath();
  ctx.moveTo(p, sheet.view === "plan" ? 62 : 0);
  ctx.lineTo(p, height);
  ctx.lineWidth = 1;
  ctx.stroke();
}

/** Nodes of the chosen run, to be taken hold of; one that is bound to a part is round. */
export function paintNodes(sheet: Sheet, nodes: readonly { readonly key: string; readonly at: Vec3; readonly on?: string | undefined }[], chosen: string | null): void {
  const { ctx, view, inks } = sheet;
  const { u, v } = PROJECTION[view];
  for (const node of nodes) {
    const [x, y] = at(sheet, node.at[u], node.at[v]);
    ctx.beginPath();
    if (node.on) ctx.arc(x, y, 5, 0, 2 * Math.PI);
    else ctx.rect(x - 4.5, y - 4.5, 9, 9);
    ctx.fillStyle = node.key === chosen ? inks.ink : inks.lit;
    ctx.fill();
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = 1.6;
    ctx.stroke();
    if (node.key !== chosen) continue;
    ctx.beginPath();
    ctx.rect(x - 9, y - 9, 18, 18);
    ctx.lineWidth = 1;
    ctx.stroke();
  }
}

/** The handle that turns: an arrow bent round a dot, on a stalk from the thing's corner. */
export function paintHandle(sheet: Sheet, x: number, y: number, corner: readonly [number, number]): void {
  const { ctx, inks } = sheet;
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 1;
  ctx.beginPath();
  ctx.moveTo(corner[0] + 6, corner[1] - 6);
  ctx.lineTo(x - 6.5, y + 6.5);
  ctx.stroke();
  ctx.beginPath();
  ctx.arc(x, y, 9.5, 0, 2 * Math.PI);
  ctx.fillStyle = inks.lit;
  ctx.fill();
  ctx.lineWidth = 1.5;
  ctx.beginPath();
  ctx.arc(x, y, 7.5, -0.55 * Math.PI, 0.95 * Math.PI);
  ctx.stroke();
  const [ax, ay] = [x + 7.5 * Math.cos(0.95 * Math.PI), y + 7.5 * Math.sin(0.95 * Math.PI)];
  ctx.beginPath();
  ctx.moveTo(ax - 4, ay + 1.5);
  ctx.lineTo(ax, ay - 4.5);
  ctx.lineTo(ax + 4, ay + 1.5);
  ctx.stroke();
  ctx.beginPath();
  ctx.arc(x, y, 1.8, 0, 2 * Math.PI);
  ctx.fillStyle = inks.ink;
  ctx.fill();
}

/** What is being drawn right now: points so far and the line to the pointer. */
export function paintDraft(sheet: Sheet, draft: Draft, pointer: readonly [number, number] | null): void {
  const { ctx, view, inks } = sheet;
  const { u, v } = PROJECTION[view];
  if (draft.top && view === "plan") {
    trace(sheet, draft.top, true);
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = 1.6;
    ctx.stroke();
  }
  if (draft.tool !== "run" && draft.view !== view) return;
  const points = draft.points.map((p): [number, number] => [p[u], p[v]]);
  const all = pointer && draft.view === view ? [...points, pointer] : points;
  trace(sheet, all, false);
  ctx.strokeStyle = inks.ink;
  ctx.setLineDash([4, 3]);
  ctx.lineWidth = 1.6;
  ctx.stroke();
  ctx.setLineDash([]);
  ctx.fillStyle = inks.ink;
  for (const [pu, pv] of points) {
    const [x, y] = at(sheet, pu, pv);
    ctx.fillRect(x - 3, y - 3, 6, 6);
  }
}

/** Thin lines through what the thing in the hand has come to lie on, each with its number at the edge of the paper. */
export function paintWitnesses(sheet: Sheet, witnesses: readonly Witness[], units: LengthUnit): void {
  const { ctx, view, inks, width, height } = sheet;
  const { u, v } = PROJECTION[view];
  for (const witness of witnesses) {
    if (witness.axis !== u && witness.axis !== v) continue;
    const upright = witness.axis === u;
    const [x, y] = at(sheet, witness.at, witness.at);
    ctx.beginPath();
    ctx.moveTo(upright ? x : 0, upright ? 62 : y);
    ctx.lineTo(upright ? x : width, upright ? height : y);
    ctx.strokeStyle = inks.ink;
    ctx.lineWidth = 0.7;
    ctx.stroke();
    const text = `${formatLength(witness.at, units)} ${witness.name}`;
    if (upright) label(sheet, text, x + 8, height - 14, { ink: inks.ink, size: 12 });
    else label(sheet, text, width - 10, y - 11, { ink: inks.ink, size: 12, align: "right" });
  }
}

/** The tape held between two points: its length beside it, and what it is made of in words. */
export function paintMeasured(sheet: Sheet, measured: Measured, pointer: readonly [number, number] | null, units: LengthUnit): void {
  const { ctx, view, inks } = sheet;
  const { u, v } = PROJECTION[view];
  if (measured.view !== view && !measured.to) return;
  const [ax, ay] = at(sheet, measured.from[u], measured.from[v]);
  const end = measured.to ? ([measured.to[u], measured.to[v]] as const) : pointer;
  if (!end) return;
  const [bx, by] = at(sheet, end[0], end[1]);
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 1.2;
  ctx.beginPath();
  ctx.moveTo(ax, ay);
  ctx.lineTo(bx, by);
  const length = Math.hypot(bx - ax, by - ay) || 1;
  const [nx, ny] = [(-(by - ay) / length) * 7, ((bx - ax) / length) * 7];
  for (const [x, y] of [[ax, ay], [bx, by]] as const) {
    ctx.moveTo(x - nx, y - ny);
    ctx.lineTo(x + nx, y + ny);
  }
  ctx.stroke();
  const across: [number, number, number] = [0, 0, 0];
  across[u] = end[0] - measured.from[u];
  across[v] = end[1] - measured.from[v];
  const mm = measured.to ? Math.hypot(...[0, 1, 2].map((k) => measured.to![k]! - measured.from[k]!)) : Math.hypot(across[u], across[v]);
  const side = ny > 0 || (ny === 0 && nx > 0) ? -1 : 1;
  label(sheet, formatLength(mm, units), (ax + bx) / 2 + side * nx * 2.2, (ay + by) / 2 + side * ny * 2.2, { ink: inks.ink, align: side * nx > 4 ? "left" : side * nx < -4 ? "right" : "center" });
}

/** "412.0: rear 380.0, up 160.0" */
export function measuredText(measured: Measured, units: LengthUnit): string | null {
  if (!measured.to) return measured.names[0] ? `from ${measured.names[0]}` : "from here";
  const by = [0, 1, 2].map((k) => measured.to![k]! - measured.from[k]!) as unknown as Vec3;
  const names = measured.names[0] && measured.names[1] ? `${measured.names[0]} to ${measured.names[1]} ` : "";
  return `${names}${formatLength(Math.hypot(...by), units)}: ${directionText(by)}`;
}
