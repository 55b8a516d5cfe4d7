import type { Vec3 } from "#core/frames.ts";
import type { Disc, Piece, Pose } from "#core/geometry/piece.ts";

/** Made-up layouts of three sizes, the same on every machine: what the distance kernel is timed on. */

export interface BenchPart {
  readonly pieces: readonly Piece[];
  readonly pose: Pose;
}

export interface Workload {
  readonly name: string;
  readonly parts: readonly BenchPart[];
}

/** mulberry32: 32-bit state, uniform in [0, 1). */
export function randomFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

export const box = (x: number, y: number, z: number, at: Vec3 = [0, 0, 0]): Piece => ({
  points: [-1, 1].flatMap((i) =>
    [-1, 1].flatMap((j) => [-1, 1].map((k): Vec3 => [at[0] + (i * x) / 2, at[1] + (j * y) / 2, at[2] + (k * z) / 2])),
  ),
  discs: [],
  radius: 0,
  form: "box",
});

export const prism = (sides: number, diameter: number, length: number): Piece => ({
  points: [-1, 1].flatMap((s) =>
    Array.from({ length: sides }, (_, i): Vec3 => {
      const t = (2 * Math.PI * i) / sides;
      return [(diameter / 2) * Math.cos(t), (diameter / 2) * Math.sin(t), (s * length) / 2];
    }),
  ),
  discs: [],
  radius: 0,
  form: "polytope",
});

export const cylinder = (diameter: number, length: number): Piece => ({
  points: [],
  discs: [-1, 1].map((s): Disc => ({ centre: [0, 0, (s * length) / 2], u: [diameter / 2, 0, 0], v: [0, diameter / 2, 0] })),
  radius: 0,
  form: "cylinder",
});

export const capsule = (p: Vec3, q: Vec3, diameter: number): Piece => ({ points: [p, q], discs: [], radius: diameter / 2, form: "capsule" });

export function randomPose(random: () => number, at: Vec3): Pose {
  // A uniform rotation from a uniform quaternion (Shoemake 1992).
  const u = random();
  const [s, c] = [2 * Math.PI * random(), 2 * Math.PI * random()];
  const [x, y, z, w] = [
    Math.sqrt(1 - u) * Math.sin(s),
    Math.sqrt(1 - u) * Math.cos(s),
    Math.sqrt(u) * Math.sin(c),
    Math.sqrt(u) * Math.cos(c),
  ];
  return {
    rotation: [
      1 - 2 * (y * y + z * z), 2 * (x * y - w * z), 2 * (x * z + w * y),
      2 * (x * y + w * z), 1 - 2 * (x * x + z * z), 2 * (y * z - w * x),
      2 * (x * z - w * y), 2 * (y * z + w * x), 1 - 2 * (x * x + y * y),
    ],
    at,
  };
}

const SPAN: Vec3 = [4400, 1700, 1200];

const somewhere = (random: () => number): Vec3 => [random() * SPAN[0], (random() - 0.5) * SPAN[1], random() * SPAN[2]];

interface Taken {
  readonly at: Vec3;
  readonly reach: number;
}

/** A place whose sphere keeps clear of those taken, if sixty tries find one: a layout is crowded, but mostly free of overlap. */
function freePlace(random: () => number, reach: number, taken: Taken[]): Vec3 {
  let at = somewhere(random);
  for (let tries = 0; tries < 60; tries++) {
    if (taken.every((t) => Math.hypot(t.at[0] - at[0], t.at[1] - at[1], t.at[2] - at[2]) > 0.8 * (t.reach + reach))) break;
    at = somewhere(random);
  }
  taken.push({ at, reach });
  return at;
}

const reachOf = (piece: Piece): number =>
  Math.max(0, ...piece.points.map((p) => Math.hypot(...p)), ...piece.discs.map((d) => Math.hypot(...d.centre) + Math.hypot(...d.u)));

