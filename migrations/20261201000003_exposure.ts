import type { Knex } from 'knex';

const tenant = (table: string) => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (org_id = nullif(current_setting('app.org_id', true), '')::uuid)
    with check (org_id = nullif(current_setting('app.org_id', true), '')::uuid);
  grant select, insert, update, delete on ${table} to gustloom_app;`;

const frozenWhenSealed = (table: string) => `
  create trigger ${table}_sealed_insert after insert on ${table}
    referencing new table as touched for each statement execute function refuse_change_in_sealed();
  create trigger ${table}_sealed_update after update on ${table}
    referencing old table as touched for each statement execute function refuse_change_in_sealed();
  create trigger ${table}_sealed_delete after delete on ${table}
    referencing old table as touched for each statement execute function refuse_change_in_sealed();
  create trigger ${table}_stay before update on ${table} for each row
    when (old.edition_id is distinct from new.edition_id or old.org_id is distinct from new.org_id)
    execute function refuse_move();`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table files (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      name text not null,
      bytes bigint not null check (bytes >= 0),
      digest text not null,
      uploaded_by uuid not null references users (id),
      uploaded_at timestamptz not null
    );
    create table file_chunks (
      org_id uuid not null,
      file_id uuid not null references files (id) on delete cascade,
      seq integer not null,
      bytes bytea not null,
      primary key (file_id, seq)
    );
    create table portfolios (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      name text not null,
      currency text not null check (currency ~ '^[A-Z]{3}$'),
      created_by uuid not null references users (id),
      created_at timestamptz not null,
      constraint portfolios_name_per_org unique (org_id, name)
    );
    create table editions (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      portfolio_id uuid not null references portfolios (id),
      number integer not null,
      state text not null check (state in ('mapping', 'checking', 'checked', 'sealed')),
      currency text not null,
      as_at date,
      file_id uuid not null references files (id),
      style jsonb not null,
      columns jsonb not null,
      header_digest text not null,
      control jsonb not null default '{}',
      answers jsonb,
      survey jsonb,
      check_no integer not null default 0,
      progress_done integer,
      progress_total integer,
      problem text,
      reconciliation jsonb,
      quality jsonb not null default '[]',
      assumptions jsonb not null default '[]',
      assumed_tiv_minor bigint not null default 0,
      assumed_sites integer not null default 0,
      messages jsonb not null default '[]',
      held_reason text,
      control_reason text,
      sealed_at timestamptz,
      sealed_by uuid references users (id),
      digest text,
      created_at timestamptz not null,
      updated_at timestamptz not null,
      constraint editions_number_per_portfolio unique (portfolio_id, number),
      constraint editions_sealed_whole check (state <> 'sealed' or (sealed_at is not null and digest is not null and as_at is not null))
    );
    create index editions_by_header on editions (org_id, header_digest, updated_at desc);
    create index editions_by_file on editions (file_id);
    create table intake_rows (
      org_id uuid not null,
      edition_id uuid not null references editions (id) on delete cascade,
      file_row integer not null,
      line text not null check (line in ('site', 'blank', 'preamble', 'total')),
      state text not null check (state in ('ready', 'notes', 'held', 'set_aside')),
      site_ref text,
      latitude double precision,
      longitude double precision,
      tiv_minor bigint not null,
      received jsonb not null,
      messages jsonb not null,
      codes text[] not null,
      corrected boolean not null default false,
      quality text not null,
      assumed text[] not null,
      surveyed jsonb not null default '[]',
      corrections jsonb not null default '[]',
      primary key (edition_id, file_row)
    );
    create index intake_rows_by_state on intake_rows (edition_id, state, file_row);
    create index intake_rows_by_code on intake_rows using gin (codes);
    create index intake_rows_by_ref on intake_rows (edition_id, site_ref);
    create table fixes (
      id uuid primary key,
      org_id uuid not null,
      edition_id uuid not null references editions (id) on delete cascade,
      seq integer not null,
      kind text not null,
      code text not null,
      file_rows integer[] not null,
      reason text not null,
      applied_by uuid not null references users (id),
      applied_at timestamptz not null,
      constraint fixes_in_order unique (edition_id, seq)
    );
    create table sites (
      org_id uuid not null,
      edition_id uuid not null references editions (id) on delete cascade,
      site_no integer not null,
      file_row integer not null,
      site_ref text not null,
      label text not null default '',
      account_ref text not null default '',
      policy_ref text not null default '',
      town text not null default '',
      region text not null default '',
      country text not null default '',
      line_of_business text not null default '',
      point geography(Point, 4326) not null,
      latitude double precision not null,
      longitude double precision not null,
      location_quality text not null,
      building_minor bigint not null,
      other_structures_minor bigint not null,
      contents_minor bigint not null,
      time_element_minor bigint not null,
      tiv_minor bigint not null check (tiv_minor > 0),
      construction text not null,
      occupancy text not null,
      year_built integer,
      storeys integer,
      terrain text not null,
      roughness_m double precision,
      deductible_minor bigint not null default 0,
      limit_minor bigint,
      state text not null check (state in ('ready', 'notes')),
      assumed text[] not null,
      primary key (edition_id, site_no),
      constraint sites_ref_once unique (edition_id, site_ref)
    );
    create index sites_by_point on sites using gist (point);
    create function refuse_sealed_change() returns trigger language plpgsql as $$
    begin
      if old.state = 'sealed' then raise exception 'edition % is sealed', old.id using errcode = 'check_violation'; end if;
      return case when tg_op = 'DELETE' then old else new end;
    end $$;
    create trigger editions_sealed before update or delete on editions for each row execute function refuse_sealed_change();
    -- By statement, so that sealing a hundred thousand sites asks once and not for each of them.
    create function refuse_change_in_sealed() returns trigger language plpgsql as $$
    declare sealed uuid;
    begin
      select editions.id into sealed from editions
      where editions.state = 'sealed' and editions.id in (select touched.edition_id from touched) limit 1;
      if found then raise exception 'edition % is sealed', sealed using errcode = 'check_violation'; end if;
      return null;
    end $$;
    create function refuse_move() returns trigger language plpgsql as $$
    begin raise exception 'rows stay in their edition' using errcode = 'check_violation'; end $$;
    ${['intake_rows', 'fixes', 'sites'].map(frozenWhenSealed).join('')}
    ${['files', 'file_chunks', 'portfolios', 'editions', 'intake_rows', 'fixes', 'sites'].map(tenant).join('')}
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table sites, fixes, intake_rows, editions, portfolios, file_chunks, files cascade;
    drop function refuse_sealed_change();
    drop function refuse_change_in_sealed();
    drop function refuse_move();
  `);
}
