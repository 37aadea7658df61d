import { mkdirSync, openSync } from "node:fs";
import { join } from "node:path";
import { startCluster } from "./cluster.mjs";
import { withEnds } from "./ends.mjs";
import { ROOT } from "./home.mjs";
import { makeReady, signIns } from "./make-ready.mjs";
import { Said } from "./said.mjs";
import { freePort, portIfFree, serve } from "./serve.mjs";

/**
 * `npm start`: the database up, its tables up to date, the demo in it, the server on loopback. `DATABASE_URL` uses
 * another PostgreSQL, `HOST` and `PORT` another address, and `DEMO=off` leaves the demo, whose passwords anybody
 * can read, out of an empty database.
 */
await withEnds(async (keep) => {
  const host = process.env.HOST || "127.0.0.1";
  const port = await portToUse(host);
  const url = process.env.DATABASE_URL || (await ownDatabase(keep));
  const accounts = makeReady(url, { demo: process.env.DEMO !== "off" });

  mkdirSync(join(ROOT, ".data"), { recursive: true });
  const server = await serve({ url, host, port, log: openSync(join(ROOT, ".data", "requests.log"), "w") });
  keep(server.stop);
  console.log(`\nBondwright is at ${server.origin}\n`);
  if (accounts.length > 0) console.log(`${signIns(accounts)}\n`);
  console.log("Requests are logged in .data/requests.log. Ctrl-C stops all that was started here.");
  return server.ended;
});

/** @param {(end: () => unknown) => void} keep */
async function ownDatabase(keep) {
  const { url, stop } = await startCluster("start");
  keep(stop);
  return url;
}

/** @param {string} host */
async function portToUse(host) {
  if (!process.env.PORT) return freePort(host, 3000);
  const port = await portIfFree(host, Number(process.env.PORT));
  if (port === null)
    throw new Said(`Port ${process.env.PORT} on ${host} is taken: set PORT to another, or leave it out.`);
  return port;
}
