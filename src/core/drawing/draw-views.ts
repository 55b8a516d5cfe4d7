import { AXES, axisIndex, groundAt, PROJECTION, type Axis, type Vec3, type View } from "../frames.ts";
import type { Gap } from "../gaps/gap.ts";
import type { Layout } from "../layout/schema.ts";
import { EDGE, nameRow, type Arrangement, type Placed } from "./arrange.ts";
import { balloonRadius, drawTags, planTags, type Tag } from "./balloons.ts";
import { cutOf, lookOf, type DrawnItem, type Look } from "./drawn-items.ts";
import { textWidth } from "./lettering.ts";
import { chooseOrdinates, drawOrdinates, labelPitch, type Ordinate } from "./ordinates.ts";
import { INDIGO, INK, VERDICT_INK, type Hand } from "./paper.ts";
import type { Pen } from "./pen.ts";
import { stroke } from "./pen.ts";
import { LABEL_AIR, stackLabels, type SheetDatum, type Zero } from "./sheet-datums.ts";
import { placeText, type SheetUnits } from "./sheet-lengths.ts";
import { busyness, linesOf, spotsOf } from "./tag-spots.ts";
import { drawCuts, drawGround, drawLooks, drawShell, drawTravel, onPaper, type ViewFrame } from "./view-lines.ts";

export interface ViewsInput {
  readonly layout: Layout;
  readonly items: readonly DrawnItem[];
  readonly gaps: readonly Gap[];
  readonly datums: readonly SheetDatum[];
  readonly zero: Zero;
  readonly units: SheetUnits;
  readonly station: number | null;
  readonly reach: Readonly<Record<Axis, readonly [number, number]>>;
}

/** How many of the worst gaps are marked in the views. */
export const MARKED_GAPS = 12;

/** Inks the views of an arrangement with their datums, dimensions and numbers; returns remarks. */
export function drawViews(pen: Pen, arrangement: Arrangement, input: ViewsInput, hand: Hand): string[] {
  const remarks: string[] = [];
  const { layout, items, station } = input;
  const tolerance = 0.006 * arrangement.scale;
  const scenes = arrangement.placed.map((placed) => {
    const { u, v } = PROJECTION[placed.view];
    const letters = ["x", "y", "z"] as const;
    const frame: ViewFrame = { view: placed.view, scale: arrangement.scale, origin: [placed.box.left - input.reach[letters[u]][0] / arrangement.scale, placed.box.bottom + input.reach[letters[v]][0] / arrangement.scale] };
    const cut = placed.view === "rear" && station !== null;
    const looks = cut ? items.map((item) => cutOf(item, station, tolerance)).filter((look): look is Look => look !== null) : items.map((item) => lookOf(item, placed.view, tolerance));
    return { placed, frame, looks, cut };
  });
  for (const { placed, frame, looks, cut } of scenes) {
    drawShell(pen, frame, layout, hand, placed.view === "rear" ? station : null);
    drawGround(pen, frame, layout, input.reach[placed.view === "side" ? "x" : "y"][0], input.reach[placed.view === "side" ? "x" : "y"][1], hand);
    if (cut) drawCuts(pen, frame, looks, hand);
    else {
      drawTravel(pen, frame, looks, layout, hand);
      drawLooks(pen, frame, looks, hand, placed.view !== "rear");
    }
  }
  for (const { placed, cut } of scenes) {
    const title = viewTitle(placed.view, cut ? station : null, input.zero, input.units);
    pen.text("titles", placed.title, title, hand.letters.head, { weight: "bold" });
  }
  const main = scenes.filter((scene) => scene.placed.view !== "rear");
  remarks.push(...drawDatums(pen, arrangement, input, scenes, hand));
  remarks.push(...drawDimensions(pen, arrangement, input, scenes, hand));
  remarks.push(...drawNumbers(pen, input, main, scenes.find((scene) => scene.cut), hand));
  return remarks;
}

interface Scene {
  readonly placed: Placed;
  readonly frame: ViewFrame;
  readonly looks: readonly Look[];
  readonly cut: boolean;
}

const inReach = (input: ViewsInput, axis: Axis, at: number) => at >= input.reach[axis][0] - 1e-6 && at <= input.reach[axis][1] + 1e-6;

