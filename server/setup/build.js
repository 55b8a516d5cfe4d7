import { createHash } from "node:crypto";
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { ROOT } from "./install.js";
import { say } from "./say.js";

/** Names, sizes and times of all files below some places: differs when a source changed. @param {string[]} places */
function stampOf(places) {
  const hash = createHash("sha256");
  /** @param {string} path */
  const walk = (path) => {
    const stat = statSync(path);
    if (stat.isDirectory()) for (const name of readdirSync(path).sort()) walk(join(path, name));
    else hash.update(`${path}|${stat.size}|${stat.mtimeMs}\n`);
  };
  for (const place of places) if (existsSync(join(ROOT, place))) walk(join(ROOT, place));
  return hash.digest("hex");
}

/** @param {string} what @param {string[]} sources @param {string[]} args @param {string} proof */
function buildWhenNewer(what, sources, args, proof) {
  const stamp = stampOf([...sources, "vite.config.ts", "package.json", "package-lock.json"]);
  const place = join(ROOT, "dist", `.${what}-stamp`);
  if (existsSync(place) && existsSync(join(ROOT, proof)) && readFileSync(place, "utf8") === stamp) return;
  say(`Building the ${what} …`);
  const result = spawnSync(process.execPath, [join(ROOT, "node_modules/vite/bin/vite.js"), "build", "--logLevel", "warn", ...args], { cwd: ROOT, stdio: ["ignore", 2, 2] });
  if (result.status !== 0) {
    say(`The ${what} could not be built: see above.`);
    process.exit(1);
  }
  mkdirSync(join(ROOT, "dist"), { recursive: true });
  writeFileSync(place, stamp);
}

export const buildServer = () => buildWhenNewer("server", ["server", "migrations", "src/core", "src/contracts", "examples"], ["--ssr"], "dist/server/main.js");
export const buildClient = () => buildWhenNewer("client", ["index.html", "src"], [], "dist/client/index.html");
