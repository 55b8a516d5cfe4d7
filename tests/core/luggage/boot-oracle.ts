import { seeded } from "../../support/seeded.ts";
/**
 * Free litres by dice: points thrown in strata, each tried against closed-form distances to the solids. No code of the core.
 */
type P2 = [number, number];
type P3 = [number, number, number];
type Distance = (p: P3) => number;

export interface Boot {
  readonly key: string;
  readonly name: string;
  readonly top?: P2[];
  readonly side?: P2[];
  readonly rear?: P2[];
  readonly wallGap: number;
  readonly partGap: number;
}

/** Into a part's own axes: the place taken off, then yaw, pitch and roll taken back. */
function local(p: P3, at: P3, turn: P3): P3 {
  const [r, q, w] = turn.map((d) => (-d * Math.PI) / 180) as P3;
  let [x, y, z] = [p[0] - at[0], p[1] - at[1], p[2] - at[2]];
  [x, y] = [x * Math.cos(w) - y * Math.sin(w), x * Math.sin(w) + y * Math.cos(w)];
  [x, z] = [x * Math.cos(q) + z * Math.sin(q), -x * Math.sin(q) + z * Math.cos(q)];
  [y, z] = [y * Math.cos(r) - z * Math.sin(r), y * Math.sin(r) + z * Math.cos(r)];
  return [x, y, z];
}

const over = (v: number) => Math.max(0, v);
/** Distance outside of something that reaches so far along and so far square to it; 0 inside. */
const cornered = (...beyond: number[]) => Math.hypot(...beyond.map(over));

function segment(p: P2, a: P2, b: P2): number {
  const d: P2 = [b[0] - a[0], b[1] - a[1]];
  const t = Math.min(1, Math.max(0, ((p[0] - a[0]) * d[0] + (p[1] - a[1]) * d[1]) / (d[0] * d[0] + d[1] * d[1])));
  return Math.hypot(p[0] - a[0] - t * d[0], p[1] - a[1] - t * d[1]);
}
/** Distance to a polygon's edge, and whether a point is in it by its winding. */
function polygon(p: P2, outline: readonly P2[]): { edge: number; inside: boolean } {
  let edge = Infinity;
  let angle = 0;
  outline.forEach((a, i) => {
    const b = outline[(i + 1) % outline.length]!;
    edge = Math.min(edge, segment(p, a, b));
    const [u, v] = [[a[0] - p[0], a[1] - p[1]], [b[0] - p[0], b[1] - p[1]]] as [P2, P2];
    angle += Math.atan2(u[0] * v[1] - u[1] * v[0], u[0] * v[0] + u[1] * v[1]);
  });
  return { edge, inside: Math.abs(angle) > Math.PI };
}

/** A space about [3000..4000] x [-500..500] x [300..800] and what lies in it, with the distance to each. */
export function randomBoot(seed: number): { space: Boot; things: { document: object; distances: Distance[] } } {
  const next = seeded(seed);
  const between = (a: number, b: number) => a + (b - a) * next();
  const tops: P2[][] = [
    [[3000, -500], [between(3700, 4000), between(-500, -300)], [4000, 500], [3000, between(300, 500)]],
    [[3000, -500], [3300, -500], [3300, between(-300, -100)], [3600, between(-300, -100)], [3600, -500], [4000, -450], [4000, 480], [3000, 500]],
  ];
  const sides: P2[][] = [
    [[3000, 300], [4000, between(300, 450)], [4000, between(550, 800)], [between(3100, 3700), 800], [3000, 780]],
    [[3000, 300], [3500, 300], [3550, between(400, 500)], [4000, 460], [4000, 700], [3000, 800]],
  ];
  const rears: P2[][] = [
    [[-500, 300], [500, 300], [between(300, 500), 800], [between(-500, -300), 800]],
    [[-500, between(400, 600)], [-200, 300], [200, 300], [500, between(400, 600)], [500, 800], [0, 720], [-500, 800]],
  ];
  const pick = (list: P2[][]) => list[Math.floor(next() * list.length)]!;
  const [top, side, rear] = [pick(tops), pick(sides), pick(rears)];
  const without = Math.floor(4 * next());
  const space: Boot = {
    key: "boot", name: "Boot", ...(without === 0 ? {} : { top }), ...(without === 1 ? {} : { side }), ...(without === 2 ? {} : { rear }),
    wallGap: next() < 0.5 ? 0 : between(5, 40), partGap: next() < 0.3 ? 0 : between(3, 40),
  };

  const distances: Distance[] = [];
  const place = (): P3 => [between(2950, 4050), between(-450, 450), between(300, 800)];
  const parts = Array.from({ length: 5 }, (_, i) => {
    const at = place();
    const turn: P3 = [between(-180, 180), between(-90, 90), between(-180, 180)];
    let solid: object;
    if (i === 0) {
      const size: P3 = [between(80, 400), between(80, 300), between(80, 300)];
      solid = { type: "box", size };
      distances.push((p) => cornered(...local(p, at, turn).map((v, k) => Math.abs(v) - size[k]! / 2)));
    } else if (i === 1) {
      const [d, l] = [between(80, 220), between(100, 500)];
      solid = { type: "round", diameter: d, length: l, axis: "y" };
      distances.push((p) => {
        const [x, y, z] = local(p, at, turn);
        return cornered(Math.hypot(x, z) - d / 2, Math.abs(y) - l / 2);
      });
    } else if (i === 2) {
      const [w, h, l] = [between(200, 320), between(80, 180), between(100, 400)];
      solid = { type: "oval", width: w, height: h, length: l, axis: "x" };
      // width along y, which is the long way; half circles of the height at both ends
      distances.push((p) => {
        const [x, y, z] = local(p, at, turn);
        return cornered(Math.hypot(over(Math.abs(y) - (w - h) / 2), z) - h / 2, Math.abs(x) - l / 2);
      });
    } else if (i === 3) {
      const d = between(80, 260);
      solid = { type: "ball", diameter: d };
      distances.push((p) => Math.hypot(p[0] - at[0], p[1] - at[1], p[2] - at[2]) - d / 2);
    } else {
      const outline: P2[] = [[-120, -80], [140, -90], [120, 90], [20, 10], [-100, 100]];
      const [from, to] = [between(-100, -20), between(20, 150)];
      solid = { type: "prism", plane: "xz", outline, from, to };
      distances.push((p) => {
        const [x, y, z] = local(p, at, turn);
        const { edge, inside } = polygon([x, z], outline);
        return cornered(inside ? -edge : edge, y - to, from - y);
      });
    }
    return { key: `p${i}`, name: `p${i}`, kind: "other", solids: [solid], at, turn };
  });

  // a bent pipe whose ends are far outside: near the space its surface is half the diameter from its centre line
  const [diameter, radius] = [between(40, 80), between(90, 200)];
  const corner = place();
  const ends: [P3, P3] = [[corner[0] - 1600, corner[1] + between(-300, 300), corner[2] + between(-200, 200)], [corner[0] + between(-200, 200), corner[1] + 1600, corner[2] + between(-200, 200)]];
  distances.push(bentPipe(ends[0], corner, ends[1], radius, diameter));
  const [inboard, outboard] = [[between(3200, 3800), -900, between(400, 700)], [between(3200, 3800), 900, between(400, 700)]] as [P3, P3];
  distances.push((p) => toLine(p, inboard, outboard) - 20);
  return {
    space,
    things: {
      document: {
        parts, shafts: [{ key: "shaft", name: "shaft", inboard, outboard, diameter: 40 }],
        runs: [{ key: "pipe", name: "pipe", kind: "exhaust", diameter, bendRadius: radius, nodes: [{ key: "a", at: ends[0] }, { key: "b", at: corner }, { key: "c", at: ends[1] }] }],
      },
      distances,
    },
  };
}

