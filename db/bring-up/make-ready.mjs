import { spawnSync } from "node:child_process";
import { join } from "node:path";
import { ROOT } from "./home.mjs";
import { Said } from "./said.mjs";

/** @typedef {{ email: string, password: string, role: string }} Account */

/**
 * Brings the tables of a database up to date, with the demo in it if that is asked for and it holds no team yet.
 * Returns the demo's sign-ins.
 * @param {string} url
 * @param {{ demo: boolean }} wanted
 * @returns {Account[]}
 */
export function makeReady(url, { demo }) {
  const program = join(ROOT, "build", "db", "make-ready.mjs");
  const run = spawnSync(process.execPath, [program, ...(demo ? ["--demo"] : [])], {
    cwd: ROOT,
    env: { ...process.env, DATABASE_URL: url, NODE_ENV: "production" },
    encoding: "utf8",
  });
  if (run.status !== 0) throw new Said(`The database could not be made ready: ${run.stderr.trim()}`);
  return JSON.parse(run.stdout);
}

/** @param {Account[]} accounts */
export function signIns(accounts) {
  const wide = (/** @type {keyof Account} */ key) =>
    Math.max(...accounts.map((account) => account[key].length));
  const lines = accounts.map(
    ({ email, password, role }) =>
      `  ${email.padEnd(wide("email"))}  ${password.padEnd(wide("password"))}  ${role}`,
  );
  return ["Sign in with one of the demo's accounts:", ...lines].join("\n");
}
