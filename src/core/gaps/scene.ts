import { applyCommand } from "../layout/apply-command.ts";
import type { Diff, ListName } from "../layout/commands.ts";
import type { Layout } from "../layout/schema.ts";
import { castOf, type Cast } from "./cast.ts";
import type { Gap, GapReport, TrustedGap, Verdict } from "./gap.ts";
import { measurePair, measureTrusted, pairMovement } from "./measure-pair.ts";
import { compileRules, ranksOf, strongestRule, type CompiledRules } from "./rules.ts";
import type { Thing } from "./things.ts";
import { neverChecked, reasonOf, trustOf } from "./trust.ts";
import { verdictOf } from "./verdict.ts";

/**
 * A layout ready to be measured: an opaque handle. Things and pairs that a change leaves alone are kept as they are; what is kept never changes,
 * so that scenes may share it.
 */
export interface Scene {
  layout: Layout;
  cast: Cast;
  rules: CompiledRules;
  /** Ranks of every selector for each thing, by its number. */
  ranks: readonly Int8Array[];
  /** World boxes of all things, six numbers each. */
  boxes: Float64Array;
  /** All pairs that have a row, in no order that matters. */
  pairs: readonly Pair[];
  report: GapReport;
}

/** A row of the ledger or of the trusted pairs, and the numbers of the two things it is about. */
interface Pair {
  readonly a: number;
  readonly b: number;
  readonly gap: Gap | null;
  readonly trusted: TrustedGap | null;
}

/** Everything measured. */
export function buildScene(layout: Layout): Scene {
  return nextScene(null, layout);
}

/**
 * Takes a scene to another layout; afterwards it equals a scene built anew, to the bit. Costs what changed: items that are the same objects
 * as before are not looked at again.
 */
export function updateScene(scene: Scene, layout: Layout, _diff?: Diff): void {
  Object.assign(scene, nextScene(scene, layout));
}

/** A new scene for another layout that shares what is alike with this one, which stays as it is: for previews while dragging. */
export function previewScene(scene: Scene, layout: Layout): Scene {
  return nextScene(scene, layout);
}

/**
 * What a scene would be with some items moved by a vector, mm, as the command "move" moves them; null where that is refused. The scene itself stays
 * as it is, so there is nothing to put back.
 * @example gapsOf(previewMove(scene, [{ list: "parts", key: "muffler-left" }], [0, -20, 0])!, "muffler-left")
 */
export function previewMove(scene: Scene, items: readonly { readonly list: ListName; readonly key: string }[], by: readonly [number, number, number]): Scene | null {
  const moved = applyCommand(scene.layout, { kind: "move", items: [...items], by: [...by] });
  return moved.ok ? nextScene(scene, moved.layout) : null;
}

/** All gaps of a layout, least margin first. */
export function checkGaps(layout: Layout): GapReport {
  return buildScene(layout).report;
}

export function reportOf(scene: Scene): GapReport {
  return scene.report;
}

/** The ledger rows of one thing (a part's include its rooms'). */
export function gapsOf(scene: Scene, key: string): Gap[] {
  const mine = (name: string) => name === key || name.startsWith(`${key}.`);
  return scene.report.gaps.filter((gap) => mine(gap.a) || mine(gap.b));
}

function nextScene(before: Scene | null, layout: Layout): Scene {
  const cast = castOf(layout, before?.cast ?? null);
  const { things } = cast;
  const sameRules = before !== null && before.layout.rules === layout.rules && before.layout.contacts === layout.contacts;
  const rules = before !== null && before.layout.rules === layout.rules ? before.rules : compileRules(layout.rules);
  const oldNumber = numbersBefore(before?.cast.things ?? [], things);
  const ranks = things.map((thing, i) => {
    const old = oldNumber[i]!;
    return old >= 0 && before!.rules === rules && before!.cast.things[old] === thing ? before!.ranks[old]! : ranksOf(rules, thing);
  });
  const boxes = new Float64Array(6 * things.length);
  things.forEach((thing, i) => boxes.set(thing.box, 6 * i));

  const next = { layout, cast, rules, ranks, boxes };
  const pairs: Pair[] = [];
  const fresh: Pair[] = [];
  if (sameRules) {
    const touched = Uint8Array.from(things, (thing, i) => (oldNumber[i]! >= 0 && before.cast.things[oldNumber[i]!] === thing ? 0 : 1));
    keepPairs(before, oldNumber, touched, pairs);
    measureTouched(next, touched, fresh);
  } else {
    measureAll(next, fresh);
  }
  pairs.push(...fresh);
  return { ...next, pairs, report: reportFrom(pairs, fresh, sameRules ? before.report : null) };
}

