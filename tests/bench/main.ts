import { mkdirSync, writeFileSync } from "node:fs";
import { cpus } from "node:os";
import { buildBody, setPose, type Body } from "#core/geometry/body.ts";
import { candidatePairs, candidatesOf, createSweep, updateSweep } from "#core/geometry/sweep.ts";
import { createMeasure, createPairCache, measureBodies } from "#core/geometry/measure.ts";
import type { Pose } from "#core/geometry/piece.ts";
import { measureAccuracy } from "./accuracy.ts";
import { rivalSearch } from "./engines.ts";
import { crashcatRival, rapierRival, type Rival } from "./rivals.ts";
import { loadSolids, solidOf } from "./solids-oracle.ts";
import { box, capsule, cylinder, prism, randomFrom, randomPose, workloadA, workloadB, workloadC, type Workload } from "./workloads.ts";

/**
 * The distance kernel beside other engines, in one process and on one thread. Least times: what the machine does when
 * nothing else disturbs it. `node dist/bench/main.js [--c] [--quick]`; prints a table and writes .artifacts/bench.json.
 */
const CUTOFF = 150;
const withC = process.argv.includes("--c");
const quick = process.argv.includes("--quick");
const seconds = quick ? 0.5 : 3;

const lines: string[] = [];
const say = (line = ""): void => {
  lines.push(line);
  console.log(line);
};

/** Least milliseconds of one run within a time. */
function leastTime(run: () => void, budget = seconds): number {
  let best = Infinity;
  const end = performance.now() + budget * 1000;
  let rounds = 0;
  while (performance.now() < end || rounds < 3) {
    const from = performance.now();
    run();
    best = Math.min(best, performance.now() - from);
    rounds++;
  }
  return best;
}

const bodiesOf = (w: Workload): Body[] =>
  w.parts.map((p) => {
    const body = buildBody(p.pieces);
    setPose(body, p.pose);
    return body;
  });

interface Row {
  name: string;
  kernel: number;
  target: number | null;
  rivals: Record<string, number>;
}
const rows: Row[] = [];

async function timeWorkload(w: Workload, target: number, rivals: readonly Rival[]): Promise<void> {
  const bodies = bodiesOf(w);
  const sweep = createSweep(bodies);
  const pairs: number[] = [];
  candidatePairs(sweep, CUTOFF, (i, j) => pairs.push(i, j));
  const out = createMeasure();
  let within = 0;
  let overlapping = 0;
  for (let k = 0; k < pairs.length; k += 2) {
    measureBodies(bodies[pairs[k]!]!, bodies[pairs[k + 1]!]!, null, CUTOFF, out);
    if (out.distance <= CUTOFF) within++;
    if (out.overlapping) overlapping++;
  }
  const pieces = w.parts.reduce((n, p) => n + p.pieces.length, 0);
  say(`workload ${w.name}: ${w.parts.length} parts, ${pieces} pieces, ${pairs.length / 2} candidate pairs, ${within} within ${CUTOFF} mm, ${overlapping} overlapping`);
  const kernel = leastTime(() => {
    for (let k = 0; k < pairs.length; k += 2) measureBodies(bodies[pairs[k]!]!, bodies[pairs[k + 1]!]!, null, CUTOFF, out);
  });
  const row: Row = { name: `${w.name}: all pairs, cut-off ${CUTOFF} mm, ms`, kernel, target, rivals: {} };
  for (const rival of rivals) {
    const search = rivalSearch(rival, w, bodies);
    row.rivals[rival.name] = leastTime(() => {
      for (let k = 0; k < pairs.length; k += 2) search(pairs[k]!, pairs[k + 1]!, CUTOFF);
    });
  }
  if (w.name === "b") {
    // minGap is far slower: a sample of pairs, each beside the kernel's mean time for a pair.
    const module = await loadSolids();
    const random = randomFrom(7);
    let total = 0;
    const sample = quick ? 6 : 24;
    for (let k = 0; k < sample; k++) {
      const at = 2 * Math.floor((random() * pairs.length) / 2);
      const [p, q] = [w.parts[pairs[at]!]!, w.parts[pairs[at + 1]!]!];
      const solidA = solidOf(module, p.pieces, p.pose);
      const solidB = solidOf(module, q.pieces, q.pose);
      solidA.numTri();
      solidB.numTri();
      total += leastTime(() => solidA.minGap(solidB, CUTOFF), 0.02);
      solidA.delete();
      solidB.delete();
    }
    row.rivals["manifold minGap"] = ((total / sample) * pairs.length) / 2;
  }
  rows.push(row);
  timeDrag(w, bodies, target === 2.5 ? 0.01 : target === 250 ? 0.05 : null, target === 2.5 ? 0.05 : target === 250 ? 1 : null);
}

