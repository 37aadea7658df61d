import { spawnSync } from "node:child_process";
import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { ROOT } from "./home.mjs";
import { Said } from "./said.mjs";

/** Installs the npm packages when those in node_modules are not the ones that the lock file names. */
export function ensurePackages() {
  if (asLocked()) return;
  console.log("Installing the npm packages …");
  const run = spawnSync("npm", ["ci", "--include=dev", "--no-audit", "--no-fund"], {
    cwd: ROOT,
    stdio: "inherit",
  });
  if (run.status !== 0)
    throw new Said("The npm packages could not be installed; what npm said stands above.");
}

/** Whether npm's own record of what it installed agrees with the lock file. */
function asLocked() {
  const record = join(ROOT, "node_modules", ".package-lock.json");
  if (!existsSync(record)) return false;
  /** @type {Record<string, { version?: string, optional?: boolean }>} */
  const locked = JSON.parse(readFileSync(join(ROOT, "package-lock.json"), "utf8")).packages;
  /** @type {typeof locked} */
  const installed = JSON.parse(readFileSync(record, "utf8")).packages;
  return Object.entries(locked).every(([path, { version, optional }]) => {
    if (path === "") return true; // the project itself
    return path in installed ? installed[path]?.version === version : optional === true; // not for this machine
  });
}
