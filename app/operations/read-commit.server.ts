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
import { changedPaths, readTexts, readTree } from "../storage/tree.server.ts";

export interface FileChange {
  path: string;
  /** Null: the file is new. */
  before: string | null;
  /** Null: the file was taken away. */
  after: string | null;
}

export interface CommitWithChanges extends SetHeading {
  commit: CommitLine;
  parent: string | null;
  changes: FileChange[];
}

/** A commit with the texts of what it changed against its first parent. */
export async function readCommit(
  actor: Actor,
  { commit: oid, ...address }: SetAddress & { commit: string },
): Promise<CommitWithChanges> {
  const standing = await requirePermission(actor, address, "set.read");
  const key = keyOf(standing);
  const commit = await readCommitRow(key, oid);
  if (!commit) refuse(404, "This model set has no such version.");
  const parent = commit.parents[0] ?? null;
  const parentRow = parent === null ? null : await readCommitRow(key, parent);
  const shelf = new ObjectShelf(key);
  const after = await readTree(shelf, commit.tree);
  const before = parentRow ? await readTree(shelf, parentRow.tree) : new Map<string, string>();
  const paths = changedPaths(before, after);
  const blobs = paths
    .flatMap((path) => [before.get(path), after.get(path)])
    .filter((blob) => blob !== undefined);
  const texts = await readTexts(shelf, blobs);
  const textAt = (tree: ReadonlyMap<string, string>, path: string) => texts.get(tree.get(path) ?? "") ?? null;
  return {
    ...headingOf(standing),
    commit: commitLine(commit),
    parent,
    changes: paths.map((path) => ({ path, before: textAt(before, path), after: textAt(after, path) })),
  };
}
