import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import { build } from "vite";
import { fresh, interleaved, python, within } from "./measure.mjs";

/**
 * `npm run bench`: speed as ratios to references in the same run, since the seconds of one machine say little about
 * another. All figures are CPU time, the least of several. Prints a table and writes `build/bench.json`.
 * `npm run bench -- F4 parse` takes the rows whose name begins with one of these.
 *
 * @typedef {{ atLeast: number } | { atMost: number } | { addsAtMost: number }} Bar
 */
const root = fileURLToPath(new URL("../..", import.meta.url));
const out = join(root, "build", "bench");
const folder = mkdtempSync(join(tmpdir(), "bondwright-bench-"));
const wanted = process.argv.slice(2);
/** @type {{ row: string, ours: number | null, reference: number | null, ratio: number | null, bar: string, verdict: string }[]} */
const rows = [];

await build({ root, mode: "cli", logLevel: "error" });
for (const entry of ["core", "parse-all"]) {
  const ssr = `tests/bench/${entry}.ts`;
  const options = { ssr, outDir: out, emptyOutDir: false, target: "node20" };
  await build({
    root,
    configFile: false,
    publicDir: false,
    logLevel: "error",
    ssr: { noExternal: true },
    build: options,
  });
}
const { familyText, parseText, readByHand, textToEquations, thousandLines } = await import(
  pathToFileURL(join(out, "core.js")).href
);
const cli = join(root, "build", "cli", "bondwright.mjs");

console.log(line("ours : reference", "ours", "reference", "ratio", "bar", ""));
try {
  const long = thousandLines();
  judge("parse to tree, 1,000 lines : scanner by hand", { atMost: 15 }, [
    [30, within(() => parseText(long), 5)],
    [30, within(() => readByHand(long), 5)],
  ]);
  for (const [family, n] of [
    ["F1", 1000],
    ["F2", 1000],
    ["F3", 1000],
    ["F5", 200],
  ]) {
    const text = familyText(family, n);
    judge(`${family} text to equations, N = ${n} : SymPy subs`, { atLeast: 100 }, [
      [20, within(() => textToEquations(text))],
      [2, python("substitute.py", family, n)],
    ]);
  }
  for (const family of ["F1", "F2", "F3", "F5"]) {
    const [small, large] = [1000, 10_000].map((n) => familyText(family, n));
    judge(`${family} text to equations, N = 10,000 : N = 1,000`, { atMost: 15 }, [
      [3, within(() => textToEquations(large))],
      [9, within(() => textToEquations(small))],
    ]);
  }
  const [grid, largeGrid] = [10, 50].map((n) => familyText("F4", n));
  judge("F4 10×10 text to equations : SymPy linsolve", { atLeast: 300 }, [
    [40, within(() => textToEquations(grid))],
    [2, python("grid.py", "sympy", 10)],
  ]);
  judge("F4 50×50 text to equations : SciPy splu", { atMost: 10 }, [
    [4, within(() => textToEquations(largeGrid))],
    [2, python("grid.py", "scipy", 50)],
  ]);

  const file = join(folder, "small.wright");
  writeFileSync(file, familyText("F1", 3));
  judge("check of one small file : node -e 0", { addsAtMost: 100 }, [
    [10, () => fresh(cli, "check", file).cpu],
    [10, () => fresh("-e", "0").cpu],
  ]);
  const lines = writeSet(join(folder, "set"));
  let memory = 0;
  judge(`check of 2,000 files, ${lines} lines, cold : parsing`, { atMost: 4 }, [
    [
      2,
      () => {
        const { cpu, peak } = fresh(cli, "check", "--quiet", join(folder, "set"));
        memory = Math.max(memory, peak / 1024);
        return cpu;
      },
    ],
    [2, () => fresh(join(out, "parse-all.js"), join(folder, "set")).cpu],
  ]);
  if (memory > 0)
    console.log(`its memory: ${memory.toFixed(0)} MB, bar ≤ 500 MB, ${memory <= 500 ? "met" : "missed"}`);
} finally {
  rmSync(folder, { recursive: true, force: true });
}
if (rows.some(({ verdict }) => verdict === "not measured"))
  console.log("Not measured: Debian's python3-sympy and python3-scipy are not installed.");
writeFileSync(
  join(root, "build", "bench.json"),
  `${JSON.stringify({ node: process.version, rows }, null, 2)}\n`,
);

/**
 * @param {string} row
 * @param {Bar} bar
 * @param {Parameters<typeof interleaved>} pair
 */
function judge(row, bar, pair) {
  if (wanted.length > 0 && !wanted.some((word) => row.startsWith(word))) return;
  const [ours, reference] = interleaved(...pair);
  const known = ours !== null && reference !== null;
  const [ratio, limit, met] =
    "atLeast" in bar
      ? [known ? reference / ours : null, `≥ ${bar.atLeast}×`, known && reference / ours >= bar.atLeast]
      : "atMost" in bar
        ? [known ? ours / reference : null, `≤ ${bar.atMost}×`, known && ours / reference <= bar.atMost]
        : [
            known ? ours / reference : null,
            `+ ${bar.addsAtMost} ms`,
            known && ours - reference <= bar.addsAtMost,
          ];
  const verdict = !known ? "not measured" : met ? "met" : "missed";
  rows.push({ row, ours, reference, ratio, bar: limit, verdict });
  console.log(
    line(row, `${figure(ours)} ms`, `${figure(reference)} ms`, `${figure(ratio)}×`, limit, verdict),
  );
}

/** @param {number | null} value */
function figure(value) {
  return value === null ? "–" : value < 10 ? value.toFixed(2) : value.toFixed(0);
}

/** @param {string[]} cells */
function line(...[row, ours, reference, ratio, bar, verdict]) {
  return `${row.padEnd(50)}${ours.padStart(11)}${reference.padStart(11)}${ratio.padStart(8)}  ${bar.padEnd(9)} ${verdict}`.trimEnd();
}

/**
 * 2,000 models of some fifty lines.
 * @param {string} set
 */
function writeSet(set) {
  let lines = 0;
  const sizes = Object.entries({ F1: 5, F2: 4, F3: 6, F5: 9 });
  for (let i = 0; i < 2000; i += 1) {
    const [family, n] = sizes[i % sizes.length];
    const text = familyText(family, n);
    lines += text.split("\n").length - 1;
    const part = join(set, `part${i % 40}`);
    mkdirSync(part, { recursive: true });
    writeFileSync(join(part, `model${i}.wright`), text);
  }
  return lines.toLocaleString("en");
}