/** Vertical lines of the main views, paper x: datums along x, and the plane of the section. */
function verticals(input: ViewsInput, frame: ViewFrame): { x: number; datum: SheetDatum | null }[] {
  const lines: { x: number; datum: SheetDatum | null }[] = input.datums.filter((d) => d.axis === "x" && inReach(input, "x", d.at)).map((datum) => ({ x: onPaper(frame, [datum.at, 0])[0], datum }));
  if (input.station !== null && inReach(input, "x", input.station)) lines.push({ x: onPaper(frame, [input.station, 0])[0], datum: null });
  return lines;
}

/** Length of the arrow that says which way one looks at a section. */
export const ARROW = 4.5;
const CUT: SheetDatum = { key: "section", code: "A", name: "A", axis: "x", at: 0 };

function drawDatums(pen: Pen, arrangement: Arrangement, input: ViewsInput, scenes: readonly Scene[], hand: Hand): string[] {
  const remarks: string[] = [];
  const chain = stroke(hand.pens.hair, INDIGO, "chain");
  const size = hand.letters.dimension;
  const main = scenes.filter((scene) => scene.placed.view !== "rear");
  if (main.length > 0) {
    const frame = main[0]!.frame;
    const { labels, left } = stackLabels(verticals(input, frame).map(({ x, datum }) => (datum ? { x, datum } : { x, datum: CUT, leftward: ARROW })), size, arrangement.names.right, rowsFor(arrangement, scenes, hand));
    const titles = main.slice(1).map((scene) => ({ y: scene.placed.title[1], right: scene.placed.title[0] + textWidth(viewTitle(scene.placed.view, null, input.zero, input.units), hand.letters.head) }));
    const foot = Math.max(...main.map((scene) => scene.placed.box.bottom)) + 2.2;
    for (const label of labels) {
      const top = arrangement.names.bottom - label.row * nameRow(hand) - size - 0.7;
      // the line stops for a view's title
      const stops = titles.filter((t) => label.x < t.right + 1).map((t): [number, number] => [t.y - hand.letters.head, t.y + 0.4 * hand.letters.head]);
      let y = top;
      const cutting = label.datum === CUT;
      for (const [from, to] of [...stops, [foot, foot] as [number, number]]) {
        if (from > y) pen.line(cutting ? "section line" : "datums", [label.x, y], [label.x, from], cutting ? stroke(hand.pens.thin, INK, "chain") : chain, label.datum.key);
        y = to;
      }
      if (cutting) {
        // thick ends of the plane, and which way one looks
        for (const [from, to] of [[top, top + 4], [foot - 4, foot]] as const) pen.line("section line", [label.x, from], [label.x, to], stroke(hand.pens.thick * 1.6));
        for (const at of [top + 0.2, foot - 0.2]) {
          pen.line("section line", [label.x, at], [label.x - ARROW, at], stroke(hand.pens.thin));
          pen.polyline("section line", [[label.x - ARROW, at], [label.x - ARROW + 2, at - 0.55], [label.x - ARROW + 2, at + 0.55]], true, null, INK);
        }
      }
      pen.text("datums", [label.x + LABEL_AIR, arrangement.names.bottom - label.row * nameRow(hand) - 0.25 * size - 0.7], label.text, size, { ink: cutting ? INK : INDIGO, weight: cutting ? "bold" : "regular", of: label.datum.key });
    }
    if (left.length > 0) remarks.push(`No room for the lines of ${left.length} datums: ${left.map((d) => d.code).join(", ")}; they are in the table of datums.`);
    const off = input.datums.filter((d) => d.axis === "x" && !inReach(input, "x", d.at));
    if (off.length > 0) remarks.push(`Off the drawing: ${off.map((d) => `${d.code} ${d.name}`).join(", ")}.`);
  }
  for (const { placed, frame } of scenes) {
    const { u, v } = PROJECTION[placed.view];
    for (const datum of input.datums) {
      const c = axisIndex(datum.axis);
      if (!inReach(input, datum.axis, datum.at)) continue;
      const at: [number, number, number] = [0, 0, 0];
      at[c] = datum.at;
      const [x, y] = onPaper(frame, [at[u]!, at[v]!]);
      if (c === v) pen.line("datums", [placed.box.left - 2, y], [placed.box.right + 2, y], chain, datum.key);
      else if (c === u && placed.view === "rear") pen.line("datums", [x, placed.box.top - EDGE], [x, placed.box.bottom + 2.2], chain, datum.key);
    }
  }
  return remarks;
}

