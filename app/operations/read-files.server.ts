import { refuse } from "../session/refusal.server.ts";
import {
  type Actor,
  headingOf,
  keyOf,
  requirePermission,
  type SetAddress,
  type SetHeading,
} from "../session/standing.server.ts";
import { readCommitRow } from "../storage/history.server.ts";
import { ObjectShelf } from "../storage/object-shelf.server.ts";
import { mainBranch, readRef } from "../storage/refs.server.ts";
import { readTexts, readTree } from "../storage/tree.server.ts";

export interface FilesOfSet extends SetHeading {
  /** The version read; null when the set holds none yet. */
  commit: string | null;
  /** [path, text], by path. */
  files: [string, string][];
}

/** All files of a set with their texts: of the commit asked for, else of the newest on the main branch. */
export async function readFiles(
  actor: Actor,
  { commit, ...address }: SetAddress & { commit?: string },
): Promise<FilesOfSet> {
  const standing = await requirePermission(actor, address, "set.read");
  const key = keyOf(standing);
  const oid = commit ?? (await readRef(key, mainBranch));
  if (oid === null) return { ...headingOf(standing), commit: null, files: [] };
  const row = await readCommitRow(key, oid);
  if (!row) refuse(404, "This model set has no such version.");
  const shelf = new ObjectShelf(key);
  const tree = await readTree(shelf, row.tree);
  const texts = await readTexts(shelf, tree.values());
  const files = [...tree].map(([path, blob]): [string, string] => [path, texts.get(blob) as string]);
  return { ...headingOf(standing), commit: oid, files: files.sort(([a], [b]) => (a < b ? -1 : 1)) };
}
