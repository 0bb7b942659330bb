import type { Knex } from 'knex';

// The organisation stands in a sub-select, so that it is read once a query and not for each of a hundred thousand rows.
const tenant = (table: string) => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (org_id = (select nullif(current_setting('app.org_id', true), '')::uuid))
    with check (org_id = (select nullif(current_setting('app.org_id', true), '')::uuid));`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table run_numbers (
      org_id uuid primary key references organisations (id),
      last_run integer not null default 0,
      last_quote integer not null default 0
    );
    create table quotes (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      number text not null,
      request jsonb not null,
      edition_id uuid not null references editions (id),
      lines jsonb not null,
      gross_minor bigint not null check (gross_minor >= 0),
      currency text not null,
      tariff_version integer not null,
      inputs_digest text not null,
      engine_version text not null,
      created_by uuid not null references users (id),
      created_at timestamptz not null,
      valid_until timestamptz not null,
      constraint quotes_number unique (org_id, number)
    );
    create table runs (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      number text not null,
      quote_id uuid not null references quotes (id),
      edition_id uuid not null references editions (id),
      calibration_id uuid not null references calibrations (id),
      curve_set_id uuid not null references curve_sets (id),
      options jsonb not null,
      purpose text not null,
      cost_centre text not null default '',
      stamped boolean not null,
      state text not null check (state in ('waiting', 'working', 'complete', 'failed', 'cancelled')),
      cancel_asked boolean not null default false,
      engine_version text not null,
      inputs_digest text not null,
      quoted_minor bigint not null,
      charged_minor bigint,
      currency text not null,
      accepted_by uuid not null references users (id),
      accepted_at timestamptz not null,
      -- Of the request that made the run: its repeat, even after a crash, is told from somebody else's second accept.
      accepted_key text,
      finished_at timestamptz,
      constraint runs_number unique (org_id, number),
      constraint runs_quote_once unique (quote_id),
      constraint runs_charge_within_quote check (charged_minor is null or charged_minor between 0 and quoted_minor)
    );
    create index runs_newest on runs (org_id, accepted_at desc, id);
    create index runs_by_inputs on runs (org_id, inputs_digest, engine_version);
    create table run_scenarios (
      id uuid primary key,
      org_id uuid not null,
      run_id uuid not null references runs (id),
      seq integer not null,
      scenario_version_id uuid not null references scenario_versions (id),
      state text not null check (state in ('waiting', 'building', 'scoring', 'stored', 'failed', 'cancelled')),
      sites_done integer not null default 0,
      sites_total integer not null,
      units integer not null default 0,
      restarts integer not null default 0,
      error text,
      result jsonb,
      result_digest text,
      resolution jsonb,
      started_at timestamptz,
      finished_at timestamptz,
      constraint run_scenarios_seq unique (run_id, seq)
    );
    -- Reference and value are those of the sealed edition, kept here so that every order of the table needs this table only.
    create table site_results (
      org_id uuid not null,
      run_scenario_id uuid not null references run_scenarios (id),
      stored_at timestamptz not null,
      site_no integer not null,
      site_ref text not null,
      tiv_minor bigint not null,
      reach smallint not null check (reach in (0, 1, 2)),
      plain real,
      plain_mean real,
      sea_wind real,
      direction real,
      peak_time timestamptz,
      seconds_above_25 real,
      seconds_above_33 real,
      enhanced_mean real,
      p5 real,
      p50 real,
      p90 real,
      p95 real,
      p99 real,
      damage_plain real,
      damage_mean real,
      damage_p5 real,
      damage_p95 real,
      ground_up_plain_minor bigint,
      ground_up_mean_minor bigint,
      gross_plain_minor bigint,
      gross_mean_minor bigint,
      gross_p5_minor bigint,
      gross_p50_minor bigint,
      gross_p95_minor bigint,
      primary key (run_scenario_id, site_no, stored_at)
    ) partition by range (stored_at);
    create table site_results_before partition of site_results default;
    alter table site_results_before enable row level security;
    alter table site_results_before force row level security;
    -- The app role owns nothing, so months are opened for it by the owner's function.
    create function open_site_results_month(moment timestamptz) returns void language plpgsql security definer set search_path = public, pg_temp as $$
    declare
      first date := date_trunc('month', moment at time zone 'UTC')::date;
      part text := 'site_results_' || to_char(first, 'YYYY_MM');
    begin
      perform pg_advisory_xact_lock(hashtext(part));
      if to_regclass(part) is null then
        execute format('create table %I partition of site_results for values from (%L) to (%L)', part, first::text || 'T00:00:00Z', (first + interval '1 month')::date::text || 'T00:00:00Z');
        execute format('alter table %I enable row level security', part);
        execute format('alter table %I force row level security', part);
      end if;
    end $$;
    revoke all on function open_site_results_month(timestamptz) from public;
    grant execute on function open_site_results_month(timestamptz) to gustloom_app;
    create table event_results (
      org_id uuid not null,
      run_scenario_id uuid primary key references run_scenarios (id),
      ground_up double precision[] not null,
      gross double precision[] not null
    );
    create table footprints (
      org_id uuid not null,
      run_scenario_id uuid primary key references run_scenarios (id),
      grid jsonb not null,
      plain jsonb not null,
      p50 jsonb not null,
      p90 jsonb not null,
      difference jsonb not null
    );
    grant select, insert, update on run_numbers, run_scenarios to gustloom_app;
    -- What was quoted, by whom and on which inputs stays as it was accepted.
    grant select, insert, update (state, cancel_asked, charged_minor, finished_at) on runs to gustloom_app;
    grant select, insert on quotes, site_results, event_results, footprints to gustloom_app;
    ${['run_numbers', 'quotes', 'runs', 'run_scenarios', 'site_results', 'event_results', 'footprints'].map(tenant).join('')}
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table footprints, event_results, site_results, run_scenarios, runs, quotes, run_numbers cascade;
    drop function open_site_results_month(timestamptz);
  `);
}
