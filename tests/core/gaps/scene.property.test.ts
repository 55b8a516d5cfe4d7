import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { buildScene, checkGaps, previewScene, updateScene } from "../../../src/core/gaps/scene.ts";
import { applyCommand } from "../../../src/core/layout/apply-command.ts";
import type { Command } from "../../../src/core/layout/commands.ts";
import { applyDiff, invertDiff, sameValue } from "../../../src/core/layout/diff.ts";
import { exportLayout } from "../../../src/core/layout/export-layout.ts";
import { findFaults } from "../../../src/core/layout/invariants.ts";
import { parseLayout } from "../../../src/core/layout/parse-layout.ts";
import { layoutSchema, partSchema, type Layout } from "../../../src/core/layout/schema.ts";
import { randomLayout } from "./random-layout.ts";

const SEED = 20261201;
const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const base: Layout = layoutSchema.parse({
  format: "handbreadth-layout", version: 1, name: "random",
  chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, bump: 40, steer: 20, tyre }, rear: { track: 1500, rideHeight: 115, bump: 50, droop: 40, tyre } },
  parts: [
    { key: "engine", name: "Engine", kind: "engine", solids: [{ type: "box", size: [420, 500, 450] }], at: [2000, 0, 300], movement: { x: [-4, 4], y: [-8, 8], z: [-6, 6] } },
    { key: "turbo", name: "Turbo", kind: "turbo", solids: [{ type: "ball", diameter: 160 }, { type: "round", diameter: 70, length: 90, axis: "x", at: [80, 0, 0] }], at: [2320, -150, 480], carriedBy: "engine", heat: { surface: 700 } },
    { key: "ecu", name: "Engine computer", kind: "ecu", solids: [{ type: "box", size: [140, 180, 40] }], at: [1500, 300, 400], heat: { limit: 85 }, source: { how: "estimate", plusMinus: { x: [0, 20], z: [-2, 5] } }, ports: [{ key: "plug", at: [70, 0, 0], kind: "plug" }] },
    { key: "muffler", name: "Muffler", kind: "muffler", solids: [{ type: "oval", width: 200, height: 110, length: 500, axis: "x" }], at: [2900, 500, 200], heat: { surface: 250 }, source: { plusMinus: 3 } },
  ],
  runs: [
    { key: "loom", name: "Loom", kind: "harness", diameter: 20, bendRadius: 60, heat: { limit: 105 }, nodes: [{ key: "a", at: [1570, 300, 400], on: "ecu.plug" }, { key: "b", at: [1800, 340, 500] }, { key: "c", at: [2100, 200, 620] }, { key: "d", at: [2240, -100, 560], on: "turbo" }] },
    { key: "pipe", name: "Pipe", kind: "exhaust", diameter: 60, bendRadius: 90, material: "304", anchor: "a", heat: { surface: 500 }, carriedBy: "engine", nodes: [{ key: "a", at: [2350, -150, 400] }, { key: "b", at: [2350, 300, 300] }, { key: "c", at: [2600, 500, 220] }] },
  ],
  shafts: [{ key: "shaft", name: "Shaft", inboard: [2500, 200, 190], outboard: [2500, 640, 190], diameter: 30, wheel: "rear-right" }],
  rules: { pairs: [{ between: ["hot", "limited"], gap: 75 }, { between: ["kind:tyre", "any"], gap: 25 }] },
});

const coordinate = fc.integer({ min: -200, max: 200 });
const partKey = fc.constantFrom("engine", "turbo", "ecu", "muffler", "extra");
/** Commands that make sense often enough; a refusal is fine. */
const command: fc.Arbitrary<Command> = fc.oneof(
  fc.record({ kind: fc.constant("move" as const), items: fc.uniqueArray(partKey, { minLength: 1, maxLength: 3 }).map((keys) => keys.map((key) => ({ list: "parts" as const, key }))), by: fc.tuple(coordinate, coordinate, coordinate) }),
  fc.record({ kind: fc.constant("place" as const), key: partKey, at: fc.tuple(fc.integer({ min: 1200, max: 3000 }), coordinate, fc.integer({ min: 100, max: 700 })), turn: fc.tuple(coordinate, fc.integer({ min: -80, max: 80 }), coordinate) }),
  fc.record({ kind: fc.constant("move-node" as const), run: fc.constantFrom("loom", "pipe"), node: fc.constantFrom("a", "b", "c", "d"), at: fc.tuple(fc.integer({ min: 1400, max: 2800 }), coordinate, fc.integer({ min: 100, max: 700 })) }),
  fc.record({ kind: fc.constant("move" as const), items: fc.constant<{ list: "runs"; key: string }[]>([{ list: "runs", key: "pipe" }]), by: fc.tuple(coordinate, coordinate, coordinate) }),
  fc.constantFrom<Command>(
    { kind: "add", list: "parts", item: partSchema.parse({ key: "extra", name: "Extra", kind: "other", solids: [{ type: "box", size: [90, 80, 70] }], at: [2500, 0, 500], carriedBy: "engine" }) },
    { kind: "remove", list: "parts", key: "extra" },
    { kind: "remove", list: "parts", key: "ecu" },
    { kind: "rename", list: "parts", key: "turbo", to: "blower" },
    { kind: "rename", list: "parts", key: "blower", to: "turbo" },
    { kind: "reorder", list: "parts", key: "engine", position: 2 },
    { kind: "status", key: "ecu", status: "on hand" },
    { kind: "set", which: "rules", value: { near: 100, band: 8, gap: 12, pairs: [] } },
    { kind: "set", which: "chassis", value: { ...base.chassis, rear: { ...base.chassis.rear, rideHeight: 140, bump: 70 } } },
    { kind: "set", which: "contacts", value: [{ between: ["engine", "turbo"], why: "bolted" }] },
  ),
);

