import { readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { gzipSync } from "node:zlib";
import type { AxeResults } from "axe-core";
import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { journey, visit, type Visit } from "./support/visit.ts";

const AXE = readFileSync(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");

const running = journey();

/** What axe-core finds against WCAG 2.2 A and AA, as "rule: element"; all but its one experimental rule. */
async function findings(page: Page): Promise<string[]> {
  await page.evaluate(AXE);
  const results = await page.evaluate(() => (window as unknown as { axe: { run(context: unknown, options: unknown): Promise<AxeResults> } }).axe.run(document, { runOnly: ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"], rules: { "label-content-name-mismatch": { enabled: false } } }));
  return results.violations.flatMap((violation) => violation.nodes.slice(0, 3).map((node) => `${violation.id}, ${violation.nodes.length} times: ${node.html.slice(0, 140)}`));
}

/** True where the page can be pushed sideways: something does not fit. */
const overflows = (page: Page) => page.evaluate(() => document.documentElement.scrollWidth > document.documentElement.clientWidth);

const SCREENS: readonly { name: string; go(here: Visit, bench: string): Promise<void> }[] = [
  { name: "builds", go: async ({ page }) => { await page.goto("/"); await page.getByRole("link", { name: "Dunlin" }).waitFor(); } },
  { name: "layouts", go: async ({ page }, bench) => { await page.goto(bench.split("/layouts/")[0]!); await page.getByRole("link", { name: "Mufflers flat, third try" }).waitFor(); await page.getByText("Tess Weld").waitFor(); } },
  { name: "bench", go: async ({ page }, bench) => { await page.goto(bench); await page.getByRole("listbox", { name: /^Gap ledger/u }).getByRole("option").first().waitFor(); } },
  { name: "bench-part", go: async ({ page }) => { await page.getByRole("tab", { name: "Parts list" }).click(); await page.getByRole("tabpanel").getByRole("option", { name: /^Catalyst/u }).click(); await page.getByLabel("Name", { exact: true }).waitFor(); } },
  { name: "bench-run", go: async ({ page }) => { await page.getByRole("tabpanel").getByRole("option", { name: /^Main loom/u }).click(); await page.getByLabel("Outer diameter").waitFor(); } },
  { name: "bench-stance", go: async ({ page }) => { await page.getByRole("tab", { name: "Stance and mass" }).click(); await page.getByText("front axle", { exact: true }).waitFor(); } },
  { name: "bench-rules", go: async ({ page }) => { await page.getByRole("tab", { name: "Rules" }).click(); await page.getByLabel("Rule 1, gap").waitFor(); } },
  { name: "bench-new-part", go: async ({ page }) => { await page.getByRole("toolbar", { name: "Tools" }).getByRole("button", { name: "Part", exact: true }).click(); await page.getByRole("button", { name: "Place it" }).waitFor(); } },
  { name: "sheets", go: async ({ page }, bench) => { await page.goto(`${bench}/sheets`); await page.getByText(/sheets?, A3, 1 : 20/u).waitFor(); } },
  { name: "history", go: async ({ page }, bench) => { await page.goto(`${bench}/history`); await page.getByRole("heading", { name: "History" }).waitFor(); } },
  { name: "method", go: async ({ page }) => { await page.goto("/method"); await page.getByRole("heading", { name: "How it measures" }).waitFor(); } },
  { name: "nowhere", go: async ({ page }) => { await page.goto("/nowhere"); await page.getByRole("main").waitFor(); } },
];

describe.each([["light", 1280, 800], ["light", 1920, 1080], ["dark", 1280, 800], ["dark", 1920, 1080]] as const)("every screen, %s, %i wide", (theme, width, height) => {
  let here: Visit;
  let bench: string;
  beforeAll(async () => {
    here = await visit(running.browser, { url: running.service.url, width, height, theme });
    await here.page.goto("/sign-in");
    await here.page.getByRole("button", { name: /^owner/iu }).waitFor();
    await here.picture(`screen-sign-in-${theme}-${width}`);
  });
  afterAll(() => here.close());

  it("sign-in", async () => {
    expect(await findings(here.page)).toEqual([]);
    expect(await overflows(here.page)).toBe(false);
    await here.openBench();
    bench = here.page.url();
  });

  it.each(SCREENS.map((screen) => [screen.name, screen] as const))("%s", async (name, screen) => {
    await screen.go(here, bench);
    await here.picture(`screen-${name}-${theme}-${width}`);
    expect(await findings(here.page)).toEqual([]);
    expect(await overflows(here.page)).toBe(false);
  });

  it("had nothing to complain of in the console", () => {
    expect(here.complaints).toEqual([]);
  });
});

describe("what is fetched, gzipped", () => {
  it("stays within the budgets: the first page 120 kB of script, 15 kB of style, four letter files of 90 kB; the bench's own page 160 kB", async () => {
    const here = await visit(running.browser, { url: running.service.url });
    const fetched: string[] = [];
    here.page.on("response", (response) => fetched.push(new URL(response.url()).pathname));
    const kilobytes = (paths: readonly string[], ending: string) => {
      const files = [...new Set(paths)].filter((path) => path.startsWith("/assets/") && path.endsWith(ending));
      const bytes = files.map((path) => readFileSync(`dist/client${path}`));
      return { count: files.length, size: bytes.reduce((sum, file) => sum + (ending === ".woff2" ? file.length : gzipSync(file).length), 0) / 1000 };
    };
    await here.page.goto("/sign-in");
    await here.page.getByRole("button", { name: /^owner/iu }).waitFor();
    await here.page.waitForLoadState("networkidle");
    const first = [...fetched];
    expect(kilobytes(first, ".js").count).toBeGreaterThan(0);
    expect(kilobytes(first, ".js").size).toBeLessThan(120);
    expect(kilobytes(first, ".css").size).toBeLessThan(15);
    await here.openBench();
    await here.page.waitForLoadState("networkidle");
    const letters = kilobytes(fetched, ".woff2");
    expect(letters.count).toBeLessThanOrEqual(4);
    expect(letters.size).toBeLessThan(90);
    const page = kilobytes(fetched.filter((path) => path.includes("bench-page")), ".js");
    expect(page.count).toBe(1);
    expect(page.size).toBeLessThan(160);
    await here.close();
  });
});

describe("the viewer", () => {
  it("reads and prints, and finds nothing that would change something", async () => {
    const here = await visit(running.browser, { url: running.service.url });
    await here.openBench("Viewer");
    const { page } = here;
    for (const word of ["Part", "Outline", "Run", "Space"]) expect(await page.getByRole("toolbar", { name: "Tools" }).getByRole("button", { name: word, exact: true }).count()).toBe(0);
    expect(await page.getByRole("button", { name: "undo", exact: true }).count()).toBe(0);
    await here.click("plan", 3000, -480);
    const front = page.getByLabel("rear of Rear axle, front face");
    expect(await front.isDisabled()).toBe(true);
    // dragging moves nothing
    const before = await page.request.get(`/api${new URL(page.url()).pathname}`).then((answer) => answer.text());
    const from = await here.at("plan", 3000, -480);
    await page.mouse.move(from.x, from.y);
    await page.mouse.down();
    await page.mouse.move(from.x + 30, from.y + 30, { steps: 4 });
    await page.mouse.up();
    await page.keyboard.type("50");
    await page.keyboard.press("ArrowRight");
    expect(await page.request.get(`/api${new URL(page.url()).pathname}`).then((answer) => answer.text())).toBe(before);
    await here.picture("viewer-bench");
    await page.getByRole("link", { name: "Print sheet" }).click();
    await page.getByText(/sheets?, A3, 1 : 20/u).waitFor();
    expect(here.complaints).toEqual([]);
    await here.close();
  });
});
