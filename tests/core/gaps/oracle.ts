import type { Layout, Part, Run, Shaft, Solid } from "../../../src/core/layout/schema.ts";

/**
 * The ledger's numbers once more, by other means: no code of the kernel, of the gap folder or of the shapes is used, only the words of the layout format.
 * Distances by descent in turns: nearest point of a solid in closed form, nearest place within each box of movement, again and again (the sum of
 * squares is convex, so it ends at the least). Depths by sampled directions. Pipes as short straight pieces on the true arcs.
 */
type V = [number, number, number];
const add = (a: V, b: V): V => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
const sub = (a: V, b: V): V => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const times = (a: V, s: number): V => [a[0] * s, a[1] * s, a[2] * s];
const dot = (a: V, b: V) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const size = (a: V) => Math.sqrt(dot(a, a));
const unit = (a: V): V => times(a, 1 / size(a));
const clamp = (v: number, low: number, high: number) => Math.min(high, Math.max(low, v));

/** Three columns: where the local axes point. */
type Axes = [V, V, V];
const toLocal = (axes: Axes, p: V): V => [dot(axes[0], p), dot(axes[1], p), dot(axes[2], p)];
const toWorld = (axes: Axes, p: V): V => add(add(times(axes[0], p[0]), times(axes[1], p[1])), times(axes[2], p[2]));
/** Turn one vector about an axis by degrees, right-handed. */
function spin(p: V, about: 0 | 1 | 2, degrees: number): V {
  const [s, c] = [Math.sin((degrees * Math.PI) / 180), Math.cos((degrees * Math.PI) / 180)];
  const [i, j] = [(about + 1) % 3, (about + 2) % 3] as [0 | 1 | 2, 0 | 1 | 2];
  const q: V = [...p];
  q[i] = c * p[i] - s * p[j];
  q[j] = s * p[i] + c * p[j];
  return q;
}
const turned = (p: V, turn: readonly number[]): V => spin(spin(spin(p, 0, turn[0]!), 1, turn[1]!), 2, turn[2]!);

/** A convex solid: nearest point of it and the farthest it reaches in a direction, both local. */
interface Shape { readonly at: V; readonly axes: Axes; readonly nearest: (p: V) => V; readonly reach: (d: V) => number; readonly radius: number }

function nearestInPolygon(polygon: readonly (readonly [number, number])[], x: number, y: number): [number, number] {
  let inside = true;
  let best: [number, number] = [x, y];
  let least = Infinity;
  const area = polygon.reduce((sum, p, i) => sum + p[0] * polygon[(i + 1) % polygon.length]![1] - polygon[(i + 1) % polygon.length]![0] * p[1], 0);
  polygon.forEach(([px, py], i) => {
    const [qx, qy] = polygon[(i + 1) % polygon.length]!;
    const [ex, ey] = [qx - px, qy - py];
    if ((ex * (y - py) - ey * (x - px)) * area < 0) inside = false;
    const t = clamp(((x - px) * ex + (y - py) * ey) / (ex * ex + ey * ey), 0, 1);
    const d = Math.hypot(x - px - t * ex, y - py - t * ey);
    if (d < least) [least, best] = [d, [px + t * ex, py + t * ey]];
  });
  return inside ? [x, y] : best;
}

/** A disc-profiled solid of revolution about local z: half height h, radii at the low and high end. */
const revolved = (r0: number, r1: number, h: number): Pick<Shape, "nearest" | "reach" | "radius"> => {
  const profile = [[0, -h], [r0, -h], [r1, h], [0, h]].filter((p, i, all) => i === 0 || p[0] !== all[i - 1]![0] || p[1] !== all[i - 1]![1]) as [number, number][];
  return {
    nearest: (p) => {
      const rho = Math.hypot(p[0], p[1]);
      const [r, z] = nearestInPolygon(profile, rho, p[2]);
      return rho > 0 ? [(p[0] / rho) * r, (p[1] / rho) * r, z] : [0, 0, z];
    },
    reach: (d) => Math.max(r0 * Math.hypot(d[0], d[1]) - h * d[2], r1 * Math.hypot(d[0], d[1]) + h * d[2]),
    radius: Math.hypot(Math.max(r0, r1), h),
  };
};

const prismOf = (polygon: readonly (readonly [number, number])[], from: number, to: number): Pick<Shape, "nearest" | "reach" | "radius"> => ({
  nearest: (p) => [...nearestInPolygon(polygon, p[0], p[1]), clamp(p[2], Math.min(from, to), Math.max(from, to))],
  reach: (d) => Math.max(...polygon.map((q) => q[0] * d[0] + q[1] * d[1])) + Math.max(from * d[2], to * d[2]),
  radius: Math.max(...polygon.map((q) => Math.hypot(q[0], q[1]))) + Math.max(Math.abs(from), Math.abs(to)),
});

