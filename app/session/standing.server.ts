import { QueryTypes } from "sequelize";
import { database } from "../../db/connect.ts";
import type { Role } from "../../db/models/index.ts";
import type { SetKey } from "../storage/object-shelf.server.ts";
import { type Permission, permissionsOf } from "./permissions.server.ts";
import { refuse } from "./refusal.server.ts";

/** Who asks. */
export interface Actor {
  userId: string;
}

/** A model set as its address names it. */
export interface SetAddress {
  team: string;
  set: string;
}

/** Where an actor stands towards a model set. */
export interface Standing {
  person: { id: string; name: string; email: string };
  team: { id: string; slug: string; name: string };
  set: { id: string; slug: string; name: string; description: string };
  role: Role;
  may: readonly Permission[];
}

/**
 * The one place where a set is asked for: gives the actor's standing, or refuses. To someone outside the team a
 * set that exists and one that does not are answered alike (404); a member who may not is told so (403).
 */
export async function requirePermission(
  actor: Actor,
  { team, set }: SetAddress,
  permission: Permission,
): Promise<Standing> {
  const [row] = await database.query<Record<string, string>>(
    `SELECT u.id AS "userId", u.display_name, u.email, t.id AS "teamId", t.slug AS team, t.name AS "teamName",
            m.role, s.id AS "setId", s.slug AS set, s.name, s.description
       FROM teams t
       JOIN memberships m ON m.team_id = t.id AND m.user_id = $1
       JOIN users u ON u.id = m.user_id AND u.disabled_at IS NULL
       JOIN model_sets s ON s.team_id = t.id AND s.slug = $3 AND s.archived_at IS NULL
      WHERE t.slug = $2`,
    { bind: [actor.userId, team, set], type: QueryTypes.SELECT },
  );
  if (!row) refuse(404, "There is no such model set, or you are not in its team.");
  const role = row.role as Role;
  const may = permissionsOf(role);
  if (!may.includes(permission)) refuse(403, `Your role in the team ${row.teamName} does not allow this.`);
  return {
    person: { id: row.userId, name: row.display_name, email: row.email },
    team: { id: row.teamId, slug: row.team, name: row.teamName },
    set: { id: row.setId, slug: row.set, name: row.name, description: row.description },
    role,
    may,
  };
}

/** What a page says about where it is. */
export interface SetHeading {
  team: { slug: string; name: string };
  set: { slug: string; name: string; description: string };
  role: Role;
  may: readonly Permission[];
}

export function headingOf({ team, set, role, may }: Standing): SetHeading {
  return {
    team: { slug: team.slug, name: team.name },
    set: { slug: set.slug, name: set.name, description: set.description },
    role,
    may,
  };
}

/** Whose objects, refs and commits are meant. */
export function keyOf({ team, set }: Standing): SetKey {
  return { teamId: team.id, setId: set.id };
}
