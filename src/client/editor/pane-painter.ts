import { measureStance } from "#core/body/stance.ts";
import type { View } from "#core/frames.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { balloonId, balloonsFor, paintBalloons, wantingOf, type Balloon } from "./paint-gaps.ts";
import { paintDraft, paintHandle, paintMeasured, paintNodes, paintStation, paintWitnesses } from "./paint-hand.ts";
import { litreLabels, paintLitres, paintSpaces, paintStance, spaceOutline, stanceLines, type StanceLine } from "./paint-lines.ts";
import { DATUM_STRIP } from "./camera.ts";
import { datumLines, paintDatumNames, paintPaper } from "./paint-paper.ts";
import { cornerTicks, paintCuts, paintShapes } from "./paint-things.ts";
import { cutsAt, shapesOf, type Cut, type Shape } from "./shapes.ts";
import { at, type Sheet } from "./sheet.ts";
import type { Shown } from "./shown.ts";
import { chooseSpots, emptyInk, inkLine, type InkMap, type Spot } from "./spots.ts";
import type { Inks } from "./theme-inks.ts";
import { cutStation, useViewState } from "./view-state.ts";

/** What a view is drawn from beside the view state. */
export interface PaneInput {
  readonly view: View;
  readonly width: number;
  readonly height: number;
  readonly inks: Inks;
  readonly units: LengthUnit;
  readonly litres: ReadonlyMap<string, number>;
  readonly mayMove: boolean;
  /** The document without what is in the hand. */
  readonly still: Layout;
  readonly shown: Shown;
  /** Where the pointer is, mm in the view, while something is drawn or measured. */
  readonly pointer: readonly [number, number] | null;
}

export const HANDLE = 30;
const NONE: ReadonlySet<string> = new Set();

/**
 * Draws one view on three sheets of film that lie over each other: what lies still, what is chosen or moves, and what is in the hand. Each remembers what it needs from one
 * drawing to the next; nothing here is React's.
 */