/** Axes that stand for (first, second, third) of a solid whose length runs along x, y or z. */
const along: Record<string, [V, V, V]> = {
  x: [[0, 1, 0], [0, 0, 1], [1, 0, 0]], y: [[0, 0, 1], [1, 0, 0], [0, 1, 0]], z: [[1, 0, 0], [0, 1, 0], [0, 0, 1]],
};

interface Placed { readonly frame: [V, V, V]; readonly at: V; readonly local: Pick<Shape, "nearest" | "reach" | "radius"> }

/** A simple polygon as triangles, ear by ear; as it is where it is convex. */
function convexPartsOf(outline: readonly (readonly [number, number])[]): (readonly (readonly [number, number])[])[] {
  const turn = (a: readonly [number, number], b: readonly [number, number], c: readonly [number, number]) => (b[0] - a[0]) * (c[1] - b[1]) - (b[1] - a[1]) * (c[0] - b[0]);
  const area = outline.reduce((sum, p, i) => sum + p[0] * outline[(i + 1) % outline.length]![1] - outline[(i + 1) % outline.length]![0] * p[1], 0);
  const left = area > 0 ? [...outline] : [...outline].reverse();
  const n = left.length;
  if (left.every((p, i) => turn(p, left[(i + 1) % n]!, left[(i + 2) % n]!) >= 0)) return [left];
  const ears: (readonly [number, number])[][] = [];
  while (left.length > 3) {
    const i = left.findIndex((p, k) => {
      const [a, c] = [left[(k + left.length - 1) % left.length]!, left[(k + 1) % left.length]!];
      if (turn(a, p, c) <= 0) return false;
      return !left.some((q) => q !== a && q !== p && q !== c && turn(a, p, q) >= 0 && turn(p, c, q) >= 0 && turn(c, a, q) >= 0);
    });
    ears.push([left[(i + left.length - 1) % left.length]!, left[i]!, left[(i + 1) % left.length]!]);
    left.splice(i, 1);
  }
  return [...ears, left];
}

/** The nearest point of a triangle: inside it, or on an edge. */
function nearestOnTriangle(corners: readonly [V, V, V], p: V): V {
  const [a, b, c] = corners;
  const cross = (x: V, y: V): V => [x[1] * y[2] - x[2] * y[1], x[2] * y[0] - x[0] * y[2], x[0] * y[1] - x[1] * y[0]];
  const n = unit(cross(sub(b, a), sub(c, a)));
  const q = sub(p, times(n, dot(sub(p, a), n)));
  const edges: [V, V][] = [[a, b], [b, c], [c, a]];
  if (edges.every(([from, to]) => dot(cross(sub(to, from), sub(q, from)), n) >= 0)) return q;
  return edges.map(([from, to]): V => {
    const d = sub(to, from);
    return add(from, times(d, clamp(dot(sub(p, from), d) / dot(d, d), 0, 1)));
  }).reduce((best, here) => (size(sub(p, here)) < size(sub(p, best)) ? here : best));
}

function sheetShape(corners: readonly [V, V, V], r: number): Placed {
  const middle = times(add(add(corners[0], corners[1]), corners[2]), 1 / 3);
  const around = corners.map((c) => sub(c, middle)) as unknown as readonly [V, V, V];
  return { frame: [[1, 0, 0], [0, 1, 0], [0, 0, 1]], at: middle, local: {
    nearest: (p) => {
      const q = nearestOnTriangle(around, p);
      const d = size(sub(p, q));
      return d <= r ? p : add(q, times(sub(p, q), r / d));
    },
    reach: (d) => Math.max(...around.map((c) => dot(c, d))) + r * size(d),
    radius: Math.max(...around.map(size)) + r,
  } };
}

