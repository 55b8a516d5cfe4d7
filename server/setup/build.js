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

/**
 * Builds where sources are newer than what is there. A build that fails ends the process, or answers false where the caller asked for that.
 * @param {string} what @param {string[]} sources @param {string[]} args @param {string} proof @param {{ orEnd?: boolean }} options @returns {boolean}
 */
function buildWhenNewer(what, sources, args, proof, { orEnd = true }) {
  const stamp = stampOf([...sources, "vite.config.ts", "package.json", "package-lock.json"]);
  const place = join(ROOT, "dist", `.${what}-stamp`);
  if (existsSync(place) && existsSync(join(ROOT, proof)) && readFileSync(place, "utf8") === stamp) return true;
  say(`Building the ${what} …`);
  const result = spawnSync(process.execPath, [join(ROOT, "node_modules/vite/bin/vite.js"), "build", "--logLevel", "warn", ...args], { cwd: ROOT, stdio: ["ignore", 2, 2], env: { ...process.env, NODE_ENV: "production" } });
  if (result.status !== 0) {
    say(`The ${what} could not be built: see above.`);
    if (orEnd) process.exit(1);
    return false;
  }
  mkdirSync(join(ROOT, "dist"), { recursive: true });
  writeFileSync(place, stamp);
  return true;
}

/** @param {{ orEnd?: boolean }} [options] */
export const buildServer = (options = {}) => buildWhenNewer("server", ["server", "migrations", "src/core", "src/contracts", "examples"], ["--ssr"], "dist/server/main.js", options);
/** @param {{ orEnd?: boolean }} [options] */
export const buildClient = (options = {}) => buildWhenNewer("client", ["index.html", "src"], [], "dist/client/index.html", options);
