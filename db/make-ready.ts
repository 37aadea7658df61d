import { database } from "./connect.ts";
import { migrate } from "./migrate.ts";
import { Team } from "./models/index.ts";
import { demoAccounts, demoTeam } from "./seed/people.ts";
import { seedDemo } from "./seed/seed-demo.ts";

/**
 * The program that brings the database of `DATABASE_URL` up to date before the server starts:
 * `node build/db/make-ready.mjs [--demo]`, in the project's folder. With `--demo` it also puts the demo into a
 * database without teams, and prints its sign-ins as JSON where it is there.
 */
const withDemo = process.argv.includes("--demo");
await migrate();
if (withDemo) await seedDemo("models-demo");
const demoIsThere = withDemo && (await Team.count({ where: { slug: demoTeam.slug } })) > 0;
await database.close();
console.log(JSON.stringify(demoIsThere ? demoAccounts : []));