/** Every solid but outlines of three views or with a top that is not a plain rectangle. */
function shapesOf(solid: Solid): Placed[] {
  const world: [V, V, V] = [[1, 0, 0], [0, 1, 0], [0, 0, 1]];
  switch (solid.type) {
    case "box": {
      const [x, y, z] = solid.size.map((s) => s / 2) as V;
      return [{ frame: world, at: [0, 0, 0], local: prismOf([[-x, -y], [x, -y], [x, y], [-x, y]], -z, z) }];
    }
    case "ball": {
      const r = solid.diameter / 2;
      return [{ frame: world, at: [0, 0, 0], local: { nearest: (p) => (size(p) <= r ? p : times(p, r / size(p))), reach: (d) => r * size(d), radius: r } }];
    }
    case "round":
      return [{ frame: along[solid.axis]!, at: [0, 0, 0], local: revolved(solid.diameter / 2, solid.diameter / 2, solid.length / 2) }];
    case "cone":
      return [{ frame: along[solid.axis]!, at: [0, 0, 0], local: revolved(solid.diameters[0] / 2, solid.diameters[1] / 2, solid.length / 2) }];
    case "oval": {
      // width along the first, height along the second of the other two axes in the order x, y, z
      const frame: [V, V, V] = solid.axis === "x" ? [[0, 1, 0], [0, 0, 1], [1, 0, 0]] : solid.axis === "y" ? [[1, 0, 0], [0, 0, 1], [0, 1, 0]] : [[1, 0, 0], [0, 1, 0], [0, 0, 1]];
      const r = Math.min(solid.width, solid.height) / 2;
      const [ex, ey] = [solid.width / 2 - r, solid.height / 2 - r];
      const h = solid.length / 2;
      return [{ frame, at: [0, 0, 0], local: {
        nearest: (p) => {
          const [cx, cy] = [clamp(p[0], -ex, ex), clamp(p[1], -ey, ey)];
          const d = Math.hypot(p[0] - cx, p[1] - cy);
          const k = d > r ? r / d : 1;
          return [cx + (p[0] - cx) * k, cy + (p[1] - cy) * k, clamp(p[2], -h, h)];
        },
        reach: (d) => ex * Math.abs(d[0]) + ey * Math.abs(d[1]) + r * Math.hypot(d[0], d[1]) + h * Math.abs(d[2]),
        radius: Math.hypot(ex + ey + r, h),
      } }];
    }
    case "prism": {
      const frame: [V, V, V] = solid.plane === "xy" ? [[1, 0, 0], [0, 1, 0], [0, 0, 1]] : solid.plane === "xz" ? [[1, 0, 0], [0, 0, 1], [0, 1, 0]] : [[0, 1, 0], [0, 0, 1], [1, 0, 0]];
      return convexPartsOf(solid.outline).map((polygon) => ({ frame, at: [0, 0, 0] as V, local: prismOf(polygon, solid.from, solid.to) }));
    }
    case "bar": {
      if (solid.size === undefined) return [tubeBetween(solid.from, solid.to, solid.diameter!)];
      // width level, height upward; only for bars that lie, without roll
      const k = unit(sub(solid.to, solid.from));
      const level = unit([-k[1], k[0], 0]);
      const up: V = [k[1] * level[2] - k[2] * level[1], k[2] * level[0] - k[0] * level[2], k[0] * level[1] - k[1] * level[0]];
      const [w, h] = [solid.size[0] / 2, solid.size[1] / 2];
      const half = size(sub(solid.to, solid.from)) / 2;
      return [{ frame: [level, up, k], at: times(add(solid.from, solid.to), 0.5), local: prismOf([[-w, -h], [w, -h], [w, h], [-w, h]], -half, half) }];
    }
    case "sheet":
      return solid.rows.slice(1).flatMap((row, i) => row.slice(1).flatMap((corner, j): Placed[] => {
        const before = solid.rows[i]!;
        return [sheetShape([before[j]!, before[j + 1]!, corner], solid.thickness / 2), sheetShape([before[j]!, corner, row[j]!], solid.thickness / 2)];
      }));
    case "outlines": {
      const ys = solid.top!.map((p) => p[1]);
      if (solid.rear || solid.top!.length !== 4 || new Set(ys).size !== 2 || new Set(solid.top!.map((p) => p[0])).size !== 2) throw new Error("the oracle knows outlines only as a side view between two planes");
      const xs = solid.top!.map((p) => p[0]);
      if (solid.side!.some((p) => p[0] < Math.min(...xs) || p[0] > Math.max(...xs))) throw new Error("the oracle wants a top that holds the side");
      return convexPartsOf(solid.side!).map((polygon) => ({ frame: [[1, 0, 0], [0, 0, 1], [0, 1, 0]] as [V, V, V], at: [0, 0, 0] as V, local: prismOf(polygon, Math.min(...ys), Math.max(...ys)) }));
    }
    default:
      throw new Error(`the oracle does not know ${(solid as Solid).type}`);
  }
}

function tubeBetween(from: V, to: V, diameter: number): Placed {
  const k = unit(sub(to, from));
  const i = unit(Math.abs(k[0]) < 0.7 ? [0, k[2], -k[1]] : [-k[2], 0, k[0]]);
  const j: V = [k[1] * i[2] - k[2] * i[1], k[2] * i[0] - k[0] * i[2], k[0] * i[1] - k[1] * i[0]];
  return { frame: [i, j, k], at: times(add(from, to), 0.5), local: revolved(diameter / 2, diameter / 2, size(sub(to, from)) / 2) };
}

