import { database } from "./connect.ts";
import { migrate } from "./migrate.ts";
import { demoAccounts } from "./seed/people.ts";
import { seedDemo } from "./seed/seed-demo.ts";

/**
 * The program that brings the database of `DATABASE_URL` up to date before the server starts:
 * `node build/db/make-ready.mjs [--demo]`, in the project's folder. With `--demo` it also puts the demo into a
 * database without teams, and prints the demo's sign-ins as JSON.
 */
const withDemo = process.argv.includes("--demo");
await migrate();
if (withDemo) await seedDemo("models-demo");
await database.close();
console.log(JSON.stringify(withDemo ? demoAccounts : []));
