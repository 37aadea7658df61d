import { spawnSync } from "node:child_process";
import { copyFileSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join, relative, resolve } from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";

/**
 * Which folder may import which, as DEVELOPERS.md tells it. The lint rule in biome.json holds these directions; here
 * the rule itself is put to the test, with one file a folder that imports every other one.
 */
const BELOW_STAGES = ["grammar/source", "grammar/diagnostics", "grammar/symbolic", "grammar/units"];
const STAGES = ["syntax", "resolve", "causality", "equations", "analysis", "expectations"].map(
  (s) => `grammar/${s}`,
);
const RESULTS = ["grammar/comparison", "grammar/writing"];
const CORE = [...BELOW_STAGES, ...STAGES, "grammar/simulation", ...RESULTS, "grammar"];
const OPERATIONS = ["app/operations", "app/storage", "app/session"];
const PAGES = ["app/routes", "app/components", "app/editor", "app/diagram", "app/reference", "app/review"];
const FOLDERS = [...CORE, ...OPERATIONS, ...PAGES, "cli", "db", "tests"];

function upTo(stage: string): string[] {
  const before = STAGES.slice(0, STAGES.indexOf(stage));
  return [...BELOW_STAGES, ...before, ...(stage === "grammar/expectations" ? ["grammar/simulation"] : [])];
}

const MAY_IMPORT: Record<string, string[]> = {
  "grammar/source": [],
  "grammar/diagnostics": BELOW_STAGES,
  "grammar/symbolic": BELOW_STAGES,
  "grammar/units": BELOW_STAGES,
  ...Object.fromEntries(STAGES.map((stage) => [stage, upTo(stage)])),
  "grammar/analysis": [...upTo("grammar/analysis"), "grammar/simulation"],
  "grammar/simulation": upTo("grammar/expectations"),
  "grammar/comparison": CORE,
  "grammar/writing": CORE,
  grammar: CORE,
  cli: CORE,
  db: [...CORE, ...OPERATIONS, ...PAGES],
  tests: FOLDERS,
  ...Object.fromEntries(OPERATIONS.map((folder) => [folder, [...CORE, ...OPERATIONS, "db"]])),
  ...Object.fromEntries(
    PAGES.map((folder) => [folder, [...CORE, "app/operations", "app/session", ...PAGES]]),
  ),
};

const BIOME = resolve("node_modules/@biomejs/biome/bin/biome");
const folder = mkdtempSync(join(tmpdir(), "import-directions-"));
let refused: Map<string, Set<string>>;

beforeAll(() => {
  copyFileSync("biome.json", join(folder, "biome.json"));
  writeFileSync(join(folder, ".gitignore"), "\n");
  for (const from of FOLDERS) {
    const file = fileIn(from);
    mkdirSync(join(folder, dirname(file)), { recursive: true });
    const lines = othersThan(from).map((to) => `import ${JSON.stringify(asImport(from, to))};\n`);
    writeFileSync(join(folder, file), lines.join(""));
  }
  const args = ["lint", "--only=style/noRestrictedImports", "--max-diagnostics=none", "--reporter=json", "."];
  const run = spawnSync(process.execPath, [BIOME, ...args], { cwd: folder, encoding: "utf8" });
  refused = refusedImports(JSON.parse(run.stdout));
});

afterAll(() => rmSync(folder, { recursive: true, force: true }));

test.each(FOLDERS)("%s imports what it may, and the lint rule refuses the rest", (from) => {
  const allowed = new Set(MAY_IMPORT[from]);
  const wanted = othersThan(from).filter((to) => !allowed.has(to));
  expect([...(refused.get(from) ?? [])].sort()).toEqual(wanted.sort());
});

test("the core may not use Node's own modules", () => {
  const file = join(folder, "grammar/syntax/uses-node.ts");
  writeFileSync(file, 'import { readFileSync } from "node:fs";\nexport const read = readFileSync;\n');
  const run = spawnSync(process.execPath, [BIOME, "lint", file], { cwd: folder, encoding: "utf8" });
  expect(run.status).not.toBe(0);
  expect(run.stderr + run.stdout).toContain("noNodejsModules");
});

function fileIn(place: string): string {
  return place === "grammar" ? "grammar/pipeline.ts" : `${place}/sample.ts`;
}

function asImport(from: string, to: string): string {
  const path = relative(dirname(fileIn(from)), fileIn(to));
  return path.startsWith(".") ? path : `./${path}`;
}

function othersThan(from: string): string[] {
  return FOLDERS.filter((to) => to !== from);
}

/** From Biome's report: the folders whose import was refused, by the folder of the file that imports them. */
function refusedImports(report: { diagnostics: { location: { path: string; start: { line: number } } }[] }) {
  const found = new Map<string, Set<string>>();
  for (const { path, start } of report.diagnostics.map(({ location }) => location)) {
    const from = path === "grammar/pipeline.ts" ? "grammar" : dirname(path);
    const to = othersThan(from)[start.line - 1] as string;
    found.set(from, (found.get(from) ?? new Set()).add(to));
  }
  return found;
}