describe("a scene", () => {
  it(`updated equals one built anew, to the bit, after any commands (seed ${SEED})`, () => {
    fc.assert(fc.property(fc.array(command, { minLength: 1, maxLength: 12 }), (commands) => {
      let layout = base;
      const scene = buildScene(layout);
      for (const one of commands) {
        const applied = applyCommand(layout, one);
        if (!applied.ok) continue;
        const kept = JSON.stringify(scene.report);
        previewScene(scene, applied.layout);
        expect(JSON.stringify(scene.report)).toBe(kept);
        layout = applied.layout;
        updateScene(scene, layout, applied.diff);
        expect(JSON.stringify(scene.report)).toBe(JSON.stringify(checkGaps(layout)));
      }
    }), { seed: SEED, numRuns: 60 });
  });

  it(`updated equals one built anew, to the bit, also where items become quite other ones, come, go and change places (seed ${SEED})`, () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 1e6 }), fc.array(fc.tuple(fc.nat(5), fc.nat(1e6), fc.nat(20)), { minLength: 1, maxLength: 8 }), (seed, steps) => {
      let layout = randomLayout(seed);
      const scene = buildScene(layout);
      for (const [what, otherSeed, index] of steps) {
        const other = randomLayout(otherSeed);
        const part = other.parts[index % other.parts.length]!;
        const run = other.runs[index % 2]!;
        const commands: Command[] = [
          { kind: layout.parts.some((one) => one.key === part.key) ? "replace" : "add", list: "parts", item: part },
          { kind: "replace", list: "runs", item: run },
          { kind: "remove", list: "parts", key: layout.parts[index % layout.parts.length]!.key },
          { kind: "reorder", list: "parts", key: layout.parts[index % layout.parts.length]!.key, position: otherSeed % layout.parts.length },
          { kind: "set", which: "rules", value: other.rules },
          { kind: "set", which: "contacts", value: [{ between: ["r0", layout.parts[index % layout.parts.length]!.key], why: "clip" }] },
        ];
        const applied = applyCommand(layout, commands[what]!);
        if (!applied.ok) continue;
        layout = applied.layout;
        updateScene(scene, layout, applied.diff);
        expect(JSON.stringify(scene.report)).toBe(JSON.stringify(checkGaps(layout)));
      }
    }), { seed: SEED, numRuns: 40 });
  }, 120_000);

  it(`gives finite numbers, margins in order and verdicts that follow from them (seed ${SEED})`, () => {
    fc.assert(fc.property(fc.array(command, { minLength: 1, maxLength: 8 }), (commands) => {
      let layout = base;
      for (const one of commands) {
        const applied = applyCommand(layout, one);
        if (applied.ok) layout = applied.layout;
      }
      const { gaps } = checkGaps(layout);
      gaps.forEach((gap, i) => {
        for (const value of [gap.distance, gap.worst, gap.required, gap.margin, ...gap.pointA, ...gap.pointB, ...Object.values(gap.shares)]) expect(Number.isFinite(value)).toBe(true);
        expect(gap.worst).toBeLessThanOrEqual(gap.distance + 1e-6);
        expect(gap.margin).toBe(gap.worst - gap.required);
        if (gap.distance > 0) expect(Math.abs(Math.hypot(...gap.pointA.map((v, k) => v - gap.pointB[k]!)) - gap.distance)).toBeLessThan(1e-6);
        if (i > 0) expect(gap.margin).toBeGreaterThanOrEqual(gaps[i - 1]!.margin);
      });
    }), { seed: SEED, numRuns: 60 });
  });
});

describe("commands", () => {
  it(`keep the invariants, and their diffs lead there and back exactly (seed ${SEED})`, () => {
    fc.assert(fc.property(fc.array(command, { minLength: 1, maxLength: 15 }), (commands) => {
      let layout = base;
      for (const one of commands) {
        const applied = applyCommand(layout, one);
        if (!applied.ok) {
          expect(applied.reason.length).toBeGreaterThan(5);
          continue;
        }
        expect(findFaults(applied.layout)).toEqual([]);
        expect(sameValue(applyDiff(layout, applied.diff), applied.layout)).toBe(true);
        const back = applyCommand(applied.layout, { kind: "restore", changes: invertDiff(applied.diff) });
        expect(applied.diff.length === 0 || (back.ok && sameValue(back.layout, layout))).toBe(true);
        layout = applied.layout;
      }
    }), { seed: SEED, numRuns: 100 });
  });

  it(`export and import are exact inverses (seed ${SEED})`, () => {
    fc.assert(fc.property(fc.array(command, { maxLength: 8 }), (commands) => {
      let layout = base;
      for (const one of commands) {
        const applied = applyCommand(layout, one);
        if (applied.ok) layout = applied.layout;
      }
      const text = exportLayout(layout);
      const read = parseLayout(JSON.parse(text));
      expect(read.ok && sameValue(read.layout, layout)).toBe(true);
      expect(read.ok && exportLayout(read.layout)).toBe(text);
    }), { seed: SEED, numRuns: 60 });
  });
});
