import { ConnectionError } from "sequelize";
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
try {
  await migrate();
  if (withDemo) await seedDemo("models-demo");
  const demoIsThere = withDemo && (await Team.count({ where: { slug: demoTeam.slug } })) > 0;
  console.log(JSON.stringify(demoIsThere ? demoAccounts : []));
} catch (error) {
  // A server that cannot be reached says so in a sentence; anything else is a fault of ours, with its stack.
  console.error(error instanceof ConnectionError ? error.message : error);
  process.exitCode = 1;
} finally {
  await database.close();
}