/** A chain as the keys of what carries a thing, itself first. */
type Carriage = readonly string[];
interface Bit { readonly shape: Shape; readonly carried: readonly Carriage[]; readonly growth: number; readonly spares: ReadonlySet<string>; readonly bigger: { axes: Axes; low: V; high: V } | null }
export interface OracleThing { readonly key: string; readonly kind: string; readonly group: string; readonly hot: boolean; readonly limited: boolean; readonly owner: string; readonly scalar: number; readonly bits: readonly Bit[] }

const WORLD: Axes = [[1, 0, 0], [0, 1, 0], [0, 0, 1]];

export class Oracle {
  readonly things: OracleThing[] = [];
  private readonly movement = new Map<string, { low: V; high: V }>();
  private readonly carrier = new Map<string, string | null>();
  private readonly layout: Layout;

  constructor(layout: Layout) {
    this.layout = layout;
    for (const item of [...layout.parts, ...layout.runs]) {
      const m = item.movement;
      this.movement.set(item.key, { low: [m.x[0], m.y[0], m.z[0]], high: [m.x[1], m.y[1], m.z[1]] });
      this.carrier.set(item.key, item.carriedBy);
    }
    for (const part of layout.parts) {
      this.things.push(this.partThing(part));
      for (const room of part.roomFor) {
        const bits = room.solids.flatMap((solid) => this.placed(solid, part)).map((shape): Bit => ({ shape, carried: [this.carriage(part.key)], growth: 0, spares: new Set(), bigger: null }));
        this.things.push({ key: `${part.key}.${room.key}`, kind: "room", group: "", hot: false, limited: false, owner: part.key, scalar: 0, bits });
      }
    }
    for (const name of ["front-left", "front-right", "rear-left", "rear-right"] as const) if (!this.carrier.has(`tyre-${name}`)) this.things.push(this.tyreThing(name));
    for (const run of layout.runs) this.things.push(this.runThing(run));
    for (const shaft of layout.shafts) if (shaft.diameter !== undefined) this.things.push(this.shaftThing(shaft));
  }

  private tyreThing(name: string): OracleThing {
    const { chassis } = this.layout;
    const axle = name.startsWith("front") ? chassis.front : chassis.rear;
    const key = `tyre-${name}`;
    this.movement.set(key, { low: [0, 0, -axle.droop], high: [0, 0, axle.bump] });
    this.carrier.set(key, null);
    const at: V = [name.startsWith("front") ? 0 : chassis.wheelbase, (name.endsWith("left") ? -axle.track : axle.track) / 2, axle.tyre.loadedRadius - axle.rideHeight];
    const shape = { at, axes: along["y"]!, ...revolved(axle.tyre.diameter / 2, axle.tyre.diameter / 2, axle.tyre.width / 2) };
    return { key, kind: "tyre", group: "", hot: false, limited: false, owner: key, scalar: 0, bits: [{ shape, carried: [[key]], growth: 0, spares: new Set(), bigger: null }] };
  }

  /** The outboard joint goes with the wheel, and inward by what an arm's swing takes at the greater travel. */
  private shaftThing(shaft: Shaft): OracleThing {
    const tyre = shaft.wheel === undefined ? null : `tyre-${shaft.wheel}`;
    const carried: string[][] = [[]];
    if (tyre !== null) {
      const { low, high } = this.movement.get(tyre)!;
      const t = Math.max(-low[2], high[2]);
      const inward = shaft.arm === undefined ? 0 : shaft.arm - Math.sqrt(Math.max(0, shaft.arm ** 2 - t ** 2));
      const toRight = shaft.inboard[1] > shaft.outboard[1];
      this.movement.set(`${shaft.key}'s arm`, { low: [0, toRight ? 0 : -inward, 0], high: [0, toRight ? inward : 0, 0] });
      carried.push([`${shaft.key}'s arm`, ...this.carriage(tyre)]);
    }
    const { frame, at, local } = tubeBetween(shaft.inboard, shaft.outboard, shaft.diameter!);
    return { key: shaft.key, kind: "shaft", group: "", hot: false, limited: false, owner: shaft.key, scalar: 0, bits: [{ shape: { at, axes: frame, ...local }, carried, growth: 0, spares: new Set(), bigger: null }] };
  }

  private carriage(key: string): string[] {
    const out: string[] = [];
    for (let at: string | null = key; at !== null; at = this.carrier.get(at) ?? null) out.push(at);
    return out;
  }

  private placed(solid: Solid, part: Part): Shape[] {
    return shapesOf(solid).map(({ frame, at, local }) => {
      const place = (v: V) => turned(turned(v, solid.turn), part.turn);
      const centre = add(turned(add(turned(at, solid.turn), solid.at), part.turn), part.at);
      return { at: centre, axes: [place(frame[0]), place(frame[1]), place(frame[2])] as Axes, ...local };
    });
  }

