import { stopSaying } from "./said.mjs";

/**
 * Runs a program that starts things, and stops them in the opposite order when it ends, is interrupted or fails.
 * @param {(keep: (end: () => unknown) => void) => Promise<number>} program gives its exit code; `keep` what stops a thing
 */
export async function withEnds(program) {
  /** @type {(() => unknown)[]} */
  const ends = [];
  /** @type {Promise<void> | undefined} */
  let stopped;
  const stop = () => {
    stopped ??= (async () => {
      for (const end of ends.reverse()) await end();
    })();
    return stopped; // whoever asks waits for the same end
  };
  for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) {
    process.on(signal, () => stop().then(() => process.exit(0), stopSaying));
  }
  try {
    const code = await program((end) => ends.push(end));
    await stop();
    process.exit(code);
  } catch (reason) {
    await stop();
    stopSaying(reason);
  }
}
