import { beforeAll, describe, expect, it } from "vitest";
import type { Layout, Solid } from "#core/layout/schema.ts";
import { journey, visit, type Visit } from "./support/visit.ts";

const running = journey();
let here: Visit;
beforeAll(async () => {
  here = await visit(running.browser, { url: running.service.url, width: 1600, height: 1150 });
  await here.openBench();
}, 60_000);

const stored = (): Promise<Layout> => here.document();
const tool = (word: string) => here.page.getByRole("toolbar", { name: "Tools" }).getByRole("button", { name: word, exact: true }).click();
const field = (label: string) => here.page.getByRole("textbox", { name: label, exact: true });
const write = async (label: string, text: string) => {
  await field(label).fill(text);
  await field(label).press("Enter");
};
const toList = () => here.page.getByRole("tab", { name: "Parts list" }).click();
const listed = (name: RegExp) => here.page.getByRole("listbox", { name: "Everything in the layout" }).getByRole("option", { name });

/** Lets go of everything, with the drawing's own Escape. */
const nothing = async () => {
  await here.page.locator("[data-view=plan]").focus();
  for (let i = 0; i < 4; i++) await here.page.keyboard.press("Escape");
};

/** What is written over in each shape's form, and what must be stored for it. */
const SHAPES: readonly { type: Solid["type"]; write: readonly (readonly [label: string, text: string])[]; stored: Record<string, unknown> }[] = [
  { type: "box", write: [["size, long", "310"], ["size, wide", "31 cm"], ["size, high", "4\""]], stored: { size: [310, 310, 101.6] } },
  { type: "round", write: [["Diameter", "6 1/2\""], ["Length", "300"]], stored: { diameter: 165.1, length: 300, axis: "x" } },
  { type: "cone", write: [["Diameter at the low end", "100"], ["Diameter at the high end", "0"], ["Length", "90"]], stored: { diameters: [100, 0], length: 90 } },
  { type: "oval", write: [["Width", "270"], ["Height", "130"], ["Length", "480"]], stored: { width: 270, height: 130, length: 480 } },
  { type: "ball", write: [["Diameter", "3 in"]], stored: { diameter: 76.2 } },
  { type: "prism", write: [["Pushed from", "-5"], ["Pushed to", "5"]], stored: { from: -5, to: 5, plane: "xz" } },
  { type: "outlines", write: [], stored: {} },
  { type: "bar", write: [["to, rear", "640"], ["Diameter", "42.4"]], stored: { from: [0, 0, 0], to: [640, 0, 0], diameter: 42.4 } },
  { type: "sheet", write: [["Thickness", "4"]], stored: { thickness: 4 } },
];

