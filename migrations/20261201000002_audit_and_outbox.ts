import type { Knex } from 'knex';

const tenant = (table: string) => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (org_id = nullif(current_setting('app.org_id', true), '')::uuid)
    with check (org_id = nullif(current_setting('app.org_id', true), '')::uuid);`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table audit_entries (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      at timestamptz not null,
      actor_id uuid references users (id),
      action text not null,
      object text not null,
      details jsonb not null
    );
    create index audit_entries_newest on audit_entries (org_id, at desc, id);
    create table audit_chain (
      org_id uuid not null references organisations (id),
      seq bigint not null,
      entry_id uuid not null references audit_entries (id),
      previous_hash text not null,
      hash text not null,
      primary key (org_id, seq),
      constraint audit_chain_entry_once unique (entry_id)
    );
    create function audit_hash(previous text, entry audit_entries) returns text language sql stable set timezone = 'UTC' as $$
      select encode(sha256(convert_to(previous || jsonb_build_array(
        entry.id, entry.org_id, entry.at, entry.actor_id, entry.action, entry.object, entry.details)::text, 'UTF8')), 'hex')
    $$;
    -- Runs at commit: the organisation's chain is locked for a moment only, and after every other lock was taken.
    create function chain_audit_entry() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
    declare
      last audit_chain;
    begin
      perform pg_advisory_xact_lock(hashtextextended('audit ' || new.org_id, 0));
      select * into last from audit_chain where audit_chain.org_id = new.org_id order by audit_chain.seq desc limit 1;
      insert into audit_chain (org_id, seq, entry_id, previous_hash, hash)
      values (new.org_id, coalesce(last.seq, 0) + 1, new.id, coalesce(last.hash, ''), audit_hash(coalesce(last.hash, ''), new));
      return null;
    end $$;
    create constraint trigger audit_entries_chained after insert on audit_entries
      deferrable initially deferred for each row execute function chain_audit_entry();
    create function refuse_audit_change() returns trigger language plpgsql as $$
    begin raise exception 'the audit log is append-only' using errcode = 'check_violation'; end $$;
    create trigger audit_entries_append_only before update or delete or truncate on audit_entries
      for each statement execute function refuse_audit_change();
    create trigger audit_chain_append_only before update or delete or truncate on audit_chain
      for each statement execute function refuse_audit_change();
    -- Null when the chain of the organisation in use is whole, else the first number at which it isn't.
    create function audit_broken_at() returns bigint language sql stable set search_path = public as $$
      select min(link.at) from (
        select audit_chain.seq as at
        from (
          select audit_chain.*,
            coalesce(lag(audit_chain.hash) over chain, '') as expected_previous,
            coalesce(lag(audit_chain.seq) over chain, 0) + 1 as expected_seq
          from audit_chain window chain as (partition by audit_chain.org_id order by audit_chain.seq)
        ) audit_chain
        left join audit_entries on audit_entries.id = audit_chain.entry_id
        where audit_chain.seq <> audit_chain.expected_seq
          or audit_chain.previous_hash <> audit_chain.expected_previous
          or audit_entries.id is null
          or audit_chain.hash <> audit_hash(audit_chain.previous_hash, audit_entries)
        union all
        select 0 from audit_entries
        where not exists (select from audit_chain where audit_chain.entry_id = audit_entries.id)
      ) link
    $$;

    create table outbox (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      kind text not null check (kind in ('mail')),
      payload jsonb not null,
      created_at timestamptz not null,
      delivered_at timestamptz,
      attempts integer not null default 0,
      last_error text
    );
    create table idempotency_keys (
      org_id uuid not null references organisations (id),
      user_id uuid not null references users (id),
      key text not null,
      request_digest text not null,
      claimed_at timestamptz not null,
      status integer,
      reply text,
      primary key (org_id, user_id, key)
    );

    ${['audit_entries', 'audit_chain', 'outbox', 'idempotency_keys'].map(tenant).join('')}
    grant select, insert on audit_entries to gustloom_app;
    grant select on audit_chain to gustloom_app;
    grant select, insert, update (delivered_at, attempts, last_error) on outbox to gustloom_app;
    grant select, insert, update, delete on idempotency_keys to gustloom_app;

    -- The queue keeps its own schema, in which the app role is the owner.
    do $$ begin execute format('grant create on database %I to gustloom_app', current_database()); end $$;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table idempotency_keys, outbox cascade;
    drop function audit_broken_at();
    drop table audit_chain cascade;
    drop function audit_hash(text, audit_entries);
    drop table audit_entries cascade;
    drop function chain_audit_entry();
    drop function refuse_audit_change();
    do $$ begin execute format('revoke create on database %I from gustloom_app', current_database()); end $$;
  `);
}
