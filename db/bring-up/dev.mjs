import { spawn } from "node:child_process";
import { join } from "node:path";
import { startCluster } from "./cluster.mjs";
import { withEnds } from "./ends.mjs";
import { ROOT } from "./home.mjs";
import { makeReady, signIns } from "./make-ready.mjs";

/** `npm run dev`: hot reload, with a cluster of its own beside that of `npm start`. */
await withEnds(async (keep) => {
  let url = process.env.DATABASE_URL;
  if (!url) {
    const cluster = await startCluster("dev");
    keep(cluster.stop);
    url = cluster.url;
  }
  console.log(signIns(makeReady(url, { demo: true })));
  const program = join(ROOT, "node_modules", "@react-router", "dev", "bin.js");
  const server = spawn(process.execPath, [program, "dev"], {
    cwd: ROOT,
    env: { ...process.env, DATABASE_URL: url },
    stdio: "inherit",
  });
  /** @type {Promise<number>} */
  const ended = new Promise((resolve) => server.once("exit", (code) => resolve(code ?? 0)));
  keep(() => {
    server.kill("SIGTERM");
    return ended;
  });
  return ended;
});
