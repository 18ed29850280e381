import { sqlMigration } from './migration';

/**
 * A study is one row that the list can be drawn from, and its content is the append-only revisions beside it. A trigger
 * keeps a revision as it was written; it lets rows go only when the study itself is purged, so that the history of a
 * living study cannot be rewritten by any door.
 */
export const addStudies = sqlMigration(
  '20261201T0700-add-studies',
  `
  create table studies (
    id uuid primary key,
    workspace_id uuid not null references workspaces (id) on delete cascade,
    owner_id uuid not null references users (id),
    origin_id uuid references studies (id) on delete set null,
    title text not null,
    place text not null,
    kind text not null check (kind in ('competition', 'consumer-resource')),
    species jsonb not null,
    state text not null default 'open' check (state in ('open', 'archived')),
    revision integer not null default 1 check (revision > 0),
    fingerprint text not null,
    lock_version integer not null default 0,
    verdict_kind text not null,
    verdict_consequence text not null,
    verdict_sentence text not null,
    part_states jsonb not null,
    sketch jsonb,
    search_text text not null,
    created_at timestamptz not null default now(),
    updated_at timestamptz not null default now(),
    changed_at timestamptz not null default now(),
    deleted_at timestamptz,
    deleted_by_id uuid references users (id)
  );
  create index studies_workspace_changed on studies (workspace_id, state, changed_at desc) where deleted_at is null;
  create index studies_owner on studies (owner_id);
  create index studies_deleted on studies (deleted_at) where deleted_at is not null;

  create table study_revisions (
    id uuid primary key,
    study_id uuid not null references studies (id) on delete cascade,
    number integer not null check (number > 0),
    question jsonb not null,
    content jsonb not null,
    fingerprint text not null,
    summary text not null,
    author_id uuid not null references users (id),
    created_at timestamptz not null default now(),
    unique (study_id, number)
  );

  create function refuse_revision_change() returns trigger language plpgsql as $$
  begin
    if tg_op = 'DELETE' and not exists (select 1 from studies where id = old.study_id) then
      return old;
    end if;
    raise exception 'A study revision is kept as it was written.' using errcode = 'restrict_violation';
  end
  $$;
  create trigger study_revisions_append_only before update or delete on study_revisions
    for each row execute function refuse_revision_change();

  create table study_shares (
    id uuid primary key,
    study_id uuid not null references studies (id) on delete cascade,
    user_id uuid not null references users (id) on delete cascade,
    role text not null check (role in ('contributor', 'reviewer', 'observer')),
    shared_by_id uuid references users (id) on delete set null,
    created_at timestamptz not null default now(),
    updated_at timestamptz not null default now(),
    unique (study_id, user_id)
  );
  create index study_shares_user on study_shares (user_id);

  create table readings (
    id uuid primary key,
    study_id uuid not null references studies (id) on delete cascade,
    part text not null check (part in ('equilibria', 'trajectories')),
    fingerprint text not null,
    revision integer not null,
    sentence text not null,
    user_id uuid not null references users (id),
    created_at timestamptz not null default now()
  );
  create index readings_part on readings (study_id, part, created_at desc);

  create table threads (
    id uuid primary key,
    study_id uuid not null references studies (id) on delete cascade,
    number integer not null,
    anchor_kind text not null check (anchor_kind in ('study', 'rate', 'point', 'part')),
    anchor_key text not null,
    anchor_quote text not null,
    anchor_revision integer not null,
    state text not null default 'open' check (state in ('open', 'resolved')),
    opener_id uuid not null references users (id),
    resolved_by_id uuid references users (id),
    resolved_at timestamptz,
    created_at timestamptz not null default now(),
    updated_at timestamptz not null default now(),
    unique (study_id, number)
  );

  create table comments (
    id uuid primary key,
    thread_id uuid not null references threads (id) on delete cascade,
    author_id uuid not null references users (id),
    kind text not null check (kind in ('must fix', 'question', 'note')),
    body text not null,
    revision integer not null,
    created_at timestamptz not null default now()
  );
  create index comments_thread on comments (thread_id, created_at);

  alter table invitations add constraint invitations_study_exists
    foreign key (study_id) references studies (id) on delete cascade;
  `,
  `
  alter table invitations drop constraint invitations_study_exists;
  drop table comments;
  drop table threads;
  drop table readings;
  drop table study_shares;
  drop table study_revisions;
  drop function refuse_revision_change();
  drop table studies;
  `
);
