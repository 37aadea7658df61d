import type { QueryInterface } from "sequelize";

/** Who did what, when: rows are added and never changed or taken away. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    CREATE TABLE journal (
      team_id  uuid NOT NULL REFERENCES teams (id),
      id       uuid NOT NULL DEFAULT gen_random_uuid(),
      at       timestamptz NOT NULL DEFAULT now(),
      actor_id uuid REFERENCES users (id),
      action   text NOT NULL,
      subject  text NOT NULL,
      details  jsonb NOT NULL DEFAULT '{}',
      PRIMARY KEY (team_id, id)
    );
    CREATE INDEX journal_by_time ON journal (team_id, at DESC);
    CREATE TRIGGER journal_stands BEFORE UPDATE OR DELETE OR TRUNCATE ON journal
      FOR EACH STATEMENT EXECUTE FUNCTION refuse_rewriting();
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query("DROP TABLE journal");
}
