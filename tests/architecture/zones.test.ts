import { readdirSync, readFileSync, statSync } from "node:fs";
import { join, relative } from "node:path";
import { describe, expect, it } from "vitest";

const ROOT = new URL("../..", import.meta.url).pathname;
const filesBelow = (folder: string): string[] =>
  readdirSync(join(ROOT, folder)).flatMap((name) => {
    const path = join(folder, name);
    return statSync(join(ROOT, path)).isDirectory() ? filesBelow(path) : /\.tsx?$/.test(name) ? [path] : [];
  });
const importsOf = (path: string): string[] => {
  const text = readFileSync(join(ROOT, path), "utf8");
  return [/(?:^|\n)\s*(?:import|export)\b[^;"]*?\bfrom\s+"([^"]+)"/g, /(?:^|\n)\s*import\s+"([^"]+)"/g, /\bimport\(\s*"([^"]+)"/g].flatMap((pattern) => [...text.matchAll(pattern)].map((m) => m[1]!));
};
const packageOf = (name: string) => (name.startsWith("@") ? name.split("/").slice(0, 2).join("/") : name.split("/")[0]!);
const zone = (path: string) => (path.startsWith("src/") ? path.split("/").slice(0, 2).join("/") : path.split("/")[0]!);

/** What a zone may import: npm packages by name (null: any), and the other zones. */
const RULES: Record<string, { packages: readonly string[] | null; zones: readonly string[] }> = {
  "src/core": { packages: ["zod", "@turf/turf"], zones: [] },
  "src/contracts": { packages: ["zod"], zones: ["src/core"] },
  "src/client": { packages: null, zones: ["src/core", "src/contracts"] },
  server: { packages: null, zones: ["src/core", "src/contracts", "migrations"] },
  migrations: { packages: ["kysely"], zones: [] },
};
/** turf works on longitude and latitude; only these are right in millimetres (they neither measure nor offset). */
const PLANAR = new Set(["union", "difference", "intersect", "dissolve", "mask", "kinks", "simplify", "convex", "lineIntersect", "bbox", "bboxClip", "bboxPolygon", "envelope", "centerOfMass", "cleanCoords", "rewind", "explode", "flatten", "polygonize", "tesselate", "booleanPointInPolygon", "booleanIntersects", "booleanDisjoint", "booleanCrosses", "booleanClockwise", "booleanConcave", "booleanValid", "booleanPointOnLine", "polygon", "multiPolygon", "featureCollection", "point", "lineString"]);

describe.each(Object.keys(RULES))("%s", (name) => {
  const rule = RULES[name]!;
  const files = filesBelow(name);

  it("holds files", () => expect(files.length).toBeGreaterThan(0));

  it("imports only what its zone may", () => {
    const wrong: string[] = [];
    for (const file of files) {
      for (const given of importsOf(file)) {
        if (given.startsWith(".")) {
          const target = relative(ROOT, join(ROOT, file, "..", given));
          if (zone(target) !== name && !rule.zones.includes(zone(target))) wrong.push(`${file} -> ${given}`);
        } else if (given.startsWith("#")) {
          if (!rule.zones.includes(`src/${given.slice(1).split("/")[0]}`)) wrong.push(`${file} -> ${given}`);
        } else if (rule.packages && !rule.packages.includes(packageOf(given))) wrong.push(`${file} -> ${given}`);
      }
    }
    expect(wrong).toEqual([]);
  });
});

describe("turf in millimetres", () => {
  it("is used only for what does not measure on a globe", () => {
    const wrong = [...filesBelow("src"), ...filesBelow("server")].flatMap((file) => [...readFileSync(join(ROOT, file), "utf8").matchAll(/import\s*\{([^}]*)\}\s*from\s*"@turf\/turf"/g)].flatMap((m) => m[1]!.split(",").map((n) => n.trim().split(" ")[0]!).filter((n) => n !== "" && !PLANAR.has(n)).map((n) => `${file}: ${n}`)));
    expect(wrong).toEqual([]);
  });
});

describe("the client's features", () => {
  it("never import their siblings", () => {
    const wrong = filesBelow("src/client/features").flatMap((file) => importsOf(file).filter((given) => {
      const target = relative(ROOT, join(ROOT, file, "..", given));
      return given.startsWith(".") && target.startsWith("src/client/features/") && target.split("/")[3] !== file.split("/")[3];
    }).map((given) => `${file} -> ${given}`));
    expect(wrong).toEqual([]);
  });
});

describe("names", () => {
  it("leave no folder that says nothing, and no barrel", () => {
    const folders = new Set([...filesBelow("src"), ...filesBelow("server")].flatMap((file) => file.split("/").slice(0, -1)));
    for (const name of ["utils", "helpers", "shared", "common", "lib", "misc"]) expect(folders.has(name)).toBe(false);
    expect([...filesBelow("src"), ...filesBelow("server")].filter((file) => /\/index\.tsx?$/.test(file))).toEqual([]);
  });

  it("every core folder begins with a README", () => {
    const folders = readdirSync(join(ROOT, "src/core")).filter((name) => statSync(join(ROOT, "src/core", name)).isDirectory() && filesBelow(`src/core/${name}`).length > 0);
    const without = folders.filter((name) => !readdirSync(join(ROOT, "src/core", name)).includes("README.md"));
    expect(without).toEqual([]);
  });
});

describe("schemas", () => {
  it("make numbers only by the unit vocabulary", () => {
    const bare = ["src/core/layout/schema.ts", "src/core/layout/commands.ts"].flatMap((file) => readFileSync(join(ROOT, file), "utf8").split("\n").filter((line) => /z\.(number|int)\(\)/.test(line) && !line.includes('unit: "as named"')).map((line) => `${file}: ${line.trim()}`));
    expect(bare).toEqual([]);
  });
});