/** One part at a time is moved a little and everything near it measured again, as while it is dragged. */
function timeDrag(w: Workload, bodies: Body[], median: number | null, p95: number | null): void {
  const sweep = createSweep(bodies);
  const out = createMeasure();
  const cache = createPairCache(bodies.length);
  const random = randomFrom(5);
  const times: number[] = [];
  const parts = Math.min(bodies.length, 300);
  let moved = -1;
  const visit = (other: number): void => measureBodies(bodies[moved]!, bodies[other]!, null, CUTOFF, out, cache, other);
  for (let n = 0; n < parts; n++) {
    moved = Math.floor(random() * bodies.length);
    cache.pieceA.fill(-1);
    const rest = w.parts[moved]!.pose;
    const path = Array.from({ length: 40 }, (_, k): Pose => ({ rotation: rest.rotation, at: [rest.at[0] + k, rest.at[1] + 0.5 * k, rest.at[2]] }));
    let best = Infinity;
    for (const pose of path) {
      const from = performance.now();
      setPose(bodies[moved]!, pose);
      updateSweep(sweep, moved);
      candidatesOf(sweep, moved, CUTOFF, visit);
      best = Math.min(best, performance.now() - from);
    }
    times.push(best);
    setPose(bodies[moved]!, rest);
    updateSweep(sweep, moved);
  }
  times.sort((x, y) => x - y);
  rows.push({ name: `${w.name}: drag one part, median ms`, kernel: times[times.length >> 1]!, target: median, rivals: {} });
  rows.push({ name: `${w.name}: drag one part, 95 % ms`, kernel: times[Math.floor(times.length * 0.95)]!, target: p95, rivals: {} });
}

function timePairs(rivals: readonly Rival[]): void {
  const kinds = [
    { name: "box-box", make: (r: () => number) => box(40 + 100 * r(), 40 + 100 * r(), 40 + 100 * r()), target: 0.25 },
    { name: "32-gon prism", make: (r: () => number) => prism(32, 40 + 100 * r(), 40 + 100 * r()), target: 0.6 },
    { name: "capsule", make: (r: () => number) => capsule([0, 0, -20 - 50 * r()], [0, 0, 20 + 50 * r()], 20 + 30 * r()), target: 0.05 },
    { name: "round cylinder", make: (r: () => number) => cylinder(40 + 100 * r(), 40 + 100 * r()), target: 0.8 },
  ];
  for (const kind of kinds) {
    const random = randomFrom(99);
    const set = Array.from({ length: 2 * 400 }, (_, i) => {
      const piece = kind.make(random);
      const away = i % 2 === 0 ? 0 : 220 + 80 * random();
      const u = randomPose(random, [0, 0, 0]).rotation;
      return { piece, pose: randomPose(random, [1000 + away * u[0]!, away * u[3]!, 500 + away * u[6]!]) };
    });
    const bodies = set.map(({ piece, pose }) => {
      const body = buildBody([piece]);
      setPose(body, pose);
      return body;
    });
    const out = createMeasure();
    const kernel = leastTime(() => {
      for (let i = 0; i < bodies.length; i += 2) measureBodies(bodies[i]!, bodies[i + 1]!, null, Infinity, out);
    }, seconds / 2);
    const row: Row = { name: `one pair, ${kind.name}, us`, kernel: (kernel * 1000) / 400, target: kind.target, rivals: {} };
    for (const rival of rivals) {
      const ready = set.map(({ piece, pose }) => rival.place(piece, pose));
      const time = leastTime(() => {
        for (let i = 0; i < ready.length; i += 2) rival.distance(ready[i], ready[i + 1], 1e5);
      }, seconds / 2);
      row.rivals[rival.name] = (time * 1000) / 400;
    }
    rows.push(row);
  }
}

const rivals = [crashcatRival(), await rapierRival()];
say(`Node ${process.versions.node}, ${cpus()[0]?.model ?? "unknown processor"}, one thread, least time of many runs`);
timePairs(rivals);
await timeWorkload(workloadA(), 0.08, rivals);
await timeWorkload(workloadB(), 2.5, rivals);
if (withC) await timeWorkload(workloadC(), 250, rivals);

say();
say("| least time | kernel | to reach | crashcat | rapier | manifold minGap |");
say("| --- | --- | --- | --- | --- | --- |");
const figure = (x: number): string => (x >= 100 ? x.toFixed(0) : x >= 1 ? x.toFixed(2) : x.toFixed(3));
for (const row of rows) {
  const beside = ["crashcat", "rapier", "manifold minGap"].map((name) => {
    const time = row.rivals[name];
    return time === undefined ? "" : `${figure(time / row.kernel)}x`;
  });
  say(`| ${row.name} | ${figure(row.kernel)} | ${row.target ?? ""} | ${beside.join(" | ")} |`);
}
say();
const accuracy = measureAccuracy(rivals);
for (const line of accuracy) say(line);

const b = rows.find((r) => r.name.startsWith("b: all"));
if (b) {
  const overRapier = b.rivals.rapier! / b.kernel;
  const overGap = b.rivals["manifold minGap"]! / b.kernel;
  say();
  say(`gate on b: ${overRapier.toFixed(1)}x rapier (at least 7), ${overGap.toFixed(0)}x manifold minGap (at least 10000): ${overRapier >= 7 && overGap >= 10000 ? "met" : "NOT met"}`);
}
mkdirSync(".artifacts", { recursive: true });
writeFileSync(".artifacts/bench.json", JSON.stringify({ node: process.versions.node, rows, lines }, null, 1));
