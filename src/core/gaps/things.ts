import type { Vec3 } from "../frames.ts";
import { buildBody, type Body } from "../geometry/body.ts";
import { partPieces, solidPieces } from "../geometry/solids.ts";
import { cutTube, tubePath, tubePieces, type TubePath, type TubePiece } from "../geometry/tubes.ts";
import { poseOf } from "../geometry/turn.ts";
import type { Layout, Part, Run, Shaft, Source } from "../layout/schema.ts";
import { cutByGrowth, grownPieces, growthOf, mostGrowth } from "./growth.ts";
import { chainOf, outboardChain, runChain, wholeTravel, type Chain } from "./movement.ts";
import { movedBody, placedBody } from "./placed-body.ts";
import type { RuleSide } from "./rules.ts";
import { grownByPlusMinus, scalarPlusMinus } from "./tolerance.ts";

/** Pieces of one thing that move alike: a part has one block, a run one for each pair of carriers that its legs run between. */
export interface Block {
  /** As drawn. */
  readonly body: Body;
  /** At its largest by a box plus-minus, or null. */
  readonly grown: Body | null;
  /** Grown by a box plus-minus and by heat, or null where nothing grows by heat. */
  readonly hot: {
    /** In stretches along which growth hardly rises: what worst is measured from while apart. */
    readonly stretches: () => Body;
    /** In the pieces as drawn, each at its greatest growth: for depths. */
    readonly whole: () => Body;
    /** The most that any of it grows, mm. */
    readonly most: number;
  } | null;
  /** What carries it: one chain, or the two of a leg between unlike ends. */
  readonly chains: readonly Chain[];
}

/** Everything that has gaps: a part, a run, a shaft, or room that must stay free. Never changed once made. */
export interface Thing extends RuleSide {
  readonly name: string;
  readonly is: "part" | "run" | "shaft" | "room";
  /** The part a room belongs to, or the thing's own key. */
  readonly owner: string;
  readonly generated: boolean;
  /** With a shaft: the tyre it drives. */
  readonly wheel: string | null;
  /** Its size is a guess. */
  readonly guessed: boolean;
  /** Taken off every gap, mm. */
  readonly plusMinus: number;
  readonly blocks: readonly Block[];
  /** Against these owners the blocks are others: stretches near clips and bound ends left out. */
  readonly against: ReadonlyMap<string, readonly Block[]>;
  /** With a run: its pieces and where on the path they lie. */
  readonly tubes?: readonly TubePiece[];
  /** What no pair of it covers. */
  readonly notCovered: readonly string[];
  /** Everywhere it may be: low x, y, z, high x, y, z, mm, by movement, tolerance and growth. */
  readonly box: readonly number[];
}

const isGuess = (source: Source): boolean => source.how === "estimate" || source.how === "reserved";
const NO_EXEMPTIONS: ReadonlyMap<string, readonly Block[]> = new Map();

function boxOf(blocks: readonly Block[], plusMinus: number): number[] {
  const out = [Infinity, Infinity, Infinity, -Infinity, -Infinity, -Infinity];
  for (const block of blocks) {
    const { boxes } = block.grown ?? block.body;
    const travel = wholeTravel(block.chains);
    const more = plusMinus + (block.hot?.most ?? 0);
    for (let k = 0; k < 3; k++) {
      out[k] = Math.min(out[k]!, boxes[k]! + travel[k]! - more);
      out[k + 3] = Math.max(out[k + 3]!, boxes[k + 3]! + travel[k + 3]! + more);
    }
  }
  return out;
}

/** @param before the same part as it was: where its solids and tolerance are unchanged its bodies are only moved */
export function partThing(part: Part, chain: Chain, generated: boolean, before?: { readonly part: Part; readonly thing: Thing }): Thing {
  const pose = poseOf(part);
  const old = before?.part.solids === part.solids && before.part.source === part.source ? before.thing.blocks[0] : undefined;
  const pieces = old ? [] : partPieces(part);
  const grown = old ? null : grownByPlusMinus(pieces, part.source);
  const block: Block = {
    body: old ? movedBody(old.body, pose) : placedBody(pieces, pose),
    grown: old ? old.grown && movedBody(old.grown, pose) : grown && placedBody(grown, pose),
    hot: null,
    chains: [chain],
  };
  const plusMinus = scalarPlusMinus(part.source);
  return {
    key: part.key, name: part.name, is: "part", kind: part.kind, group: part.group, owner: part.key, generated, wheel: null,
    hot: part.heat?.surface !== undefined, limited: part.heat?.limit !== undefined,
    guessed: isGuess(part.source), plusMinus, blocks: [block], against: NO_EXEMPTIONS, notCovered: [], box: boxOf([block], plusMinus),
  };
}

