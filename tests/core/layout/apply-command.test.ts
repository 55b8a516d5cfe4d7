import { describe, expect, it } from "vitest";
import { applyCommand } from "../../../src/core/layout/apply-command.ts";
import { rolesFor, readsAndWrites } from "../../../src/core/layout/command-access.ts";
import { directionText, labelFor } from "../../../src/core/layout/command-labels.ts";
import type { Command } from "../../../src/core/layout/commands.ts";
import { layoutSchema, type Layout } from "../../../src/core/layout/schema.ts";

const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const box = [{ type: "box", size: [100, 100, 100] }];
const layout: Layout = layoutSchema.parse({
  format: "handbreadth-layout", version: 1, name: "t",
  chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } },
  parts: [
    { key: "ecu", name: "Engine computer", kind: "ecu", solids: box, at: [1000, 0, 300], ports: [{ key: "plug", at: [50, 0, 0], kind: "plug" }] },
    { key: "rail", name: "Rail", kind: "frame", solids: box, at: [0, 0, 0], locked: true },
    { key: "engine", name: "Engine", kind: "engine", solids: box, at: [2000, 0, 300] },
  ],
  runs: [{ key: "loom", name: "Loom", kind: "harness", diameter: 20, carriedBy: "engine", nodes: [{ key: "a", at: [1050, 0, 300], on: "ecu.plug" }, { key: "b", at: [1400, 0, 500], clip: "rail" }, { key: "c", at: [1950, 0, 300], on: "engine" }] }],
  spaces: [{ key: "boot", name: "Boot", top: [[0, 0], [100, 0], [100, 100]], side: [[0, 0], [100, 0], [100, 100]] }],
  contacts: [{ between: ["engine", "loom"], why: "plugged" }],
  rules: { pairs: [{ between: ["key:engine", "any"], gap: 15 }] },
});
const done = (command: Command) => {
  const applied = applyCommand(layout, command);
  if (!applied.ok) throw new Error(applied.reason);
  return applied;
};
const refused = (command: Command) => {
  const applied = applyCommand(layout, command);
  return applied.ok ? "" : applied.reason;
};
const nodeAt = (l: Layout, key: string) => l.runs[0]!.nodes.find((node) => node.key === key)!.at;

