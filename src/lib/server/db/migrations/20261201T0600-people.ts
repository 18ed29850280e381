import { sqlMigration } from './migration';

/** People, workspaces, sign-ins, tokens, invitations, mail kept by the built-in server, tries counted, and the audit. */
export const people = sqlMigration(
  '20261201T0600-people',
  `
  create table users (
    id uuid primary key default gen_random_uuid(),
    email varchar(254) not null check (email = lower(email)),
    name varchar(120) not null check (name <> ''),
    password_hash text not null,
    created_at timestamptz not null default now(),
    updated_at timestamptz not null default now(),
    constraint users_email unique (email)
  );

  create table workspaces (
    id uuid primary key default gen_random_uuid(),
    name varchar(120) not null check (name <> ''),
    created_at timestamptz not null default now(),
    updated_at timestamptz not null default now()
  );

  create table memberships (
    id uuid primary key default gen_random_uuid(),
    workspace_id uuid not null references workspaces on delete cascade,
    user_id uuid not null references users on delete cascade,
    role varchar(20) not null check (role in ('administrator', 'ecologist', 'reviewer', 'observer')),
    created_at timestamptz not null default now(),
    updated_at timestamptz not null default now(),
    constraint memberships_person unique (workspace_id, user_id)
  );
  create index memberships_user on memberships (user_id);

  create table sessions (
    id text primary key,
    user_id uuid not null references users on delete cascade,
    expires_at timestamptz not null,
    ip varchar(64) not null default '',
    user_agent varchar(300) not null default '',
    created_at timestamptz not null default now()
  );
  create index sessions_user on sessions (user_id);

  create table api_tokens (
    id uuid primary key default gen_random_uuid(),
    user_id uuid not null references users on delete cascade,
    name varchar(80) not null,
    token_hash char(64) not null unique,
    last4 char(4) not null,
    scopes text[] not null,
    expires_at timestamptz not null,
    revoked_at timestamptz,
    last_used_at timestamptz,
    created_at timestamptz not null default now()
  );
  create index api_tokens_user on api_tokens (user_id);

  create table password_resets (
    id uuid primary key default gen_random_uuid(),
    user_id uuid not null references users on delete cascade,
    token_hash char(64) not null unique,
    expires_at timestamptz not null,
    used_at timestamptz,
    created_at timestamptz not null default now()
  );
  create index password_resets_user on password_resets (user_id);

  create table invitations (
    id uuid primary key default gen_random_uuid(),
    email varchar(254) not null check (email = lower(email)),
    workspace_id uuid references workspaces on delete cascade,
    workspace_role varchar(20) check (workspace_role in ('administrator', 'ecologist', 'reviewer', 'observer')),
    study_id uuid,
    study_role varchar(20) check (study_role in ('contributor', 'reviewer', 'observer')),
    invited_by_id uuid not null references users,
    token_hash char(64) not null unique,
    expires_at timestamptz not null,
    accepted_at timestamptz,
    accepted_by_id uuid references users,
    withdrawn_at timestamptz,
    created_at timestamptz not null default now(),
    constraint invitations_to_something check (workspace_role is not null or study_role is not null),
    constraint invitations_workspace check (workspace_role is null or workspace_id is not null),
    constraint invitations_study check ((study_id is null) = (study_role is null))
  );
  create index invitations_email on invitations (email);
  create index invitations_workspace_id on invitations (workspace_id);
  create index invitations_study_id on invitations (study_id);

  create table mail_messages (
    id uuid primary key default gen_random_uuid(),
    sender varchar(320) not null,
    recipient varchar(320) not null,
    subject text not null,
    text text not null,
    html text not null default '',
    received_at timestamptz not null default now()
  );
  create index mail_messages_received on mail_messages (received_at desc);

  create table rate_limits (
    key varchar(255) primary key,
    points integer not null default 0,
    expire bigint
  );

  create table audit_events (
    id bigserial primary key,
    at timestamptz not null,
    actor_id uuid,
    actor_name varchar(120) not null default '',
    via varchar(10) not null,
    act varchar(60) not null,
    subject_type varchar(40) not null,
    subject_id text not null,
    study_id uuid,
    workspace_id uuid,
    details jsonb not null default '{}',
    request_id text not null,
    ip varchar(64) not null default ''
  );
  create index audit_events_workspace on audit_events (workspace_id, id desc);
  create index audit_events_study on audit_events (study_id, id desc);

  create function audit_events_are_kept() returns trigger language plpgsql as $$
  begin
    raise exception 'the audit is append-only' using errcode = 'insufficient_privilege';
  end $$;
  create trigger audit_events_no_change before update or delete on audit_events
    for each row execute function audit_events_are_kept();
  create trigger audit_events_no_truncate before truncate on audit_events
    for each statement execute function audit_events_are_kept();
  `,
  `
  drop table audit_events;
  drop function audit_events_are_kept();
  drop table rate_limits, mail_messages, invitations, password_resets, api_tokens, sessions, memberships, workspaces, users;
  `
);
