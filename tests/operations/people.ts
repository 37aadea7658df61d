import { hashPassword } from "../../app/session/password.server.ts";
import { Membership, ModelSet, type Role, Team, User } from "../../db/models/index.ts";

export const password = "three grey gulls wait";
let hashed: Promise<string> | undefined;
let count = 0;

/** A person who can sign in with `password`. */
export async function newPerson(name = "Ada Krog") {
  hashed ??= hashPassword(password);
  count += 1;
  const user = await User.create({
    email: `p${count}@example.org`,
    displayName: name,
    passwordHash: await hashed,
  });
  return { userId: user.id, email: user.email };
}

/** A team with one model set, empty as yet, and a person of each role asked for. */
export async function newTeam<R extends Role>(...roles: R[]) {
  count += 1;
  const team = await Team.create({ slug: `team-${count}`, name: `Team ${count}` });
  const set = await ModelSet.create({ teamId: team.id, slug: "hoist", name: "Hoist" });
  const people = {} as Record<R, { userId: string; email: string }>;
  for (const role of roles) {
    people[role] = await newPerson(role);
    await Membership.create({ teamId: team.id, userId: people[role].userId, role });
  }
  return { ...people, address: { team: team.slug, set: set.slug }, key: { teamId: team.id, setId: set.id } };
}
