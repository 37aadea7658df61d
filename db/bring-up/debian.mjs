import { spawnSync } from "node:child_process";
import { accessSync, constants, existsSync, readdirSync } from "node:fs";
import { delimiter, join } from "node:path";
import { Said } from "./said.mjs";

/**
 * The programs that come from Debian rather than from npm, and how each is found and installed.
 * Only Node's own modules here: this runs before `npm ci`.
 */

/** The folder of PostgreSQL's server programs, newest version first; null where there are none. */
export function postgresPrograms() {
  const debian = "/usr/lib/postgresql";
  const versions = existsSync(debian) ? readdirSync(debian) : [];
  const folders = versions
    .sort((a, b) => Number(b) - Number(a))
    .map((version) => join(debian, version, "bin"))
    .concat((process.env.PATH ?? "").split(delimiter));
  return (
    folders.find((folder) => ["initdb", "pg_ctl", "postgres"].every((name) => runs(join(folder, name)))) ??
    null
  );
}

/** @param {string} name */
export function onPath(name) {
  const folders = (process.env.PATH ?? "").split(delimiter).concat("/usr/bin", "/usr/sbin");
  return folders.map((folder) => join(folder, name)).find(runs) ?? null;
}

/** Debian's Chromium, or the one that `CHROMIUM` names. */
export function chromiumProgram() {
  return process.env.CHROMIUM ?? onPath("chromium");
}

export function ensurePostgres() {
  if (postgresPrograms() !== null) return;
  install(["postgresql"], "PostgreSQL", "or set DATABASE_URL to use another server", () => {
    // Debian starts a cluster of its own on port 5432 unless told not to; this one is left to the machine's owner.
    const folder = "/etc/postgresql-common/createcluster.d";
    return [
      ["mkdir", "-p", folder],
      ["sh", "-c", `echo 'create_main_cluster = false' > ${folder}/bondwright.conf`],
    ];
  });
  if (postgresPrograms() === null)
    throw new Said("PostgreSQL was installed, but its server programs were not found.");
}

export function ensureChromium() {
  if (chromiumProgram() === null) install(["chromium"], "Chromium", "or set CHROMIUM to the program's path");
}

export function ensureGit() {
  if (onPath("git") === null) install(["git"], "git");
}

/** Debian's Python, whatever another one comes first in the path: Debian's packages are known to it alone. */
export const PYTHON = "/usr/bin/python3";

/** What the tests' independent checks are computed with. */
export function ensurePython() {
  if (imports(["numpy", "scipy", "sympy"])) return;
  install(["python3-numpy", "python3-scipy", "python3-sympy"], "Python's NumPy, SciPy and SymPy");
  if (!imports(["numpy", "scipy", "sympy"]))
    throw new Said(`NumPy and SymPy were installed, but ${PYTHON} does not find them.`);
}

/** @param {string[]} modules */
function imports(modules) {
  const find = `import importlib.util, sys; sys.exit(any(importlib.util.find_spec(m) is None for m in ${JSON.stringify(modules)}))`;
  return spawnSync(PYTHON, ["-c", find], { stdio: "ignore" }).status === 0;
}

/**
 * @param {string[]} packages
 * @param {string} title
 * @param {string} [otherwise]
 * @param {() => string[][]} [before] commands that prepare the installation
 */
function install(packages, title, otherwise, before = () => []) {
  const command = `apt-get install --no-install-recommends ${packages.join(" ")}`;
  const advice = `${title} is not installed. Run \`${command}\` as root${otherwise ? `, ${otherwise}` : ""}, and start again.`;
  const root = asRoot();
  if (onPath("apt-get") === null || root === null) throw new Said(advice);

  console.log(`Installing ${title} (once) …`);
  const apt = ["env", "DEBIAN_FRONTEND=noninteractive", "apt-get", "-q", "-o", "DPkg::Lock::Timeout=600"];
  const commands = [
    ...before(),
    [...apt, "update"],
    [...apt, "install", "-y", "--no-install-recommends", ...packages],
  ];
  for (const [program, ...args] of commands.map((words) => [...root, ...words])) {
    const run = spawnSync(String(program), args, { stdio: ["inherit", "pipe", "pipe"], encoding: "utf8" });
    if (run.status !== 0) {
      console.error(`${run.stdout}${run.stderr}`.trim().split("\n").slice(-8).join("\n"));
      throw new Said(advice);
    }
  }
}

/** The words before a command that run it as root; null where that is not to be had. */
function asRoot() {
  if (process.getuid?.() === 0) return [];
  const sudo = onPath("sudo");
  if (sudo === null) return null;
  if (spawnSync(sudo, ["-n", "true"], { stdio: "ignore" }).status === 0) return [sudo, "-n"];
  return process.stdin.isTTY ? [sudo] : null;
}

/** @param {string} path */
function runs(path) {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}
