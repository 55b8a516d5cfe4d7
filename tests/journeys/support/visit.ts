import { execFileSync } from "node:child_process";
import { mkdirSync } from "node:fs";
import { chromium, type Browser, type BrowserContext, type Page } from "playwright-core";
import { afterAll, beforeAll, expect } from "vitest";
import type { Layout } from "#core/layout/schema.ts";
import { startService, type Service } from "../../support/service.ts";

const ARTIFACTS = new URL("../../../.artifacts/journeys/", import.meta.url).pathname;

/** A service with the built pages and a browser for all of a test file's visits; both end with it. */
export function journey(): { readonly service: Service; readonly browser: Browser } {
  const running = {} as { service: Service; browser: Browser };
  beforeAll(async () => {
    running.service = await startService({ site: true });
    running.browser = await openBrowser();
  }, 120_000);
  afterAll(async () => {
    await running.browser.close();
    await running.service.close();
  });
  return running;
}

/** Debian's Chromium, without a window. */
function openBrowser(): Promise<Browser> {
  const executablePath = execFileSync("sh", ["-c", "command -v chromium"], { encoding: "utf8" }).trim();
  return chromium.launch({ executablePath, args: ["--no-sandbox", "--disable-dev-shm-usage"] });
}

export interface VisitOptions {
  readonly url: string;
  readonly width?: number;
  readonly height?: number;
  readonly theme?: "light" | "dark";
}

export interface Visit {
  readonly page: Page;
  readonly context: BrowserContext;
  /** What the console complained of and what was thrown, so far. */
  readonly complaints: readonly string[];
  /** Keeps a picture of the page for people to look at. */
  picture(name: string): Promise<void>;
  signIn(role: "Owner" | "Designer" | "Fabricator" | "Viewer"): Promise<void>;
  /** Signs in as the owner and opens the demo layout's bench. */
  openBench(role?: "Owner" | "Designer" | "Fabricator" | "Viewer"): Promise<void>;
  /** Where a place of the car, mm of the view's two axes, lies on the page. */
  at(view: "plan" | "side" | "rear", u: number, v: number): Promise<{ x: number; y: number }>;
  click(view: "plan" | "side" | "rear", u: number, v: number): Promise<void>;
  /** Waits until the server has everything. */
  saved(): Promise<void>;
  /** The layout that is open, as the server has it. */
  document(): Promise<Layout>;
  close(): Promise<void>;
}

export async function visit(browser: Browser, { url, width = 1440, height = 900, theme = "light" }: VisitOptions): Promise<Visit> {
  const context = await browser.newContext({ viewport: { width, height }, colorScheme: theme, reducedMotion: "reduce", acceptDownloads: true, baseURL: url });
  const page = await context.newPage();
  page.setDefaultTimeout(8_000);
  const complaints: string[] = [];
  page.on("console", (message) => {
    if (message.type() === "error" || message.type() === "warning") complaints.push(message.text());
  });
  page.on("pageerror", (error) => complaints.push(error.message));
  const at: Visit["at"] = async (view, u, v) => {
    const pane = page.locator(`[data-view=${view}]`);
    const [box, paper] = await Promise.all([pane.boundingBox(), pane.evaluate((element) => ({ ...(element as HTMLElement).dataset }))]);
    const [left, top, scale] = [Number(paper["left"]), Number(paper["top"]), Number(paper["scale"])];
    return { x: box!.x + (u - left) * scale, y: box!.y + (top - v) * scale };
  };
  const signIn: Visit["signIn"] = async (role) => {
    await page.goto("/");
    await page.getByRole("button", { name: new RegExp(`^${role}`, "i") }).click();
    await page.getByRole("heading", { name: "Builds" }).waitFor();
  };
  return {
    page, context, complaints, at, signIn,
    picture: async (name) => {
      mkdirSync(ARTIFACTS, { recursive: true });
      await page.screenshot({ path: `${ARTIFACTS}${name}.png` });
    },
    openBench: async (role = "Owner") => {
      await signIn(role);
      await page.getByRole("link", { name: "Dunlin" }).click();
      await page.getByRole("link", { name: "Mufflers flat, third try" }).first().click();
      await page.locator("[data-view=plan][data-scale]").waitFor();
      await page.getByRole("listbox", { name: /^Gap ledger/u }).getByRole("option").first().waitFor();
    },
    click: async (view, u, v) => {
      const { x, y } = await at(view, u, v);
      await page.mouse.click(x, y);
    },
    saved: async () => {
      await expect.poll(() => page.getByRole("banner").getByRole("status").first().textContent(), { timeout: 15_000 }).toMatch(/^saved/u);
    },
    document: async () => {
      const path = new URL(page.url()).pathname.replace(/\/(sheets|history)$/u, "");
      return ((await (await page.request.get(`/api${path}`)).json()) as { document: Layout }).document;
    },
    close: () => context.close(),
  };
}
