import { describe, expect, it } from "vitest";
import { applyCommand } from "#core/layout/apply-command.ts";
import { emptyLayout } from "#core/layout/new-layout.ts";
import { partSchema, runSchema, type Layout } from "#core/layout/schema.ts";
import { applyPose, poseOf } from "#core/geometry/turn.ts";
import { tubePath } from "#core/geometry/tubes.ts";
import { directionOf, distanceOf, nextFace, twinCommand, wordOf } from "../../../src/client/editor/hands.ts";
import { allUnder } from "../../../src/client/editor/hit.ts";
import { legNear, withNode, withoutNode } from "../../../src/client/editor/nodes.ts";
import { cutsAt, extentOf, shapesOf } from "../../../src/client/editor/shapes.ts";
import { snapMove, snapPoint } from "../../../src/client/editor/snap.ts";
import { turnInView, turnWords } from "../../../src/client/editor/turning.ts";
import { thingsUnder } from "../../../src/client/editor/under.ts";

/** A box with its local origin in its middle. */
const box = (key: string, at: [number, number, number], size: [number, number, number]) =>
  partSchema.parse({ key, name: key, kind: "other", at, solids: [{ type: "box", size }] });
const layoutOf = (...parts: Layout["parts"]): Layout => ({ ...emptyLayout("test"), parts });

describe("the box used in these checks", () => {
  it("stands about its own origin", () => {
    const shape = shapesOf(layoutOf(box("a", [0, 0, 0], [100, 60, 40])), "plan").find((one) => one.key === "a")!;
    expect([...shape.box]).toEqual([-50, -30, 50, 30]);
  });
});

describe("keys and directions", () => {
  it("moves along the paper with the arrows and out of it with Page Up", () => {
    expect(wordOf(directionOf("plan", "ArrowRight"))).toBe("rear");
    expect(wordOf(directionOf("plan", "ArrowUp"))).toBe("right");
    expect(wordOf(directionOf("plan", "PageUp"))).toBe("up");
    expect(wordOf(directionOf("side", "PageUp"))).toBe("left");
    expect(wordOf(directionOf("side", "ArrowUp"))).toBe("up");
    expect(wordOf(directionOf("rear", "ArrowLeft"))).toBe("left");
    expect(wordOf(directionOf("rear", "PageDown"))).toBe("forward");
  });

  it("takes 12 3/8 as inches where inches are shown, and one step where nothing is typed", () => {
    expect(distanceOf("12 3/8", "in-fraction", 1)).toBeCloseTo(314.325, 9);
    expect(distanceOf("12 3/8\"", "mm", 1)).toBeCloseTo(314.325, 9);
    expect(distanceOf("", "mm", 1)).toBe(1);
    expect(distanceOf("12 3/", "mm", 1)).toBeNull();
  });
});

describe("nextFace", () => {
  const layout = layoutOf(box("mover", [0, 0, 0], [100, 100, 100]), box("wall", [300, 0, 0], [100, 100, 100]), box("aside", [180, 500, 0], [20, 100, 100]));
  it("brings the leading face onto the next face ahead, and passes what is not in the way", () => {
    // leading face at 50, the wall's near face at 250
    expect(nextFace(layout, ["mover"], [1, 0, 0])).toBeCloseTo(200, 9);
  });
  it("goes on to the far face once it lies on the near one", () => {
    const moved = layoutOf(box("mover", [200, 0, 0], [100, 100, 100]), box("wall", [300, 0, 0], [100, 100, 100]));
    expect(nextFace(moved, ["mover"], [1, 0, 0])).toBeCloseTo(100, 9);
  });
  it("says so where there is none", () => {
    expect(nextFace(layout, ["mover"], [-1, 0, 0])).toBeNull();
  });
});