describe("applyCommand", () => {
  it("moves a part and the run ends bound to it, and nothing else", () => {
    const { layout: after, diff } = done({ kind: "move", items: [{ list: "parts", key: "ecu" }], by: [10, -20, 5] });
    expect(after.parts[0]!.at).toEqual([1010, -20, 305]);
    expect(nodeAt(after, "a")).toEqual([1060, -20, 305]);
    expect(nodeAt(after, "b")).toEqual([1400, 0, 500]);
    expect(diff.map((c) => c.key)).toEqual(["ecu", "loom"]);
    expect(after.parts[2]).toBe(layout.parts[2]);
  });

  it("turns a bound node about the part: yaw 90 sends the plug from rear to right", () => {
    const { layout: after } = done({ kind: "place", key: "ecu", at: [1000, 0, 300], turn: [0, 0, 90] });
    expect(nodeAt(after, "a").map((v) => Math.round(v * 1e9) / 1e9)).toEqual([1000, 50, 300]);
  });

  it("moves a run's free nodes, but not the ends that parts hold", () => {
    const { layout: after } = done({ kind: "move", items: [{ list: "runs", key: "loom" }], by: [0, 30, 0] });
    expect(nodeAt(after, "a")).toEqual([1050, 0, 300]);
    expect(nodeAt(after, "b")).toEqual([1400, 30, 500]);
  });

  it("moves outlines of a space by what they show", () => {
    const { layout: after } = done({ kind: "move", items: [{ list: "spaces", key: "boot" }], by: [1, 2, 3] });
    expect(after.spaces[0]!.top![0]).toEqual([1, 2]);
    expect(after.spaces[0]!.side![0]).toEqual([1, 3]);
  });

  it("leaves what is locked where it is", () => {
    expect(refused({ kind: "move", items: [{ list: "parts", key: "rail" }], by: [1, 0, 0] })).toMatch(/Rail is locked/);
    expect(refused({ kind: "place", key: "rail", at: [1, 0, 0] })).toMatch(/locked/);
    expect(refused({ kind: "replace", list: "parts", item: { ...layout.parts[1]!, at: [5, 0, 0] } })).toMatch(/locked/);
    expect(done({ kind: "replace", list: "parts", item: { ...layout.parts[1]!, locked: false } }).layout.parts[1]!.locked).toBe(false);
  });

  it("removes nothing that others need, and names them", () => {
    expect(refused({ kind: "remove", list: "parts", key: "engine" })).toMatch(/Loom \(carried by it\).*Loom, node c.*contact engine \/ loom/);
    const freed = done({ kind: "together", label: "free it", commands: [
      { kind: "set", which: "contacts", value: [] },
      { kind: "remove", list: "runs", key: "loom" },
      { kind: "remove", list: "parts", key: "engine" },
    ] });
    expect(freed.layout.parts.map((p) => p.key)).toEqual(["ecu", "rail"]);
  });

  it("follows a renamed key everywhere", () => {
    const { layout: after } = done({ kind: "rename", list: "parts", key: "engine", to: "motor" });
    expect(after.parts[2]!.key).toBe("motor");
    expect(after.runs[0]).toMatchObject({ carriedBy: "motor" });
    expect(after.runs[0]!.nodes[2]!.on).toBe("motor");
    expect(after.contacts[0]!.between).toEqual(["motor", "loom"]);
    expect(after.rules.pairs[0]!.between[0]).toBe("key:motor");
    expect(refused({ kind: "rename", list: "parts", key: "engine", to: "ecu" })).toMatch(/already something with the key/);
  });

  it("takes together all or nothing", () => {
    expect(refused({ kind: "together", label: "x", commands: [{ kind: "status", key: "ecu", status: "fitted" }, { kind: "remove", list: "parts", key: "nothing" }] })).toMatch(/no "nothing"/);
  });

  it("gives an empty diff where nothing changes", () => {
    expect(done({ kind: "replace", list: "parts", item: layout.parts[0]! }).diff).toEqual([]);
  });

  it("takes back only what is still as it was left", () => {
    const { layout: moved, diff } = done({ kind: "move", items: [{ list: "parts", key: "engine" }], by: [1, 0, 0] });
    const back: Command = { kind: "restore", changes: diff.map((c) => ({ ...c, before: c.after, after: c.before })) };
    expect(applyCommand(moved, back).ok).toBe(true);
    expect(applyCommand(layout, back).ok).toBe(false);
  });
});

describe("who may give a command", () => {
  it.each<[Command, readonly string[]]>([
    [{ kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, 0] }, ["owner"]],
    [{ kind: "move", items: [{ list: "spaces", key: "boot" }], by: [1, 0, 0] }, ["owner", "designer"]],
    [{ kind: "status", key: "ecu", status: "fitted" }, ["owner", "fabricator"]],
    [{ kind: "set", which: "body", value: layout.body }, ["owner", "designer"]],
    [{ kind: "set", which: "rules", value: layout.rules }, ["owner"]],
    [{ kind: "together", label: "x", commands: [{ kind: "status", key: "ecu", status: "fitted" }, { kind: "set", which: "body", value: layout.body }] }, ["owner"]],
  ])("%j: %j", (command, roles) => expect(rolesFor(command)).toEqual(roles));

  it("a status change may be taken back by whoever may make one, a move may not", () => {
    const undo = (command: Command) => rolesFor({ kind: "restore", changes: [...done(command).diff].map((c) => ({ ...c, before: c.after, after: c.before })) });
    expect(undo({ kind: "status", key: "ecu", status: "fitted" })).toEqual(["owner", "fabricator"]);
    expect(undo({ kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, 0] })).toEqual(["owner"]);
  });
});

describe("what a command touches", () => {
  it("is the part and the runs that it carries along", () => {
    expect(readsAndWrites({ kind: "move", items: [{ list: "parts", key: "ecu" }], by: [1, 0, 0] }, layout)).toEqual([{ list: "parts", key: "ecu" }, { list: "runs", key: "loom" }]);
  });
});

describe("labels", () => {
  it("say what happened in the trade's words", () => {
    expect(labelFor({ kind: "move", items: [{ list: "parts", key: "ecu" }], by: [12, 0, -4] }, layout)).toBe("Move Engine computer 12.0 rear, 4.0 down");
    expect(directionText([0, -3, 0])).toBe("3.0 left");
    expect(labelFor({ kind: "remove", list: "parts", key: "ecu" }, layout)).toBe("Remove Engine computer");
  });
});
