import type { Vec2, View } from "../frames.ts";
import { groundAt, PROJECTION } from "../frames.ts";
import type { Layout } from "../layout/schema.ts";
import { joinSegments, partEdge, type Facet } from "./covered-edges.ts";
import type { Look } from "./drawn-items.ts";
import { hatchOf } from "./hatch.ts";
import { HAIRLINE, INK, PENCIL, type Hand } from "./paper.ts";
import type { LineType } from "./plan.ts";
import type { Paper, Pen } from "./pen.ts";
import { stroke } from "./pen.ts";

/** Where a view stands on paper: the place of its origin, and its scale, one in this many. */
export interface ViewFrame {
  readonly view: View;
  readonly origin: Paper;
  readonly scale: number;
}
/** A view's point (mm at full size, v up) on paper (mm, y down): divided by the scale and turned over. The one place where this happens. */
export const onPaper = (frame: ViewFrame, p: Vec2): Paper => [frame.origin[0] + p[0] / frame.scale, frame.origin[1] - p[1] / frame.scale];

/** What one sees through, or past: it hides nothing on a sheet. */
const SEEN_THROUGH: ReadonlySet<string> = new Set(["glass", "tyre", "panel", "lid", "shroud", "shield"]);
export const RUN_FILL = "#E2E5DE";
export const FRAME_FILL = "#F0F2EC";

const hides = (look: Look) => !SEEN_THROUGH.has(look.item.kind);

/** Items in a view: visible lines thick, hidden ones thin and dashed (or left out), estimated ones dashed, runs as tubes with centre lines. */
export function drawLooks(pen: Pen, frame: ViewFrame, looks: readonly Look[], hand: Hand, showHidden: boolean): void {
  const slack = 0.02 * frame.scale;
  for (const look of looks) {
    const fill = look.item.is === "run" ? RUN_FILL : look.item.kind === "frame" ? FRAME_FILL : null;
    if (fill) for (const facet of look.facets) if (facet.points.length > 2) pen.polyline("fills", facet.points.map((p) => onPaper(frame, p)), true, stroke(0.05, fill), fill, look.item.key);
  }
  const covers = looks.filter(hides).flatMap((look) => look.facets.map((facet) => ({ facet, look })));
  const shown: { look: Look; clear: Vec2[][]; covered: Vec2[][] }[] = looks.map((look) => {
    const around = covers.filter(({ facet, look: other }) => other !== look && facet.left < look.box.right && facet.right > look.box.left && facet.low < look.box.high && facet.high > look.box.low);
    const overOf = new Map<number, Facet[]>();
    for (const { near } of look.facets) if (!overOf.has(near)) overOf.set(near, around.filter(({ facet }) => facet.near > near + 1e-6).map(({ facet }) => facet));
    const clear: [Vec2, Vec2][] = [];
    const covered: [Vec2, Vec2][] = [];
    for (const edge of look.edges) {
      const parts = partEdge(edge, overOf.get(edge.facet.near)!, slack);
      clear.push(...parts.clear);
      covered.push(...parts.covered);
    }
    return { look, clear: joinSegments(clear, slack / 4), covered: joinSegments(covered, slack / 4) };
  });
  const ink = (layer: string, lines: readonly Vec2[][], width: number, colour: string, type: LineType, of: string) => {
    for (const line of lines) {
      const points = line.map((p) => onPaper(frame, p));
      const closed = points.length > 3 && Math.hypot(points[0]![0] - points.at(-1)![0], points[0]![1] - points.at(-1)![1]) < 0.01;
      pen.polyline(layer, closed ? points.slice(0, -1) : points, closed, stroke(width, colour, type), null, of);
    }
  };
  if (showHidden) for (const { look, covered } of shown) ink("hidden", covered, hand.pens.hair, PENCIL, "dashed", look.item.key);
  for (const { look, clear } of shown) {
    const { item } = look;
    const slim = item.is === "run" || item.is === "shaft" || item.kind === "frame" || item.kind === "glass";
    ink("outlines", clear, slim ? hand.pens.thin : hand.pens.thick, INK, item.estimated ? "dashed" : "continuous", item.key);
  }
  for (const look of looks) {
    for (const line of look.item.centreLines) {
      const { u, v } = PROJECTION[frame.view];
      const points = line.map((p) => onPaper(frame, [p[u], p[v]]));
      const length = points.slice(1).reduce((sum, p, i) => sum + Math.hypot(p[0] - points[i]![0], p[1] - points[i]![1]), 0);
      // in a hose thinner than its own lines the centre line would only blacken it
      const wide = Math.max(...look.item.pieces.map((piece) => Math.max(0, ...piece.discs.map((d) => 2 * Math.hypot(d.u[0], d.u[1], d.u[2]))))) / frame.scale;
      if (length > 2 && (wide > 1.2 || look.item.is === "shaft")) pen.polyline("centre lines", points, false, stroke(hand.pens.hair, PENCIL, "chain"), null, look.item.key);
    }
  }
}

