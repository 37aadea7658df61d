import { GitObject } from "../../db/models/index.ts";
import {
  type Actor,
  headingOf,
  keyOf,
  requirePermission,
  type SetAddress,
  type SetHeading,
} from "../session/standing.server.ts";
import { type CommitLine, lineOfCommits, readCommitRow } from "../storage/history.server.ts";
import { ObjectShelf, type SetKey } from "../storage/object-shelf.server.ts";
import { mainBranch, readRef } from "../storage/refs.server.ts";
import { readTree } from "../storage/tree.server.ts";

export interface OpenedSet extends SetHeading {
  /** The newest commit of the main branch; null while the set is empty. */
  head: string | null;
  files: { path: string; size: number }[];
  /** The newest commits, at most ten. */
  recent: CommitLine[];
}

/** A model set as it stands on its main branch. */
export async function openSet(actor: Actor, address: SetAddress): Promise<OpenedSet> {
  const standing = await requirePermission(actor, address, "set.read");
  const key = keyOf(standing);
  const head = await readRef(key, mainBranch);
  const commit = head && (await readCommitRow(key, head));
  return {
    ...headingOf(standing),
    head,
    files: commit ? await filesOf(key, commit.tree) : [],
    recent: head ? await lineOfCommits(key, head, { limit: 10 }) : [],
  };
}

async function filesOf(key: SetKey, tree: string): Promise<{ path: string; size: number }[]> {
  const files = await readTree(new ObjectShelf(key), tree);
  const blobs = await GitObject.findAll({
    where: { ...key, oid: [...new Set(files.values())] },
    attributes: ["oid", "size"],
    raw: true,
  });
  const sizes = new Map(blobs.map(({ oid, size }) => [oid, size]));
  return [...files]
    .map(([path, oid]) => ({ path, size: sizes.get(oid) ?? 0 }))
    .sort((a, b) => (a.path < b.path ? -1 : 1));
}
