import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, linkSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { holderOf, stampOfThis } from "./holder.mjs";
import { ROOT } from "./home.mjs";
import { Said } from "./said.mjs";

/**
 * What is built, and what each part is built from; `npm run build` makes them all.
 * @typedef {"application" | "cli" | "db"} Part
 */

const ALWAYS = [
  "package-lock.json",
  "package.json",
  "react-router.config.ts",
  "tsconfig.json",
  "vite.config.ts",
];

/** @type {Record<Part, string[]>} */
const SOURCES = {
  application: ["app", "db", "grammar", "public"],
  cli: ["cli", "grammar"],
  db: ["db", "app", "grammar", "models-demo"],
};

/** @type {Record<Part, string>} */
const TITLES = { application: "the application", cli: "the command line", db: "the database's program" };

/** @type {Record<Part, string[]>} */
const COMMANDS = {
  application: ["@react-router/dev/bin.js", "build"],
  cli: ["vite/bin/vite.js", "build", "--mode", "cli"],
  db: ["vite/bin/vite.js", "build", "--mode", "db"],
};

/**
 * Builds the parts whose sources changed since they were last built here. Processes that want this at the same
 * moment take turns.
 * @param {Part[]} parts
 */
export function buildWhenChanged(parts) {
  const lock = join(ROOT, "build", ".lock");
  mkdirSync(join(ROOT, "build"), { recursive: true });
  while (!taken(lock)) Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 200);
  try {
    for (const part of parts) buildIfChanged(part);
  } finally {
    rmSync(lock, { force: true });
  }
}

/** @param {Part} part */
function buildIfChanged(part) {
  const now = hashOf([...SOURCES[part].flatMap(filesIn), ...ALWAYS]);
  const mark = join(ROOT, "build", `${part}.sources`);
  if (existsSync(mark) && readFileSync(mark, "utf8") === now) return;
  rmSync(mark, { force: true });
  console.log(`Building ${TITLES[part]} …`);
  build(part);
  writeFileSync(mark, now);
}

/**
 * Takes a lock file for this process, unless a living one has it.
 * @param {string} lock
 */
function taken(lock) {
  const own = `${lock}-${process.pid}`;
  writeFileSync(own, stampOfThis());
  try {
    linkSync(own, lock); // all at once: nobody sees a lock without its holder
    return true;
  } catch {
    if (holderOf(lock) === null) rmSync(lock, { force: true });
    return false;
  } finally {
    rmSync(own, { force: true });
  }
}

/** @param {Part} part */
function build(part) {
  const [program, ...args] = COMMANDS[part];
  const env = { ...process.env, NODE_ENV: "production" };
  const run = spawnSync(process.execPath, [join(ROOT, "node_modules", String(program)), ...args], {
    cwd: ROOT,
    env,
    encoding: "utf8",
  });
  if (run.status === 0) return;
  console.error(`${run.stdout}${run.stderr}`);
  throw new Said(`The build of ${part} failed; what it said stands above.`);
}

/** @param {string[]} files */
function hashOf(files) {
  const hash = createHash("sha256");
  for (const file of files)
    hash
      .update(`${file}\0`)
      .update(readFileSync(join(ROOT, file)))
      .update("\0");
  return hash.digest("hex");
}

/**
 * @param {string} folder
 * @returns {string[]}
 */
function filesIn(folder) {
  if (!existsSync(join(ROOT, folder))) return [];
  const entries = readdirSync(join(ROOT, folder), { withFileTypes: true, recursive: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath ?? entry.path, entry.name).slice(ROOT.length + 1))
    .sort();
}
