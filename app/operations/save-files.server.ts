import type { Transaction } from "sequelize";
import { database } from "../../db/connect.ts";
import { type Commit, JournalEntry } from "../../db/models/index.ts";
import { refuse } from "../session/refusal.server.ts";
import { type Actor, keyOf, requirePermission, type SetAddress } from "../session/standing.server.ts";
import { storeCommit } from "../storage/commit.server.ts";
import { type CommitLine, commitLine, readCommitRow } from "../storage/history.server.ts";
import { ObjectShelf, type SetKey } from "../storage/object-shelf.server.ts";
import { lockRef, moveRef } from "../storage/refs.server.ts";
import { readTexts, readTree, type Tree, writeText } from "../storage/tree.server.ts";
import { type FileEdit, type Problem, problemsOfSave } from "./save-problems.ts";

export interface SaveRequest extends SetAddress {
  branch: "main";
  /** The commit the texts were written on; null when the set was empty. */
  parent: string | null;
  files: FileEdit[];
  message: string;
}

/** A file that others have changed since: all three texts, null where there is no such file. */
export interface Collision {
  path: string;
  base: string | null;
  theirs: string | null;
  yours: string | null;
}

export type SaveResult =
  /** `merged`: others had saved other files since; their work stands beside this. */
  | { kind: "saved"; commit: CommitLine; merged: boolean }
  /** The files hold this already; nothing was written. */
  | { kind: "unchanged"; head: string | null }
  /** Others have saved the same files since; nothing was written. `newest` is their last commit. */
  | { kind: "behind"; head: string; newest: CommitLine; collisions: Collision[] }
  | { kind: "refused"; problems: Problem[] };

interface Version {
  commit: Commit;
  files: Tree;
}

/**
 * Saves files as one commit on the branch: the blobs, trees, commit, the branch's step and the journal are one
 * transaction, and one save of a set at a time. Where others have saved since `parent`, files that only one side
 * changed are taken from that side; a file that both changed differently stops the save.
 */
export async function saveFiles(actor: Actor, request: SaveRequest): Promise<SaveResult> {
  const standing = await requirePermission(actor, request, "set.write");
  const key = keyOf(standing);
  const message = request.message.replaceAll("\r\n", "\n").trim();
  const ref = `refs/heads/${request.branch}`;

  return database.transaction(async (transaction): Promise<SaveResult> => {
    const shelf = new ObjectShelf(key, transaction);
    const edits = new Map<string, string | null>();
    for (const { path, text } of request.files)
      edits.set(path, text === null ? null : await writeText(shelf, text));

    const head = await versionAt(shelf, await lockRef(key, ref, transaction));
    const base = head?.commit.oid === request.parent ? head : await versionAt(shelf, request.parent);

    const colliding = [...edits].filter(([path, yours]) => collides(path, yours, base, head));
    if (head && colliding.length > 0) {
      const collisions = await showCollisions(
        shelf,
        request,
        colliding.map(([path]) => path),
        base,
        head,
      );
      return { kind: "behind", head: head.commit.oid, newest: commitLine(head.commit), collisions };
    }

    const files = withEdits(head?.files ?? new Map(), edits);
    const problems = problemsOfSave({ files: request.files, message, paths: files.keys() });
    if (problems.length > 0) return { kind: "refused", problems };
    if (same(files, head?.files ?? new Map())) return { kind: "unchanged", head: head?.commit.oid ?? null };

    const commit = await storeCommit(shelf, {
      parent: head,
      files,
      author: standing.person,
      time: new Date(),
      message,
    });
    if (!(await moveRef(key, ref, head?.commit.oid ?? null, commit.oid, transaction)))
      refuse(409, "Someone else saved at the same moment. Nothing was saved; try again.");
    await record(key, actor, commit, transaction);
    return { kind: "saved", commit: commitLine(commit), merged: head !== base };
  });
}

async function versionAt(shelf: ObjectShelf, oid: string | null): Promise<Version | null> {
  if (oid === null) return null;
  const commit = await readCommitRow(shelf.key, oid, shelf.transaction);
  if (!commit) refuse(404, "This model set has no such version.");
  return { commit, files: await readTree(shelf, commit.tree) };
}

/** Has the file changed since `base`, and to something else than what is now to be saved? */
function collides(path: string, yours: string | null, base: Version | null, head: Version | null): boolean {
  const theirs = head?.files.get(path) ?? null;
  return theirs !== (base?.files.get(path) ?? null) && theirs !== yours;
}

async function showCollisions(
  shelf: ObjectShelf,
  request: SaveRequest,
  paths: string[],
  base: Version | null,
  head: Version,
): Promise<Collision[]> {
  const blobs = paths.flatMap((path) => [base?.files.get(path), head.files.get(path)]);
  const texts = await readTexts(
    shelf,
    blobs.filter((blob) => blob !== undefined),
  );
  const textAt = (version: Version | null, path: string) => texts.get(version?.files.get(path) ?? "") ?? null;
  return paths.map((path) => ({
    path,
    base: textAt(base, path),
    theirs: textAt(head, path),
    yours: request.files.find((file) => file.path === path)?.text ?? null,
  }));
}

function withEdits(files: Tree, edits: ReadonlyMap<string, string | null>): Tree {
  const result = new Map(files);
  for (const [path, blob] of edits) {
    if (blob === null) result.delete(path);
    else result.set(path, blob);
  }
  return result;
}

function same(a: Tree, b: Tree): boolean {
  return a.size === b.size && [...a].every(([path, oid]) => b.get(path) === oid);
}

async function record(key: SetKey, actor: Actor, commit: Commit, transaction: Transaction): Promise<void> {
  await JournalEntry.create(
    {
      teamId: key.teamId,
      actorId: actor.userId,
      action: "set.saved",
      subject: key.setId,
      details: { commit: commit.oid, paths: commit.changedPaths },
    },
    { transaction },
  );
}
