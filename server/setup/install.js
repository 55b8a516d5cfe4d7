// Node's own modules only: this runs before anything is installed.
import { createHash } from "node:crypto";
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { say } from "./say.js";

export const ROOT = new URL("../..", import.meta.url).pathname.replace(/\/$/, "");
export const isRoot = () => process.getuid?.() === 0;

/** Node 20.19 or newer, or a message and the end. */
export function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  if (major > 20 || (major === 20 && minor >= 19)) return;
  say(`Handbreadth needs Node 20.19 or newer; this is ${process.versions.node}. Install a newer Node and run the command again.`);
  process.exit(1);
}

/** node_modules as the lock file says: installed when a stamp of lock file and Node's ABI differs, the stamp written only after success. */
export function installModules() {
  const stamp = createHash("sha256").update(readFileSync(join(ROOT, "package-lock.json"))).update(process.versions.modules).digest("hex");
  const place = join(ROOT, "node_modules", ".handbreadth-stamp");
  if (existsSync(place) && readFileSync(place, "utf8") === stamp) return;
  say("Installing node modules …");
  const result = spawnSync("npm", ["ci", "--include=dev", "--no-audit", "--no-fund"], { cwd: ROOT, stdio: ["ignore", 2, 2] });
  if (result.status !== 0) {
    say("npm ci failed: see above. Is the npm registry reachable?");
    process.exit(1);
  }
  writeFileSync(place, stamp);
}

/**
 * Debian packages, by the files that show that they are there. As root they are installed; otherwise the line to run is printed and the process ends.
 * @param {{ name: string, shows: () => boolean }[]} wanted
 */
export function requirePackages(wanted) {
  const missing = wanted.filter((one) => !one.shows()).map((one) => one.name);
  if (missing.length === 0) return;
  const line = `apt-get install -y --no-install-recommends ${missing.join(" ")}`;
  if (!isRoot()) {
    say(`Missing: ${missing.join(", ")}. As root, run:\n  apt-get update && ${line}\nthen run this command again.`);
    process.exit(1);
  }
  say(`Installing ${missing.join(", ")} …`);
  const environment = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  const run = (/** @type {string[]} */ args) => spawnSync("apt-get", ["-o", "DPkg::Lock::Timeout=300", ...args], { env: environment, stdio: ["ignore", 2, 2] }).status;
  // look-ups fail on a fresh machine without an update; one that fails is tried anyway
  run(["update"]);
  // a cluster of Debian's own would be made and started by the package: ours is made beside it, so theirs is not wanted
  mkdirSync("/etc/postgresql-common", { recursive: true });
  if (missing.includes("postgresql") && !existsSync("/etc/postgresql-common/createcluster.conf")) writeFileSync("/etc/postgresql-common/createcluster.conf", "create_main_cluster = false\n");
  if (run(["install", "-y", "--no-install-recommends", ...missing]) !== 0) {
    say(`Could not install ${missing.join(", ")}. Run by hand:\n  apt-get update && ${line}`);
    process.exit(1);
  }
}
