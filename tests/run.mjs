import { spawn } from "node:child_process";
import { existsSync, readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

/**
 * `npm test`: types, lint and every test, each counted. The last line says how many passed and failed, and the exit
 * code is 0 only when something ran and nothing failed.
 */
const root = fileURLToPath(new URL("..", import.meta.url));
const report = join(root, "build", "tests.json");
const tally = { passed: 0, failed: 0, skipped: 0 };

count(
  "types",
  (await node("@react-router/dev/bin.js", "typegen")) === 0 && (await node("typescript/bin/tsc")) === 0,
);
count("lint", (await node("@biomejs/biome/bin/biome", "ci", "--colors=off", ".")) === 0);

rmSync(report, { force: true });
const code = await node(
  "vitest/vitest.mjs",
  "run",
  "--reporter=default",
  "--reporter=json",
  `--outputFile=${report}`,
);
if (existsSync(report)) {
  const found = JSON.parse(readFileSync(report, "utf8"));
  tally.passed += found.numPassedTests;
  tally.failed += found.numFailedTests;
  tally.skipped += found.numPendingTests + found.numTodoTests;
  // A file that could not be loaded has no tests to count; it failed all the same.
  tally.failed += found.testResults.filter(
    (/** @type {{ status: string, assertionResults: { status: string }[] }} */ file) =>
      file.status === "failed" && !file.assertionResults.some(({ status }) => status === "failed"),
  ).length;
  if (code !== 0 && tally.failed === 0) count("the run as a whole", false);
  if (found.numTotalTests === 0) count("at least one test", false);
} else {
  count("the run as a whole", false);
}

console.log(
  `\n${tally.passed} passed, ${tally.failed} failed${tally.skipped > 0 ? `, ${tally.skipped} skipped` : ""}`,
);
process.exit(tally.failed === 0 ? 0 : 1);

/**
 * @param {string} what
 * @param {boolean} good
 */
function count(what, good) {
  tally[good ? "passed" : "failed"] += 1;
  console.log(`${good ? "passed" : "FAILED"}: ${what}`);
}

/**
 * Runs a package's program and gives its exit code.
 * @param {string} program
 * @param {string[]} args
 * @returns {Promise<number>}
 */
function node(program, ...args) {
  const child = spawn(process.execPath, [join(root, "node_modules", program), ...args], {
    cwd: root,
    stdio: ["ignore", "inherit", "inherit"],
  });
  return new Promise((resolve) => child.once("exit", (status) => resolve(status ?? 1)));
}
