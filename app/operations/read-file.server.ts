import { refuse } from "../session/refusal.server.ts";
import {
  type Actor,
  headingOf,
  keyOf,
  requirePermission,
  type SetAddress,
  type SetHeading,
} from "../session/standing.server.ts";
import { type CommitLine, commitLine, readCommitRow } from "../storage/history.server.ts";
import { ObjectShelf } from "../storage/object-shelf.server.ts";
import { readTexts, readTree } from "../storage/tree.server.ts";

export interface FileAtVersion extends SetHeading {
  commit: CommitLine;
  path: string;
  text: string;
}

/** One file as a commit has it. */
export async function readFile(
  actor: Actor,
  { commit: oid, path, ...address }: SetAddress & { commit: string; path: string },
): Promise<FileAtVersion> {
  const standing = await requirePermission(actor, address, "set.read");
  const key = keyOf(standing);
  const commit = await readCommitRow(key, oid);
  if (!commit) refuse(404, "This model set has no such version.");
  const shelf = new ObjectShelf(key);
  const blob = (await readTree(shelf, commit.tree)).get(path);
  if (blob === undefined) refuse(404, `This version has no file “${path}”.`);
  const text = (await readTexts(shelf, [blob])).get(blob) as string;
  return { ...headingOf(standing), commit: commitLine(commit), path, text };
}