describe("what is under a place", () => {
  it("is the smaller of two things one over the other, and everything can be reached", () => {
    const layout = layoutOf(box("large", [0, 0, 0], [400, 400, 50]), box("small", [50, 0, -200], [60, 60, 50]));
    const found = allUnder(shapesOf(layout, "plan").filter((one) => one.list === "parts"), 50, 0, 1);
    expect(found.map((one) => one.key)).toEqual(["small", "large"]);
  });
  it("is a thin run within the slack of its line, and not beyond", () => {
    const layout = { ...layoutOf(), runs: [runSchema.parse({ key: "line", name: "line", kind: "brake", diameter: 5, nodes: [{ key: "a", at: [0, 0, 0] }, { key: "b", at: [500, 0, 0] }] })] };
    expect(thingsUnder(layout, "plan", 250, 9, 10, 0, new Set(), new Set()).map((one) => one.key)).toEqual(["line"]);
    expect(thingsUnder(layout, "plan", 250, 11, 10, 0, new Set(), new Set())).toEqual([]);
  });
  it("is what the section cuts, and nothing in front of or behind it", () => {
    const layout = layoutOf(box("cut", [0, 0, 0], [100, 100, 100]), box("behind", [400, 0, 0], [100, 100, 100]));
    expect(thingsUnder(layout, "rear", 0, 0, 1, 20, new Set(), new Set()).map((one) => one.key)).toEqual(["cut"]);
    expect(cutsAt(layout, 300).filter((cut) => cut.list === "parts")).toEqual([]);
  });
});

describe("the drawn outline follows a part without being made anew", () => {
  it("shares its loops when the part moves and not when it turns", () => {
    const part = box("a", [0, 0, 0], [100, 60, 40]);
    const first = shapesOf(layoutOf(part), "plan").find((one) => one.key === "a")!;
    const moved = shapesOf(layoutOf({ ...part, at: [500, 0, 0] }), "plan").find((one) => one.key === "a")!;
    const turned = shapesOf(layoutOf({ ...part, turn: [0, 0, 90] }), "plan").find((one) => one.key === "a")!;
    expect(moved.loops).toBe(first.loops);
    expect([...moved.box]).toEqual([450, -30, 550, 30]);
    expect(turned.loops).not.toBe(first.loops);
    turned.box.forEach((value, i) => expect(value).toBeCloseTo([-30, -50, 30, 50][i]!, 6));
  });
  it("a run is as wide as its diameter", () => {
    const layout = { ...layoutOf(), runs: [runSchema.parse({ key: "pipe", name: "pipe", kind: "exhaust", diameter: 60, bendRadius: 90, nodes: [{ key: "a", at: [0, 0, 0] }, { key: "b", at: [400, 0, 0] }, { key: "c", at: [400, 400, 0] }] })] };
    const shape = shapesOf(layout, "plan").find((one) => one.key === "pipe")!;
    expect(shape.widths).toEqual([60]);
    // the outer edge of the bend's far straight lies a radius beyond its centre line
    expect(shape.box[2]).toBeCloseTo(430, 0);
    expect(extentOf(layout, new Set(["pipe"])).high[1]).toBeCloseTo(430, 6);
  });
});

describe("snapping", () => {
  const layout = layoutOf(box("mover", [0, 0, 0], [100, 100, 100]), box("wall", [300, 0, 0], [100, 100, 100]));
  const shapes = shapesOf(layout, "plan");
  const moverBox = [-50, -50, 50, 50] as const;
  it("lays a face on a face within reach, and names it", () => {
    const snapped = snapMove(layout, shapes, new Set(["mover"]), "plan", moverBox, 197, 33, 5);
    expect(snapped.du).toBeCloseTo(200, 9);
    expect(snapped.witnesses[0]).toEqual({ axis: 0, at: 250, name: "wall" });
  });
  it("leaves alone what is out of reach", () => {
    const snapped = snapMove(layout, shapes, new Set(["mover"]), "plan", moverBox, 170, 33, 5);
    expect([snapped.du, snapped.dv]).toEqual([170, 33]);
    expect(snapped.witnesses).toEqual([]);
  });
  it("puts the tape on a corner before an edge, with no say about the unseen direction", () => {
    const caught = snapPoint(layout, shapes, [], "plan", 252, -48, 8);
    expect(caught.at.map((value) => Math.round(value))).toEqual([250, -50]);
    expect([caught.name, caught.depth]).toEqual(["wall", null]);
  });
  it("takes the unseen coordinate of a port that it was put on", () => {
    expect(snapPoint(layout, [], [{ at: [10, 20, 333], name: "port" }], "plan", 12, 21, 8)).toEqual({ at: [10, 20], depth: 333, name: "port" });
  });
});

