import {
  chmodSync,
  closeSync,
  fsyncSync,
  openSync,
  realpathSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from "node:fs";
import path from "node:path";
import { WrongUse } from "./wrong-use.ts";

/** Writes beside the file and renames, so that nobody ever reads half of it; a link stays a link, a mode the mode. */
export function writeWhole(file: string, text: string): void {
  let beside: string | null = null;
  try {
    const before = statSync(file, { throwIfNoEntry: false });
    if (before !== undefined && !before.isFile()) throw new Error("it is no ordinary file");
    const target = before === undefined ? path.resolve(file) : realpathSync(file);
    beside = path.join(path.dirname(target), `.${path.basename(target)}.${process.pid}.new`);
    const handle = openSync(beside, "wx");
    try {
      writeFileSync(handle, text);
      fsyncSync(handle);
    } finally {
      closeSync(handle);
    }
    if (before !== undefined) chmodSync(beside, before.mode);
    renameSync(beside, target);
  } catch (error) {
    if (beside !== null) rmSync(beside, { force: true });
    throw new WrongUse(
      `${file} cannot be written: ${error instanceof Error ? error.message : String(error)}`,
    );
  }
}
