import { buildWhenChanged } from "./build.mjs";
import { ensureChromium, ensureGit, ensurePostgres, ensurePython } from "./debian.mjs";
import { ensurePackages } from "./packages.mjs";
import { Said, stopSaying } from "./said.mjs";

/**
 * Runs before `npm start`, `npm run dev` and `npm test`: whatever is missing on the machine is installed, and what
 * has changed is built. Uses nothing but Node's own modules, since on a fresh clone there is nothing else.
 */
const purpose = process.argv[2] ?? "start";

try {
  if (Number(process.versions.node.split(".")[0]) < 20)
    throw new Said(`Node.js 20 or newer is needed; this is ${process.version}.`);
  if (purpose === "test" || !process.env.DATABASE_URL) ensurePostgres();
  if (purpose === "test") {
    ensureChromium();
    ensureGit();
    ensurePython();
  }
  ensurePackages();
  if (purpose === "start") buildWhenChanged(["db", "application", "cli"]);
  if (purpose === "dev") buildWhenChanged(["db"]);
} catch (reason) {
  stopSaying(reason);
}
