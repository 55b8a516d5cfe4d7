import { buildBody, setPose, type Body } from "../geometry/body.ts";
import { IDENTITY, type Piece, type Pose } from "../geometry/piece.ts";
import { partPieces, solidPieces } from "../geometry/solids.ts";
import { cutTube, tubePath, tubePieces, type TubePath, type TubePiece } from "../geometry/tubes.ts";
import { poseOf } from "../geometry/turn.ts";
import type { Layout, Part, Run, Shaft, Source } from "../layout/schema.ts";
import { chainOf, greatestTravel, runChain, type Chain } from "./movement.ts";
import type { RuleSide } from "./rules.ts";
import { greatestPlusMinus, grownByPlusMinus, growthOf, scalarPlusMinus } from "./tolerance.ts";

/** Pieces of one thing that move alike: a part has one block, a run one for each pair of carriers its legs run between. */
export interface Block {
  readonly body: Body;
  /** The body at its largest by a box plus-minus, or null. */
  readonly grown: Body | null;
  /** What carries it: one chain, or the two of a leg between unlike ends. */
  readonly chains: readonly Chain[];
  /** Thermal growth taken off, mm. */
  readonly growth: number;
}

/** Everything that has gaps: a part, a run, a shaft, or room that must stay free. */
export interface Thing extends RuleSide {
  readonly name: string;
  readonly is: "part" | "run" | "shaft" | "room";
  /** The part a room belongs to, or the thing's own key. */
  readonly owner: string;
  readonly generated: boolean;
  /** With a shaft: the tyre it drives. */
  readonly wheel: string | null;
  readonly source: Source;
  readonly plusMinus: number;
  readonly blocks: readonly Block[];
  /** Against these owners the blocks are others: stretches near clips and bound ends left out. */
  readonly against: ReadonlyMap<string, readonly Block[]>;
  /** Named in every pair of it: what is not covered. */
  readonly notCovered: readonly string[];
  /** Farthest it may go, be larger or grow, mm: for the broad phase. */
  readonly reach: number;
}

const posed = (pieces: readonly Piece[], pose: Pose): Body => {
  const body = buildBody(pieces);
  if (pose !== IDENTITY) setPose(body, pose);
  return body;
};

export function partThing(part: Part, chain: Chain, generated: boolean): Thing {
  const pieces = partPieces(part);
  const pose = poseOf(part);
  const grown = grownByPlusMinus(pieces, part.source);
  return {
    key: part.key, name: part.name, is: "part", kind: part.kind, group: part.group, owner: part.key, generated, wheel: null,
    hot: part.heat?.surface !== undefined, limited: part.heat?.limit !== undefined,
    source: part.source, plusMinus: scalarPlusMinus(part.source),
    blocks: [{ body: posed(pieces, pose), grown: grown && posed(grown, pose), chains: [chain], growth: 0 }],
    against: new Map(), notCovered: [], reach: greatestTravel(chain) + greatestPlusMinus(part.source),
  };
}

/** Room that must stay free: carried like its part, never hot, no tolerance of its own. */
export function roomThing(part: Part, room: Part["roomFor"][number], chain: Chain): Thing {
  return {
    key: `${part.key}.${room.key}`, name: room.name, is: "room", kind: "room", group: "", owner: part.key, generated: false, wheel: null, hot: false, limited: false,
    source: { how: part.source.how, plusMinus: 0 }, plusMinus: 0,
    blocks: [{ body: posed(room.solids.flatMap(solidPieces), poseOf(part)), grown: null, chains: [chain], growth: 0 }],
    against: new Map(), notCovered: [], reach: greatestTravel(chain),
  };
}

