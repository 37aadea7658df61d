import { ConnectionError } from "sequelize";

/**
 * SQLSTATE classes and codes that say "not now" rather than "wrong": connection lost (08), out of room or of
 * connections (53), shut down or starting (57P), statement out of time (57014), lock not granted (55P03),
 * serialisation and deadlock (40), the system's own faults (58). PostgreSQL manual, appendix A.
 */
const notNow = /^(08|53|57P|57014|55P03|40|58)/;

/** Errors of the socket below. */
const socket = /^(ECONN|EPIPE|ETIMEDOUT|EHOST|ENOTFOUND|EAI_AGAIN)/;

/** True when the database could not be reached or could not take the work on: nothing was done, ask again later. */
export function databaseUnavailable(error: unknown): boolean {
  if (error instanceof ConnectionError) return true;
  for (let cause = error; cause instanceof Error; cause = causeOf(cause)) {
    const { code } = cause as { code?: unknown };
    if (typeof code === "string" && (notNow.test(code) || socket.test(code))) return true;
    if (/^(Connection terminated|Client has encountered a connection error|timeout e)/.test(cause.message))
      return true;
  }
  return false;
}

function causeOf(error: Error): unknown {
  return (error as { parent?: unknown }).parent ?? error.cause;
}
