import type { Transaction } from "sequelize";
import { database } from "./connect.ts";

/** Any number that no other lock of this database uses. */
const preparing = 7_301_001;

/** Runs work that prepares the database; processes that start at the same moment take turns. */
export function inTurn<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  return database.transaction(async (transaction) => {
    await database.query("SET LOCAL idle_in_transaction_session_timeout = 0", { transaction });
    await database.query("SELECT pg_advisory_xact_lock($1)", { bind: [preparing], transaction });
    return work(transaction);
  });
}
