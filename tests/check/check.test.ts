import { spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { parseLayout } from "../../src/core/layout/parse-layout.ts";
import { fullReport } from "../../src/core/reports.ts";

const ROOT = new URL("../..", import.meta.url).pathname;
let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "handbreadth-check-"));
  // builds once where sources are newer
  check("--help");
}, 180_000);
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** As `npm run --silent check -- …` runs it. */
function check(...args: string[]) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [join(ROOT, "server/setup/check.js"), ...args], { cwd: folder, encoding: "utf8", maxBuffer: 64 * 1024 * 1024, env: { ...process.env, INIT_CWD: folder } });
  return { status, stdout, stderr };
}
function file(name: string, content: unknown): string {
  const path = join(folder, name);
  writeFileSync(path, typeof content === "string" ? content : JSON.stringify(content));
  return path;
}
const tyre = { diameter: 640, width: 200, loadedRadius: 305 };
const plain = (parts: unknown[]) => ({ format: "handbreadth-layout", version: 1, name: "Two boxes", chassis: { wheelbase: 2500, front: { track: 1500, rideHeight: 115, tyre }, rear: { track: 1500, rideHeight: 115, tyre } }, parts });
const box = (key: string, x: number) => ({ key, name: key, kind: "other", solids: [{ type: "box", size: [100, 100, 100] }], at: [x, 0, 1500] });

describe("the check command", () => {
  it("ends with 0 and says so when nothing is too near", () => {
    const { status, stdout, stderr } = check(file("clear.layout.json", plain([box("a", 1000), box("b", 1140)])));
    expect(status).toBe(0);
    expect(stderr).toBe("");
    expect(stdout).toMatch(/0 touch, 0 rub, 0 short, 0 tight, 1 clear/);
    expect(stdout).toMatch(/1\s+clear\s+a\s+b\s+40\.0\s+40\.0\s+10\.0\s+30\.0\s+default gap/);
    expect(stdout).toMatch(/Measure on the car/);
  });

  it.each([["touch", 1100], ["short", 1105]])("ends with 1 when something is %s", (verdict, x) => {
    const { status, stdout } = check(file(`${verdict}.layout.json`, plain([box("a", 1000), box("b", x)])));
    expect(status).toBe(1);
    expect(stdout).toContain(`1 ${verdict}`);
  });

  it("ends with 0 on an empty layout", () => {
    const { status, stdout } = check(file("empty.layout.json", plain([])));
    expect(status).toBe(0);
    expect(stdout).toMatch(/Nothing is near anything else/);
  });

  it("takes a path from where it was called, and a file that begins with a byte order mark", () => {
    file("marked.layout.json", `\uFEFF${JSON.stringify(plain([]))}`);
    expect(check("marked.layout.json").status).toBe(0);
  });

  it("prints with --json one object and nothing else, in full doubles: the same as the functions give", () => {
    const layout = plain([box("a", 1000), box("b", 1140 + 1 / 3)]);
    const { status, stdout, stderr } = check(file("json.layout.json", layout), "--json", "--seconds", "1");
    expect(status).toBe(0);
    expect(stderr).toBe("");
    const report = JSON.parse(stdout);
    const parsed = parseLayout(layout);
    expect(parsed.ok && report).toEqual(parsed.ok && JSON.parse(JSON.stringify(fullReport(parsed.layout))));
    expect(report).toMatchObject({ format: "handbreadth-report", version: 1, layout: "Two boxes", counts: { clear: 1 } });
    expect(report.gaps[0].distance).toBe(1140 + 1 / 3 - 50 - 1050);
    expect(Object.keys(report).sort()).toEqual(["body", "counts", "format", "gaps", "layout", "mass", "spaces", "trusted", "version"]);
  });

  const examples = readdirSync(join(ROOT, "examples")).filter((name) => name.endsWith(".layout.json"));
  it.each(examples)("reads examples/%s and gives what the functions give", (name) => {
    const path = join(ROOT, "examples", name);
    const { status, stdout, stderr } = check(path, "--json");
    const parsed = parseLayout(JSON.parse(readFileSync(path, "utf8")));
    if (!parsed.ok) {
      expect(status).toBe(2);
      return;
    }
    expect(stderr).toBe("");
    const report = JSON.parse(stdout);
    expect(report).toEqual(JSON.parse(JSON.stringify(fullReport(parsed.layout))));
    expect(status).toBe(report.counts.touch + report.counts.rub + report.counts.short > 0 ? 1 : 0);
  });

  it.each([
    ["not JSON", "{ \"format\": ", [/expected JSON/]],
    ["an empty file", "", [/expected JSON/]],
    ["another format", { format: "something" }, [/format: expected handbreadth-layout, found "something"/, /chassis: expected an object, found nothing/]],
    ["a size of nothing", plain([{ ...box("a", 0), solids: [{ type: "box", size: [0, 10, 10] }] }]), [/parts\[0\]\.solids\[0\]\.size\[0\]: expected more than 0, found 0/]],
    ["an unknown key", plain([{ ...box("a", 0), colour: "red" }]), [/parts\[0\]\.colour: unknown key/]],
    ["a key used twice", plain([box("a", 0), box("a", 500)]), [/parts\[1\]\.key: the key "a" is already used/]],
    ["carriers in a circle", plain([{ ...box("a", 0), carriedBy: "b" }, { ...box("b", 500), carriedBy: "a" }]), [/parts\[0\]\.carriedBy: carried in a circle/]],
  ])("ends with 2 and names path, expected and found on stderr: %s", (_, content, messages) => {
    const { status, stdout, stderr } = check(file("broken.layout.json", content), "--json");
    expect(status).toBe(2);
    expect(stdout).toBe("");
    for (const message of messages) expect(stderr).toMatch(message);
    expect(stderr).not.toMatch(/at .*\.(js|ts):\d+/);
  });

  it("ends with 2 on a number that is not one", () => {
    const { status, stderr } = check(file("infinite.layout.json", JSON.stringify(plain([box("a", 0)])).replace("1500]", "1e999]")));
    expect(status).toBe(2);
    expect(stderr).toMatch(/parts\[0\]\.at\[2\]/);
  });

  it.each([
    [["nowhere.layout.json"], /cannot be read/], [[], /expected one file, found none/], [["a", "b"], /expected one file, found a, b/],
    [["a", "--colour"], /usage/], [["a", "--seconds", "0"], /--seconds: expected a number above 0/], [["a", "--seconds", "soon"], /found "soon"/], [["."], /cannot be read/],
  ])("ends with 2 on %j", (args, message) => {
    const { status, stdout, stderr } = check(...args);
    expect(status).toBe(2);
    expect(stdout).toBe("");
    expect(stderr).toMatch(message);
  });
});
