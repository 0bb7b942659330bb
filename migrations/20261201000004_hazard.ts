import type { Knex } from 'knex';

const tenant = (table: string) => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (org_id = nullif(current_setting('app.org_id', true), '')::uuid)
    with check (org_id = nullif(current_setting('app.org_id', true), '')::uuid);`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table scenarios (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      name text not null,
      description text not null default '',
      created_by uuid not null references users (id),
      created_at timestamptz not null,
      constraint scenarios_name_per_org unique (org_id, name)
    );
    create table scenario_versions (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      scenario_id uuid not null references scenarios (id),
      number integer not null,
      track jsonb not null,
      resolution jsonb not null,
      as_of timestamptz,
      digest text not null,
      created_by uuid not null references users (id),
      created_at timestamptz not null,
      constraint scenario_versions_number unique (scenario_id, number)
    );
    grant select, insert on scenarios, scenario_versions to gustloom_app;
    ${['scenarios', 'scenario_versions'].map(tenant).join('')}
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table scenario_versions, scenarios');
}
