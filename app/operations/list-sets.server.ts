import { QueryTypes } from "sequelize";
import { database } from "../../db/connect.ts";
import type { Role } from "../../db/models/index.ts";
import { permissionsOf } from "../session/permissions.server.ts";
import type { Actor } from "../session/standing.server.ts";

export interface SetLine {
  slug: string;
  name: string;
  description: string;
  /** The newest commit of the main branch; null while there is none. */
  head: string | null;
  updatedAt: string | null;
  updatedBy: string | null;
  files: number;
}

export interface TeamSets {
  team: { slug: string; name: string };
  role: Role;
  sets: SetLine[];
}

/** The actor's teams with their model sets, by name. */
export async function listSets(actor: Actor): Promise<TeamSets[]> {
  const rows = await database.query<TeamRow & Partial<SetRow>>(
    `SELECT t.slug AS team, t.name AS "teamName", m.role,
            s.slug, s.name, s.description, r.oid AS head, c.time, c.author_name AS author, c.file_count AS files
       FROM memberships m
       JOIN teams t ON t.id = m.team_id
       LEFT JOIN model_sets s ON s.team_id = m.team_id AND s.archived_at IS NULL
       LEFT JOIN git_refs r ON r.team_id = s.team_id AND r.set_id = s.id AND r.name = 'refs/heads/main'
       LEFT JOIN commits c ON c.team_id = r.team_id AND c.set_id = r.set_id AND c.oid = r.oid
      WHERE m.user_id = $1
      ORDER BY t.name, t.slug, s.name, s.slug`,
    { bind: [actor.userId], type: QueryTypes.SELECT },
  );
  const teams = new Map<string, TeamSets>();
  for (const row of rows) {
    if (!permissionsOf(row.role).includes("set.read")) continue;
    const team = teams.get(row.team) ?? {
      team: { slug: row.team, name: row.teamName },
      role: row.role,
      sets: [],
    };
    teams.set(row.team, team);
    if (row.slug) team.sets.push(setLine(row as SetRow));
  }
  return [...teams.values()];
}

interface TeamRow {
  team: string;
  teamName: string;
  role: Role;
}

interface SetRow {
  slug: string;
  name: string;
  description: string;
  head: string | null;
  time: Date | null;
  author: string | null;
  files: number | null;
}

function setLine({ slug, name, description, head, time, author, files }: SetRow): SetLine {
  return {
    slug,
    name,
    description,
    head,
    updatedAt: time?.toISOString() ?? null,
    updatedBy: author,
    files: files ?? 0,
  };
}
