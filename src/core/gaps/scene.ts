import { measureBodies, createMeasure, type Measure } from "../geometry/measure.ts";
import { candidatePairs, createSweep } from "../geometry/sweep.ts";
import { applyDiff } from "../layout/diff.ts";
import type { Diff } from "../layout/commands.ts";
import { generatedTyres } from "../layout/generated.ts";
import type { Layout, Part } from "../layout/schema.ts";
import type { Gap, GapReport, TrustedGap, Verdict } from "./gap.ts";
import { chainOf, hullOfMovements, relativeMovement, type RelativeMovement } from "./movement.ts";
import { requiredGap } from "./rules.ts";
import { partThing, roomThing, runThing, shaftThing, type Block, type Thing } from "./things.ts";
import { contactsOf, neverChecked, trustOf, type Contacts } from "./trust.ts";
import { verdictOf } from "./verdict.ts";

/** A layout ready to be measured: opaque to callers. Things and pairs that a change leaves alone are kept by identity. */
export interface Scene {
  layout: Layout;
  things: readonly Thing[];
  /** What each thing was made from: equal inputs, equal thing. */
  made: ReadonlyMap<string, { readonly from: readonly unknown[]; readonly thing: Thing }>;
  pairs: ReadonlyMap<string, MeasuredPair>;
  report: GapReport;
}

/** What two things measured to, before rules: kept while both stay as they are. */
interface MeasuredPair {
  readonly a: Thing;
  readonly b: Thing;
  /** Null beyond the reach it was measured to. */
  readonly measured: Measured | null;
  readonly reach: number;
}

interface Measured {
  readonly distance: number;
  readonly pointA: readonly [number, number, number];
  readonly pointB: readonly [number, number, number];
  readonly depthIsEstimate: boolean;
  readonly worst: number;
  readonly shares: { readonly movement: number; readonly plusMinus: number; readonly growth: number };
  readonly moving: boolean;
  readonly notCovered: readonly string[];
}

/** Everything measured. Cost: about 10 ms for 40 parts, most of it building pieces. */
export function buildScene(layout: Layout): Scene {
  return nextScene(null, layout);
}

/** Takes a scene to the layout a diff leads to; afterwards it equals a scene built anew, to the bit. */
export function updateScene(scene: Scene, layout: Layout, diff?: Diff): void {
  Object.assign(scene, nextScene(scene, diff && layout === scene.layout ? applyDiff(layout, diff) : layout));
}

/** A new scene for another layout that shares what is alike with this one, which stays as it is: for previews while dragging. */
export function previewScene(scene: Scene, layout: Layout): Scene {
  return nextScene(scene, layout);
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
  const made = makeThings(before, layout);
  const things = [...made.values()].map((entry) => entry.thing);
  const rules = layout.rules;
  const farthestRule = Math.max(rules.gap, 0, ...rules.pairs.map((rule) => rule.gap));
  const reach = Math.max(rules.near, farthestRule + rules.band);
  const contacts = contactsOf(layout.contacts);

  const pairs = new Map<string, MeasuredPair>();
  const gaps: Gap[] = [];
  const trusted: TrustedGap[] = [];
  for (const [i, j] of candidates(things, reach)) {
    const a = things[i]!;
    const b = things[j]!;
    if (neverChecked(a, b)) continue;
    const name = `${a.key}|${b.key}`;
    const known = before?.pairs.get(name);
    const pair = known && known.a === a && known.b === b && known.reach === reach ? known : { a, b, reach, measured: measurePair(a, b, reach) };
    pairs.set(name, pair);
    if (pair.measured) enter(pair.measured, a, b, layout, contacts, gaps, trusted);
  }
  gaps.sort((x, y) => x.margin - y.margin || (x.a < y.a ? -1 : x.a > y.a ? 1 : 0) || (x.b < y.b ? -1 : x.b > y.b ? 1 : 0));
  trusted.sort((x, y) => (x.a < y.a ? -1 : x.a > y.a ? 1 : x.b < y.b ? -1 : 1));
  const counts: Record<Verdict, number> = { touch: 0, rub: 0, short: 0, tight: 0, clear: 0 };
  for (const gap of gaps) counts[gap.verdict]++;
  return { layout, things, made, pairs, report: { gaps, trusted, counts } };
}

