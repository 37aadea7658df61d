import type { QueryInterface } from "sequelize";

/** Model sets, and the git objects and refs that hold their versions. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    CREATE FUNCTION refuse_rewriting() RETURNS trigger LANGUAGE plpgsql AS $$
    BEGIN
      RAISE EXCEPTION '% is never rewritten (% refused)', TG_TABLE_NAME, TG_OP USING ERRCODE = 'restrict_violation';
    END $$;

    CREATE TABLE model_sets (
      team_id     uuid NOT NULL REFERENCES teams (id),
      id          uuid NOT NULL DEFAULT gen_random_uuid(),
      slug        text NOT NULL CHECK (slug ~ '^[a-z0-9]+(-[a-z0-9]+)*$'),
      name        text NOT NULL CHECK (name <> ''),
      description text NOT NULL DEFAULT '',
      created_at  timestamptz NOT NULL DEFAULT now(),
      archived_at timestamptz,
      PRIMARY KEY (team_id, id),
      UNIQUE (team_id, slug)
    );

    -- content is the loose object as git stores it: zlib over "type size NUL body"; size is that of the body.
    CREATE TABLE git_objects (
      team_id uuid NOT NULL,
      set_id  uuid NOT NULL,
      oid     text NOT NULL CHECK (oid ~ '^[0-9a-f]{40}$'),
      type    text NOT NULL CHECK (type IN ('blob', 'tree', 'commit', 'tag')),
      size    integer NOT NULL CHECK (size >= 0),
      content bytea NOT NULL,
      PRIMARY KEY (team_id, set_id, oid),
      FOREIGN KEY (team_id, set_id) REFERENCES model_sets
    );
    -- It is packed already: spare PostgreSQL the attempt.
    ALTER TABLE git_objects ALTER COLUMN content SET STORAGE EXTERNAL;
    CREATE TRIGGER git_objects_stand BEFORE UPDATE ON git_objects
      FOR EACH STATEMENT EXECUTE FUNCTION refuse_rewriting();

    CREATE TABLE git_refs (
      team_id uuid NOT NULL,
      set_id  uuid NOT NULL,
      name    text NOT NULL CHECK (name LIKE 'refs/%'),
      oid     text NOT NULL,
      PRIMARY KEY (team_id, set_id, name),
      FOREIGN KEY (team_id, set_id, oid) REFERENCES git_objects
    );

    -- What the pages ask of a commit, so that a history needs no unpacking.
    -- position: one more than that of the first parent, whatever the clocks said.
    CREATE TABLE commits (
      team_id       uuid NOT NULL,
      set_id        uuid NOT NULL,
      oid           text NOT NULL,
      tree          text NOT NULL,
      parents       text[] NOT NULL,
      position      integer NOT NULL CHECK (position >= 1),
      author_id     uuid REFERENCES users (id),
      author_name   text NOT NULL,
      time          timestamptz NOT NULL,
      message       text NOT NULL,
      changed_paths text[] NOT NULL,
      file_count    integer NOT NULL,
      PRIMARY KEY (team_id, set_id, oid),
      FOREIGN KEY (team_id, set_id, oid) REFERENCES git_objects
    );
    CREATE TRIGGER commits_stand BEFORE UPDATE ON commits
      FOR EACH STATEMENT EXECUTE FUNCTION refuse_rewriting();
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    DROP TABLE commits, git_refs, git_objects, model_sets;
    DROP FUNCTION refuse_rewriting;
  `);
}
