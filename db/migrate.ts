import { SequelizeStorage, Umzug } from "umzug";
import { database } from "./connect.ts";
import { inTurn } from "./in-turn.ts";
import { migrations } from "./migrations/index.ts";

function migrator() {
  return new Umzug({
    migrations,
    context: database.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize: database, tableName: "applied_migrations" }),
    logger: undefined,
  });
}

/** Applies what is missing; returns the names of what was applied. */
export function migrate(): Promise<string[]> {
  return inTurn(async () => (await migrator().up()).map(({ name }) => name));
}

/** Takes everything back: the database is as it was before the first migration. */
export function migrateDown(): Promise<string[]> {
  return inTurn(async () => (await migrator().down({ to: 0 })).map(({ name }) => name));
}
