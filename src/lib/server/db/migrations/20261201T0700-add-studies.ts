import type { QueryInterface, Transaction } from 'sequelize';

export const name = '20261201T0700-add-studies';

/**
 * A study is one row that the list can be drawn from, and its content is the append-only revisions beside it. A trigger
 * keeps a revision as it was written; it lets rows go only when the study itself is purged, so that the history of a
 * living study cannot be rewritten by any door.
 */
export async function up(query: QueryInterface, transaction: Transaction): Promise<void> {
  await query.sequelize.query(
    `
    CREATE TABLE studies (
      id uuid PRIMARY KEY,
      workspace_id uuid NOT NULL REFERENCES workspaces (id) ON DELETE CASCADE,
      owner_id uuid NOT NULL REFERENCES users (id),
      origin_id uuid REFERENCES studies (id) ON DELETE SET NULL,
      title text NOT NULL,
      place text NOT NULL,
      kind text NOT NULL CHECK (kind IN ('competition', 'consumer-resource')),
      species jsonb NOT NULL,
      state text NOT NULL DEFAULT 'open' CHECK (state IN ('open', 'archived')),
      revision integer NOT NULL DEFAULT 1 CHECK (revision > 0),
      fingerprint text NOT NULL,
      lock_version integer NOT NULL DEFAULT 0,
      verdict_kind text NOT NULL,
      verdict_consequence text NOT NULL,
      verdict_sentence text NOT NULL,
      part_states jsonb NOT NULL,
      sketch jsonb,
      search_text text NOT NULL,
      created_at timestamptz NOT NULL DEFAULT now(),
      updated_at timestamptz NOT NULL DEFAULT now(),
      changed_at timestamptz NOT NULL DEFAULT now(),
      deleted_at timestamptz,
      deleted_by_id uuid REFERENCES users (id)
    );
    CREATE INDEX studies_workspace_changed ON studies (workspace_id, state, changed_at DESC) WHERE deleted_at IS NULL;
    CREATE INDEX studies_owner ON studies (owner_id);
    CREATE INDEX studies_deleted ON studies (deleted_at) WHERE deleted_at IS NOT NULL;

    CREATE TABLE study_revisions (
      id uuid PRIMARY KEY,
      study_id uuid NOT NULL REFERENCES studies (id) ON DELETE CASCADE,
      number integer NOT NULL CHECK (number > 0),
      question jsonb NOT NULL,
      content jsonb NOT NULL,
      fingerprint text NOT NULL,
      summary text NOT NULL,
      author_id uuid NOT NULL REFERENCES users (id),
      created_at timestamptz NOT NULL DEFAULT now(),
      UNIQUE (study_id, number)
    );

    CREATE FUNCTION refuse_revision_change() RETURNS trigger LANGUAGE plpgsql AS $$
    BEGIN
      IF TG_OP = 'DELETE' AND NOT EXISTS (SELECT 1 FROM studies WHERE id = OLD.study_id) THEN
        RETURN OLD;
      END IF;
      RAISE EXCEPTION 'A study revision is kept as it was written.' USING ERRCODE = 'restrict_violation';
    END
    $$;
    CREATE TRIGGER study_revisions_append_only BEFORE UPDATE OR DELETE ON study_revisions
      FOR EACH ROW EXECUTE FUNCTION refuse_revision_change();

    CREATE TABLE study_shares (
      id uuid PRIMARY KEY,
      study_id uuid NOT NULL REFERENCES studies (id) ON DELETE CASCADE,
      user_id uuid NOT NULL REFERENCES users (id) ON DELETE CASCADE,
      role text NOT NULL CHECK (role IN ('contributor', 'reviewer', 'observer')),
      shared_by_id uuid REFERENCES users (id) ON DELETE SET NULL,
      created_at timestamptz NOT NULL DEFAULT now(),
      updated_at timestamptz NOT NULL DEFAULT now(),
      UNIQUE (study_id, user_id)
    );
    CREATE INDEX study_shares_user ON study_shares (user_id);

    CREATE TABLE readings (
      id uuid PRIMARY KEY,
      study_id uuid NOT NULL REFERENCES studies (id) ON DELETE CASCADE,
      part text NOT NULL CHECK (part IN ('equilibria', 'trajectories')),
      fingerprint text NOT NULL,
      revision integer NOT NULL,
      sentence text NOT NULL,
      user_id uuid NOT NULL REFERENCES users (id),
      created_at timestamptz NOT NULL DEFAULT now()
    );
    CREATE INDEX readings_part ON readings (study_id, part, created_at DESC);

    CREATE TABLE threads (
      id uuid PRIMARY KEY,
      study_id uuid NOT NULL REFERENCES studies (id) ON DELETE CASCADE,
      number integer NOT NULL,
      anchor_kind text NOT NULL CHECK (anchor_kind IN ('study', 'rate', 'point', 'part')),
      anchor_key text NOT NULL,
      anchor_quote text NOT NULL,
      anchor_revision integer NOT NULL,
      state text NOT NULL DEFAULT 'open' CHECK (state IN ('open', 'resolved')),
      opener_id uuid NOT NULL REFERENCES users (id),
      resolved_by_id uuid REFERENCES users (id),
      resolved_at timestamptz,
      created_at timestamptz NOT NULL DEFAULT now(),
      updated_at timestamptz NOT NULL DEFAULT now(),
      UNIQUE (study_id, number)
    );

    CREATE TABLE comments (
      id uuid PRIMARY KEY,
      thread_id uuid NOT NULL REFERENCES threads (id) ON DELETE CASCADE,
      author_id uuid NOT NULL REFERENCES users (id),
      kind text NOT NULL CHECK (kind IN ('must fix', 'question', 'note')),
      body text NOT NULL,
      revision integer NOT NULL,
      created_at timestamptz NOT NULL DEFAULT now()
    );
    CREATE INDEX comments_thread ON comments (thread_id, created_at);
    `,
    { transaction }
  );
}

export async function down(query: QueryInterface, transaction: Transaction): Promise<void> {
  await query.sequelize.query(
    `
    DROP TABLE comments;
    DROP TABLE threads;
    DROP TABLE readings;
    DROP TABLE study_shares;
    DROP TABLE study_revisions;
    DROP FUNCTION refuse_revision_change();
    DROP TABLE studies;
    `,
    { transaction }
  );
}
