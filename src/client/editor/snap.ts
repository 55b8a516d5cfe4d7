import { PROJECTION, type Vec3, type View } from "#core/frames.ts";
import type { Layout } from "#core/layout/schema.ts";
import { datumLines } from "./paint-paper.ts";
import type { Shape } from "./shapes.ts";
import type { Witness } from "./view-state.ts";

/** What a thing in the hand, or a tape's end, comes to lie on. Pure. */

type Box = readonly [number, number, number, number];

export interface Snapped {
  readonly du: number;
  readonly dv: number;
  readonly witnesses: readonly Witness[];
}

interface Face {
  readonly at: number;
  readonly name: string;
}

/** Datums and the faces and centres of what lies beside a box (within `beside` mm across), along one axis of a view. */
function facesAlong(layout: Layout, shapes: readonly Shape[], moving: ReadonlySet<string>, view: View, along: "u" | "v", box: Box, beside: number): Face[] {
  const axis = PROJECTION[view][along];
  const faces: Face[] = datumLines(layout).filter((line) => line.axis === axis).map((line) => ({ at: line.at, name: line.name }));
  const [low, high, crossLow, crossHigh] = along === "u" ? ([0, 2, 1, 3] as const) : ([1, 3, 0, 2] as const);
  for (const shape of shapes) {
    if (moving.has(shape.key) || shape.list === "runs" || shape.list === "shafts" || shape.list === "tyres" || shape.kind === "glass") continue;
    if (shape.box[crossLow] > box[crossHigh] + beside || shape.box[crossHigh] < box[crossLow] - beside) continue;
    faces.push({ at: shape.box[low], name: shape.name }, { at: shape.box[high], name: shape.name }, { at: 0.5 * (shape.box[low] + shape.box[high]), name: `middle of ${shape.name}` });
  }
  return faces;
}

/**
 * Moves a wanted displacement by at most `reach` mm in each axis so that a face or the middle of the moving box lies on a datum, or on a face or the middle of something
 * beside it. Middles snap to middles and datums only.
 */
export function snapMove(layout: Layout, shapes: readonly Shape[], moving: ReadonlySet<string>, view: View, box: Box, du: number, dv: number, reach: number): Snapped {
  const axes = PROJECTION[view];
  const witnesses: Witness[] = [];
  const moved: Box = [box[0] + du, box[1] + dv, box[2] + du, box[3] + dv];
  const along = (which: "u" | "v", wanted: number): number => {
    const [low, high] = which === "u" ? [box[0], box[2]] : [box[1], box[3]];
    let best: { by: number; face: Face } | null = null;
    for (const face of facesAlong(layout, shapes, moving, view, which, moved, 120)) {
      const middle = face.name.startsWith("middle of ");
      for (const own of middle ? [0.5 * (low + high)] : [low, high, ...(datumNames(layout).has(face.name) ? [0.5 * (low + high)] : [])]) {
        const by = face.at - own;
        if (Math.abs(by - wanted) <= reach && (best === null || Math.abs(by - wanted) < Math.abs(best.by - wanted))) best = { by, face };
      }
    }
    if (!best) return wanted;
    witnesses.push({ axis: axes[which], at: best.face.at, name: best.face.name });
    return best.by;
  };
  const u = along("u", du);
  const v = along("v", dv);
  return { du: u, dv: v, witnesses };
}

const datumNames = (layout: Layout): ReadonlySet<string> => new Set(datumLines(layout).map((line) => line.name));

export interface Caught {
  readonly at: readonly [number, number];
  /** The unseen coordinate, where what it caught has one. */
  readonly depth: number | null;
  readonly name: string | null;
}

/** A place on the paper, drawn to the nearest corner, port, node, edge or datum within `reach` mm: for the tape's ends and the clicks of a draft. */
export function snapPoint(layout: Layout, shapes: readonly Shape[], points: readonly { readonly at: Vec3; readonly name: string }[], view: View, u: number, v: number, reach: number): Caught {
  const axes = PROJECTION[view];
  let best: Caught | null = null;
  let least = reach;
  const take = (pu: number, pv: number, depth: number | null, name: string, slack = 1) => {
    const distance = Math.hypot(pu - u, pv - v) * slack;
    if (distance < least) {
      least = distance;
      best = { at: [pu, pv], depth, name };
    }
  };
  for (const point of points) take(point.at[axes.u], point.at[axes.v], point.at[axes.depth], point.name, 0.8);
  for (const shape of shapes) {
    if (shape.list === "tyres" || u < shape.box[0] - reach || u > shape.box[2] + reach || v < shape.box[1] - reach || v > shape.box[3] + reach) continue;
    const [su, sv] = shape.shift;
    for (const loop of shape.loops) {
      for (let i = 0; i < loop.length; i += 2) {
        const j = (i + 2) % loop.length;
        const [au, av, bu, bv] = [loop[i]! + su, loop[i + 1]! + sv, loop[j]! + su, loop[j + 1]! + sv];
        const length = (bu - au) ** 2 + (bv - av) ** 2;
        const long = length > 400;
        // corners of flat faces first; along an edge otherwise
        if (long) take(au, av, null, shape.name, 0.75);
        const t = length === 0 ? 0 : Math.max(0, Math.min(1, ((u - au) * (bu - au) + (v - av) * (bv - av)) / length));
        take(au + t * (bu - au), av + t * (bv - av), null, shape.name, 1.15);
      }
    }
  }
  if (best) return best;
  let [pu, pv, name]: [number, number, string | null] = [u, v, null];
  for (const line of datumLines(layout)) {
    if (line.axis === axes.u && Math.abs(line.at - u) < reach) [pu, name] = [line.at, line.name];
    if (line.axis === axes.v && Math.abs(line.at - v) < reach) [pv, name] = [line.at, line.name];
  }
  return { at: [pu, pv], depth: null, name };
}

/** Ports of parts and nodes of runs in the car frame: exact places that a tape or a node may be put on. */
export function exactPoints(layout: Layout, place: (part: Layout["parts"][number], local: Vec3) => Vec3): { at: Vec3; name: string }[] {
  return [
    ...layout.parts.flatMap((part) => part.ports.map((port) => ({ at: place(part, port.at), name: `${part.name}, ${port.key}` }))),
    ...layout.runs.flatMap((run) => run.nodes.map((node) => ({ at: node.at as Vec3, name: `${run.name}, ${node.key}` }))),
  ];
}
