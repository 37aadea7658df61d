/** A reason to stop that the person at the terminal can act on: shown as one sentence, without a stack. */
export class Said extends Error {}

/** @param {unknown} reason */
export function stopSaying(reason) {
  console.error(reason instanceof Said ? `\n${reason.message}` : reason);
  process.exit(1);
}
