import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import { fileURLToPath } from "node:url";

const PYTHON = "/usr/bin/python3";
const here = (/** @type {string} */ name) => fileURLToPath(new URL(name, import.meta.url));

/** @typedef {() => number | null} Timed runs once and gives its CPU milliseconds; null where it can't run here */

/**
 * The least of several turns of each, taken by turns so that a busy moment of the machine hits both.
 *
 * @param {[turns: number, run: Timed]} ours
 * @param {[turns: number, run: Timed]} reference
 * @returns {[number | null, number | null]}
 */
export function interleaved(ours, reference) {
  const least = [ours, reference].map(() => /** @type {number | null} */ (Number.POSITIVE_INFINITY));
  for (let turn = 0; turn < Math.max(ours[0], reference[0]); turn += 1) {
    for (const [i, [turns, run]] of [ours, reference].entries()) {
      const before = least[i];
      if (turn >= turns || before === null) continue;
      const found = run();
      least[i] = found === null ? null : Math.min(before, found);
    }
  }
  return [least[0], least[1]];
}

/**
 * In this process; `times` over for what is done in a moment.
 *
 * @param {() => unknown} run
 * @returns {Timed}
 */
export function within(run, times = 1) {
  return () => {
    const before = process.cpuUsage();
    for (let i = 0; i < times; i += 1) run();
    const { user, system } = process.cpuUsage(before);
    return (user + system) / 1000 / times;
  };
}

/**
 * A program of `references/`, by Debian's Python; it says itself how many seconds it took.
 *
 * @param {string} program
 * @param {(string | number)[]} args
 * @returns {Timed}
 */
export function python(program, ...args) {
  return () => {
    if (!existsSync(PYTHON)) return null;
    const { status, stdout } = spawnSync(PYTHON, [here(`references/${program}`), ...args.map(String)]);
    return status === 0 ? 1000 * Number(String(stdout).split(" ")[0]) : null;
  };
}

/**
 * A process of Node.js from its start to its end.
 *
 * @param {string[]} args
 * @returns {{ cpu: number, peak: number }} CPU milliseconds, and the most memory it held, in KiB
 */
export function fresh(...args) {
  const { status, output } = spawnSync(process.execPath, ["--import", here("tell-usage.mjs"), ...args], {
    stdio: ["ignore", "ignore", "inherit", "pipe"],
  });
  if (status !== 0 && status !== 1) throw new Error(`${args.join(" ")} ended with ${status}`);
  const [cpu, peak] = String(output[3]).split(" ").map(Number);
  return { cpu, peak };
}
