import { existsSync, readFileSync } from "node:fs";

/** Files that say which process holds something; what a killed process held is free again. */

export function stampOfThis() {
  return stamp(process.pid) ?? "";
}

/**
 * The number of the living process that a file names as the holder; null where there is none.
 * @param {string} file
 */
export function holderOf(file) {
  const held = existsSync(file) ? readFileSync(file, "utf8") : "";
  const pid = Number(held.split(" ")[0]);
  return pid > 0 && stamp(pid) === held ? pid : null;
}

/**
 * A process number with the time it was started, since numbers are used again; null where there is none.
 * @param {number} pid
 */
function stamp(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    return `${pid} ${stat.slice(stat.lastIndexOf(")")).split(" ")[20]}`; // field 22 of proc(5): starttime
  } catch {
    return null;
  }
}
