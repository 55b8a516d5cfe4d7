import type { Layout, Part, Run, Solid } from "../../../src/core/layout/schema.ts";

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

/** Solids that the oracle knows: convex ones, and prisms whose convex parts `cut` gives. */
function shapesOf(solid: Solid, cut: (outline: readonly (readonly [number, number])[]) => readonly (readonly (readonly [number, number])[])[]): { frame: [V, V, V]; at: V; local: Pick<Shape, "nearest" | "reach" | "radius"> }[] {
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
      return cut(solid.outline).map((polygon) => ({ frame, at: [0, 0, 0] as V, local: prismOf(polygon, solid.from, solid.to) }));
    }
    case "bar":
      return [tubeBetween(solid.from, solid.to, solid.diameter!)];
    default:
      throw new Error(`the oracle does not know ${solid.type}`);
  }
}

function tubeBetween(from: V, to: V, diameter: number): { frame: [V, V, V]; at: V; local: Pick<Shape, "nearest" | "reach" | "radius"> } {
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
  private readonly cut: (outline: readonly (readonly [number, number])[]) => readonly (readonly (readonly [number, number])[])[];

  constructor(layout: Layout, cut: (outline: readonly (readonly [number, number])[]) => readonly (readonly (readonly [number, number])[])[] = (outline) => [outline]) {
    this.layout = layout;
    this.cut = cut;
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
    for (const run of layout.runs) this.things.push(this.runThing(run));
  }

  private carriage(key: string): string[] {
    const out: string[] = [];
    for (let at: string | null = key; at !== null; at = this.carrier.get(at) ?? null) out.push(at);
    return out;
  }

  private placed(solid: Solid, part: Part): Shape[] {
    return shapesOf(solid, this.cut).map(({ frame, at, local }) => {
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

  /** A chain of nodes only, every bend fitting its legs. */
  private runThing(run: Run): OracleThing {
    const n = run.nodes.length;
    const at = run.nodes.map((node) => node.at as V);
    const way = at.slice(1).map((p, i) => unit(sub(p, at[i]!)));
    const bend = run.nodes.map((node, i) => {
      if (i === 0 || i === n - 1) return { tangent: 0, angle: 0, radius: 0 };
      const angle = Math.acos(clamp(dot(way[i - 1]!, way[i]!), -1, 1));
      const radius = node.bend ?? run.bendRadius;
      return { tangent: radius * Math.tan(angle / 2), angle, radius };
    });
    // the centre line as points with their path length; a node of a bend is at the middle of its arc
    const points: { p: V; s: number; leg: number }[] = [{ p: at[0]!, s: 0, leg: 0 }];
    const nodeAt = [0];
    let s = 0;
    for (let i = 1; i < n; i++) {
      const straight = size(sub(at[i]!, at[i - 1]!)) - bend[i - 1]!.tangent - bend[i]!.tangent;
      const from = points[points.length - 1]!.p;
      const steps = Math.max(1, Math.ceil(straight / 5));
      for (let k = 1; k <= steps; k++) points.push({ p: add(from, times(way[i - 1]!, (straight * k) / steps)), s: s + (straight * k) / steps, leg: i - 1 });
      s += straight;
      const { angle, radius } = bend[i]!;
      if (i < n - 1 && angle > 1e-9 && radius > 0) {
        const start = points[points.length - 1]!.p;
        const inward = unit(sub(way[i]!, times(way[i - 1]!, dot(way[i]!, way[i - 1]!))));
        const centre = add(start, times(inward, radius));
        const arcSteps = 2 * Math.ceil(angle * radius);
        for (let k = 1; k <= arcSteps; k++) {
          const a = (angle * k) / arcSteps;
          points.push({ p: add(centre, add(times(way[i - 1]!, radius * Math.sin(a)), times(inward, -radius * Math.cos(a)))), s: s + radius * a, leg: k <= arcSteps / 2 ? i - 1 : i });
        }
        nodeAt.push(s + (radius * angle) / 2);
        s += radius * angle;
      } else nodeAt.push(s);
    }
    const carried = run.nodes.map((node) => this.carriage(node.on === undefined ? run.key : node.on.split(".")[0]!));
    const growing = run.heat?.surface !== undefined && run.material !== undefined && run.anchor !== undefined;
    const anchorAt = growing ? nodeAt[run.nodes.findIndex((node) => node.key === run.anchor)]! : 0;
    const rate = growing ? alpha304(run.heat!.surface!) * (run.heat!.surface! - 20) : 0;
    const spared: { owner: string; from: number; to: number }[] = [];
    run.nodes.forEach((node, i) => {
      if (node.on !== undefined) spared.push({ owner: node.on.split(".")[0]!, from: nodeAt[i]! - 2 * run.diameter, to: nodeAt[i]! + 2 * run.diameter });
      if (node.clip !== undefined) spared.push({ owner: node.clip, from: nodeAt[i]! - 50, to: nodeAt[i]! + 50 });
    });
    const bits: Bit[] = [];
    for (let k = 0; k + 1 < points.length; k++) {
      const a = points[k]!;
      const b = points[k + 1]!;
      // cut where an exemption begins or ends
      const marks = [a.s, ...spared.flatMap((one) => [one.from, one.to]).filter((m) => m > a.s + 1e-9 && m < b.s - 1e-9).sort((x, y) => x - y), b.s];
      for (let m = 0; m + 1 < marks.length; m++) {
        if (marks[m + 1]! - marks[m]! < 1e-9) continue;
        const place = (t: number) => add(a.p, times(sub(b.p, a.p), (t - a.s) / (b.s - a.s)));
        const { frame, at: centre, local } = tubeBetween(place(marks[m]!), place(marks[m + 1]!), run.diameter);
        const middle = (marks[m]! + marks[m + 1]!) / 2;
        const spares = new Set(spared.filter((one) => middle > one.from && middle < one.to).map((one) => one.owner));
        const growth = rate * Math.max(Math.abs(marks[m]! - anchorAt), Math.abs(marks[m + 1]! - anchorAt));
        bits.push({ shape: { at: centre, axes: frame, ...local }, carried: [carried[b.leg]!, carried[b.leg + 1]!], growth, spares, bigger: this.bigger(run.source, WORLD) });
      }
    }
    return { key: run.key, kind: run.kind, group: run.group, hot: run.heat?.surface !== undefined, limited: run.heat?.limit !== undefined, owner: run.key, scalar: typeof run.source.plusMinus === "number" ? run.source.plusMinus : 0, bits };
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
    const pairs = a.bits.filter((p) => !p.spares.has(b.owner)).flatMap((p) => b.bits.filter((q) => !q.spares.has(a.owner)).map((q) => {
      const boxes = p.carried.flatMap((x) => q.carried.map((y) => this.travel(x, y)));
      const low = [0, 1, 2].map((k) => Math.min(...boxes.map((box) => box.low[k]!))) as V;
      const high = [0, 1, 2].map((k) => Math.max(...boxes.map((box) => box.high[k]!))) as V;
      const less = p.growth + q.growth + a.scalar + b.scalar;
      const apart = size(sub(p.shape.at, q.shape.at)) - p.shape.radius - q.shape.radius;
      const most = size([0, 1, 2].map((k) => Math.max(-low[k]!, high[k]!)) as V) + grow(p) + grow(q);
      return { p, q, low, high, less, apart, least: apart - most - less };
    }));
    let worst = Infinity;
    for (const { p, q, low, high, less, least } of pairs.sort((x, y) => x.least - y.least)) {
      if (least > Math.min(worst, reach)) break;
      const shifts: Shift[] = [{ axes: WORLD, low, high }];
      if (q.bigger) shifts.push(q.bigger);
      if (p.bigger) shifts.push({ axes: p.bigger.axes, low: times(p.bigger.high, -1), high: times(p.bigger.low, -1) });
      worst = Math.min(worst, leastDistance(p.shape, q.shape, shifts) - less);
    }
    let drawn = Infinity;
    if (worst > reach) return { drawn, worst: Infinity };
    for (const { p, q, apart } of pairs.sort((x, y) => x.apart - y.apart)) {
      if (apart > drawn) break;
      drawn = Math.min(drawn, leastDistance(p.shape, q.shape, []));
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
 * (never less deep than the truth).
 */
function leastDistance(a: Shape, b: Shape, shifts: readonly Shift[]): number {
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
