import { Op } from "sequelize";
import { database } from "../../db/connect.ts";
import { Session, User } from "../../db/models/index.ts";
import { hashPassword, passwordMatches, passwordProblem } from "../session/password.server.ts";
import type { SignedIn } from "../session/token.server.ts";

export type ChangePasswordResult = { kind: "changed" } | { kind: "refused"; message: string };

/** Gives the actor a new password and ends all their other sessions. */
export async function changePassword(
  actor: SignedIn,
  { current, wanted }: { current: string; wanted: string },
): Promise<ChangePasswordResult> {
  const user = await User.findByPk(actor.userId, { rejectOnEmpty: true });
  if (!(await passwordMatches(user.passwordHash, current)))
    return { kind: "refused", message: "The current password is not right." };
  const problem = passwordProblem(wanted);
  if (problem) return { kind: "refused", message: problem };
  const passwordHash = await hashPassword(wanted);
  await database.transaction(async (transaction) => {
    await user.update({ passwordHash }, { transaction });
    await Session.update(
      { revokedAt: new Date() },
      { where: { userId: user.id, revokedAt: null, id: { [Op.ne]: actor.sessionId } }, transaction },
    );
  });
  return { kind: "changed" };
}