describe("turning by the handle", () => {
  it("keeps the pivot where it is and turns by the angle seen on the paper", () => {
    const part = box("a", [100, 50, 20], [200, 60, 40]);
    const pivot = [180, 70, 20] as const;
    const command = turnInView(part, "plan", 90, pivot);
    if (command.kind !== "place") throw new Error("a turn is a place command");
    const before = poseOf(part);
    const after = poseOf({ at: command.at, turn: command.turn! });
    // the material point at the pivot: its local coordinates are the pivot less the origin, since the part was not turned
    const local = [80, 20, 0] as const;
    applyPose(before, local).forEach((value, i) => expect(value).toBeCloseTo(pivot[i]!, 6));
    applyPose(after, local).forEach((value, i) => expect(value).toBeCloseTo(pivot[i]!, 2));
    // a point 50 rearward of it comes to lie 50 to the right: anticlockwise on paper
    applyPose(after, [130, 20, 0]).forEach((value, i) => expect(value).toBeCloseTo([180, 120, 20][i]!, 2));
  });
  it("is anticlockwise on the paper in every view", () => {
    for (const [view, u, v] of [["plan", 0, 1], ["side", 0, 2], ["rear", 1, 2]] as const) {
      const command = turnInView(box("a", [0, 0, 0], [10, 10, 10]), view, 30);
      if (command.kind !== "place") throw new Error("a turn is a place command");
      const along: [number, number, number] = [0, 0, 0];
      along[u] = 100;
      const turned = applyPose(poseOf({ at: command.at, turn: command.turn! }), along);
      expect(turned[u]).toBeCloseTo(100 * Math.cos(Math.PI / 6), 2);
      expect(turned[v]).toBeCloseTo(50, 2);
    }
  });
  it("speaks as the trade does: out is away from the middle of the car", () => {
    // seen from behind, anticlockwise takes the top to the left: out for a muffler on the left, in for one on the right
    expect(turnWords("rear", -400, 9.5)).toBe("lean out 9.5°");
    expect(turnWords("rear", 400, 9.5)).toBe("lean in 9.5°");
    expect(turnWords("rear", 400, -9.5)).toBe("lean out 9.5°");
    expect(turnWords("side", 0, -4)).toBe("lean back 4.0°");
    expect(turnWords("plan", 0, 3)).toBe("turn left 3.0°");
  });
});

describe("nodes of a run", () => {
  const run = runSchema.parse({ key: "r", name: "r", kind: "harness", diameter: 12, bendRadius: 30, nodes: [{ key: "n1", at: [0, 0, 0] }, { key: "n2", at: [400, 0, 100] }, { key: "n3", at: [400, 300, 100] }] });
  it("puts a node into the leg that passes nearest, on the leg itself, so that the length stays", () => {
    const leg = legNear(run, 200, 4, { u: 0, v: 1 })!;
    expect([leg.from, leg.to]).toEqual(["n1", "n2"]);
    expect(leg.at.map((value) => Math.round(value))).toEqual([200, 0, 50]);
    const more = withNode(run, leg.from, leg.to, leg.at).run;
    expect(more.nodes.map((node) => node.key)).toEqual(["n1", "n4", "n2", "n3"]);
    expect(tubePath(more).length).toBeCloseTo(tubePath(run).length, 6);
  });
  it("takes a node out again, and never leaves fewer than two", () => {
    expect(withoutNode(run, "n2")!.nodes.map((node) => node.key)).toEqual(["n1", "n3"]);
    expect(withoutNode(withoutNode(run, "n2")!, "n1")).toBeNull();
  });
  it("splits and joins the legs of a branched run", () => {
    const branched = runSchema.parse({ ...run, nodes: [...run.nodes, { key: "n5", at: [400, -200, 100] }], legs: [{ from: "n1", to: "n2" }, { from: "n2", to: "n3" }, { from: "n2", to: "n5" }] });
    const more = withNode(branched, "n1", "n2", [200, 0, 50]);
    expect(more.run.legs.map((leg) => `${leg.from}-${leg.to}`)).toEqual([`n1-${more.node}`, `${more.node}-n2`, "n2-n3", "n2-n5"]);
    expect(withoutNode(more.run, more.node)!.legs.map((leg) => `${leg.from}-${leg.to}`)).toContain("n1-n2");
    expect(withoutNode(branched, "n2")).toBeNull();
  });
});

describe("a twin", () => {
  it("lies beside the first, has a key of its own and is one command that the document takes", () => {
    const layout = layoutOf(box("a", [0, 0, 0], [100, 60, 40]));
    const twin = twinCommand(layout, ["a"])!;
    const applied = applyCommand(layout, twin.command);
    if (!applied.ok) throw new Error(applied.reason);
    const [first, second] = ["a", twin.keys[0]!].map((key) => shapesOf(applied.layout, "plan").find((one) => one.key === key)!);
    expect(second!.box[1]).toBeGreaterThan(first!.box[3]);
  });
});
