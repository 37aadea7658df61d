import { execFileSync } from "node:child_process";
import { existsSync, readFileSync } from "node:fs";

/** The files of the project: those that git knows or would take in, relative to the root. */
export const trackedFiles: readonly string[] = execFileSync(
  "git",
  ["ls-files", "--cached", "--others", "--exclude-standard", "-z"],
  { encoding: "utf8" },
)
  .split("\0")
  .filter((path) => path !== "" && existsSync(path));

export const sourceFiles = trackedFiles.filter((path) => /\.(ts|tsx|mjs)$/.test(path));

/** Those that are shipped: neither tests nor settings at the root. */
export const shippedFiles = trackedFiles.filter((path) => /^(app|cli|db|grammar|public)\//.test(path));

export function read(path: string): string {
  return readFileSync(path, "utf8");
}