/** What stands above a view. */
export function viewTitle(view: View, station: number | null, zero: Zero, units: SheetUnits): string {
  if (view === "plan") return "PLAN";
  if (view === "side") return "SIDE, FROM THE LEFT";
  return station === null ? "REAR, FROM BEHIND" : `SECTION A-A AT ${placeText(station - zero.at[0], units)}, FROM BEHIND`;
}
const rowsFor = (arrangement: Arrangement, scenes: readonly Scene[], hand: Hand) => {
  const first = scenes.find((scene) => scene.placed.view !== "rear")!;
  return Math.max(0, Math.floor((arrangement.names.bottom - first.placed.title[1] - 0.3 * hand.letters.head) / nameRow(hand)));
};

interface Face {
  /** Along its axis, car frame, mm. */
  readonly at: number;
  readonly text: string;
  /** Datums and ends first, then faces of large things (area seen along the axis's view, mm2). */
  readonly weight: number;
  readonly of: string;
  readonly datum: boolean;
}

/** What may be dimensioned along an axis. */
function facesAlong(input: ViewsInput, axis: Axis): Face[] {
  const c = axisIndex(axis);
  const out: Face[] = [];
  const add = (at: number, weight: number, of: string, mark = "", datum = false) => {
    if (!inReach(input, axis, at)) return;
    const text = placeText(at - input.zero.at[c], input.units);
    out.push({ at, text: mark === "" ? text : `${text} ${mark}`, weight, of, datum });
  };
  // names of datums along x stand above the views; the others are told by their codes
  for (const datum of input.datums) if (datum.axis === axis) add(datum.at, 1e12, datum.key, axis === "x" ? "" : datum.code, true);
  if (axis === "x" && input.station !== null) add(input.station, 1e12, "section", "A");
  if (axis === "z") add(groundAt(input.layout.chassis, input.layout.chassis.wheelbase), 1e11, "ground");
  const { side = [], top = [] } = input.layout.body;
  const body = axis === "x" ? [...side, ...top].map((p) => p[0]) : axis === "y" ? top.map((p) => p[1]) : side.map((p) => p[1]);
  if (body.length > 0) for (const at of [body.reduce((a, b) => Math.min(a, b)), body.reduce((a, b) => Math.max(a, b))]) add(at, 1e11, "body");
  for (const item of input.items) {
    if (item.is !== "part" || FOLLOWERS.has(item.kind)) continue;
    const size = [0, 1, 2].map((k) => item.extent.high[k]! - item.extent.low[k]!);
    const area = axis === "y" ? size[0]! * size[1]! : size[0]! * size[2]!;
    add(item.extent.low[c], area, item.key);
    add(item.extent.high[c], area * 0.999, item.key);
  }
  return out;
}

/** Every value that a dimension along an axis may say. */
export const ordinateTexts = (input: ViewsInput, axis: Axis): string[] => facesAlong(input, axis).map((face) => face.text);

/** Kinds whose faces nobody sets out with a tape: they follow other things. */
const FOLLOWERS: ReadonlySet<string> = new Set(["frame", "tyre", "wheel", "brake", "suspension", "glass", "panel", "other"]);

function drawDimensions(pen: Pen, arrangement: Arrangement, input: ViewsInput, scenes: readonly Scene[], hand: Hand): string[] {
  const pitch = labelPitch(hand.letters.dimension);
  const remarks: string[] = [];
  const scene = (view: View) => scenes.find((s) => s.placed.view === view);
  const run = (axis: Axis, view: View, at: number | undefined, runs: "across" | "up", low: number, high: number, base: number, share: number) => {
    const s = scene(view);
    if (!s || at === undefined) return;
    const { u } = PROJECTION[view];
    const c = axisIndex(axis);
    const along = (value: number) => onPaper(s.frame, c === u ? [value, 0] : [0, value])[runs === "across" ? 0 : 1];
    const wanted = facesAlong(input, axis).map((face): Ordinate => ({ ...face, at: along(face.at), start: base }));
    const origin = inReach(input, axis, input.zero.at[c]) ? along(input.zero.at[c]) : null;
    const most = Math.max(3, Math.floor(((high - low) / pitch) * share));
    const chosen = chooseOrdinates(wanted, pitch, low, high, most, 2.2 * pitch);
    drawOrdinates(pen, { runs, at, jog: arrangement.jog, origin }, chosen, hand);
  };
  const lowest = scene("side") ?? scene("plan");
  if (lowest) run("x", lowest.placed.view, arrangement.lines.x, "across", lowest.placed.box.left - 1, arrangement.names.right, lowest.placed.box.bottom + 1, 0.8);
  const plan = scene("plan");
  if (plan) run("y", "plan", arrangement.lines.yPlan, "up", plan.placed.box.top - 2, plan.placed.box.bottom + 2, plan.placed.box.right + 1.2, 0.8);
  const tall = scene("side") ?? scene("rear");
  if (tall) run("z", tall.placed.view, arrangement.lines.z, "up", tall.placed.box.top - 2, tall.placed.box.bottom + 2, tall.placed.box.right + 1.2, 0.8);
  const rear = scene("rear");
  if (rear) run("y", "rear", arrangement.lines.yRear, "across", rear.placed.box.left, rear.placed.box.right, rear.placed.box.bottom + 1, 0.5);
  return remarks;
}