export function createPainter(input: () => PaneInput) {
  const spots = new Map<string, Spot>();
  let ink: InkMap | null = null;
  let cuts: { layout: Layout; station: number; cuts: Cut[] } | null = null;
  let stance: { layout: Layout; lines: StanceLine[] } | null = null;
  let held: { still: Layout; document: Layout; keys: ReadonlySet<string> } | null = null;

  const sheet = (ctx: CanvasRenderingContext2D): Sheet => {
    const { view, width, height, inks } = input();
    return { ctx, view, width, height, inks, camera: useViewState.getState().camera };
  };
  /** Keys whose items the change in the hand has replaced. */
  const inHand = (): ReadonlySet<string> => {
    const { still, shown } = input();
    if (!shown.previewing || shown.document === still) return NONE;
    if (held?.still === still && held.document === shown.document) return held.keys;
    const keys = new Set<string>();
    for (const list of ["parts", "runs", "shafts", "spaces", "glass", "eyes"] as const) {
      const before = new Map<string, unknown>(still[list].map((item) => [item.key, item]));
      for (const item of shown.document[list]) if (before.get(item.key) !== item) keys.add(item.key);
    }
    held = { still, document: shown.document, keys };
    return keys;
  };
  const shownCuts = (): Cut[] => {
    const { shown } = input();
    const station = cutStation(useViewState.getState());
    if (cuts?.layout !== shown.document || cuts.station !== station) cuts = { layout: shown.document, station, cuts: cutsAt(shown.document, station) };
    return cuts.cuts;
  };
  const measureLines = (layout: Layout): void => {
    stance = { layout, lines: stanceLines(measureStance(layout), layout) };
  };
  const shownStance = (): StanceLine[] => {
    const { shown, view } = input();
    if (view !== "side") return [];
    // while something is in the hand the stance follows in the pauses: it looks at everything there is
    if (stance && shown.previewing) return stance.lines;
    if (stance?.layout !== shown.document) measureLines(shown.document);
    return stance!.lines;
  };
  /** The section shows what it cuts, and the tyres of the nearer axle behind it. */
  const behindTheCut = (all: readonly Shape[], layout: Layout, station: number): Shape[] =>
    all.filter((shape) => shape.list === "tyres" && layout.chassis.wheelbase / 2 < station === shape.key.includes("rear"));

  const shownBalloons = (): Balloon[] => {
    const { shown, view } = input();
    const { pair, selection } = useViewState.getState();
    const held = shown.previewing ? inHand() : NONE;
    const all = balloonsFor(shown.report.gaps, pair, new Set(selection), held);
    if (view !== "rear") return all;
    const station = cutStation(useViewState.getState());
    return all.filter(({ gap, framed, inHand: mine }) => framed || mine || Math.abs(0.5 * (gap.pointA[0] + gap.pointB[0]) - station) < 160);
  };

  const inkOf = (page: Sheet): InkMap => {
    const { view, still, litres } = input();
    const map = emptyInk(page.width, page.height);
    const polyline = (points: readonly (readonly [number, number])[], close: boolean) => {
      for (let i = close ? 0 : 1; i < points.length; i++) {
        const a = at(page, ...points[(i + points.length - 1) % points.length]!);
        const b = at(page, ...points[i]!);
        inkLine(map, a[0], a[1], b[0], b[1]);
      }
    };
    const body = view === "plan" ? still.body.top : view === "side" ? still.body.side : still.body.rear;
    if (body) polyline(body, true);
    for (const shape of shapesOf(still, view)) {
      if (view === "rear") break;
      const [du, dv] = shape.shift;
      const { scale } = page.camera;
      const [left, top] = at(page, du, dv);
      for (const line of shape.lines) for (let i = 2; i < line.length; i += 2) inkLine(map, left + line[i - 2]! * scale, top - line[i - 1]! * scale, left + line[i]! * scale, top - line[i + 1]! * scale);
      for (const loop of shape.loops) {
        for (let i = 0, j = loop.length - 2; i < loop.length; j = i, i += 2) inkLine(map, left + loop[j]! * scale, top - loop[j + 1]! * scale, left + loop[i]! * scale, top - loop[i + 1]! * scale);
      }
    }
    for (const space of still.spaces) {
      const outline = spaceOutline(space, view);
      if (outline) polyline(outline, true);
    }
    for (const line of shownStance()) polyline([line.from, line.to], false);
    for (const line of datumLines(still)) {
      const [x, y] = at(page, line.at, line.at);
      if (line.axis === 0 ? view !== "rear" : line.axis === 1 && view === "rear") inkLine(map, x, 0, x, page.height);
      else if (line.axis === 2 || (line.axis === 1 && view === "plan")) inkLine(map, 0, y, page.width, y);
    }
    for (const one of litreLabels(page, still, litres)) for (const dy of [-6, 0, 6]) inkLine(map, one.x - 30, one.y + dy, one.x + 30, one.y + dy);
    return map;
  };

  /** Where the handle that turns the chosen part is, pixels; null where there is none. */
  const handle = (): { x: number; y: number; corner: [number, number]; key: string; middle: [number, number] } | null => {
    const { shown, view, mayMove, width } = input();
    const { selection, camera, tool } = useViewState.getState();
    if (!mayMove || selection.length !== 1 || tool !== "pick") return null;
    const part = shown.document.parts.find((one) => one.key === selection[0]);
    if (!part || part.locked) return null;
    const shape = shapesOf(shown.document, view).find((one) => one.key === part.key);
    if (!shape || !Number.isFinite(shape.box[0])) return null;
    const page = { view, camera } as Sheet;
    const corner = at(page, shape.box[2], shape.box[3]);
    return { x: Math.min(width - 14, corner[0] + HANDLE), y: Math.max(DATUM_STRIP + 12, corner[1] - HANDLE), corner, key: part.key, middle: [0.5 * (shape.box[0] + shape.box[2]), 0.5 * (shape.box[1] + shape.box[3])] };
  };

  const settleSpots = (page: Sheet, balloons: readonly Balloon[], again: boolean): void => {
    const wanting = balloons.flatMap((balloon) => wantingOf(page, balloon) ?? []);
    const asked = again ? wanting : wanting.filter((one) => !spots.has(one.id));
    if (asked.length === 0) return;
    ink ??= inkOf(page);
    const turner = handle();
    const standing = turner ? [{ x: turner.x, y: turner.y, halfWidth: 12, halfHeight: 12 }] : [];
    if (!again) standing.push(...wanting.flatMap((one) => {
      const spot = spots.get(one.id);
      return spot ? [{ x: one.x + spot.x, y: one.y + spot.y, halfWidth: one.halfWidth, halfHeight: one.halfHeight }] : [];
    }));
    const chosen = chooseSpots(asked, ink, { width: page.width, height: page.height, head: page.view === "plan" ? DATUM_STRIP + 2 : 36 }, spots, standing);
    if (again) spots.clear();
    for (const [id, spot] of chosen) spots.set(id, spot);
  };

  return {
    still(ctx: CanvasRenderingContext2D): void {
      const { still, view } = input();
      const page = sheet(ctx);
      const state = useViewState.getState();
      const station = cutStation(state);
      paintPaper(page, still, station);
      const held = inHand();
      const all = shapesOf(still, view).filter((shape) => !state.hidden.has(shape.key) && !held.has(shape.key));
      if (view === "rear") {
        paintShapes(page, behindTheCut(all, still, station), NONE, null);
        paintCuts(page, shownCuts().filter((cut) => !state.hidden.has(cut.key)), NONE, null);
      } else paintShapes(page, all, NONE, null);
    },
    moving(ctx: CanvasRenderingContext2D): void {
      const { shown, view, litres, units } = input();
      const page = sheet(ctx);
      const state = useViewState.getState();
      const chosen = new Set(state.selection);
      const held = inHand();
      const lifts = (key: string) => !state.hidden.has(key) && (chosen.has(key) || held.has(key) || key === state.hover);
      const lifted = shapesOf(shown.document, view).filter((shape) => lifts(shape.key));
      if (view === "rear") {
        const mine = shownCuts().filter((cut) => lifts(cut.key));
        paintCuts(page, mine, chosen, state.hover);
        // what is chosen but not cut here shows as a thin outline, so that it is seen in all views
        for (const shape of lifted) if (!mine.some((cut) => cut.key === shape.key)) outlineOnly(page, shape);
        for (const shape of lifted) if (chosen.has(shape.key)) cornerTicks(page, shape.box);
      } else paintShapes(page, lifted, chosen, state.hover);
      paintSpaces(page, shown.document, chosen, state.hover);
      paintStance(page, shownStance());
      paintDatumNames(page, shown.document, units);
      paintLitres(page, litreLabels(page, shown.document, litres));
    },
    hand(ctx: CanvasRenderingContext2D): void {
      const { shown, units, pointer } = input();
      const page = sheet(ctx);
      const state = useViewState.getState();
      paintStation(page, state.station, state.peek);
      const run = state.selection.length === 1 ? shown.document.runs.find((one) => one.key === state.selection[0]) : undefined;
      if (run) paintNodes(page, run.nodes, state.node);
      const balloons = shownBalloons();
      settleSpots(page, balloons, shown.previewing);
      paintBalloons(page, balloons, spots);
      paintWitnesses(page, state.witnesses, units);
      if (state.draft) paintDraft(page, state.draft, pointer);
      if (state.measured) paintMeasured(page, state.measured, pointer, units);
      const turner = handle();
      if (turner) paintHandle(page, turner.x, turner.y, turner.corner);
    },
    /** Measures the stance of what is in the hand. True where its lines have to be drawn again. */
    followStance(): boolean {
      const { shown, view } = input();
      if (view !== "side" || !shown.previewing || stance?.layout === shown.document) return false;
      measureLines(shown.document);
      return true;
    },
    /** What the change in the hand replaces: the still film leaves it out. */
    held: (): string => [...inHand()].join(),
    /** Looks again for the best spots of all balloons: when the paper has come to rest. True where any moved. */
    settle(ctx: CanvasRenderingContext2D): boolean {
      const page = sheet(ctx);
      const before = [...spots].map(([id, spot]) => `${id}${spot.x},${spot.y}`).join();
      ink = null;
      settleSpots(page, shownBalloons(), true);
      return before !== [...spots].map(([id, spot]) => `${id}${spot.x},${spot.y}`).join();
    },
    handle,
    balloonAt(px: number, py: number, ctx: CanvasRenderingContext2D): Balloon | null {
      const page = sheet(ctx);
      return shownBalloons().find((balloon) => {
        const wanting = wantingOf(page, balloon);
        const spot = spots.get(balloonId(balloon));
        return wanting && spot && Math.abs(wanting.x + spot.x - px) < wanting.halfWidth + 3 && Math.abs(wanting.y + spot.y - py) < wanting.halfHeight + 3;
      }) ?? null;
    },
    shownCuts,
  };
}

export type Painter = ReturnType<typeof createPainter>;

function outlineOnly(sheet: Sheet, shape: Shape): void {
  const { ctx, inks, camera } = sheet;
  const [x, y] = at(sheet, shape.shift[0], shape.shift[1]);
  ctx.save();
  ctx.beginPath();
  for (const loop of shape.loops) {
    for (let i = 0; i < loop.length; i += 2) {
      const [px, py] = [x + loop[i]! * camera.scale, y - loop[i + 1]! * camera.scale];
      if (i === 0) ctx.moveTo(px, py);
      else ctx.lineTo(px, py);
    }
    ctx.closePath();
  }
  for (const line of shape.lines) {
    for (let i = 0; i < line.length; i += 2) {
      const [px, py] = [x + line[i]! * camera.scale, y - line[i + 1]! * camera.scale];
      if (i === 0) ctx.moveTo(px, py);
      else ctx.lineTo(px, py);
    }
  }
  ctx.setLineDash([1, 3]);
  ctx.strokeStyle = inks.ink;
  ctx.lineWidth = 1.2;
  ctx.stroke();
  ctx.restore();
}
