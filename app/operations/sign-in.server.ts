import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { database } from "../../db/connect.ts";
import { User } from "../../db/models/index.ts";
import { passwordMatches } from "../session/password.server.ts";
import { openSession } from "../session/token.server.ts";

export type SignInResult =
  | { kind: "signed-in"; token: string; user: { id: string; name: string; email: string } }
  | { kind: "refused"; message: string }
  | { kind: "too-many-tries"; message: string };

/** Wrong tries that are evaluated for one account before it rests, and for how long it rests. */
const triesOfAccount = 20;
const restSeconds = 15 * 60;

/** Counted in the database, so that it makes no difference which process a try reaches. */
const tries = new RateLimiterPostgres({
  storeClient: database,
  storeType: "sequelize",
  tableName: "sign_in_tries",
  tableCreated: true,
  keyPrefix: "account",
  points: triesOfAccount,
  duration: restSeconds,
});

/**
 * Opens a session for the one who knows the password. The try is counted before the password is looked at, so
 * that many at once gain nothing; an account that does not exist is counted and costs the same time.
 */
export async function signIn({
  email,
  password,
  userAgent,
}: {
  email: string;
  password: string;
  userAgent: string;
}): Promise<SignInResult> {
  const account = normaliseEmail(email);
  const rest = await countTry(account);
  if (rest > 0) {
    const minutes = Math.ceil(rest / 60);
    const message = `Too many wrong tries for this account. It can be tried again in ${minutes} min.`;
    return { kind: "too-many-tries", message };
  }
  const user = await User.findOne({ where: { email: account } });
  const known = user && !user.disabledAt ? user : null;
  if (!(await passwordMatches(known?.passwordHash ?? null, password)) || !known)
    return { kind: "refused", message: "This e-mail address and this password do not belong together." };
  await tries.delete(account);
  const token = await openSession(known.id, userAgent);
  return { kind: "signed-in", token, user: { id: known.id, name: known.displayName, email: known.email } };
}

export function normaliseEmail(email: string): string {
  return email.normalize("NFC").trim().toLowerCase().slice(0, 200);
}

/** Seconds for which the account still rests; 0 when this try is to be evaluated. */
async function countTry(account: string): Promise<number> {
  try {
    await tries.consume(account);
    return 0;
  } catch (refused) {
    if (refused instanceof RateLimiterRes) return Math.max(1, Math.ceil(refused.msBeforeNext / 1000));
    throw refused;
  }
}
