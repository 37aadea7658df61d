import { database } from "../../db/connect.ts";

/** Asks the database for a sign of life; throws when there is none. */
export async function checkHealth(): Promise<void> {
  await database.query("SELECT 1");
}
