import { seeded } from "../../support/seeded.ts";
import { layoutSchema, type Layout } from "../../../src/core/layout/schema.ts";

/**
 * The stance numbers by walking over sampled surface points: own rotation, own ground frame, own hull, no code of the core but the schema's defaults.
 */
type P3 = [number, number, number];
interface Cloud {
  readonly lengths: boolean;
  readonly low: boolean;
  readonly points: readonly P3[];
}

/** Roll about x, then pitch about y, then yaw about z, each as its own right-hand turn. */
function turned(p: P3, turn: P3, at: P3): P3 {
  const [r, q, w] = turn.map((d) => (d * Math.PI) / 180) as P3;
  let [x, y, z] = p;
  [y, z] = [y * Math.cos(r) - z * Math.sin(r), y * Math.sin(r) + z * Math.cos(r)];
  [x, z] = [x * Math.cos(q) + z * Math.sin(q), -x * Math.sin(q) + z * Math.cos(q)];
  [x, y] = [x * Math.cos(w) - y * Math.sin(w), x * Math.sin(w) + y * Math.cos(w)];
  return [x + at[0], y + at[1], z + at[2]];
}

const AROUND = 1440;
const circle = (r: number, put: (c: number, s: number) => P3): P3[] => Array.from({ length: AROUND }, (_, i) => put(r * Math.cos((2 * Math.PI * i) / AROUND), r * Math.sin((2 * Math.PI * i) / AROUND)));

/** A layout of parts, a straight pipe, a shaft and body lines about a leaning car, with points on everything's surface. */
export function randomStanding(seed: number): { layout: Layout; clouds: Cloud[] } {
  const next = seeded(seed);
  const between = (a: number, b: number) => a + (b - a) * next();
  const wheelbase = between(2200, 2900);
  const axle = () => ({ track: 1500, rideHeight: between(90, 180), tyre: { diameter: 640, width: 225, loadedRadius: between(280, 330) } });
  const clouds: Cloud[] = [];
  const parts = Array.from({ length: 2 + Math.floor(4 * next()) }, (_, i) => {
    const at: P3 = [between(-900, wheelbase + 1100), between(-600, 600), between(60, 700)];
    const turn: P3 = [between(-180, 180), between(-180, 180), between(-180, 180)];
    const kind = next() < 0.15 ? "brake" : next() < 0.1 ? "tyre" : "other";
    const sort = Math.floor(4 * next());
    let local: P3[];
    let solid: object;
    if (sort === 0) {
      const [a, b, c] = [between(20, 900), between(20, 400), between(20, 300)];
      local = [-1, 1].flatMap((x) => [-1, 1].flatMap((y) => [-1, 1].map((z): P3 => [(x * a) / 2, (y * b) / 2, (z * c) / 2])));
      solid = { type: "box", size: [a, b, c] };
    } else if (sort === 1) {
      const [d, l] = [between(20, 260), between(20, 700)];
      local = [-1, 1].flatMap((end) => circle(d / 2, (c, s) => [(end * l) / 2, c, s]));
      solid = { type: "round", diameter: d, length: l, axis: "x" };
    } else if (sort === 2) {
      const [d0, d1, l] = [between(0, 200), between(20, 260), between(20, 500)];
      local = [...circle(d0 / 2, (c, s) => [c, s, -l / 2]), ...circle(d1 / 2, (c, s) => [c, s, l / 2])];
      solid = { type: "cone", diameters: [d0, d1], length: l, axis: "z" };
    } else {
      const d = between(20, 300);
      local = [];
      solid = { type: "ball", diameter: d };
      // a ball seen from the side is a disc: its silhouette, untilted by any turn
      clouds.push({ lengths: kind !== "tyre", low: kind === "other", points: circle(d / 2, (c, s) => [at[0] + c, at[1], at[2] + s]) });
    }
    if (local.length > 0) clouds.push({ lengths: kind !== "tyre", low: kind === "other", points: local.map((p) => turned(p, turn, at)) });
    return { key: `p${i}`, name: `p${i}`, kind, solids: [solid], at, turn };
  });
  const tube = (a: P3, b: P3, d: number): P3[] => {
    const k = b.map((v, i) => v - a[i]!) as P3;
    const long = Math.hypot(...k);
    const n = k.map((v) => v / long) as P3;
    const h: P3 = Math.abs(n[2]) < 0.9 ? [0, 0, 1] : [1, 0, 0];
    const u: P3 = [n[1] * h[2] - n[2] * h[1], n[2] * h[0] - n[0] * h[2], n[0] * h[1] - n[1] * h[0]];
    const m = Math.hypot(...u);
    const e = u.map((v) => v / m) as P3;
    const f: P3 = [n[1] * e[2] - n[2] * e[1], n[2] * e[0] - n[0] * e[2], n[0] * e[1] - n[1] * e[0]];
    return [a, b].flatMap((p) => circle(d / 2, (c, s) => [p[0] + c * e[0] + s * f[0], p[1] + c * e[1] + s * f[1], p[2] + c * e[2] + s * f[2]]));
  };
  const end = (): P3 => [between(-700, wheelbase + 900), between(-500, 500), between(80, 400)];
  const [from, to, d] = [end(), end(), between(20, 90)];
  clouds.push({ lengths: true, low: true, points: tube(from, to, d) });
  const [inboard, outboard] = [[wheelbase + 20, 100, 200], [wheelbase + between(-30, 30), 600, between(60, 230)]] as [P3, P3];
  clouds.push({ lengths: false, low: true, points: tube(inboard, outboard, 30) });
  const side: [number, number][] = [[between(-900, -500), between(150, 400)], [between(400, 2000), between(20, 200)], [wheelbase + between(500, 900), between(200, 500)], [1200, 1200]];
  side.forEach((p, i) => clouds.push({ lengths: true, low: true, points: [p, side[(i + 1) % 4]!].map(([x, z]): P3 => [x, 0, z]) }));
  const layout = layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name: "t", chassis: { wheelbase, front: axle(), rear: axle() }, parts,
    runs: [{ key: "run", name: "run", kind: "exhaust", diameter: d, nodes: [{ key: "a", at: from }, { key: "b", at: to }] }],
    shafts: [{ key: "shaft", name: "shaft", inboard, outboard, diameter: 30 }], body: { side },
  });
  return { layout, clouds };
}

