import { spawn } from "node:child_process";
import { connect, createServer } from "node:net";
import { join } from "node:path";
import { setTimeout as pause } from "node:timers/promises";
import { ROOT } from "./home.mjs";
import { Said } from "./said.mjs";

/**
 * Starts the built server and waits until it accepts connections.
 * @param {{ url: string, port: number, host?: string, log?: number | "ignore" | "inherit" }} options
 *   `url` of the database; `log`: where the lines about requests go, nowhere unless told
 */
export async function serve({ url, port, host = "127.0.0.1", log = "ignore" }) {
  const program = join(ROOT, "node_modules", "@react-router", "serve", "bin.js");
  const preload = new URL("end-with-starter.mjs", import.meta.url).href;
  const build = join(ROOT, "build", "app", "server", "index.js");
  const server = spawn(process.execPath, ["--import", preload, program, build], {
    cwd: ROOT,
    env: { ...process.env, DATABASE_URL: url, HOST: host, PORT: String(port), NODE_ENV: "production" },
    stdio: ["ignore", log, "inherit", "ipc"],
    detached: true, // Ctrl-C reaches the starter alone, which stops the server before its database
  });
  /** @type {Promise<number>} */
  const ended = new Promise((resolve) => server.once("exit", (code) => resolve(code ?? 1)));

  while (!(await accepts(host, port))) {
    if (server.exitCode !== null) throw new Said(`The server did not start (exit code ${server.exitCode}).`);
    await pause(50);
  }
  return {
    origin: `http://${host.includes(":") ? `[${host}]` : host}:${port}`,
    ended,
    /** No new requests from now on; those under way have a second. */
    async stop() {
      server.kill("SIGTERM");
      const late = setTimeout(() => server.kill("SIGKILL"), 1000);
      await ended;
      clearTimeout(late);
    },
  };
}

/**
 * The first free port from `first` on; any free one for 0.
 * @param {string} host
 * @param {number} first
 * @returns {Promise<number>}
 */
export async function freePort(host, first = 0) {
  for (let port = first; port < first + 100; port += 1) {
    const found = await portIfFree(host, port);
    if (found !== null) return found;
  }
  throw new Said(`No free port on ${host} from ${first} on.`);
}

/**
 * @param {string} host
 * @param {number} port
 * @returns {Promise<number | null>}
 */
export function portIfFree(host, port) {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once("error", (/** @type {NodeJS.ErrnoException} */ error) =>
      error.code === "EADDRINUSE" || error.code === "EACCES" ? resolve(null) : reject(error),
    );
    probe.listen(port, host, () => {
      const address = probe.address();
      probe.close(() => resolve(typeof address === "object" && address !== null ? address.port : null));
    });
  });
}

/**
 * @param {string} host
 * @param {number} port
 * @returns {Promise<boolean>}
 */
function accepts(host, port) {
  return new Promise((resolve) => {
    const socket = connect(port, host);
    socket.once("connect", () => resolve(true)).once("error", () => resolve(false));
    socket.once("connect", () => socket.destroy());
  });
}