/** Numbers of parts, runs and shafts, and of the worst gaps, each once, in the view that shows it best; in a section those of what is cut. */
function drawNumbers(pen: Pen, input: ViewsInput, main: readonly Scene[], section: Scene | undefined, hand: Hand): string[] {
  const remarks: string[] = [];
  const radius = balloonRadius(hand);
  const shown = main.map((scene) => ({ scene, tags: [] as Tag[] }));
  const unseen: string[] = [];
  if (shown.length > 0) {
    for (const item of input.items) {
      if (item.label === "") continue;
      const found = shown.map(({ scene, tags }) => {
        const look = scene.looks.find((one) => one.item === item)!;
        return { tags, spots: spotsOf(look, scene.looks, scene.frame), weight: (look.box.right - look.box.left) * (look.box.high - look.box.low) };
      });
      // the view in which it is seen, and seen at its largest
      const best = found.reduce((a, b) => (rank(b.spots, radius) > rank(a.spots, radius) + 1e-9 ? b : a));
      best.tags.push({ text: item.label, of: item.key, shape: "disc", ink: INK, spots: best.spots.map(({ at, depth }) => ({ at, depth })), weight: best.weight });
    }
    input.gaps.slice(0, MARKED_GAPS).forEach((gap, index) => {
      if (gap.verdict === "clear" || gap.verdict === "tight") return;
      const middle = gap.pointA.map((a, i) => (a + gap.pointB[i]!) / 2) as unknown as Vec3;
      // a report of another layout must not draw over the frame
      if (AXES.some((axis, i) => !inReach(input, axis, middle[i]!))) return;
      const spread = shown.map(({ scene, tags }) => {
        const { u, v } = PROJECTION[scene.frame.view];
        return { scene, tags, length: Math.hypot(gap.pointA[u] - gap.pointB[u], gap.pointA[v] - gap.pointB[v]), at: onPaper(scene.frame, [middle[u], middle[v]]) };
      });
      const best = spread.reduce((a, b) => (b.length > a.length + 1e-9 ? b : a));
      best.tags.push({ text: String(index + 1), of: `${gap.a}|${gap.b}`, shape: "square", ink: VERDICT_INK[gap.verdict], spots: [{ at: best.at, depth: 0 }], weight: 1e9 - index });
    });
  }
  for (const { scene, tags } of shown) {
    const lines = verticals(input, scene.frame).map(({ x }) => x);
    const plan = planTags(tags, scene.placed.rings, scene.placed.box.left, scene.placed.box.right, lines, radius, busyness(linesOf(scene.looks, scene.frame), radius));
    drawTags(pen, plan, radius, hand);
    unseen.push(...plan.missed.map((tag) => tag.text));
  }
  if (section) {
    const tags = section.looks.filter((look) => look.item.label !== "").map((look): Tag => ({ text: look.item.label, of: look.item.key, shape: "disc", ink: INK, spots: spotsOf(look, [], section.frame).map(({ at, depth }) => ({ at, depth })), weight: (look.box.right - look.box.left) * (look.box.high - look.box.low) }));
    const plan = planTags(tags, section.placed.rings, section.placed.box.left, section.placed.box.right, [onPaper(section.frame, [0, 0])[0]], radius, busyness(linesOf(section.looks, section.frame), radius));
    drawTags(pen, plan, radius, hand);
    if (plan.missed.length > 0) remarks.push(`Numbers without room in the section: ${plan.missed.map((tag) => tag.text).join(", ")}.`);
  }
  if (unseen.length > 0) remarks.push(`Numbers without room in these views: ${unseen.join(", ")}; see the tables.`);
  return remarks;
}

/** Seen and roomy before seen, seen before hidden. */
function rank(spots: readonly { depth: number; seen: boolean }[], radius: number): number {
  const best = spots[0];
  return best === undefined ? -1 : (best.seen ? 100 : 0) + Math.min(best.depth, 1.5 * radius);
}