/** Upper and lower chain would do; the whole hull of points of the plane, by gift wrapping's sorted cousin. */
function hullOf(points: readonly (readonly [number, number])[]): (readonly [number, number])[] {
  const sorted = [...points].sort((p, q) => p[0] - q[0] || p[1] - q[1]);
  const chain = (list: typeof sorted) => {
    const out: (readonly [number, number])[] = [];
    for (const p of list) {
      while (out.length > 1) {
        const [a, b] = [out[out.length - 2]!, out[out.length - 1]!];
        if ((b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0]) > 0) break;
        out.pop();
      }
      out.push(p);
    }
    return out.slice(0, -1);
  };
  return [...chain(sorted), ...chain(sorted.reverse())];
}

/** Every number of the stance from the clouds; a convex thing's outline is its points' hull, walked every few millimetres. */
export function standingBySamples(layout: Layout, clouds: readonly Cloud[]) {
  const { wheelbase, front, rear } = layout.chassis;
  const lean = Math.atan2(rear.rideHeight - front.rideHeight, wheelbase);
  // turned about the front contact point until the ground is level (facts.md section 1); the ground falls rearward where the rear stands higher
  const stand = ([x, , z]: readonly [number, number, number] | P3): [number, number] => {
    const h = z + front.rideHeight;
    return [x * Math.cos(lean) - h * Math.sin(lean), x * Math.sin(lean) + h * Math.cos(lean)];
  };
  const wheel = (x: number, axle: typeof front) => ({ c: stand([x, 0, -axle.rideHeight + axle.tyre.loadedRadius]), r: axle.tyre.loadedRadius });
  const [f, r] = [wheel(0, front), wheel(wheelbase, rear)];
  const tangent = (x: number, h: number, radius: number) => {
    const d = Math.hypot(x, h);
    return x <= 0 || d <= radius ? Infinity : ((Math.atan2(h, x) + Math.asin(radius / d)) * 180) / Math.PI;
  };
  let [approach, departure, ramp, clearance, first, last] = [90, 90, Infinity, Infinity, Infinity, -Infinity];
  for (const cloud of clouds) {
    if (cloud.lengths) {
      for (const [x] of cloud.points) {
        first = Math.min(first, x);
        last = Math.max(last, x);
      }
    }
    if (!cloud.low) continue;
    const hull = cloud.points.length > 2 ? hullOf(cloud.points.map(stand)) : cloud.points.map(stand);
    hull.forEach((p, i) => {
      const q = hull[(i + 1) % hull.length]!;
      const steps = Math.max(1, Math.ceil(Math.hypot(q[0] - p[0], q[1] - p[1]) / 0.5));
      for (let k = 0; k < steps; k++) {
        const [u, v] = [p[0] + ((q[0] - p[0]) * k) / steps, p[1] + ((q[1] - p[1]) * k) / steps];
        approach = Math.min(approach, tangent(f.c[0] - u, v - f.c[1], f.r));
        departure = Math.min(departure, tangent(u - r.c[0], v - r.c[1], r.r));
        ramp = Math.min(ramp, tangent(u - f.c[0], v - f.c[1], f.r) + tangent(r.c[0] - u, v - r.c[1], r.r));
        clearance = Math.min(clearance, v);
      }
    });
  }
  const known = (v: number, none: number) => (v < none ? v : null);
  return {
    length: last - first, frontOverhang: -first, rearOverhang: last - wheelbase, groundClearance: clearance,
    approachAngle: known(approach, 90), departureAngle: known(departure, 90), breakoverAngle: known(ramp, Infinity),
  };
}
