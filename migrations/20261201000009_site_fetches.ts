import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    -- A cache: whoever empties it only makes the next run slower.
    create table site_fetches (
      org_id uuid not null,
      edition_id uuid not null references editions (id) on delete cascade,
      -- Of the land polygons and of the way distances are measured in them.
      land_digest text not null,
      site_no integer not null,
      -- Overland distance for wind from 0, 45, ..., 315 degrees, to the last bit.
      fetch_m double precision[] not null check (array_length(fetch_m, 1) = 8),
      primary key (edition_id, land_digest, site_no)
    );
    alter table site_fetches enable row level security;
    alter table site_fetches force row level security;
    create policy tenant on site_fetches
      using (org_id = (select nullif(current_setting('app.org_id', true), '')::uuid))
      with check (org_id = (select nullif(current_setting('app.org_id', true), '')::uuid));
    grant select, insert, delete on site_fetches to gustloom_app;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table site_fetches');
}
