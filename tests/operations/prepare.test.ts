import { readdirSync, readFileSync } from "node:fs";
import { type Model, type ModelStatic, QueryTypes } from "sequelize";
import { beforeAll, describe, expect, test } from "vitest";
import { listSets } from "../../app/operations/list-sets.server.ts";
import { readFiles } from "../../app/operations/read-files.server.ts";
import { signIn } from "../../app/operations/sign-in.server.ts";
import { database } from "../../db/connect.ts";
import { migrate, migrateDown } from "../../db/migrate.ts";
import { migrations } from "../../db/migrations/index.ts";
import * as models from "../../db/models/index.ts";
import { demoAccounts, demoTeam } from "../../db/seed/people.ts";
import { seedDemo } from "../../db/seed/seed-demo.ts";
import { testDatabase } from "../support/database.ts";

const demo = new URL("../../models-demo", import.meta.url).pathname;

beforeAll(() => testDatabase());

interface Column {
  table: string;
  column: string;
  type: string;
  nullable: string;
}

/** The tables as the catalogue has them. */
function columns(): Promise<Column[]> {
  return database.query<Column>(
    `SELECT table_name AS table, column_name AS column, data_type AS type, is_nullable AS nullable
       FROM information_schema.columns WHERE table_schema = 'public' AND table_name <> 'applied_migrations'
      ORDER BY 1, ordinal_position`,
    { type: QueryTypes.SELECT },
  );
}

function fieldsOf(model: ModelStatic<Model>): string[] {
  return Object.values(model.getAttributes()).map(({ field }) => `${model.getTableName()}.${field}`);
}

describe("migrations", () => {
  test("go down to nothing and up again to the same tables", async () => {
    const before = await columns();
    expect(before.length).toBeGreaterThan(40);
    expect(await migrateDown()).toHaveLength(migrations.length);
    expect(await columns()).toEqual([]);
    expect(await migrate()).toEqual(migrations.map(({ name }) => name));
    expect(await columns()).toEqual(before);
    expect(await migrate()).toEqual([]);
  });

  test("started twice at once are applied once", async () => {
    await migrateDown();
    const applied = await Promise.all([migrate(), migrate()]);
    expect(applied.map((names) => names.length).sort()).toEqual([0, migrations.length]);
  });

  test("make the columns that the models name, and no others", async () => {
    const made = new Set((await columns()).map(({ table, column }) => `${table}.${column}`));
    const named = Object.values(models).flatMap((model) =>
      typeof model === "function" ? fieldsOf(model as ModelStatic<Model>) : [],
    );
    const counter = ["sign_in_tries.key", "sign_in_tries.points", "sign_in_tries.expire"];
    expect([...made].sort()).toEqual([...named, ...counter].sort());
  });
});

test("a table of a team leads its primary key with the team", async () => {
  const keys = await database.query<{ table: string; columns: string[] }>(
    `SELECT c.relname AS table, array_agg(a.attname::text ORDER BY k.place) AS columns
       FROM pg_index i JOIN pg_class c ON c.oid = i.indrelid
       JOIN unnest(i.indkey) WITH ORDINALITY AS k(number, place) ON true
       JOIN pg_attribute a ON a.attrelid = c.oid AND a.attnum = k.number
      WHERE i.indisprimary AND c.relnamespace = 'public'::regnamespace GROUP BY 1`,
    { type: QueryTypes.SELECT },
  );
  const apart = ["users", "sessions", "sign_in_tries", "teams", "applied_migrations"];
  for (const { table, columns } of keys)
    if (!apart.includes(table)) expect(columns[0], table).toBe("team_id");
});

describe("the demo", () => {
  test("is put in once, with all its folders, texts and people", async () => {
    expect(await Promise.all([seedDemo(demo), seedDemo(demo)])).toContain(false);
    expect(await seedDemo(demo)).toBe(false);
    for (const { email, password, role } of demoAccounts) {
      const result = await signIn({ email, password, userAgent: "" });
      if (result.kind !== "signed-in") throw new Error(`${email} cannot sign in`);
      const [team] = await listSets({ userId: result.user.id });
      expect(team).toMatchObject({ team: demoTeam, role: role.replace(" ", "_") });
      expect(team.sets.map(({ slug }) => slug).sort()).toEqual(readdirSync(demo).sort());
      for (const set of team.sets) {
        expect(set.description).toMatch(/\.$/);
        const { files } = await readFiles(
          { userId: result.user.id },
          { team: team.team.slug, set: set.slug },
        );
        expect(files).toHaveLength(set.files);
        for (const [path, text] of files) {
          expect(text).toBe(readFileSync(`${demo}/${set.slug}/${path}`, "utf8"));
        }
      }
    }
  });
});