/** A wandering tube of `legs` straight legs, each a swept ball; of forty walks the one that meets the fewest parts. */
function tubePart(random: () => number, legs: number, diameter: number, step: number, taken: readonly Taken[]): BenchPart {
  let best: Vec3[] = [];
  let fewest = Infinity;
  for (let tries = 0; tries < 40 && fewest > 0; tries++) {
    const path = walk(random, legs, step);
    let hits = 0;
    for (const p of path) {
      for (const t of taken) if (Math.hypot(t.at[0] - p[0], t.at[1] - p[1], t.at[2] - p[2]) < 0.8 * t.reach + diameter / 2) hits++;
    }
    if (hits < fewest) [best, fewest] = [path, hits];
  }
  const pieces = best.slice(1).map((to, i) => capsule(best[i]!, to, diameter));
  return { pieces, pose: { rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1], at: [0, 0, 0] } };
}

function walk(random: () => number, legs: number, step: number): Vec3[] {
  let here = somewhere(random);
  let course: Vec3 = [random() - 0.5, random() - 0.5, (random() - 0.5) * 0.6];
  const path: Vec3[] = [here];
  for (let i = 0; i < legs; i++) {
    const bend = 0.25;
    const next: Vec3 = [course[0] + bend * (random() - 0.5), course[1] + bend * (random() - 0.5), course[2] + bend * (random() - 0.5)];
    const length = Math.hypot(...next);
    course = [next[0] / length, next[1] / length, next[2] / length];
    const to: Vec3 = [here[0] + step * course[0], here[1] + step * course[1], here[2] + step * course[2]];
    for (let k = 0; k < 3; k++) {
      const low = k === 1 ? -SPAN[1] / 2 : 0;
      if (to[k]! < low || to[k]! > low + SPAN[k]!) {
        const turned: [number, number, number] = [course[0], course[1], course[2]];
        turned[k] = -turned[k]!;
        course = turned;
      }
    }
    path.push(to);
    here = to;
  }
  return path;
}

/** A bracket or casting: boxes side by side, as a cut outline gives. */
function blockPart(random: () => number, pieces: number, size: number, taken: Taken[]): BenchPart {
  const list: Piece[] = [];
  let x = 0;
  for (let i = 0; i < pieces; i++) {
    const width = size * (0.2 + 0.4 * random());
    list.push(box(width, size * (0.3 + 0.7 * random()), size * (0.3 + 0.7 * random()), [x + width / 2, 0, 0]));
    x += width;
  }
  return { pieces: list, pose: randomPose(random, freePlace(random, x / 2, taken)) };
}

function makeWorkload(
  name: string,
  seed: number,
  counts: { boxes: number; blocks: number; blockPieces: number; prisms: number; rounds: number; tubes: number; legs: number },
  size: number,
  step: number,
): Workload {
  const random = randomFrom(seed);
  const parts: BenchPart[] = [];
  const single = (): number => size * (0.4 + 1.2 * random());
  const taken: Taken[] = [];
  const lone = (piece: Piece): void => {
    parts.push({ pieces: [piece], pose: randomPose(random, freePlace(random, reachOf(piece), taken)) });
  };
  for (let i = 0; i < counts.boxes; i++) lone(box(single(), single(), single()));
  for (let i = 0; i < counts.blocks; i++) parts.push(blockPart(random, counts.blockPieces, size, taken));
  for (let i = 0; i < counts.prisms; i++) lone(prism(32, single(), single()));
  for (let i = 0; i < counts.rounds; i++) lone(cylinder(single(), 1.5 * single()));
  for (let i = 0; i < counts.tubes; i++) {
    const legs = Math.floor(((i + 1) * counts.legs) / counts.tubes) - Math.floor((i * counts.legs) / counts.tubes);
    parts.push(tubePart(random, legs, 8 + 30 * random(), step, taken));
  }
  return { name, parts };
}

/** 40 parts, 648 pieces. */
export const workloadA = (): Workload =>
  makeWorkload("a", 11, { boxes: 8, blocks: 12, blockPieces: 10, prisms: 4, rounds: 4, tubes: 12, legs: 512 }, 250, 16);
/** 300 parts, 3 996 pieces. */
export const workloadB = (): Workload =>
  makeWorkload("b", 22, { boxes: 80, blocks: 80, blockPieces: 8, prisms: 36, rounds: 40, tubes: 64, legs: 3200 }, 165, 20);
/** 1 500 parts, 64 216 pieces, of them 300 tubes of 200. */
export const workloadC = (): Workload =>
  makeWorkload("c", 33, { boxes: 500, blocks: 377, blockPieces: 9, prisms: 132, rounds: 191, tubes: 300, legs: 60000 }, 100, 16);