/** Cut faces: thick outlines and hatching, its direction changing from one thing to the next. */
export function drawCuts(pen: Pen, frame: ViewFrame, cuts: readonly Look[], hand: Hand): void {
  cuts.forEach((cut, i) => {
    const { item } = cut;
    if (item.kind === "tyre") return;
    const pitch = 1.6 * frame.scale;
    for (const [a, b] of hatchOf(cut.facets, pitch, i % 2 === 0 ? 45 : -45)) pen.line("hatching", onPaper(frame, a), onPaper(frame, b), stroke(hand.pens.hair, PENCIL), item.key);
  });
  for (const cut of cuts) {
    for (const line of joinSegments(cut.edges.map((edge) => [edge.from, edge.to] as const), 0.005 * frame.scale)) {
      pen.polyline("outlines", line.map((p) => onPaper(frame, p)), false, stroke(hand.pens.thick, INK, cut.item.estimated ? "dashed" : "continuous"), null, cut.item.key);
    }
  }
}

/** Body lines, luggage spaces and glass openings: what is not a solid. */
export function drawShell(pen: Pen, frame: ViewFrame, layout: Layout, hand: Hand, station: number | null): void {
  const { view } = frame;
  const { u, v } = PROJECTION[view];
  const loop = (layer: string, points: readonly Vec2[] | undefined, closed: boolean, width: number, ink: string, type: LineType, of: string) => {
    if (points && points.length > 1) pen.polyline(layer, points.map((p) => onPaper(frame, p)), closed, stroke(width, ink, type), null, of);
  };
  for (const space of layout.spaces) loop("spaces", view === "plan" ? space.top : view === "side" ? space.side : space.rear, true, hand.pens.thin, PENCIL, "dotted", space.key);
  for (const glass of layout.glass) loop("glass", glass.opening.map((p): Vec2 => [p[u], p[v]]), true, hand.pens.hair, PENCIL, "continuous", glass.key);
  const { body } = layout;
  loop("body lines", view === "plan" ? body.top : view === "side" ? body.side : body.rear, true, hand.pens.thin, INK, "continuous", "body");
  if (view === "rear") {
    for (const section of body.sections) {
      const here = station !== null && Math.abs(section.x - station) < 0.5;
      if (here || station === null) loop("body lines", section.line, false, here ? hand.pens.thick : hand.pens.hair, here ? INK : HAIRLINE, "continuous", "body");
    }
  }
}

/** Tyres at full bump and droop (side and rear views): thin double-dash-dot, the extreme positions of moving parts. */
export function drawTravel(pen: Pen, frame: ViewFrame, looks: readonly Look[], layout: Layout, hand: Hand): void {
  if (frame.view === "plan") return;
  const line = stroke(hand.pens.hair, PENCIL, "double-chain");
  for (const look of looks) {
    if (look.item.is !== "tyre") continue;
    const axle = look.item.key.includes("front") ? layout.chassis.front : layout.chassis.rear;
    for (const shift of [axle.bump, -axle.droop]) {
      if (shift === 0) continue;
      const [a, b] = [onPaper(frame, [look.box.left, look.box.low + shift]), onPaper(frame, [look.box.right, look.box.high + shift])];
      if (frame.view === "side") pen.arc("travel", [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2], (b[0] - a[0]) / 2, line, null, look.item.key);
      else pen.box("travel", { left: a[0], right: b[0], top: b[1], bottom: a[1] }, line);
    }
  }
}

/** The ground under the car, thick, with short strokes below it at the ends. */
export function drawGround(pen: Pen, frame: ViewFrame, layout: Layout, low: number, high: number, hand: Hand): void {
  if (frame.view === "plan") return;
  const z = (x: number) => groundAt(layout.chassis, x);
  // seen from behind the ground lies as it does under the rear axle
  const height = (a: number) => (frame.view === "side" ? z(a) : z(layout.chassis.wheelbase));
  pen.line("ground", onPaper(frame, [low, height(low)]), onPaper(frame, [high, height(high)]), stroke(hand.pens.thick * 1.25), "ground");
}
