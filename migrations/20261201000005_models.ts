import type { Knex } from 'knex';

const tenant = (table: string) => `
  alter table ${table} enable row level security;
  alter table ${table} force row level security;
  create policy tenant on ${table}
    using (org_id = nullif(current_setting('app.org_id', true), '')::uuid)
    with check (org_id = nullif(current_setting('app.org_id', true), '')::uuid);`;

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table curve_sets (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      name text not null,
      version integer not null,
      state text not null check (state in ('draft', 'approved')),
      note text not null,
      curve jsonb not null,
      digest text not null,
      created_at timestamptz not null,
      constraint curve_sets_version unique (org_id, name, version)
    );
    create table calibrations (
      id uuid primary key,
      org_id uuid not null references organisations (id),
      code text not null,
      version integer not null,
      state text not null check (state in ('draft', 'submitted', 'signed', 'withdrawn')),
      note text not null,
      settings jsonb not null,
      curve_set_id uuid not null references curve_sets (id),
      author_id uuid references users (id),
      signed_by uuid references users (id),
      signed_at timestamptz,
      digest text not null,
      created_at timestamptz not null,
      constraint calibrations_version unique (org_id, code, version),
      constraint calibrations_four_eyes check (signed_by is null or signed_by <> author_id)
    );
    grant select on curve_sets, calibrations to gustloom_app;
    ${['curve_sets', 'calibrations'].map(tenant).join('')}
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table calibrations, curve_sets');
}
