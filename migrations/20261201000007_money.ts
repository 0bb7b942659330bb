import type { Knex } from 'knex';

const tenant = (table: string) => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (org_id = nullif(current_setting('app.org_id', true), '')::uuid)
    with check (org_id = nullif(current_setting('app.org_id', true), '')::uuid);`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table tariffs (
      version integer primary key,
      unit_price numeric(12, 6) not null check (unit_price >= 0),
      minimum_minor bigint not null check (minimum_minor >= 0),
      tax_label text not null,
      tax_rate numeric(8, 6) not null check (tax_rate >= 0),
      currency text not null,
      quote_hours integer not null check (quote_hours > 0),
      in_force_from timestamptz not null
    );
    grant select on tariffs to gustloom_app;
    insert into tariffs values (1, 0.004, 500, 'Tax 7 %', 0.07, 'USD', 24, '2026-01-01T00:00:00Z');

    -- Double entry: every movement's entries sum to zero. Accounts: free, reserved (the customer's), provider, revenue, tax.
    create table ledger_entries (
      id bigint generated always as identity primary key,
      org_id uuid not null references organisations (id),
      movement_id uuid not null,
      kind text not null check (kind in ('opening', 'top_up', 'reserve', 'release', 'charge', 'refund')),
      account text not null check (account in ('free', 'reserved', 'provider', 'revenue', 'tax', 'opening')),
      amount_minor bigint not null,
      currency text not null,
      run_id uuid references runs (id),
      top_up_id uuid,
      actor_id uuid references users (id),
      text text not null,
      at timestamptz not null
    );
    create index ledger_by_org on ledger_entries (org_id, account, id);
    create index ledger_by_movement on ledger_entries (movement_id);
    create unique index ledger_run_once on ledger_entries (run_id, kind, account) where run_id is not null;
    create function refuse_ledger_change() returns trigger language plpgsql as $$
    begin raise exception 'the ledger is append-only' using errcode = 'check_violation'; end $$;
    create trigger ledger_append_only before update or delete on ledger_entries for each row execute function refuse_ledger_change();
    create function check_movement_sums() returns trigger language plpgsql as $$
    begin
      if (select sum(amount_minor) from ledger_entries where movement_id = new.movement_id) <> 0 then
        raise exception 'movement % does not sum to zero', new.movement_id using errcode = 'check_violation';
      end if;
      return null;
    end $$;
    create constraint trigger ledger_sums after insert on ledger_entries deferrable initially deferred for each row execute function check_movement_sums();

    create table payments (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      amount_minor bigint not null check (amount_minor > 0),
      currency text not null,
      state text not null check (state in ('pending', 'succeeded', 'declined', 'abandoned')),
      reason text,
      provider_session text,
      checkout_url text,
      created_by uuid not null references users (id),
      created_at timestamptz not null,
      settled_at timestamptz
    );
    create table provider_events (
      id text primary key,
      org_id uuid not null references organisations (id),
      kind text not null,
      payload_digest text not null,
      received_at timestamptz not null
    );
    grant select, insert on ledger_entries, provider_events to gustloom_app;
    grant select, insert, update (state, reason, provider_session, checkout_url, settled_at) on payments to gustloom_app;
    ${['ledger_entries', 'payments', 'provider_events'].map(tenant).join('')}
    -- One row a tenant to lock while money moves, so that parallel accepts can't jointly overdraw.
    create table balances (
      org_id uuid primary key references organisations (id),
      free_minor bigint not null default 0,
      reserved_minor bigint not null default 0 check (reserved_minor >= 0),
      currency text not null
    );
    grant select, insert, update (free_minor, reserved_minor) on balances to gustloom_app;
    ${tenant('balances')}
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table balances, provider_events, payments, ledger_entries, tariffs cascade;
    drop function refuse_ledger_change();
    drop function check_movement_sums();
  `);
}
