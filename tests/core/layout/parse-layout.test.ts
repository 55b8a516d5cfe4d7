import { describe, expect, it } from "vitest";
import { parseLayout } from "../../../src/core/layout/parse-layout.ts";

const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const least = (rest: object = {}) => ({ format: "handbreadth-layout", version: 1, name: "least", chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } }, ...rest });
const part = (rest: object = {}) => ({ key: "a", name: "A", kind: "other", solids: [{ type: "box", size: [10, 10, 10] }], at: [0, 0, 0], ...rest });
const run = (rest: object = {}) => ({ key: "r", name: "R", kind: "harness", diameter: 10, nodes: [{ key: "a", at: [0, 0, 0] }, { key: "b", at: [100, 0, 0] }, { key: "c", at: [100, 100, 0] }], ...rest });
const faults = (json: unknown) => {
  const parsed = parseLayout(json);
  return parsed.ok ? [] : parsed.faults.map((fault) => fault.path);
};

describe("parseLayout", () => {
  it("fills in every default of the format", () => {
    const parsed = parseLayout(least({ parts: [part()], runs: [run()], spaces: [{ key: "s", name: "S", top: [[0, 0], [9, 0], [9, 9]], side: [[0, 0], [9, 0], [9, 9]] }], luggage: [{ key: "l", name: "L", size: [1, 2, 3] }], glass: [{ key: "g", name: "G", opening: [[0, 0, 0], [1, 0, 0], [1, 1, 0]] }] }));
    expect(parsed.ok).toBe(true);
    if (!parsed.ok) return;
    const { layout } = parsed;
    expect(layout.air).toEqual({ temperature: 60, speed: 0, surroundings: 60 });
    expect(layout.rules).toEqual({ near: 150, band: 5, gap: 10, pairs: [] });
    expect(layout.chassis.front).toMatchObject({ bump: 0, droop: 0, steer: 0 });
    expect(layout.parts[0]).toMatchObject({ turn: [0, 0, 0], massAt: [0, 0, 0], group: "", locked: false, mirrorOf: null, carriedBy: null, source: { how: "measured", plusMinus: 0 }, movement: { x: [0, 0], y: [0, 0], z: [0, 0] }, rock: [], ports: [], status: "needed" });
    expect("mass" in layout.parts[0]!).toBe(false);
    expect(layout.runs[0]).toMatchObject({ bendRadius: 0, legs: [], wires: [] });
    expect(layout.spaces[0]).toMatchObject({ wallGap: 0, partGap: 10 });
    expect(layout.luggage[0]).toMatchObject({ count: 1, upright: false });
    expect(layout.glass[0]).toMatchObject({ frit: 0 });
    expect(layout.body).toMatchObject({ skin: 0, skinGap: 0, sections: [] });
  });

  it("keeps extra in every object, and nothing else that it does not know", () => {
    const layout = least({ extra: { anything: [1, { deep: true }] }, parts: [part({ extra: { colour: "red" } })] });
    const parsed = parseLayout(layout);
    expect(parsed.ok && parsed.layout.parts[0]!.extra).toEqual({ colour: "red" });
    expect(parsed.ok && parsed.layout.extra).toEqual({ anything: [1, { deep: true }] });
    expect(faults(least({ colour: "red" }))).toEqual(["colour"]);
    expect(faults(least({ parts: [part({ solids: [{ type: "box", size: [1, 1, 1], hue: 3 }] })] }))).toEqual(["parts[0].solids[0].hue"]);
  });

  it.each([
    ["keys in small letters only", least({ parts: [part({ key: "Muffler" })] }), ["parts[0].key"]],
    ["a key over all lists once", least({ parts: [part()], runs: [run({ key: "a" })] }), ["runs[0].key"]],
    ["a datum's key too", least({ parts: [part({ key: "firewall" })], chassis: { ...least().chassis, datums: [{ key: "firewall", name: "F", axis: "x", at: 0 }] } }), ["chassis.datums[0].key"]],
    ["node keys once within a run", least({ runs: [run({ nodes: [{ key: "a", at: [0, 0, 0] }, { key: "a", at: [9, 0, 0] }] })] }), ["runs[0].nodes[1].key"]],
    ["heat with a surface or a limit", least({ parts: [part({ heat: {} })] }), ["parts[0].heat"]],
    ["emissivity within 0 to 1", least({ parts: [part({ heat: { surface: 300, emissivity: 1.2 } })] }), ["parts[0].heat.emissivity"]],
    ["movement low <= 0 <= high", least({ parts: [part({ movement: { x: [2, 5] } })] }), ["parts[0].movement.x[0]"]],
    ["nothing below absolute zero", least({ air: { temperature: -300 } }), ["air.temperature"]],
    ["carriers that exist", least({ parts: [part({ carriedBy: "nothing" })] }), ["parts[0].carriedBy"]],
    ["carriers without a circle", least({ parts: [part({ carriedBy: "b" }), part({ key: "b", carriedBy: "a" })] }), ["parts[0].carriedBy", "parts[1].carriedBy"]],
    ["a part not carried by itself", least({ parts: [part({ carriedBy: "a" })] }), ["parts[0].carriedBy"]],
    ["legs that close no loop", least({ runs: [run({ legs: [{ from: "a", to: "b" }, { from: "b", to: "c" }, { from: "c", to: "a" }] })] }), ["runs[0].legs[2]"]],
    ["legs that reach every node", least({ runs: [run({ legs: [{ from: "a", to: "b" }] })] }), ["runs[0].legs"]],
    ["legs to nodes that exist", least({ runs: [run({ legs: [{ from: "a", to: "z" }] })] }), ["runs[0].legs[0].to"]],
    ["wires to nodes that exist", least({ runs: [run({ wires: [{ key: "w", from: "a", to: "z", gauge: "20 AWG" }] })] }), ["runs[0].wires[0].to"]],
    ["nodes apart", least({ runs: [run({ nodes: [{ key: "a", at: [5, 5, 5] }, { key: "b", at: [5, 5, 5] }] })] }), ["runs[0].nodes[1].at"]],
    ["a node's port that exists", least({ parts: [part()], runs: [run({ nodes: [{ key: "a", at: [0, 0, 0], on: "a.plug" }, { key: "b", at: [9, 0, 0] }] })] }), ["runs[0].nodes[0].on"]],
    ["contacts between things that exist", least({ parts: [part()], contacts: [{ between: ["a", "b"] }] }), ["contacts[0].between[1]"]],
    ["a space with two outlines at least", least({ spaces: [{ key: "s", name: "S", top: [[0, 0], [9, 0], [9, 9]] }] }), ["spaces[0]"]],
    ["rules with selectors that are ones", least({ rules: { pairs: [{ between: ["colour:red", "any"], gap: 5 }] } }), ["rules.pairs[0].between[0]"]],
    ["version 1", least({ version: 2 }), ["version"]],
    ["sheets of even rows", least({ parts: [part({ solids: [{ type: "sheet", thickness: 2, rows: [[[0, 0, 0], [0, 1, 0]], [[1, 0, 0], [1, 1, 0], [1, 2, 0]]] }] })] }), ["parts[0].solids[0].rows[1]"]],
  ])("asks for %s", (_, json, paths) => expect(faults(json)).toEqual(paths));

  it("lets a generated tyre be carried on, contacted and clipped to", () => {
    expect(faults(least({ parts: [part({ carriedBy: "tyre-front-left" })], contacts: [{ between: ["a", "tyre-rear-left"] }] }))).toEqual([]);
  });

  it.each([null, undefined, 0, "text", true, [], {}, [[[]]], { format: "handbreadth-layout" }])("answers %j with faults, never with an exception", (json) => expect(faults(json).length).toBeGreaterThan(0));

  it("answers nesting without end, a million keys and a long list quickly", () => {
    let deep: unknown = 1;
    for (let i = 0; i < 200_000; i++) deep = [deep];
    expect(faults({ extra: deep }).length).toBe(1);
    expect(faults(least({ parts: Array.from({ length: 2001 }, () => part()) }))).toEqual(["parts"]);
    const many = Object.fromEntries(Array.from({ length: 300_000 }, (_, i) => [`k${i}`, 1]));
    expect(faults(least(many)).length).toBeGreaterThan(0);
    expect(faults(least(many)).length).toBeLessThanOrEqual(50);
  });

  it("takes keys like constructor for the plain words they are", () => {
    const parsed = parseLayout(least({ parts: [part({ key: "constructor" })], runs: [run({ key: "tostring", nodes: [{ key: "constructor", at: [0, 0, 0], on: "constructor" }, { key: "b", at: [50, 0, 0] }] })] }));
    expect(parsed.ok).toBe(true);
  });
});