/** Room that must stay free: carried like its part, never hot, no tolerance of its own, a guess where its part is one. */
export function roomThing(part: Part, room: Part["roomFor"][number], chain: Chain, before?: { readonly room: Part["roomFor"][number]; readonly thing: Thing }): Thing {
  const pose = poseOf(part);
  const old = before?.room === room ? before.thing.blocks[0] : undefined;
  const block: Block = { body: old ? movedBody(old.body, pose) : placedBody(room.solids.flatMap(solidPieces), pose), grown: null, hot: null, chains: [chain] };
  return {
    key: `${part.key}.${room.key}`, name: room.name, is: "room", kind: "room", group: "", owner: part.key, generated: false, wheel: null, hot: false, limited: false,
    guessed: isGuess(part.source), plusMinus: 0, blocks: [block], against: NO_EXEMPTIONS, notCovered: [], box: boxOf([block], 0),
  };
}

/** A shaft as one straight tube between its joints. The inboard one moves with nothing, the outboard one with its wheel: the whole by the box hull of both. */
export function shaftThing(shaft: Shaft, wheelChain: Chain | null): Thing {
  const nodes = [{ key: "inboard", at: shaft.inboard }, { key: "outboard", at: shaft.outboard }];
  const pieces = tubePieces(tubePath({ diameter: shaft.diameter!, bendRadius: 0, nodes, legs: [] })).map((tube) => tube.piece);
  const chains: Chain[] = wheelChain ? [[], outboardChain(shaft, wheelChain)] : [[]];
  const block: Block = { body: buildBody(pieces), grown: null, hot: null, chains };
  return {
    key: shaft.key, name: shaft.name, is: "shaft", kind: "shaft", group: "", owner: shaft.key, generated: false, wheel: shaft.wheel ? `tyre-${shaft.wheel}` : null, hot: false, limited: false,
    guessed: false, plusMinus: 0, blocks: [block], against: NO_EXEMPTIONS, notCovered: [], box: boxOf([block], 0),
  };
}

/** Path length from a node that is not checked against the part it is bound to, in outer diameters; and against a clip's part, mm. */
export const BOUND_DIAMETERS = 2;
export const CLIP_REACH = 50;

/** @param before the same run as it was: stretches that a change leaves alone are the same pieces again, and bodies of nothing but those the same bodies */
export function runThing(run: Run, parts: ReadonlyMap<string, Part>, chassis: Layout["chassis"], before?: Thing): Thing {
  const path = tubePath(run);
  const tubes = keepAlike(tubePieces(path), before?.tubes ?? []);
  const growth = growthOf(run, path);
  const carrier = run.carriedBy === null ? undefined : parts.get(run.carriedBy);
  const own = runChain(run.key, run.movement, carrier ? chainOf(carrier, parts, chassis) : []);
  const chainAt = new Map<string, Chain>(run.nodes.map((node) => {
    const owner = node.on === undefined ? undefined : parts.get(ownerOf(node.on));
    return [node.key, owner ? chainOf(owner, parts, chassis) : own];
  }));
  const body = (kept: readonly TubePiece[]): Body => buildBody(kept.map((tube) => tube.piece));
  const made = new Map<string, { readonly group: readonly TubePiece[]; readonly block: Block }>();
  const blocksOf = (kept: readonly TubePiece[]): Block[] => {
    const groups = new Map<string, TubePiece[]>();
    for (const tube of kept) {
      const name = tube.nodes.map((node) => chainAt.get(node)![0]!.key).sort().join("|");
      const group = groups.get(name);
      if (group) group.push(tube);
      else groups.set(name, [tube]);
    }
    return [...groups].map(([name, group]): Block => {
      const known = made.get(name);
      if (known && known.group.length === group.length && group.every((tube, i) => tube === known.group[i])) return known.block;
      const [a, b] = group[0]!.nodes.map((node) => chainAt.get(node)!) as [Chain, Chain];
      const grown = grownByPlusMinus(group.map((tube) => tube.piece), run.source);
      const hot = (some: () => readonly TubePiece[]) => once(() => {
        const cut = some();
        const pieces = cut.map((tube) => tube.piece);
        return buildBody(grownPieces(cut, grownByPlusMinus(pieces, run.source) ?? pieces, growth, path));
      });
      const block: Block = {
        body: body(group), grown: grown && buildBody(grown), chains: a[0]!.key === b[0]!.key ? [a] : [a, b],
        hot: growth.any ? { stretches: hot(() => cutByGrowth(group, growth, path)), whole: hot(() => group), most: mostGrowth(group, growth, path) } : null,
      };
      made.set(name, known ? known : { group, block });
      return block;
    });
  };

  const exempt = new Map<string, { node: string; reach: number }[]>();
  const leaveOut = (owner: string, node: string, reach: number) => exempt.set(owner, [...(exempt.get(owner) ?? []), { node, reach }]);
  for (const node of run.nodes) {
    if (node.on !== undefined) leaveOut(ownerOf(node.on), node.key, BOUND_DIAMETERS * diameterAt(path, node.key));
    if (node.clip !== undefined) leaveOut(node.clip, node.key, CLIP_REACH);
  }
  const plusMinus = scalarPlusMinus(run.source);
  const blocks = blocksOf(tubes);
  return {
    key: run.key, name: run.name, is: "run", kind: run.kind, group: run.group, owner: run.key, generated: false, wheel: null,
    hot: run.heat?.surface !== undefined || run.nodes.some((node) => node.surface !== undefined), limited: run.heat?.limit !== undefined,
    guessed: isGuess(run.source), plusMinus, blocks, tubes,
    against: exempt.size === 0 ? NO_EXEMPTIONS : new Map([...exempt].map(([owner, from]) => [owner, blocksOf(cutTube(tubes, ...stretchesNear(path, from)))] as const)),
    notCovered: growth.unknown ? ["growth"] : [], box: boxOf(blocks, plusMinus),
  };
}

