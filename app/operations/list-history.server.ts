import { refuse } from "../session/refusal.server.ts";
import {
  type Actor,
  headingOf,
  keyOf,
  requirePermission,
  type SetAddress,
  type SetHeading,
} from "../session/standing.server.ts";
import { type CommitLine, lineOfCommits, readCommitRow } from "../storage/history.server.ts";
import { mainBranch, readRef } from "../storage/refs.server.ts";

export interface HistoryPage extends SetHeading {
  commits: CommitLine[];
  /** To be given as `before` for the older ones; null when these were the last. */
  next: string | null;
}

/**
 * The commits of the main branch, newest first; of one file when `path` is given; those older than `before`.
 */
export async function listHistory(
  actor: Actor,
  { path, before, limit, ...address }: SetAddress & { path?: string; before?: string; limit: number },
): Promise<HistoryPage> {
  const standing = await requirePermission(actor, address, "set.read");
  const key = keyOf(standing);
  let start: string | null;
  if (before === undefined) start = await readRef(key, mainBranch);
  else {
    const commit = await readCommitRow(key, before);
    if (!commit) refuse(404, "This model set has no such version.");
    start = commit.parents[0] ?? null;
  }
  if (start === null) return { ...headingOf(standing), commits: [], next: null };
  // One more than asked for tells whether there are older ones.
  const commits = await lineOfCommits(key, start, { path, limit: limit + 1 });
  const shown = commits.slice(0, limit);
  return {
    ...headingOf(standing),
    commits: shown,
    next: commits.length > limit ? (shown.at(-1)?.oid ?? null) : null,
  };
}
