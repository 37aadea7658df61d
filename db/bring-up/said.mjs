/** A reason to stop that the person at the terminal can act on: shown as one sentence, without a stack. */
export class Said extends Error {}

/** @param {unknown} reason */
export function stopSaying(reason) {
  const refused = /** @type {NodeJS.ErrnoException} */ (reason);
  if (reason instanceof Said) console.error(`\n${reason.message}`);
  else if (refused.code === "EACCES")
    console.error(`\n${refused.path} belongs to somebody else: was it made as root?`);
  else console.error(reason);
  process.exit(1);
}
