import { QueryTypes, type Transaction } from "sequelize";
import { database } from "../../db/connect.ts";
import { Commit } from "../../db/models/index.ts";
import type { SetKey } from "./object-shelf.server.ts";

/** A commit as a list shows it. */
export interface CommitLine {
  oid: string;
  /** 1 for the first version of the set, counted along first parents. */
  position: number;
  parents: string[];
  author: string;
  /** ISO 8601, UTC. */
  time: string;
  message: string;
  /** Paths that differ from the first parent. */
  paths: string[];
}

/** The row of a commit of this set; null for anything that does not name one. */
export async function readCommitRow(
  key: SetKey,
  oid: string,
  transaction?: Transaction,
): Promise<Commit | null> {
  if (!/^[0-9a-f]{40}$/.test(oid)) return null;
  return Commit.findOne({ where: { ...key, oid }, transaction });
}

export function commitLine(commit: Omit<LineRow, "time"> & { time: Date }): CommitLine {
  return {
    oid: commit.oid,
    position: commit.position,
    parents: commit.parents,
    author: commit.authorName,
    time: commit.time.toISOString(),
    message: commit.message,
    paths: commit.changedPaths,
  };
}

type LineRow = Pick<
  Commit,
  "oid" | "position" | "parents" | "authorName" | "message" | "changedPaths" | "time"
>;

/**
 * The commits from `start` back along first parents, newest first: at most `limit`, only those that touched `path`
 * when one is given. The order is that of the parents, never that of the clocks. PostgreSQL follows the line no
 * further than the limit asks.
 */
export async function lineOfCommits(
  key: SetKey,
  start: string,
  { path = null, limit }: { path?: string | null; limit: number },
): Promise<CommitLine[]> {
  const rows = await database.query<LineRow>(
    `WITH RECURSIVE line AS (
       SELECT c.* FROM commits c WHERE c.team_id = $1 AND c.set_id = $2 AND c.oid = $3
       UNION ALL
       SELECT c.* FROM line JOIN commits c ON c.team_id = $1 AND c.set_id = $2 AND c.oid = line.parents[1]
     )
     SELECT oid, position, parents, author_name AS "authorName", time, message, changed_paths AS "changedPaths"
       FROM line WHERE $4::text IS NULL OR $4 = ANY (changed_paths) LIMIT $5`,
    { bind: [key.teamId, key.setId, start, path, limit], type: QueryTypes.SELECT },
  );
  return rows.map(commitLine);
}
