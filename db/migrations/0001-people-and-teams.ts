import type { QueryInterface } from "sequelize";

/**
 * People and their sessions belong to no single team. Everything else hangs off a team and carries `team_id` at
 * the head of its primary key, so that the tables can be spread by team over several machines.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    CREATE TABLE users (
      id            uuid PRIMARY KEY DEFAULT gen_random_uuid(),
      email         text NOT NULL UNIQUE CHECK (email = lower(email)),
      display_name  text NOT NULL CHECK (display_name <> ''),
      password_hash text NOT NULL CHECK (password_hash LIKE '$argon2id$%'),
      disabled_at   timestamptz,
      created_at    timestamptz NOT NULL DEFAULT now()
    );

    -- The name of a session is the SHA-256 of its token: a stolen dump opens no session.
    CREATE TABLE sessions (
      id           text PRIMARY KEY CHECK (id ~ '^[0-9a-f]{64}$'),
      user_id      uuid NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      user_agent   text NOT NULL DEFAULT '',
      created_at   timestamptz NOT NULL DEFAULT now(),
      last_seen_at timestamptz NOT NULL DEFAULT now(),
      expires_at   timestamptz NOT NULL,
      revoked_at   timestamptz
    );
    CREATE INDEX sessions_of_user ON sessions (user_id);

    -- The columns are those that rate-limiter-flexible writes.
    CREATE TABLE sign_in_tries (
      key    varchar(255) PRIMARY KEY,
      points integer NOT NULL DEFAULT 0,
      expire bigint
    );

    CREATE TABLE teams (
      id         uuid PRIMARY KEY DEFAULT gen_random_uuid(),
      slug       text NOT NULL UNIQUE CHECK (slug ~ '^[a-z0-9]+(-[a-z0-9]+)*$'),
      name       text NOT NULL CHECK (name <> ''),
      created_at timestamptz NOT NULL DEFAULT now()
    );

    CREATE TABLE memberships (
      team_id    uuid NOT NULL REFERENCES teams (id),
      user_id    uuid NOT NULL REFERENCES users (id),
      role       text NOT NULL
                 CHECK (role IN ('reader', 'modeller', 'reviewer', 'release_keeper', 'administrator')),
      created_at timestamptz NOT NULL DEFAULT now(),
      PRIMARY KEY (team_id, user_id)
    );
    CREATE INDEX memberships_of_user ON memberships (user_id);
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query("DROP TABLE memberships, teams, sign_in_tries, sessions, users");
}