export function shaftThing(shaft: Shaft, wheelChain: Chain | null): Thing {
  const nodes = [{ key: "inboard", at: shaft.inboard }, { key: "outboard", at: shaft.outboard }];
  const pieces = tubePieces(tubePath({ diameter: shaft.diameter!, bendRadius: 0, nodes, legs: [] })).map((tube) => tube.piece);
  const ends: Chain[] = wheelChain ? [[], wheelChain] : [[]];
  return {
    key: shaft.key, name: shaft.name, is: "shaft", kind: "shaft", group: "", owner: shaft.key, generated: false, wheel: shaft.wheel ? `tyre-${shaft.wheel}` : null, hot: false, limited: false,
    source: { how: "measured", plusMinus: 0 }, plusMinus: 0,
    blocks: [{ body: buildBody(pieces), grown: null, chains: ends, growth: 0 }],
    against: new Map(), notCovered: [], reach: Math.max(...ends.map(greatestTravel)),
  };
}

/** Path length from a node that is not checked against the part it is bound to, in outer diameters; and against a clip's part, mm. */
export const BOUND_DIAMETERS = 2;
export const CLIP_REACH = 50;

export function runThing(run: Run, parts: ReadonlyMap<string, Part>, chassis: Layout["chassis"]): Thing {
  const path = tubePath(run);
  const tubes = tubePieces(path);
  const growth = growthOf(run, path);
  const own = runChain(run.key, run.movement, carrierChain(run.carriedBy, parts, chassis));
  const chainAt = new Map<string, Chain>(run.nodes.map((node) => {
    const owner = node.on === undefined ? undefined : parts.get(node.on.split(".")[0]!);
    return [node.key, owner ? chainOf(owner, parts, chassis) : own];
  }));
  const blocksOf = (kept: readonly TubePiece[]): Block[] => {
    const groups = new Map<string, TubePiece[]>();
    for (const tube of kept) {
      const chains = [chainAt.get(tube.nodes[0])!, chainAt.get(tube.nodes[1])!];
      const growthHere = growthAt(tube);
      const name = `${chains.map((chain) => chain.map((link) => link.key).join(">")).join("|")}|${growthHere}`;
      groups.set(name, [...(groups.get(name) ?? []), tube]);
    }
    return [...groups.values()].map((group) => {
      const pieces = group.map((tube) => tube.piece);
      const [a, b] = [chainAt.get(group[0]!.nodes[0])!, chainAt.get(group[0]!.nodes[1])!];
      const grown = grownByPlusMinus(pieces, run.source);
      return { body: buildBody(pieces), grown: grown && buildBody(grown), chains: a[0]?.key === b[0]?.key ? [a] : [a, b], growth: growthAt(group[0]!) };
    });
  };
  const growthAt = (tube: TubePiece) => (tube.leg < 0 ? (growth.atNode.get(tube.nodes[0]) ?? 0) : growth.onLeg[tube.leg]!);

  const exempt = new Map<string, { node: string; reach: number }[]>();
  for (const node of run.nodes) {
    const owner = node.on?.split(".")[0];
    if (owner !== undefined) exempt.set(owner, [...(exempt.get(owner) ?? []), { node: node.key, reach: BOUND_DIAMETERS * diameterAt(path, node.key) }]);
    if (node.clip !== undefined) exempt.set(node.clip, [...(exempt.get(node.clip) ?? []), { node: node.key, reach: CLIP_REACH }]);
  }
  const against = new Map([...exempt].map(([owner, from]) => [owner, blocksOf(cutTube(tubes, ...stretchesNear(path, from)))] as const));
  return {
    key: run.key, name: run.name, is: "run", kind: run.kind, group: run.group, owner: run.key, generated: false, wheel: null,
    hot: run.heat?.surface !== undefined || run.nodes.some((node) => node.surface !== undefined), limited: run.heat?.limit !== undefined,
    source: run.source, plusMinus: scalarPlusMinus(run.source), blocks: blocksOf(tubes), against,
    notCovered: growth.unknown ? ["growth"] : [],
    reach: Math.max(...[...chainAt.values()].map(greatestTravel)) + greatestPlusMinus(run.source) + Math.max(0, ...growth.onLeg),
  };
}

function carrierChain(carrier: string | null, parts: ReadonlyMap<string, Part>, chassis: Layout["chassis"]): Chain {
  const part = carrier === null ? undefined : parts.get(carrier);
  return part ? chainOf(part, parts, chassis) : [];
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