/** New pieces, those that are equal to the old one at their place exchanged for it. */
function keepAlike(tubes: readonly TubePiece[], before: readonly TubePiece[]): readonly TubePiece[] {
  // Counted from either end: a bend that takes a piece more shifts what comes after it.
  const shift = before.length - tubes.length;
  return tubes.map((tube, i) => [before[i], before[i + shift]].find((old) => old !== undefined && alikeTubes(old, tube)) ?? tube);
}

function alikeTubes(a: TubePiece, b: TubePiece): boolean {
  if (a.leg !== b.leg || a.from !== b.from || a.to !== b.to || a.nodes[0] !== b.nodes[0] || a.nodes[1] !== b.nodes[1]) return false;
  const [p, q] = [a.piece, b.piece];
  if (p.radius !== q.radius || p.form !== q.form || p.discs.length !== q.discs.length || p.points.length !== q.points.length) return false;
  return p.points.every((v, i) => sameVec(v, q.points[i]!)) && p.discs.every((d, i) => sameVec(d.centre, q.discs[i]!.centre) && sameVec(d.u, q.discs[i]!.u) && sameVec(d.v, q.discs[i]!.v));
}

function sameVec(a: Vec3, b: Vec3): boolean {
  return Object.is(a[0], b[0]) && Object.is(a[1], b[1]) && Object.is(a[2], b[2]);
}

/** Made when first asked for: a body is worth its building only where something is near. */
function once<T>(make: () => T): () => T {
  let made: T | undefined;
  return () => (made ??= make());
}

/** The part that a node's `on` names: "ecu" of "ecu.plug". */
export function ownerOf(on: string): string {
  const dot = on.indexOf(".");
  return dot < 0 ? on : on.slice(0, dot);
}

function diameterAt(path: TubePath, node: string): number {
  return Math.max(...path.nodes.get(node)!.legs.map((leg) => path.legs[leg]!.diameter));
}

/** Stretches of legs within a path length of some nodes, and the branch balls within it. */
function stretchesNear(path: TubePath, from: readonly { node: string; reach: number }[]): [{ leg: number; from: number; to: number }[], Set<string>] {
  const stretches: { leg: number; from: number; to: number }[] = [];
  const balls = new Set<string>();
  for (const start of from) {
    const left = new Map<string, number>([[start.node, start.reach]]);
    const open = [start.node];
    while (open.length > 0) {
      const key = open.pop()!;
      const rest = left.get(key)!;
      balls.add(key);
      for (const index of path.nodes.get(key)!.legs) {
        const leg = path.legs[index]!;
        const forward = leg.from === key;
        stretches.push(forward ? { leg: index, from: 0, to: Math.min(rest, leg.length) } : { leg: index, from: Math.max(0, leg.length - rest), to: leg.length });
        const next = forward ? leg.to : leg.from;
        if (rest > leg.length && !(left.get(next)! >= rest - leg.length)) {
          left.set(next, rest - leg.length);
          open.push(next);
        }
      }
    }
  }
  return [stretches, balls];
}