/** For each thing its number in the scene before, or -1 where its key is new. */
function numbersBefore(before: readonly Thing[], things: readonly Thing[]): Int32Array {
  const out = new Int32Array(things.length).fill(-1);
  let same = before.length === things.length;
  for (let i = 0; same && i < things.length; i++) same = before[i]!.key === things[i]!.key;
  if (same) return out.map((_, i) => i);
  const numbers = new Map(before.map((thing, i) => [thing.key, i]));
  for (let i = 0; i < things.length; i++) out[i] = numbers.get(things[i]!.key) ?? -1;
  return out;
}

/** Takes over the pairs of which both things are untouched; one whose things changed places is touched. */
function keepPairs(before: Scene, oldNumber: Int32Array, touched: Uint8Array, pairs: Pair[]): void {
  const newNumber = new Int32Array(before.cast.things.length).fill(-1);
  let last = -1;
  oldNumber.forEach((old, i) => {
    if (old < 0) return;
    // Which of a pair is a is a matter of the order of things: one that others overtook is measured again.
    if (old < last) touched[i] = 1;
    else last = old;
    newNumber[old] = i;
  });
  for (const pair of before.pairs) {
    const a = newNumber[pair.a]!;
    const b = newNumber[pair.b]!;
    if (a < 0 || b < 0 || touched[a] === 1 || touched[b] === 1) continue;
    pairs.push(a === pair.a && b === pair.b ? pair : { ...pair, a, b });
  }
}

type Stage = Pick<Scene, "layout" | "cast" | "rules" | "ranks" | "boxes">;

/** mm: boxes may be off by rounding. */
const BOX_SLACK = 1e-6;

function boxesWithin(boxes: Float64Array, i: number, j: number, reach: number): boolean {
  const p = 6 * i;
  const q = 6 * j;
  let square = 0;
  for (let k = 0; k < 3; k++) {
    const apart = Math.max(boxes[q + k]! - boxes[p + 3 + k]!, boxes[p + k]! - boxes[q + 3 + k]!);
    if (apart > 0) square += apart * apart;
  }
  return square <= (reach + BOX_SLACK) * (reach + BOX_SLACK);
}

/** Farthest that any pair of this layout is listed from, mm. */
function farthestReach({ rules }: Stage): number {
  return Math.max(rules.rules.near, rules.largest + rules.rules.band);
}

function measureAll(stage: Stage, out: Pair[]): void {
  const { boxes } = stage;
  const n = stage.cast.things.length;
  const reach = farthestReach(stage);
  const contacts = contactPairs(stage, null, out);
  const order = Int32Array.from({ length: n }, (_, i) => i).sort((i, j) => boxes[6 * i]! - boxes[6 * j]! || i - j);
  for (let r = 0; r < n; r++) {
    const i = order[r]!;
    const end = boxes[6 * i + 3]! + reach + BOX_SLACK;
    for (let s = r + 1; s < n && boxes[6 * order[s]!]! <= end; s++) {
      const j = order[s]!;
      if (boxesWithin(boxes, i, j, reach)) measureInto(stage, Math.min(i, j), Math.max(i, j), contacts, out);
    }
  }
}

/** Every pair that a touched thing is in. */
function measureTouched(stage: Stage, touched: Uint8Array, out: Pair[]): void {
  if (!touched.includes(1)) return;
  const { boxes } = stage;
  const reach = farthestReach(stage);
  const contacts = contactPairs(stage, touched, out);
  for (let i = 0; i < touched.length; i++) {
    if (touched[i] === 0) continue;
    for (let j = 0; j < touched.length; j++) {
      if (j === i || (touched[j] === 1 && j < i)) continue;
      if (boxesWithin(boxes, i, j, reach)) measureInto(stage, Math.min(i, j), Math.max(i, j), contacts, out);
    }
  }
}