  private bigger(source: Part["source"], axes: Axes): Bit["bigger"] {
    if (typeof source.plusMinus === "number") return null;
    const { x, y, z } = source.plusMinus;
    return { axes, low: [x[0], y[0], z[0]], high: [x[1], y[1], z[1]] };
  }

  private partThing(part: Part): OracleThing {
    const axes = WORLD.map((v) => turned(v, part.turn)) as Axes;
    const bits = part.solids.flatMap((solid) => this.placed(solid, part)).map((shape): Bit => ({ shape, carried: [this.carriage(part.key)], growth: 0, spares: new Set(), bigger: this.bigger(part.source, axes) }));
    return { key: part.key, kind: part.kind, group: part.group, hot: part.heat?.surface !== undefined, limited: part.heat?.limit !== undefined, owner: part.key, scalar: typeof part.source.plusMinus === "number" ? part.source.plusMinus : 0, bits };
  }

  /** Legs as centre lines with the place along the leg, half of the arc at either end. */
  private runThing(run: Run): OracleThing {
    const at = new Map(run.nodes.map((node) => [node.key, node.at as V]));
    const legs = (run.legs.length > 0 ? run.legs : run.nodes.slice(1).map((node, i) => ({ from: run.nodes[i]!.key, to: node.key, diameter: undefined }))).map((leg) => ({ from: leg.from, to: leg.to, diameter: leg.diameter ?? run.diameter }));
    const at2 = (leg: { from: string; to: string }, node: string) => (leg.from === node ? leg.to : leg.from);
    const legsAt = (node: string) => legs.filter((leg) => leg.from === node || leg.to === node);
    const turnAt = (node: string): number => {
      const here = legsAt(node);
      if (here.length !== 2) return 0;
      const [u, v] = here.map((leg) => unit(sub(at.get(at2(leg, node))!, at.get(node)!))) as [V, V];
      return Math.PI - Math.acos(clamp(dot(u, v), -1, 1));
    };
    const asked = (node: string) => (run.nodes.find((one) => one.key === node)!.bend ?? run.bendRadius) * Math.tan(turnAt(node) / 2);
    /** Tangents that do not fit a leg are scaled by one factor; a node takes the smaller of its two. */
    const fit = (leg: { from: string; to: string }) => Math.min(1, size(sub(at.get(leg.to)!, at.get(leg.from)!)) / Math.max(1e-12, asked(leg.from) + asked(leg.to)));
    /** Half an arc, from the straight to the middle of the bend. */
    const halfArc = (leg: { from: string; to: string }, node: string): { tangent: number; length: number; place: (share: number) => V } => {
      const none = { tangent: 0, length: 0, place: () => at.get(node)! };
      const turn = turnAt(node);
      const tangent = asked(node) * Math.min(...legsAt(node).map(fit));
      if (turn < 1e-6 || tangent === 0) return none;
      const other = legsAt(node).find((one) => one !== leg)!;
      const u = unit(sub(at.get(at2(leg, node))!, at.get(node)!));
      const v = unit(sub(at.get(at2(other, node))!, at.get(node)!));
      const r = tangent / Math.tan(turn / 2);
      const centre = add(at.get(node)!, times(unit(add(u, v)), r / Math.cos(turn / 2)));
      const start = add(at.get(node)!, times(u, tangent));
      const e = unit(sub(start, centre));
      return { tangent, length: (r * turn) / 2, place: (share) => add(centre, add(times(e, r * Math.cos((share * turn) / 2)), times(u, -r * Math.sin((share * turn) / 2)))) };
    };
    const lines = legs.map((leg) => {
      const [a, b] = [halfArc(leg, leg.from), halfArc(leg, leg.to)];
      const [p, q] = [at.get(leg.from)!, at.get(leg.to)!];
      const straight = Math.max(0, size(sub(q, p)) - a.tangent - b.tangent);
      const way = unit(sub(q, p));
      const length = a.length + straight + b.length;
      const start = add(p, times(way, a.tangent));
      const place = (t: number): V => (t < a.length ? a.place(1 - t / a.length) : t > length - b.length ? b.place(1 - (length - t) / b.length) : add(start, times(way, t - a.length)));
      return { leg, length, place, arcs: [a.length, length - b.length] as const };
    });
    /** Path length from one node to every other. */
    const lengthsFrom = (node: string) => {
      const out = new Map([[node, 0]]);
      for (let again = true; again;) {
        again = false;
        for (const { leg, length } of lines) for (const [p, q] of [[leg.from, leg.to], [leg.to, leg.from]] as const) {
          if (out.has(p) && !out.has(q)) {
            out.set(q, out.get(p)! + length);
            again = true;
          }
        }
      }
      return out;
    };
    const awayFrom = (from: Map<string, number>, line: (typeof lines)[number], t: number) => Math.min(from.get(line.leg.from)! + t, from.get(line.leg.to)! + line.length - t);
    const spared = run.nodes.flatMap((node) => {
      const widest = Math.max(...legsAt(node.key).map((leg) => leg.diameter));
      return [...(node.on === undefined ? [] : [{ owner: node.on.split(".")[0]!, reach: 2 * widest }]), ...(node.clip === undefined ? [] : [{ owner: node.clip, reach: 50 }])].map((one) => ({ ...one, from: lengthsFrom(node.key) }));
    });
    const growing = run.heat?.surface !== undefined && run.material === "304" && run.anchor !== undefined;
    const rate = growing ? Math.abs(alpha304(run.heat!.surface!) * (run.heat!.surface! - 20)) : 0;
    const fromAnchor = growing ? lengthsFrom(run.anchor!) : null;
    const carriedAt = (node: string) => {
      const on = run.nodes.find((one) => one.key === node)!.on;
      return this.carriage(on === undefined ? run.key : on.split(".")[0]!);
    };
    const bits: Bit[] = [];
    for (const line of lines) {
      const step = growing ? 5 : 60;
      const marks = new Set<number>([0, line.length]);
      const edges = [0, line.length];
      const [arcA, arcB] = line.arcs;
      for (let k = 0, n = Math.ceil(arcA); k <= n; k++) marks.add((arcA * k) / Math.max(1, n));
      for (let k = 0, n = Math.ceil(line.length - arcB); k <= n; k++) marks.add(arcB + ((line.length - arcB) * k) / Math.max(1, n));
      for (let k = 1, n = Math.ceil((arcB - arcA) / step); k < n; k++) marks.add(arcA + ((arcB - arcA) * k) / n);
      for (const { reach, from } of spared) {
        for (const t of [reach - from.get(line.leg.from)!, line.length - (reach - from.get(line.leg.to)!)]) edges.push(t);
      }
      // a sliver at every edge, so that its end stands square to the arc and not to a chord
      for (const t of edges) for (const at of [t - 0.05, t, t + 0.05]) if (at > 0 && at < line.length) marks.add(at);
      const sorted = [...marks].sort((x, y) => x - y);
      const carried = [carriedAt(line.leg.from), carriedAt(line.leg.to)];
      for (let k = 0; k + 1 < sorted.length; k++) {
        const [t0, t1] = [sorted[k]!, sorted[k + 1]!];
        if (t1 - t0 < 1e-9) continue;
        const { frame, at: centre, local } = tubeBetween(line.place(t0), line.place(t1), line.leg.diameter);
        const middle = (t0 + t1) / 2;
        const spares = new Set(spared.filter((one) => awayFrom(one.from, line, middle) < one.reach).map((one) => one.owner));
        const growth = fromAnchor === null ? 0 : rate * Math.max(awayFrom(fromAnchor, line, t0), awayFrom(fromAnchor, line, t1));
        bits.push({ shape: { at: centre, axes: frame, ...local }, carried, growth, spares, bigger: this.bigger(run.source, WORLD) });
      }
    }
    for (const node of run.nodes) {
      const here = legsAt(node.key);
      if (here.length < 3) continue;
      const r = Math.max(...here.map((leg) => leg.diameter)) / 2;
      const spares = new Set(spared.filter((one) => one.from.get(node.key)! <= one.reach).map((one) => one.owner));
      const shape: Shape = { at: node.at, axes: WORLD, nearest: (p) => (size(p) <= r ? p : times(p, r / size(p))), reach: (d) => r * size(d), radius: r };
      bits.push({ shape, carried: [carriedAt(node.key)], growth: fromAnchor === null ? 0 : rate * fromAnchor.get(node.key)!, spares, bigger: this.bigger(run.source, WORLD) });
    }
    const hot = run.heat?.surface !== undefined || run.nodes.some((node) => node.surface !== undefined);
    return { key: run.key, kind: run.kind, group: run.group, hot, limited: run.heat?.limit !== undefined, owner: run.key, scalar: typeof run.source.plusMinus === "number" ? run.source.plusMinus : 0, bits };
  }

