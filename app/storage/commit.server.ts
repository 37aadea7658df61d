import git from "isomorphic-git";
import { Commit } from "../../db/models/index.ts";
import type { ObjectShelf } from "./object-shelf.server.ts";
import { changedPaths, type Tree, writeTree } from "./tree.server.ts";

export interface Author {
  id: string | null;
  name: string;
  email: string;
}

export interface NewCommit {
  /** The commit that this one follows, with its files; null for a first one. */
  parent: { commit: Commit; files: Tree } | null;
  files: Tree;
  author: Author;
  time: Date;
  message: string;
}

/** Stores a commit with everything it needs (its blobs are on the shelf already) and the row that the pages read. */
export async function storeCommit(
  shelf: ObjectShelf,
  { parent, files, author, time, message }: NewCommit,
): Promise<Commit> {
  const tree = await writeTree(shelf, files);
  const parents = parent ? [parent.commit.oid] : [];
  const signature = {
    name: plain(author.name) || "unnamed",
    email: plain(author.email),
    timestamp: Math.floor(time.getTime() / 1000),
    timezoneOffset: 0,
  };
  const oid = await git.writeCommit({
    ...shelf.git,
    commit: { tree, parent: parents, author: signature, committer: signature, message: `${message}\n` },
  });
  await shelf.store();
  return Commit.create(
    {
      ...shelf.key,
      oid,
      tree,
      parents,
      position: (parent?.commit.position ?? 0) + 1,
      authorId: author.id,
      authorName: author.name,
      time: new Date(signature.timestamp * 1000),
      message,
      changedPaths: changedPaths(parent?.files ?? new Map(), files),
      fileCount: files.size,
    },
    { transaction: shelf.transaction },
  );
}

/** Git ends a name at `<` and a line at a line feed. */
function plain(text: string): string {
  return text.replace(/[<>\p{Cc}]/gu, "").trim();
}