/** Named contacts, however far apart: their pairs by number, those of touched things (or all) measured. */
function contactPairs(stage: Stage, touched: Uint8Array | null, out: Pair[]): ReadonlySet<number> {
  const { things } = stage.cast;
  const named = new Set<number>();
  if (stage.layout.contacts.length === 0) return named;
  const numbers = new Map(things.map((thing, i) => [thing.key, i]));
  for (const contact of stage.layout.contacts) {
    const one = numbers.get(contact.between[0]);
    const other = numbers.get(contact.between[1]);
    if (one === undefined || other === undefined || one === other) continue;
    const a = Math.min(one, other);
    const b = Math.max(one, other);
    const code = a * things.length + b;
    if (named.has(code) || neverChecked(things[a]!, things[b]!)) continue;
    named.add(code);
    if (touched === null || touched[a] === 1 || touched[b] === 1) trustInto(things, a, b, reasonOf(contact), Infinity, out);
  }
  return named;
}

function trustInto(things: readonly Thing[], a: number, b: number, why: string, reach: number, out: Pair[]): void {
  const measured = measureTrusted(things[a]!, things[b]!, reach);
  if (measured === null) return;
  const { distance, pointA, pointB } = measured;
  out.push({ a, b, gap: null, trusted: { a: things[a]!.key, b: things[b]!.key, distance, why, pointA, pointB } });
}

/** Measures one pair and keeps its row, if it has one. */
function measureInto(stage: Stage, i: number, j: number, contacts: ReadonlySet<number>, out: Pair[]): void {
  const { things } = stage.cast;
  const a = things[i]!;
  const b = things[j]!;
  if (contacts.has(i * things.length + j) || neverChecked(a, b)) return;
  const { near, band } = stage.rules.rules;
  const trust = trustOf(a, b);
  if (trust !== null) return trustInto(things, i, j, trust, near, out);
  const movement = pairMovement(a, b);
  const room = a.is === "room" ? a : b.is === "room" ? b : null;
  const need = room ? { gap: 0, why: `${room.name}: must stay free`, overruled: [] } : strongestRule(stage.rules, stage.ranks[i]!, stage.ranks[j]!, movement.moving);
  const reach = Math.max(near, need.gap + band);
  if (!boxesWithin(stage.boxes, i, j, reach)) return;
  const measured = measurePair(a, b, movement, reach);
  if (measured === null) return;
  const margin = measured.worst - need.gap;
  const { notCovered } = movement;
  const gap: Gap = {
    a: a.key, b: b.key, distance: measured.distance, worst: measured.worst, required: need.gap, margin,
    verdict: verdictOf(measured.distance, measured.worst, margin, band, notCovered.length === 0),
    pointA: measured.pointA, pointB: measured.pointB, why: need.why, shares: measured.shares, provisional: a.guessed || b.guessed,
    ...(measured.depthIsEstimate ? { depthIsEstimate: true } : {}),
    ...(need.overruled.length > 0 ? { overruled: need.overruled } : {}),
    ...(notCovered.length > 0 ? { notCovered } : {}),
  };
  out.push({ a: i, b: j, gap, trusted: null });
}

/** Rows in order: least margin first, ties by key. What is already in order is kept so and only added to. */
function reportFrom(pairs: readonly Pair[], fresh: readonly Pair[], before: GapReport | null): GapReport {
  const gaps: Gap[] = [];
  const trusted: TrustedGap[] = [];
  if (before === null) collect(pairs, gaps, trusted);
  else {
    const kept = new Set<Gap | TrustedGap>();
    for (const pair of pairs) kept.add((pair.gap ?? pair.trusted)!);
    for (const gap of before.gaps) if (kept.has(gap)) gaps.push(gap);
    for (const one of before.trusted) if (kept.has(one)) trusted.push(one);
    collect(fresh, gaps, trusted);
  }
  gaps.sort((x, y) => x.margin - y.margin || byKeys(x, y));
  trusted.sort(byKeys);
  const counts: Record<Verdict, number> = { touch: 0, rub: 0, short: 0, tight: 0, clear: 0 };
  for (const gap of gaps) counts[gap.verdict]++;
  return { gaps, trusted, counts };
}

function collect(pairs: readonly Pair[], gaps: Gap[], trusted: TrustedGap[]): void {
  for (const pair of pairs) {
    if (pair.gap !== null) gaps.push(pair.gap);
    if (pair.trusted !== null) trusted.push(pair.trusted);
  }
}

function byKeys(x: { readonly a: string; readonly b: string }, y: { readonly a: string; readonly b: string }): number {
  return (x.a < y.a ? -1 : x.a > y.a ? 1 : 0) || (x.b < y.b ? -1 : x.b > y.b ? 1 : 0);
}