describe("on the bench", () => {
  describe("a part by its form", () => {
    it.each(SHAPES)("$type", async ({ type, write: sizes, stored: expected }) => {
      const { page } = here;
      const before = (await stored()).parts.length;
      await tool("Part");
      await write("Name", `A ${type} of mine`);
      await page.getByLabel("Shape", { exact: true }).selectOption(type);
      for (const [label, text] of sizes) await write(label, text);
      await write("Front face, rear of Front axle", "4000");
      await here.picture(`bench-part-${type}`);
      await page.getByRole("button", { name: "Place it" }).click();
      await here.saved();
      const { parts } = await stored();
      expect(parts).toHaveLength(before + 1);
      const made = parts.find((part) => part.name === `A ${type} of mine`)!;
      expect(made.solids).toHaveLength(1);
      expect(made.solids[0]).toMatchObject({ type, ...expected });
      await expect.poll(() => page.getByLabel("Name", { exact: true }).first().inputValue()).toBe(`A ${type} of mine`);
    });

    it("that crosses itself is refused at its field, and nothing is stored", async () => {
      const { page } = here;
      const before = await stored();
      await tool("Part");
      await page.getByLabel("Shape", { exact: true }).selectOption("prism");
      const outline = page.getByLabel(/^outline/u);
      await outline.fill("0, 0\n100, 100\n100, 0\n0, 100");
      await outline.blur();
      await page.getByRole("alert").filter({ hasText: /cross/iu }).waitFor();
      await here.picture("bench-outline-crosses");
      await outline.press("Escape");
      await page.getByRole("button", { name: "Leave it" }).click();
      expect(await stored()).toEqual(before);
    });
  });

  it("a part by its outlines, clicked in plan and side", async () => {
    const { page } = here;
    const before = (await stored()).parts.length;
    await tool("Outline");
    for (const [x, y] of [[-200, 760], [150, 760], [150, 860], [-200, 860]] as const) await here.click("plan", x, y);
    await page.getByRole("button", { name: "On to the side" }).click();
    for (const [x, z] of [[-200, 620], [150, 620], [150, 760], [-200, 800]] as const) await here.click("side", x, z);
    await here.picture("bench-outline");
    await page.getByRole("button", { name: "Done" }).click();
    await here.saved();
    const { parts } = await stored();
    expect(parts).toHaveLength(before + 1);
    const solid = parts.at(-1)!.solids[0]!;
    if (solid.type !== "outlines") throw new Error(solid.type);
    expect(solid.top).toHaveLength(4);
    expect(solid.side).toHaveLength(4);
    await page.keyboard.press("Escape");
  });

  it("a run by clicking its nodes, then shaped: diameter, bend radius, a node's third coordinate", async () => {
    const { page } = here;
    const before = (await stored()).runs.length;
    await tool("Run");
    for (const [x, y] of [[-400, 700], [0, 760], [400, 720]] as const) await here.click("plan", x, y);
    await page.getByRole("button", { name: "Done" }).click();
    await here.saved();
    let run = (await stored()).runs.at(-1)!;
    expect((await stored()).runs).toHaveLength(before + 1);
    expect(run.nodes).toHaveLength(3);
    await write("Outer diameter", "18");
    await write("Bend radius, to the centre line", "40");
    await write(`Node ${run.nodes[1]!.key}, up`, "333");
    await here.saved();
    run = (await stored()).runs.at(-1)!;
    expect(run).toMatchObject({ diameter: 18, bendRadius: 40 });
    expect(run.nodes[1]!.at[2]).toBe(333);
    await here.picture("bench-run");
    await page.keyboard.press("Escape");
  });

  it("a luggage space by its outlines, and its litres", async () => {
    const { page } = here;
    await tool("Space");
    for (const [x, y] of [[760, -300], [960, -300], [960, 300], [760, 300]] as const) await here.click("plan", x, y);
    await page.getByRole("button", { name: "On to the side" }).click();
    for (const [x, z] of [[760, 700], [960, 700], [960, 900], [760, 900]] as const) await here.click("side", x, z);
    await page.getByRole("button", { name: "Done" }).click();
    await here.saved();
    const { spaces } = await stored();
    expect(spaces).toHaveLength(2);
    await page.getByRole("tab", { name: "Stance and mass" }).click();
    await expect.poll(() => page.getByRole("tabpanel").textContent()).toContain(spaces[1]!.name);
    await here.picture("bench-space");
    await page.keyboard.press("Escape");
  });

  it("twins, locks, frees and removes a part", async () => {
    const { page } = here;
    await toList();
    await listed(/^Battery, battery/u).click();
    await page.getByRole("button", { name: "More for Battery" }).click();
    await page.getByRole("menuitem", { name: /^Twin/u }).click();
    await here.saved();
    let { parts } = await stored();
    const twin = parts.filter((part) => part.kind === "battery").at(-1)!;
    expect(parts.filter((part) => part.kind === "battery")).toHaveLength(2);
    await page.getByRole("button", { name: `More for ${twin.name}` }).click();
    await page.getByRole("menuitem", { name: "Lock in place" }).click();
    await here.saved();
    expect((await stored()).parts.find((part) => part.key === twin.key)!.locked).toBe(true);
    expect(await page.getByLabel(/front face$/u).first().isDisabled()).toBe(true);
    await page.getByRole("button", { name: `More for ${twin.name}` }).click();
    await page.getByRole("menuitem", { name: "Unlock" }).click();
    await page.getByRole("button", { name: `More for ${twin.name}` }).click();
    await page.getByRole("menuitem", { name: "Remove" }).click();
    await here.saved();
    ({ parts } = await stored());
    expect(parts.filter((part) => part.kind === "battery")).toHaveLength(1);
  });

  it("chassis numbers, a datum, a rule and the air", async () => {
    const { page } = here;
    await nothing();
    const open = (fold: RegExp) => page.locator("summary").filter({ hasText: fold }).click();
    await open(/^chassis/iu);
    await write("wheelbase", "2500");
    await here.saved();
    expect((await stored()).chassis.wheelbase).toBe(2500);
    await page.getByRole("button", { name: "undo", exact: true }).click();
    await write("wheelbase", "-4");
    await page.getByRole("alert").first().waitFor();
    await field("wheelbase").press("Escape");
    await open(/^datums/iu);
    await field("Firewall lies at").waitFor();
    await page.getByRole("button", { name: "Add one at the station" }).click();
    await here.saved();
    expect((await stored()).chassis.datums.length).toBe(4);
    await open(/^air/iu);
    await write("Air in the bay", "70");
    await here.saved();
    expect((await stored()).air.temperature).toBe(70);
    await page.getByRole("tab", { name: "Rules" }).click();
    await write("Rule 1, gap", "18");
    await here.saved();
    expect((await stored()).rules.pairs[0]!.gap).toBe(18);
    await page.getByRole("button", { name: "Add a rule" }).click();
    await here.saved();
    await here.picture("bench-forms");
    for (let i = 0; i < 4; i++) await page.getByRole("button", { name: "undo", exact: true }).click();
    await here.saved();
    expect((await stored()).rules.pairs[0]!.gap).toBe(15);
  });

  it("by keyboard alone: the parts list, the ledger, the ticket", async () => {
    const { page } = here;
    await toList();
    const list = page.getByRole("listbox", { name: "Everything in the layout" });
    await list.focus();
    await page.keyboard.press("Home");
    await page.keyboard.type("l");
    await page.keyboard.press("Enter");
    await expect.poll(() => list.getByRole("option", { selected: true }).count()).toBe(1);
    const name = (await list.getByRole("option", { selected: true }).getAttribute("aria-label"))!.split(",")[0]!;
    expect(name).toMatch(/^L/u);
    await expect.poll(() => page.getByLabel("Name", { exact: true }).first().inputValue()).toBe(name);
    await page.getByRole("tab", { name: "Parts list" }).focus();
    await page.keyboard.press("ArrowLeft");
    const ledger = page.getByRole("listbox", { name: /^Gap ledger/u });
    await ledger.focus();
    await page.keyboard.press("Home");
    await page.keyboard.press("ArrowDown");
    await page.keyboard.press(" ");
    await expect.poll(() => ledger.locator("[data-open]").count()).toBe(1);
    await here.picture("bench-shares");
    expect(await ledger.locator("[data-open]").textContent()).toMatch(/movement/u);
  });

  it("measures between two places with the tape", async () => {
    const { page } = here;
    await nothing();
    await tool("Fit");
    await tool("Tape");
    // from the firewall's datum to the bulkhead's, on free paper beside the car: 1660 - 640
    await here.click("plan", 640, 940);
    await here.click("plan", 1660, 940);
    await here.picture("bench-tape");
    await expect.poll(() => page.getByRole("status").allTextContents().then((all) => all.join(" "))).toMatch(/1020\.0/u);
    await nothing();
  });

  it("had nothing to complain of in the console", () => {
    expect(here.complaints).toEqual([]);
  });
});
