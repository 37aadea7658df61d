import { revokeSession } from "../session/token.server.ts";

/** Ends the session of this token; it opens nothing from the next request on. */
export async function signOut(token: string): Promise<void> {
  await revokeSession(token);
}