  /** How b may move against a: what carries only one of the two counts. */
  private travel(a: Carriage, b: Carriage): { low: V; high: V } {
    const low: V = [0, 0, 0];
    const high: V = [0, 0, 0];
    const own = (mine: Carriage, others: Carriage, sign: number) => {
      for (const key of mine.filter((one) => !others.includes(one))) {
        const m = this.movement.get(key)!;
        for (const k of [0, 1, 2] as const) {
          low[k] += sign > 0 ? m.low[k] : -m.high[k];
          high[k] += sign > 0 ? m.high[k] : -m.low[k];
        }
      }
    };
    own(b, a, 1);
    own(a, b, -1);
    return { low, high };
  }

  /** Drawn and worst distance of two things, nearer bits first; Infinity where worst is beyond `reach`. */
  measure(a: OracleThing, b: OracleThing, reach: number): { drawn: number; worst: number } {
    const grow = (one: Bit) => (one.bigger ? size([0, 1, 2].map((k) => Math.max(-one.bigger!.low[k]!, one.bigger!.high[k]!)) as V) : 0);
    // the most that anything here may give, so that what is far is not looked into
    const all = (one: Bit) => one.growth + grow(one) + Math.max(...one.carried.map((chain) => chain.reduce((sum, key) => sum + size(this.movement.get(key)!.low) + size(this.movement.get(key)!.high), 0)));
    const most = Math.max(0, ...a.bits.map(all)) + Math.max(0, ...b.bits.map(all)) + a.scalar + b.scalar;
    const hulls = new Map<readonly Carriage[], Map<readonly Carriage[], { low: V; high: V }>>();
    const hullOf = (mine: readonly Carriage[], others: readonly Carriage[]) => {
      let row = hulls.get(mine);
      if (!row) hulls.set(mine, (row = new Map()));
      let hull = row.get(others);
      if (!hull) {
        const boxes = mine.flatMap((x) => others.map((y) => this.travel(x, y)));
        hull = { low: [0, 1, 2].map((k) => Math.min(...boxes.map((box) => box.low[k]!))) as V, high: [0, 1, 2].map((k) => Math.max(...boxes.map((box) => box.high[k]!))) as V };
        row.set(others, hull);
      }
      return hull;
    };
    const pairs: { p: Bit; q: Bit; low: V; high: V; less: number; apart: number; least: number }[] = [];
    for (const p of a.bits) {
      if (p.spares.has(b.owner)) continue;
      for (const q of b.bits) {
        if (q.spares.has(a.owner)) continue;
        const apart = size(sub(p.shape.at, q.shape.at)) - p.shape.radius - q.shape.radius;
        if (apart > reach + most) continue;
        const { low, high } = hullOf(p.carried, q.carried);
        const less = p.growth + q.growth + a.scalar + b.scalar;
        pairs.push({ p, q, low, high, less, apart, least: apart - less - size([0, 1, 2].map((k) => Math.max(-low[k]!, high[k]!)) as V) - grow(p) - grow(q) });
      }
    }
    let worst = Infinity;
    for (const { p, q, low, high, less, least } of pairs.sort((x, y) => x.least - y.least)) {
      if (least > Math.min(worst, reach)) break;
      const shifts: Shift[] = [{ axes: WORLD, low, high }];
      if (q.bigger) shifts.push(q.bigger);
      if (p.bigger) shifts.push({ axes: p.bigger.axes, low: times(p.bigger.high, -1), high: times(p.bigger.low, -1) });
      worst = Math.min(worst, leastDistance(p.shape, q.shape, shifts, worst + less) - less);
    }
    let drawn = Infinity;
    if (worst > reach) return { drawn, worst: Infinity };
    for (const { p, q, apart } of pairs.sort((x, y) => x.apart - y.apart)) {
      if (apart > drawn) break;
      drawn = Math.min(drawn, leastDistance(p.shape, q.shape, [], drawn));
    }
    return { drawn, worst };
  }

