import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { lstatSync, mkdirSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { onPath } from "./debian.mjs";
import { Said } from "./said.mjs";

/** The project's root folder. */
export const ROOT = fileURLToPath(new URL("../..", import.meta.url)).replace(/\/$/, "");

/**
 * PostgreSQL refuses to run as root, so root hands its programs to Debian's user of that name.
 * @param {string} program
 * @param {string[]} args
 * @returns {[string, string[]]}
 */
export function asPostgres(program, args) {
  if (process.getuid?.() !== 0) return [program, args];
  return ["runuser", ["-u", "postgres", "--", program, ...args]];
}

/**
 * The folder that holds this checkout's clusters: `.data`, or one under /var/tmp where PostgreSQL's user cannot
 * pass every folder above (a clone in /root, say).
 */
export function home() {
  const here = join(ROOT, ".data");
  mkdirSync(here, { recursive: true, mode: 0o755 });
  if (passable(here)) return here;
  const name = createHash("sha256").update(ROOT).digest("hex").slice(0, 12);
  const there = join("/var/tmp", `bondwright-${name}`);
  mkdirSync(there, { recursive: true, mode: 0o755 });
  const found = lstatSync(there);
  if (!found.isDirectory() || found.uid !== process.getuid?.())
    throw new Said(`${there} belongs to somebody else.`);
  return there;
}

/** @param {string} folder */
function passable(folder) {
  if (process.getuid?.() !== 0) return true;
  if (onPath("runuser") === null)
    throw new Said("PostgreSQL does not run as root: start as an ordinary user.");
  const [program, args] = asPostgres("test", ["-x", folder]);
  return spawnSync(program, args, { cwd: "/", stdio: "ignore" }).status === 0;
}