/** Things in document order: parts, generated tyres, runs, shafts, rooms. */
function makeThings(before: Scene | null, layout: Layout): Map<string, { from: readonly unknown[]; thing: Thing }> {
  const made = new Map<string, { from: readonly unknown[]; thing: Thing }>();
  const make = (key: string, from: readonly unknown[], build: () => Thing) => {
    const known = before?.made.get(key);
    const same = known && known.from.length === from.length && known.from.every((value, i) => Object.is(value, from[i]));
    made.set(key, same ? known : { from, thing: build() });
  };
  const sameTyres = before && before.layout.chassis === layout.chassis && before.layout.parts.length === layout.parts.length && before.layout.parts.every((part, i) => part.key === layout.parts[i]!.key);
  const tyres = sameTyres ? tyresOf.get(before.layout)! : generatedTyres(layout);
  tyresOf.set(layout, tyres);
  const parts = new Map<string, Part>([...layout.parts, ...tyres].map((part) => [part.key, part]));
  const carriers = (part: Part | undefined): unknown[] => {
    const list: unknown[] = [];
    for (let at = part; at && list.length < 2000; at = at.carriedBy === null ? undefined : parts.get(at.carriedBy)) list.push(at);
    return list;
  };
  const chassis = layout.chassis;
  const generated = new Set(tyres.map((tyre) => tyre.key));
  for (const part of parts.values()) {
    make(part.key, [...carriers(part), chassis], () => partThing(part, chainOf(part, parts, chassis), generated.has(part.key)));
  }
  for (const run of layout.runs) {
    const owners = run.nodes.flatMap((node) => (node.on === undefined ? [] : carriers(parts.get(node.on.split(".")[0]!))));
    make(run.key, [run, ...(run.carriedBy === null ? [] : carriers(parts.get(run.carriedBy))), ...owners, chassis], () => runThing(run, parts, chassis));
  }
  for (const shaft of layout.shafts) {
    if (shaft.diameter === undefined) continue;
    const tyre = shaft.wheel === undefined ? undefined : parts.get(`tyre-${shaft.wheel}`);
    make(shaft.key, [shaft, ...carriers(tyre), chassis], () => shaftThing(shaft, tyre ? chainOf(tyre, parts, chassis) : null));
  }
  for (const part of layout.parts) {
    for (const room of part.roomFor) {
      make(`${part.key}.${room.key}`, [room, ...carriers(part), chassis], () => roomThing(part, room, chainOf(part, parts, chassis)));
    }
  }
  return made;
}

/** Generated tyres of a layout, kept so that an unchanged chassis gives the same objects. */
const tyresOf = new WeakMap<Layout, Part[]>();

/** Pairs of things with blocks near enough, each once, lower index first, in order. */
function candidates(things: readonly Thing[], reach: number): [number, number][] {
  const owner: number[] = [];
  const bodies = things.flatMap((thing, i) => thing.blocks.map((block) => {
    owner.push(i);
    return block.body;
  }));
  if (bodies.length === 0) return [];
  const sweep = createSweep(bodies, owner.map((i) => things[i]!.reach));
  const n = things.length;
  const seen = new Set<number>();
  candidatePairs(sweep, reach, (p, q) => {
    const i = Math.min(owner[p]!, owner[q]!);
    const j = Math.max(owner[p]!, owner[q]!);
    if (i !== j) seen.add(i * n + j);
  });
  return [...seen].sort((x, y) => x - y).map((code) => [Math.floor(code / n), code % n]);
}

const drawnScratch = createMeasure();
const worstScratch = createMeasure();

function blocksAgainst(thing: Thing, other: Thing): readonly Block[] {
  return thing.against.get(other.owner) ?? thing.blocks;
}

