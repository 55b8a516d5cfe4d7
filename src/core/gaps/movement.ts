import type { TravelBox } from "../geometry/piece.ts";
import type { Layout, Movement, Part } from "../layout/schema.ts";

/**
 * What a thing is carried by, itself first, the chassis left out. Two things move against each other only by the links below the first one
 * that they share.
 */
export interface Link {
  readonly key: string;
  readonly movement: Movement;
  /** Movement the box does not hold: turning of the link itself. */
  readonly notCovered: readonly string[];
}
export type Chain = readonly Link[];

export const STILL: Movement = { x: [0, 0], y: [0, 0], z: [0, 0] };

/** A part's chain: the part, its carrier, the carrier's carrier. Circles are refused by the document's invariants. */
export function chainOf(part: Part, parts: ReadonlyMap<string, Part>, chassis: Layout["chassis"]): Chain {
  const chain: Link[] = [];
  for (let at: Part | undefined = part; at && chain.length < 2000; at = at.carriedBy === null ? undefined : parts.get(at.carriedBy)) {
    chain.push({ key: at.key, movement: at.movement, notCovered: uncovered(at, chassis) });
  }
  return chain;
}

/** The chain of a run's free nodes: the run itself, then what carries it. */
export function runChain(key: string, movement: Movement, carrier: Chain): Chain {
  return [{ key, movement, notCovered: [] }, ...carrier];
}

function uncovered(part: Part, chassis: Layout["chassis"]): readonly string[] {
  const out: string[] = [];
  if (part.rock.some((rock) => rock.angle[0] !== 0 || rock.angle[1] !== 0)) out.push("rock");
  const axle = part.key.startsWith("tyre-front-") ? chassis.front : part.key.startsWith("tyre-rear-") ? chassis.rear : null;
  if (axle && axle.steer > 0) out.push("steer");
  return out;
}

/** The links of `chain` below the first one that `other` shares. */
function ownLinks(chain: Chain, other: Chain): readonly Link[] {
  const shared = new Set(other.map((link) => link.key));
  const at = chain.findIndex((link) => shared.has(link.key));
  return at < 0 ? chain : chain.slice(0, at);
}

export interface RelativeMovement {
  readonly travel: TravelBox;
  readonly still: boolean;
  readonly notCovered: readonly string[];
}

/**
 * How b may move relative to a: links add up along each chain and between the two by Minkowski sum (boxes add). Car axes, mm.
 * @example an engine that rocks +-8 across carries a pump: pump and engine move against each other only by the pump's own movement
 */
export function relativeMovement(a: Chain, b: Chain): RelativeMovement {
  const low: [number, number, number] = [0, 0, 0];
  const high: [number, number, number] = [0, 0, 0];
  const notCovered = new Set<string>();
  const add = (links: readonly Link[], sign: 1 | -1) => {
    for (const link of links) {
      for (const word of link.notCovered) notCovered.add(word);
      const axes = [link.movement.x, link.movement.y, link.movement.z] as const;
      axes.forEach(([from, to], k) => {
        low[k as 0 | 1 | 2] += sign === 1 ? from : -to;
        high[k as 0 | 1 | 2] += sign === 1 ? to : -from;
      });
    }
  };
  add(ownLinks(b, a), 1);
  add(ownLinks(a, b), -1);
  return { travel: { low: [low[0] + 0, low[1] + 0, low[2] + 0], high: [high[0] + 0, high[1] + 0, high[2] + 0] }, still: [...low, ...high].every((v) => v === 0), notCovered: [...notCovered].sort() };
}

/** The box hull of several ways to move: what a piece of a run between two nodes may do. */
export function hullOfMovements(all: readonly RelativeMovement[]): RelativeMovement {
  if (all.length === 1) return all[0]!;
  const least = (k: 0 | 1 | 2) => Math.min(...all.map((m) => m.travel.low[k]));
  const most = (k: 0 | 1 | 2) => Math.max(...all.map((m) => m.travel.high[k]));
  return {
    travel: { low: [least(0), least(1), least(2)], high: [most(0), most(1), most(2)] },
    still: all.every((m) => m.still),
    notCovered: [...new Set(all.flatMap((m) => m.notCovered))].sort(),
  };
}

/** Farthest any point of a chain's thing may go, mm: for the broad phase only. */
export function greatestTravel(chain: Chain): number {
  let x = 0;
  let y = 0;
  let z = 0;
  for (const { movement } of chain) {
    x += Math.max(-movement.x[0], movement.x[1]);
    y += Math.max(-movement.y[0], movement.y[1]);
    z += Math.max(-movement.z[0], movement.z[1]);
  }
  return Math.hypot(x, y, z);
}

