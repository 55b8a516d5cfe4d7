import type { TravelBox } from "../geometry/piece.ts";
import type { Layout, Movement, Part } from "../layout/schema.ts";

/**
 * Who carries whom, and how far two things may move against each other. Carriers form a tree whose root is the chassis; a thing's
 * chain leads from itself to the last carrier, the chassis left out.
 */
export interface Link {
  readonly key: string;
  readonly movement: Movement;
  /** Movement the box does not hold: turning of the link itself. */
  readonly notCovered: readonly string[];
}
export type Chain = readonly Link[];

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

/**
 * The chain of a shaft's outboard joint: its wheel's, without steering (the joint sits on the steering axis), and with an arm of radius R
 * the way inward that the swing brings, R - sqrt(R^2 - t^2) at the greater travel t: all of the arc lies in that box.
 */
export function outboardChain(shaft: { readonly key: string; readonly inboard: readonly number[]; readonly outboard: readonly number[]; readonly arm?: number | undefined }, wheel: Chain): Chain {
  const chain = wheel.map((link) => ({ ...link, notCovered: link.notCovered.filter((word) => word !== "steer") }));
  const z = wheel[0]?.movement.z;
  if (shaft.arm === undefined || z === undefined) return chain;
  const travel = Math.min(shaft.arm, Math.max(-z[0], z[1]));
  const inward = shaft.arm - Math.sqrt(shaft.arm * shaft.arm - travel * travel);
  const y: [number, number] = shaft.inboard[1]! >= shaft.outboard[1]! ? [0, inward] : [-inward + 0, 0];
  return [{ key: `${shaft.key}/arm`, movement: { x: [0, 0], y, z: [0, 0] }, notCovered: [] }, ...chain];
}

/** How many links two chains share: in a tree, all from the first shared carrier to the root. */
function sharedLinks(a: Chain, b: Chain): number {
  let n = 0;
  while (n < a.length && n < b.length && a[a.length - 1 - n]!.key === b[b.length - 1 - n]!.key) n++;
  return n;
}

export interface RelativeMovement {
  readonly travel: TravelBox;
  /** True where the box is a point. */
  readonly still: boolean;
  readonly notCovered: readonly string[];
}

const NOTHING: readonly string[] = [];
const SAME: RelativeMovement = { travel: { low: [0, 0, 0], high: [0, 0, 0] }, still: true, notCovered: NOTHING };

/**
 * How b may move relative to a, car axes, mm. Only links below the first one that both share count; they add up along each chain and
 * between the two by Minkowski sum (boxes add).
 * @example an engine that moves +-8 across carries a pump: pump and engine move against each other only by the pump's own movement
 */
export function relativeMovement(a: Chain, b: Chain): RelativeMovement {
  const shared = sharedLinks(a, b);
  const ownA = a.length - shared;
  const ownB = b.length - shared;
  if (ownA === 0 && ownB === 0) return SAME;
  let [lx, ly, lz, hx, hy, hz] = [0, 0, 0, 0, 0, 0];
  let words: Set<string> | null = null;
  for (let i = 0; i < ownB; i++) {
    const { movement, notCovered } = b[i]!;
    lx += movement.x[0]; hx += movement.x[1];
    ly += movement.y[0]; hy += movement.y[1];
    lz += movement.z[0]; hz += movement.z[1];
    for (const word of notCovered) (words ??= new Set()).add(word);
  }
  for (let i = 0; i < ownA; i++) {
    const { movement, notCovered } = a[i]!;
    lx -= movement.x[1]; hx -= movement.x[0];
    ly -= movement.y[1]; hy -= movement.y[0];
    lz -= movement.z[1]; hz -= movement.z[0];
    for (const word of notCovered) (words ??= new Set()).add(word);
  }
  const still = lx === 0 && ly === 0 && lz === 0 && hx === 0 && hy === 0 && hz === 0;
  if (still && words === null) return SAME;
  return { travel: { low: [lx + 0, ly + 0, lz + 0], high: [hx + 0, hy + 0, hz + 0] }, still, notCovered: words === null ? NOTHING : [...words].sort() };
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

/** How far things with these chains may go in all, each way: low x, y, z, high x, y, z, mm. For the broad phase only. */
export function wholeTravel(chains: readonly Chain[]): number[] {
  const out = [0, 0, 0, 0, 0, 0];
  for (const chain of chains) {
    const one = [0, 0, 0, 0, 0, 0];
    for (const { movement } of chain) {
      [movement.x, movement.y, movement.z].forEach(([low, high], k) => {
        one[k]! += low;
        one[k + 3]! += high;
      });
    }
    for (let k = 0; k < 3; k++) {
      out[k] = Math.min(out[k]!, one[k]!);
      out[k + 3] = Math.max(out[k + 3]!, one[k + 3]!);
    }
  }
  return out;
}