/** Drawn and worst distance of two things over all their blocks; null where worst is beyond the reach. */
function measurePair(a: Thing, b: Thing, reach: number): Measured | null {
  const scalars = a.plusMinus + b.plusMinus;
  let worst = Infinity;
  let drawn = Infinity;
  let pointA: [number, number, number] = [0, 0, 0];
  let pointB: [number, number, number] = [0, 0, 0];
  let depthIsEstimate = false;
  let moving = false;
  let shares = { movement: 0, plusMinus: 0, growth: 0 };
  const notCovered = new Set<string>([...a.notCovered, ...b.notCovered]);
  const blocksA = blocksAgainst(a, b);
  const blocksB = blocksAgainst(b, a);
  for (const p of blocksA) {
    for (const q of blocksB) {
      const relative = movementOf(p, q);
      moving ||= !relative.still;
      for (const word of relative.notCovered) notCovered.add(word);
    }
  }
  for (const p of blocksA) {
    for (const q of blocksB) {
      const relative = movementOf(p, q);
      const growth = p.growth + q.growth;
      const travel = relative.still ? null : relative.travel;
      measureBodies(p.grown ?? p.body, q.grown ?? q.body, travel, reach + scalars + growth, worstScratch);
      const worstHere = worstScratch.distance - scalars - growth;
      if (worstHere <= reach && worstHere < worst) {
        worst = worstHere;
        shares = sharesOf(p, q, travel, worstScratch.distance, scalars, growth);
      }
      measureBodies(p.body, q.body, null, Math.min(drawn, Infinity), drawnScratch);
      if (drawnScratch.distance < drawn) {
        drawn = drawnScratch.distance;
        pointA = copyPoint(drawnScratch.pointA);
        pointB = copyPoint(drawnScratch.pointB);
        depthIsEstimate = drawnScratch.depthIsEstimate;
      }
    }
  }
  if (worst > reach || drawn === Infinity) return null;
  // itemised from the drawn least distance: what is left over of another block's being nearer when moved counts as movement
  shares = { ...shares, movement: drawn - worst - shares.plusMinus - shares.growth };
  if (Math.abs(shares.movement) < 1e-9) shares = { ...shares, movement: 0 };
  return { distance: drawn, pointA, pointB, depthIsEstimate, worst, shares, moving, notCovered: [...notCovered].sort() };
}

function copyPoint(p: Measure["pointA"]): [number, number, number] {
  return [p[0]!, p[1]!, p[2]!];
}

function movementOf(p: Block, q: Block): RelativeMovement {
  return hullOfMovements(p.chains.flatMap((a) => q.chains.map((b) => relativeMovement(a, b))));
}

const shareScratch = createMeasure();

function sharesOf(p: Block, q: Block, travel: RelativeMovement["travel"] | null, grownAndMoved: number, scalars: number, growth: number): { movement: number; plusMinus: number; growth: number } {
  let plusMinus = scalars;
  if (p.grown || q.grown) {
    measureBodies(p.body, q.body, travel, Infinity, shareScratch);
    plusMinus += shareScratch.distance - grownAndMoved;
  }
  return { movement: 0, plusMinus, growth };
}

/** Turns a measured pair into a ledger row or a trusted one. */
function enter(m: Measured, a: Thing, b: Thing, layout: Layout, contacts: Contacts, gaps: Gap[], trusted: TrustedGap[]): void {
  const trust = trustOf(a, b, contacts);
  if (trust !== null) {
    trusted.push({ a: a.key, b: b.key, distance: m.distance, why: trust, pointA: m.pointA, pointB: m.pointB });
    return;
  }
  const room = a.is === "room" || b.is === "room";
  const need = room ? { gap: 0, why: `${(a.is === "room" ? a : b).name}: must stay free`, overruled: [] } : requiredGap(layout.rules, a, b, m.moving);
  if (m.worst > Math.max(layout.rules.near, need.gap + layout.rules.band)) return;
  const margin = m.worst - need.gap;
  const guess = (thing: Thing) => thing.source.how === "estimate" || thing.source.how === "reserved";
  gaps.push({
    a: a.key, b: b.key, distance: m.distance, worst: m.worst, required: need.gap, margin,
    verdict: verdictOf(m.distance, m.worst, margin, layout.rules.band, m.notCovered.length === 0),
    pointA: m.pointA, pointB: m.pointB, why: need.why, shares: m.shares, provisional: guess(a) || guess(b),
    ...(m.depthIsEstimate ? { depthIsEstimate: true } : {}),
    ...(need.overruled.length > 0 ? { overruled: need.overruled } : {}),
    ...(m.notCovered.length > 0 ? { notCovered: m.notCovered } : {}),
  });
}