  /** The gap a rule asks for. */
  required(a: OracleThing, b: OracleThing, moving: boolean): number {
    if (a.kind === "room" || b.kind === "room") return 0;
    const rank = (selector: string, side: OracleThing): number | null => {
      const named: Record<string, number | null> = { any: 0, hot: side.hot ? 1 : null, limited: side.limited ? 1 : null, moving: moving ? 1 : null, [`key:${side.key}`]: 3, [`kind:${side.kind}`]: 2, [`group:${side.group}`]: side.group ? 2 : null };
      return named[selector] ?? null;
    };
    const found = this.layout.rules.pairs.flatMap((rule, order) => [[a, b], [b, a]].flatMap(([x, y]) => {
      const ranks = [rank(rule.between[0], x!), rank(rule.between[1], y!)];
      return ranks.includes(null) ? [] : [{ ranks: (ranks as number[]).sort((i, j) => j - i), gap: rule.gap, order }];
    }));
    found.sort((x, y) => y.ranks[0]! - x.ranks[0]! || y.ranks[1]! - x.ranks[1]! || y.gap - x.gap || x.order - y.order);
    return found[0]?.gap ?? this.layout.rules.gap;
  }

  moves(a: OracleThing, b: OracleThing): boolean {
    return a.bits.some((p) => b.bits.some((q) => !p.spares.has(b.owner) && !q.spares.has(a.owner) && p.carried.some((x) => q.carried.some((y) => {
      const { low, high } = this.travel(x, y);
      return size(low) + size(high) > 0;
    }))));
  }
}

