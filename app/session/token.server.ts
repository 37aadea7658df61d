import { createHash, randomBytes } from "node:crypto";
import { Op } from "sequelize";
import { Session, User } from "../../db/models/index.ts";

/** A session ends after this time, whether it was used or not. */
export const sessionDays = 14;
/** How often the time of the last request is written down. */
const seenEveryMs = 5 * 60_000;

/** The person who is signed in, as requests carry it. */
export interface SignedIn {
  userId: string;
  sessionId: string;
  name: string;
  email: string;
}

/**
 * Opens a session and returns its token: 256 random bits, of which the database keeps only the hash. Sessions of
 * this person that have run out are cleared away.
 */
export async function openSession(userId: string, userAgent: string): Promise<string> {
  await Session.destroy({ where: { userId, expiresAt: { [Op.lte]: new Date() } } });
  const token = randomBytes(32).toString("base64url");
  await Session.create({
    id: sessionIdOf(token),
    userId,
    userAgent: userAgent.slice(0, 300),
    expiresAt: new Date(Date.now() + sessionDays * 86_400_000),
  });
  return token;
}

export function sessionIdOf(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}

/** Who holds this token; null when the session is unknown, expired or revoked, or the person disabled. */
export async function holderOf(token: string): Promise<SignedIn | null> {
  const attributes = ["id", "email", "displayName", "disabledAt"];
  const include = { model: User, as: "user", attributes };
  const session = await Session.findByPk(sessionIdOf(token), { include });
  const user = session?.user;
  const now = new Date();
  if (!session || !user || session.revokedAt || session.expiresAt <= now || user.disabledAt) return null;
  if (now.getTime() - session.lastSeenAt.getTime() > seenEveryMs) await session.update({ lastSeenAt: now });
  return { userId: user.id, sessionId: session.id, name: user.displayName, email: user.email };
}

export async function revokeSession(token: string): Promise<void> {
  await Session.update({ revokedAt: new Date() }, { where: { id: sessionIdOf(token), revokedAt: null } });
}