const minus = (a: P3, b: P3): P3 => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: P3, b: P3) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const scaled = (a: P3, s: number): P3 => [a[0] * s, a[1] * s, a[2] * s];
const unit = (a: P3) => scaled(a, 1 / Math.hypot(...a));

function toLine(p: P3, a: P3, b: P3): number {
  const d = minus(b, a);
  const t = Math.min(1, Math.max(0, dot(minus(p, a), d) / dot(d, d)));
  return Math.hypot(...minus(minus(p, a), scaled(d, t)));
}

/** Two straights joined by an arc of a radius that touches both. */
function bentPipe(a: P3, corner: P3, b: P3, radius: number, diameter: number): Distance {
  const [u, v] = [unit(minus(a, corner)), unit(minus(b, corner))];
  const half = Math.acos(dot(u, v)) / 2;
  const tangent = radius / Math.tan(half);
  const way = unit([u[0] + v[0], u[1] + v[1], u[2] + v[2]]);
  const centre: P3 = [0, 1, 2].map((k) => corner[k]! + (way[k]! * radius) / Math.sin(half)) as P3;
  const [p0, p1] = [u, v].map((d) => [0, 1, 2].map((k) => corner[k]! + d[k]! * tangent) as P3) as [P3, P3];
  const out = scaled(way, -1);
  const across = unit(minus(u, v));
  const reach = Math.PI / 2 - half;
  const arc = (p: P3) => {
    const d = minus(p, centre);
    const [e, f] = [dot(d, out), dot(d, across)];
    const turn = Math.min(reach, Math.max(-reach, Math.atan2(f, e)));
    return Math.hypot(...[0, 1, 2].map((k) => d[k]! - radius * (out[k]! * Math.cos(turn) + across[k]! * Math.sin(turn))));
  };
  return (p) => Math.min(toLine(p, a, p0), toLine(p, b, p1), arc(p)) - diameter / 2;
}

const STRATA = 64;

/** Two dice in each of 64^3 boxes; the standard error from how the two of a box differ. */
export function freeLitresByDice(space: Boot, distances: readonly Distance[], seed: number): { litres: number; error: number } {
  const next = seeded(seed + 1);
  const [low, size]: [P3, P3] = [[3000, -500, 300], [1000, 1000, 500]];
  const walls = [[space.top, 0, 1], [space.side, 0, 2], [space.rear, 1, 2]] as const;
  const isFree = (p: P3): number => {
    for (const distance of distances) if (distance(p) <= space.partGap) return 0;
    for (const [outline, i, k] of walls) {
      if (!outline) continue;
      const { edge, inside } = polygon([p[i], p[k]], outline);
      if (!inside || edge < space.wallGap) return 0;
    }
    return 1;
  };
  let [sum, unlike] = [0, 0];
  const cell = size.map((s) => s / STRATA) as P3;
  for (let i = 0; i < STRATA; i++) {
    for (let j = 0; j < STRATA; j++) {
      for (let k = 0; k < STRATA; k++) {
        const throwDie = () => isFree([low[0] + (i + next()) * cell[0], low[1] + (j + next()) * cell[1], low[2] + (k + next()) * cell[2]]);
        const [a, b] = [throwDie(), throwDie()];
        sum += a + b;
        unlike += (a - b) * (a - b);
      }
    }
  }
  const each = (cell[0] * cell[1] * cell[2]) / 1e6;
  // variance of a box's mean of two is a quarter of the expected square of their difference
  return { litres: (sum / 2) * each, error: (Math.sqrt(unlike) / 2) * each };
}