/** Mean coefficient of 304 from 20 degC: 17.2e-6 to 100, 18.4e-6 to 540, 18.7e-6 to 650. */
function alpha304(t: number): number {
  const known = [[-300, 17.2], [100, 17.2], [540, 18.4], [650, 18.7], [5000, 18.7]] as const;
  for (let i = 1; i < known.length; i++) {
    const [t0, a0] = known[i - 1]!;
    const [t1, a1] = known[i]!;
    if (t <= t1) return (a0 + ((a1 - a0) * (t - t0)) / (t1 - t0)) * 1e-6;
  }
  return NaN;
}

interface Shift { readonly axes: Axes; readonly low: V; readonly high: V }

/**
 * Signed: apart by descent in turns until the slab between the two points proves it to 1e-3 mm, overlapping by sampled directions
 * (never less deep than the truth). Infinity where it is proven to be more than `enough`.
 */
function leastDistance(a: Shape, b: Shape, shifts: readonly Shift[], enough: number): number {
  const by = shifts.map((): V => [0, 0, 0]);
  const nearest = (shape: Shape, p: V): V => add(shape.at, toWorld(shape.axes, shape.nearest(toLocal(shape.axes, sub(p, shape.at)))));
  let pb = b.at;
  let pa = nearest(a, pb);
  let proven = -Infinity;
  for (let turn = 0; turn < 200_000; turn++) {
    pb = nearest(b, sub(pa, by.reduce(add, [0, 0, 0] as V)));
    shifts.forEach((shift, i) => {
      const others = by.reduce((sum, v, k) => (k === i ? sum : add(sum, v)), [0, 0, 0] as V);
      const wish = toLocal(shift.axes, sub(sub(pa, pb), others));
      by[i] = toWorld(shift.axes, wish.map((v, k) => clamp(v, shift.low[k]!, shift.high[k]!)) as V);
    });
    const moved = add(pb, by.reduce(add, [0, 0, 0] as V));
    pa = nearest(a, moved);
    if (turn % 10 !== 9) continue;
    const apart = sub(moved, pa);
    const gap = size(apart);
    if (gap < 1e-5) break;
    proven = Math.max(proven, -widthAlong(a, b, shifts, times(apart, 1 / gap)));
    if (gap - proven < 1e-3) return gap;
    if (proven > enough) return Infinity;
    if (turn > 100_000 && proven > 0) throw new Error(`the descent has not ended: between ${proven} and ${gap}`);
  }
  return -depthOf(a, b, shifts);
}

/** How far a must go against n to leave b, wherever b moves: negative when n parts them. */
function widthAlong(a: Shape, b: Shape, shifts: readonly Shift[], n: V): number {
  let w = dot(n, a.at) + a.reach(toLocal(a.axes, n)) - dot(n, b.at) + b.reach(toLocal(b.axes, times(n, -1)));
  for (const shift of shifts) w -= toLocal(shift.axes, n).reduce((sum, d, k) => sum + Math.min(d * shift.low[k]!, d * shift.high[k]!), 0);
  return w;
}

/** Least width of the overlap over sampled directions, then narrowed around the best. */
function depthOf(a: Shape, b: Shape, shifts: readonly Shift[]): number {
  const width = (n: V) => widthAlong(a, b, shifts, n);
  const starts: { n: V; w: number }[] = [];
  const count = 2000;
  for (let i = 0; i < count; i++) {
    const z = 1 - (2 * i + 1) / count;
    const angle = i * Math.PI * (3 - Math.sqrt(5));
    const n: V = [Math.sqrt(1 - z * z) * Math.cos(angle), Math.sqrt(1 - z * z) * Math.sin(angle), z];
    starts.push({ n, w: width(n) });
  }
  for (const v of [...a.axes, ...b.axes, ...WORLD]) for (const s of [1, -1]) starts.push({ n: times(v, s), w: width(times(v, s)) });
  starts.sort((x, y) => x.w - y.w);
  let best = Infinity;
  for (const start of starts.slice(0, 25)) {
    let { n, w } = start;
    for (let step = 0.05; step > 1e-7; step *= 0.6) {
      for (let again = true, guard = 0; again && guard < 50; guard++) {
        again = false;
        for (const v of WORLD) for (const s of [step, -step]) {
          const m = unit(add(n, times(v, s)));
          const here = width(m);
          if (here < w) [n, w, again] = [m, here, true];
        }
      }
    }
    best = Math.min(best, w);
  }
  return Math.max(0, best);
}
