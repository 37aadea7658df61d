import { refuse } from "../session/refusal.server.ts";
import type { Actor, SetAddress } from "../session/standing.server.ts";
import { pathProblem } from "../storage/safe-path.ts";
import { type FilesOfSet, readFiles } from "./read-files.server.ts";

export interface OpenedFile extends FilesOfSet {
  path: string;
  /** The set has no such file yet: saving would make it. */
  isNew: boolean;
}

/**
 * A file to be read or written, with all others of its set, since what follows from one may stand in another.
 * A path without a file opens an empty one for those who may write, if a file may be called that.
 */
export async function openFile(
  actor: Actor,
  { path, ...address }: SetAddress & { path: string },
): Promise<OpenedFile> {
  const opened = await readFiles(actor, address);
  const isNew = !opened.files.some(([file]) => file === path);
  if (isNew && (!opened.may.includes("set.write") || pathProblem(path) !== null))
    refuse(404, `This model set has no file “${path}”.`);
  return { ...opened, path, isNew };
}
