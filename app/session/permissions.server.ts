import type { Role } from "../../db/models/index.ts";

/** What a person may do in a team. */
export type Permission = "set.read" | "set.write" | "change.review" | "release.make" | "team.administer";

/** The one table of roles and permissions. */
const allowed: Record<Role, readonly Permission[]> = {
  reader: ["set.read"],
  modeller: ["set.read", "set.write"],
  reviewer: ["set.read", "set.write", "change.review"],
  release_keeper: ["set.read", "set.write", "change.review", "release.make"],
  administrator: ["set.read", "set.write", "change.review", "release.make", "team.administer"],
};

export function permissionsOf(role: Role): readonly Permission[] {
  return allowed[role];
}
