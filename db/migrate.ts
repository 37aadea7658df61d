import type { QueryInterface, Sequelize } from "sequelize";
import { SequelizeStorage, Umzug } from "umzug";
import { migrations } from "./migrations/index.ts";

/**
 * Brings the tables up to date and returns the names of the migrations that ran. One process at a time does so:
 * the others wait for the lock, then find nothing left to do. A migration is one query, hence all of it or nothing.
 */
export function migrate(database: Sequelize): Promise<string[]> {
  return database.transaction(async (transaction) => {
    await database.query("SELECT pg_advisory_xact_lock(hashtext('bondwright migrations'))", { transaction });
    const umzug = new Umzug<QueryInterface>({
      migrations,
      context: database.getQueryInterface(),
      storage: new SequelizeStorage({ sequelize: database, tableName: "migrations" }),
      logger: undefined,
    });
    return (await umzug.up()).map(({ name }) => name);
  });
}
