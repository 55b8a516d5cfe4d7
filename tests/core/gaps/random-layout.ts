import { layoutSchema, type Layout, type LayoutInput } from "../../../src/core/layout/schema.ts";

/** Numbers in a fixed order from a seed (a linear congruential generator, Numerical Recipes' constants). */
export function numbersFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

type PartInput = NonNullable<LayoutInput["parts"]>[number];
type SolidInput = PartInput["solids"][number];
type RunInput = NonNullable<LayoutInput["runs"]>[number];

const tyre = { diameter: 600, width: 200, loadedRadius: 290 };

/** An L: not convex. */
const ELL: [number, number][] = [[0, 0], [90, 0], [90, 30], [30, 30], [30, 80], [0, 80]];

/** A crowded corner of a car, far from its tyres: parts of every plain kind of solid, carriers, movement, tolerances, rooms, bound and clipped runs, a hot pipe. */
export function randomLayout(seed: number): Layout {
  const next = numbersFrom(seed);
  for (let i = 0; i < 8; i++) next();
  const between = (low: number, high: number) => low + (high - low) * next();
  const pick = <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)]!;
  const chance = (share: number) => next() < share;
  const place = (): [number, number, number] => [between(1000, 1500), between(-250, 250), between(1800, 2150)];
  const axis = () => pick(["x", "y", "z"] as const);
  const turn = (): [number, number, number] => (chance(0.4) ? [0, 0, 0] : chance(0.3) ? [pick([0, 90, 180]), 0, pick([0, 90, 270])] : [between(-90, 90), between(-80, 80), between(-180, 180)]);
  const range = (most: number): [number, number] => [-between(0, most), between(0, most)];
  const solid = (): SolidInput => {
    const placed = chance(0.5) ? {} : { at: [between(-60, 60), between(-60, 60), between(-60, 60)] as [number, number, number], turn: turn() };
    switch (Math.floor(next() * 8)) {
      case 0: return { type: "ball", diameter: between(40, 140), ...placed };
      case 1: return { type: "round", diameter: between(30, 120), length: between(40, 250), axis: axis(), ...placed };
      case 2: return { type: "cone", diameters: chance(0.3) ? [0, between(40, 120)] : [between(20, 120), between(20, 120)], length: between(50, 200), axis: axis(), ...placed };
      case 3: return { type: "oval", width: between(40, 200), height: between(40, 120), length: between(60, 300), axis: axis(), ...placed };
      case 4: return { type: "prism", plane: pick(["xy", "xz", "yz"] as const), outline: [[0, 0], [between(60, 120), between(-10, 10)], [between(40, 90), between(50, 90)], [between(-20, 10), between(40, 60)]], from: between(-40, 0), to: between(10, 70), ...placed };
      case 5: return { type: "prism", plane: pick(["xy", "xz", "yz"] as const), outline: ELL, from: between(-40, 0), to: between(10, 70), ...placed };
      case 6: return { type: "bar", from: [0, 0, 0], to: [between(-200, 200), between(-200, 200), between(50, 200)], diameter: between(15, 45), ...placed };
      default: return { type: "box", size: [between(30, 200), between(30, 200), between(30, 200)], ...placed };
    }
  };
  const count = 4 + Math.floor(next() * 4);
  const parts: PartInput[] = Array.from({ length: count }, (_, i): PartInput => ({
    key: `p${i}`, name: `Part ${i}`, kind: pick(["engine", "ecu", "muffler", "other"] as const), group: pick(["", "exhaust"]),
    solids: Array.from({ length: 1 + Math.floor(next() * 2) }, solid), at: place(), turn: turn(),
    ...(i > 0 && chance(0.4) ? { carriedBy: `p${Math.floor(next() * i)}` } : {}),
    ...(chance(0.5) ? { movement: { x: range(12), y: range(12), z: range(12) } } : {}),
    source: { how: pick(["measured", "estimate"] as const), plusMinus: chance(0.4) ? between(0, 6) : chance(0.5) ? { x: range(15), y: range(15), z: range(15) } : 0 },
    ...(chance(0.3) ? { heat: { surface: 400 } } : chance(0.4) ? { heat: { limit: 90 } } : {}),
    ...(chance(0.2) ? { roomFor: [{ key: "room", name: "Room", solids: [{ type: "box", size: [60, 60, 160], at: [0, 0, 100] }] }] } : {}),
  }));
  const runs: RunInput[] = Array.from({ length: 2 }, (_, i): RunInput => {
    // a staircase whose bends always fit: legs of at least 160, radius up to 45, turns of little more than 90 degrees
    const nodes: RunInput["nodes"] = [{ key: "n0", at: place() }];
    const steps: [number, number, number][] = [[1, 0, 0], [0, chance(0.5) ? 1 : -1, 0], [0, 0, chance(0.5) ? 1 : -1]];
    let before = -1;
    for (let k = 1; k < 4 + Math.floor(next() * 2); k++) {
      let which = Math.floor(next() * steps.length);
      if (which === before) which = (which + 1) % 3;
      before = which;
      const [x, y, z] = nodes[k - 1]!.at;
      const long = between(160, 280);
      const d = steps[which]!;
      const skew = () => between(-0.15, 0.15) * long;
      nodes.push({ key: `n${k}`, at: [x + d[0] * long + skew(), y + d[1] * long + skew(), z + d[2] * long + skew()] });
    }
    if (chance(0.6)) nodes[0]!.on = `p${Math.floor(next() * count)}`;
    if (chance(0.4)) nodes[nodes.length - 1]!.on = `p${Math.floor(next() * count)}`;
    if (chance(0.4)) nodes[1]!.clip = `p${Math.floor(next() * count)}`;
    return {
      key: `r${i}`, name: `Run ${i}`, kind: i === 0 ? "harness" : "exhaust", diameter: between(10, 50), bendRadius: between(26, 45), nodes,
      ...(chance(0.4) ? { carriedBy: `p${Math.floor(next() * count)}` } : {}), ...(chance(0.5) ? { movement: { x: range(8), y: range(8), z: range(8) } } : {}),
      ...(chance(0.4) ? { source: { plusMinus: between(0, 4) } } : chance(0.2) ? { source: { plusMinus: { x: range(8), y: range(8), z: range(8) } } } : {}),
      ...(i === 1 ? { material: "304" as const, anchor: pick(["n0", "n1"]), heat: { surface: between(200, 700) } } : chance(0.5) ? { heat: { limit: 105 } } : {}),
    };
  });
  const selector = () => pick(["any", "hot", "limited", "moving", "kind:engine", "kind:ecu", "kind:harness", "group:exhaust", "key:p0", "key:r1", "kind:exhaust"]);
  return layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name: `random ${seed}`,
    chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } },
    parts, runs,
    rules: { near: pick([60, 100, 150]), band: pick([0, 5, 12]), gap: pick([0, 8, 15]), pairs: Array.from({ length: 5 }, () => ({ between: [selector(), selector()], gap: Math.round(between(0, 120)) })) },
  } satisfies LayoutInput);
}
