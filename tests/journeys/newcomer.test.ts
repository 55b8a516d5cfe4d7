import { readFileSync, writeFileSync } from "node:fs";
import { mkdtempSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import { parseLayout } from "#core/layout/parse-layout.ts";
import type { Layout } from "#core/layout/schema.ts";
import { readPdf } from "../support/pdf.ts";
import { journey, visit, type Visit } from "./support/visit.ts";

const running = journey();
let here: Visit;
beforeAll(async () => {
  here = await visit(running.browser, { url: running.service.url, width: 1600, height: 1000 });
}, 60_000);

const stored = (): Promise<Layout> => here.document();
const part = (layout: Layout, key: string) => layout.parts.find((one) => one.key === key)!;
const rows = () => here.page.getByRole("listbox", { name: /^Gap ledger/u }).getByRole("option").allTextContents();

/** The newcomer's list, in its order: each step goes on from where the last one ended. */
describe("somebody who has never been here", () => {
  it("signs in with one click and sees the demo layout in three views, its problems worst first", async () => {
    await here.openBench();
    for (const view of ["plan", "side", "rear"]) await here.page.locator(`[data-view=${view}] canvas`).first().waitFor();
    const first = (await rows()).slice(0, 4);
    expect(first[0]).toMatch(/rub.*Charge hose.*Right half-shaft/u);
    expect(first[1]).toMatch(/short.*Catalyst.*Clutch line/u);
    expect(first[2]).toMatch(/short.*Radiator fan.*Steering rack.*estimate/u);
    expect(first[3]).toMatch(/tight/u);
    // plan and side share x; side and section share z
    const [plan, side, rear] = await Promise.all((["plan", "side", "rear"] as const).map((view) => here.page.locator(`[data-view=${view}]`).evaluate((pane) => ({ ...(pane as HTMLElement).dataset }))));
    expect(plan!["left"]).toBe(side!["left"]);
    expect(side!["top"]).toBe(rear!["top"]);
    await here.picture("newcomer-1-bench");
  });

  it("drags a muffler and sees the gaps change while it is in the hand", async () => {
    const { page } = here;
    const before = await rows();
    const from = await here.at("plan", 3000, -480);
    const to = await here.at("plan", 3000, -400);
    await page.mouse.move(from.x, from.y);
    await page.mouse.down();
    await page.mouse.move((from.x + to.x) / 2, (from.y + to.y) / 2, { steps: 4 });
    await page.mouse.move(to.x, to.y, { steps: 4 });
    await expect.poll(rows).not.toEqual(before);
    const during = await rows();
    expect(during.some((row) => /Left rail.*Left muffler|Left muffler.*Left rail/u.test(row))).toBe(true);
    expect(part(await stored(), "muffler-left").at[1]).toBe(-480);
    await here.picture("newcomer-2-dragging");
    await page.mouse.up();
    await here.saved();
    const moved = part(await stored(), "muffler-left").at[1];
    expect(moved).toBeGreaterThan(-440);
    expect(moved).toBeLessThan(-360);
  });

  it("takes it back, and does it again", async () => {
    const { page } = here;
    await page.getByRole("button", { name: "undo", exact: true }).click();
    await here.saved();
    expect(part(await stored(), "muffler-left").at[1]).toBe(-480);
    await page.keyboard.press("Control+Shift+Z");
    await here.saved();
    expect(part(await stored(), "muffler-left").at[1]).toBeGreaterThan(-440);
    await page.keyboard.press("Control+Z");
    await here.saved();
    expect(part(await stored(), "muffler-left").at[1]).toBe(-480);
  });

  it("types a position in inches, whatever is shown", async () => {
    const { page } = here;
    await here.click("plan", 3000, -480);
    const front = page.getByLabel("rear of Rear axle, front face");
    expect(await front.inputValue()).toBe("260.0");
    await front.fill("12 3/8\"");
    await front.press("Enter");
    await here.saved();
    // 12 3/8 in = 314.325 mm; the muffler's front face stood at 260
    const [x] = part(await stored(), "muffler-left").at;
    expect(x - 2990).toBeCloseTo(314.325 - 260, 6);
    await page.getByLabel("Units").selectOption("in-fraction");
    await expect.poll(() => front.inputValue()).toBe("12 3/8");
    await front.fill("10 1/4");
    await front.press("Enter");
    await here.saved();
    expect(part(await stored(), "muffler-left").at[0] - 2990).toBeCloseTo(10.25 * 25.4 - 260, 6);
    await front.fill("ten");
    await front.press("Enter");
    expect(await page.getByRole("alert").first().textContent()).not.toBe("");
    await front.press("Escape");
    await page.getByLabel("Units").selectOption("mm");
    for (let i = 0; i < 2; i++) await page.getByRole("button", { name: "undo", exact: true }).click();
    await here.saved();
    expect(part(await stored(), "muffler-left").at).toEqual([2990, -480, 150]);
  });

  it("types a distance, then an arrow, on the drawing", async () => {
    const { page } = here;
    await here.click("plan", 3000, -480);
    await page.keyboard.type("12 3/8\"");
    await page.keyboard.press("ArrowRight");
    await here.saved();
    expect(part(await stored(), "muffler-left").at[0]).toBeCloseTo(2990 + 314.325, 6);
    await page.keyboard.press("ArrowUp");
    await here.saved();
    // one tape step of 1 mm, up the plan: to the car's right
    expect(part(await stored(), "muffler-left").at[1]).toBe(-479);
    await page.keyboard.press("Control+Z");
    await page.keyboard.press("Control+Z");
    await here.saved();
    expect(part(await stored(), "muffler-left").at).toEqual([2990, -480, 150]);
  });

  it("drags a node of the loom", async () => {
    const { page } = here;
    await page.getByRole("tab", { name: "Parts list" }).click();
    await page.getByRole("listbox", { name: "Everything in the layout" }).getByRole("option", { name: /^Main loom/u }).click();
    await page.getByRole("tab", { name: "Gap ledger" }).click();
    const node = (await stored()).runs.find((run) => run.key === "loom-main")!.nodes.find((one) => one.key === "b")!;
    await page.getByLabel("of what is selected").check();
    const before = await rows();
    expect(before.length).toBeGreaterThan(2);
    expect(before.every((row) => row.includes("Main loom"))).toBe(true);
    const from = await here.at("side", node.at[0], node.at[2]);
    await page.mouse.move(from.x, from.y);
    await page.mouse.down();
    await page.mouse.move(from.x - 4, from.y - 6, { steps: 2 });
    await page.mouse.move(from.x - 10, from.y - 18, { steps: 4 });
    await expect.poll(rows).not.toEqual(before);
    await here.picture("newcomer-3-node");
    await page.mouse.up();
    await here.saved();
    const after = (await stored()).runs.find((run) => run.key === "loom-main")!.nodes.find((one) => one.key === "b")!;
    expect(after.at[2]).toBeGreaterThan(node.at[2] + 20);
    expect(after.at[1]).toBe(node.at[1]);
    await page.getByLabel("of what is selected").uncheck();
    await page.getByRole("button", { name: "undo", exact: true }).click();
    await here.saved();
  });

  it("finds everything again after a reload, and in the history who did what", async () => {
    const { page } = here;
    await page.getByLabel("Units").selectOption("mm");
    await here.click("plan", 3000, -480);
    await page.keyboard.type("30");
    await page.keyboard.press("ArrowRight");
    await here.saved();
    await page.reload();
    await page.getByRole("listbox", { name: /^Gap ledger/u }).getByRole("option").first().waitFor();
    expect(part(await stored(), "muffler-left").at[0]).toBe(3020);
    await page.getByRole("link", { name: "History" }).click();
    await page.getByText(/Left muffler/u).first().waitFor();
    expect(await page.getByText("Maren Built").count()).toBeGreaterThan(0);
    await here.picture("newcomer-4-history");
    await page.getByRole("link", { name: "Bench" }).click();
  });

  it("exports the layout file, which reads back as the very document, and brings it in as another layout", async () => {
    const { page } = here;
    const document = await stored();
    await page.getByRole("link", { name: "Dunlin", exact: true }).click();
    await page.getByRole("button", { name: "More for Mufflers flat, third try" }).click();
    const [download] = await Promise.all([page.waitForEvent("download"), page.getByRole("menuitem", { name: "Export the layout file" }).click()]);
    const text = readFileSync(await download.path(), "utf8");
    const read = parseLayout(JSON.parse(text));
    if (!read.ok) throw new Error(JSON.stringify(read.faults));
    expect(read.layout).toEqual(document);
    const file = join(mkdtempSync(join(tmpdir(), "layout-")), "again.layout.json");
    writeFileSync(file, JSON.stringify({ ...JSON.parse(text) as object, name: "Brought in again" }));
    await page.getByLabel("Layout file").setInputFiles(file);
    await page.getByRole("link", { name: "Brought in again" }).waitFor();
    await here.picture("newcomer-5-layouts");
    await page.getByRole("link", { name: "Brought in again" }).click();
    await page.locator("[data-view=plan][data-scale]").waitFor();
    expect(await stored()).toEqual({ ...document, name: "Brought in again" });
    await page.getByRole("link", { name: "Dunlin", exact: true }).click();
  });

  it("is told where a wrong file is wrong, and nothing comes of it", async () => {
    const { page } = here;
    const file = join(mkdtempSync(join(tmpdir(), "layout-")), "wrong.layout.json");
    writeFileSync(file, JSON.stringify({ ...(JSON.parse(readFileSync("examples/dunlin.layout.json", "utf8")) as object), name: "Wrong", chassis: { wheelbase: -3 } }));
    await page.getByLabel("Layout file").setInputFiles(file);
    await page.getByRole("dialog").getByText(/chassis\.wheelbase/u).first().waitFor();
    await here.picture("newcomer-6-wrong-file");
    await page.keyboard.press("Escape");
    expect(await page.getByRole("link", { name: "Wrong", exact: true }).count()).toBe(0);
  });

  it("prints a dimensioned sheet at true scale, the same one as on the screen", async () => {
    const { page } = here;
    await page.getByRole("link", { name: "Mufflers flat, third try" }).first().click();
    await page.getByRole("link", { name: "Print sheet" }).click();
    await page.getByText(/sheets?, A3, 1 : 20/u).waitFor();
    const preview = (await page.locator("main svg").allTextContents()).join(" ");
    await here.picture("newcomer-7-sheet");
    const [download] = await Promise.all([page.waitForEvent("download", { timeout: 20_000 }), page.getByRole("link", { name: "Download the PDF" }).or(page.getByRole("button", { name: "Download the PDF" })).click()]);
    const read = readPdf(readFileSync(await download.path()));
    expect(Math.abs(read.size[0] - 420)).toBeLessThan(0.1);
    for (const said of ["General arrangement", "Left muffler", "CHECK BAR 100 mm", "SIDE, FROM THE LEFT"]) {
      expect(read.text).toContain(said);
      expect(preview).toContain(said);
    }
    await page.getByLabel("Paper").selectOption("A1");
    await page.getByText(/sheets?, A1, 1 : 10/u).waitFor();
  }, 60_000);

  it("signs out, and then has to sign in", async () => {
    const { page } = here;
    await page.getByRole("button", { name: "You: Maren Built" }).click();
    await page.getByRole("button", { name: "Sign out" }).click();
    await page.waitForURL(/sign-in/u);
    await page.goto("/builds/00000000-0000-4000-8000-000000000000");
    await page.waitForURL(/sign-in/u);
  });

  it("had nothing to complain of in the console", () => {
    // Chromium itself notes an answer of 400: the wrong file's
    expect(here.complaints).toEqual(["Failed to load resource: the server responded with a status of 400 (Bad Request)"]);
  });
});
