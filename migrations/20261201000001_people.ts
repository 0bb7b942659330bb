import type { Knex } from 'knex';

const tenant = (table: string, column = 'org_id') => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (${column} = nullif(current_setting('app.org_id', true), '')::uuid)
    with check (${column} = nullif(current_setting('app.org_id', true), '')::uuid);`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table organisations (
      id uuid primary key,
      name text not null,
      initials text not null,
      created_at timestamptz not null default now()
    );
    create table users (
      id uuid primary key,
      name text not null,
      email text not null check (email = lower(email)),
      password_hash text not null,
      created_at timestamptz not null default now(),
      constraint users_email_once unique (email)
    );
    create table memberships (
      org_id uuid not null references organisations (id),
      user_id uuid not null references users (id),
      roles text[] not null,
      is_approver boolean not null default false,
      version integer not null default 1,
      ended_at timestamptz,
      created_at timestamptz not null default now(),
      primary key (org_id, user_id),
      constraint memberships_roles check (
        cardinality(roles) > 0 and roles <@ array['underwriter', 'modeler', 'admin', 'auditor']
      )
    );
    create index memberships_by_user on memberships (user_id);
    -- Access tokens carry the version, so any change of rights ends those already handed out.
    create function bump_membership_version() returns trigger language plpgsql as $$
    begin
      if (new.roles, new.is_approver, new.ended_at) is distinct from (old.roles, old.is_approver, old.ended_at) then
        new.version := old.version + 1;
      end if;
      return new;
    end $$;
    create trigger memberships_version before update on memberships for each row execute function bump_membership_version();

    create table acceptances (
      org_id uuid not null references organisations (id),
      user_id uuid not null references users (id),
      version text not null,
      name text not null,
      accepted_at timestamptz not null,
      primary key (org_id, user_id, version)
    );
    create table sessions (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      user_id uuid not null references users (id),
      started_at timestamptz not null,
      revoked_at timestamptz,
      revoked_because text
    );
    create index sessions_by_person on sessions (org_id, user_id, started_at);
    create table refresh_tokens (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      session_id uuid not null references sessions (id) on delete cascade,
      digest text not null,
      issued_at timestamptz not null,
      expires_at timestamptz not null,
      used_at timestamptz,
      constraint refresh_tokens_digest_once unique (digest)
    );
    create index refresh_tokens_by_session on refresh_tokens (session_id);
    -- By a digest of the address, known here or not, so that the answer doesn't tell which addresses exist.
    create table sign_in_failures (
      address_digest text primary key,
      failures integer not null,
      last_at timestamptz not null
    );

    ${tenant('organisations', 'id')}
    ${['memberships', 'acceptances', 'sessions', 'refresh_tokens'].map((table) => tenant(table)).join('')}
    alter table users enable row level security;
    alter table users force row level security;
    create policy colleagues on users for select
      using (exists (select from memberships where memberships.user_id = users.id));
    -- Sign-in starts before the organisation is known; the owner's function below is the only way round the policies.
    create policy owner_all on users to gustloom_owner using (true) with check (true);
    create policy owner_reads on memberships for select to gustloom_owner using (true);
    create function person_for_sign_in(address text)
      returns table (user_id uuid, password_hash text, org_id uuid)
      language sql stable security definer set search_path = public, pg_temp
    as $$
      select users.id, users.password_hash, memberships.org_id
      from users
      join memberships on memberships.user_id = users.id and memberships.ended_at is null
      where users.email = lower(address)
      order by memberships.created_at, memberships.org_id
      limit 1
    $$;
    revoke all on function person_for_sign_in(text) from public;
    grant execute on function person_for_sign_in(text) to gustloom_app;

    grant select on organisations to gustloom_app;
    grant select (id, name, email, created_at) on users to gustloom_app;
    grant select, update (roles, is_approver, ended_at) on memberships to gustloom_app;
    grant select, insert on acceptances to gustloom_app;
    grant select, insert, update (revoked_at, revoked_because) on sessions to gustloom_app;
    grant select, insert, update (used_at), delete on refresh_tokens to gustloom_app;
    grant select, insert, update, delete on sign_in_failures to gustloom_app;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop function person_for_sign_in(text);
    drop table sign_in_failures, refresh_tokens, sessions, acceptances, memberships, users, organisations cascade;
    drop function bump_membership_version();
  `);
}
