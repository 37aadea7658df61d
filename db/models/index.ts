import { Commit } from "./commit.ts";
import { GitObject } from "./git-object.ts";
import { GitRef } from "./git-ref.ts";
import { JournalEntry } from "./journal-entry.ts";
import { Membership } from "./membership.ts";
import { ModelSet } from "./model-set.ts";
import { Session } from "./session.ts";
import { Team } from "./team.ts";
import { User } from "./user.ts";

// All associations stand here, so that no two tables import each other. Keys that lead with `team_id` are written
// out in the query instead: Sequelize joins on one column only.
Session.belongsTo(User, { as: "user", foreignKey: "userId" });
Membership.belongsTo(User, { as: "user", foreignKey: "userId" });
Membership.belongsTo(Team, { as: "team", foreignKey: "teamId" });
Team.hasMany(ModelSet, { as: "sets", foreignKey: "teamId" });

export type { Role } from "./role.ts";
export { roles } from "./role.ts";
export { Commit, GitObject, GitRef, JournalEntry, Membership, ModelSet, Session, Team, User };
