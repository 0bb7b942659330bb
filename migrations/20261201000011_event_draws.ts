import type { Knex } from 'knex';

/** What each draw did to the event beside its loss; runs stored before have none. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table event_results add column strongest double precision[], add column sites_above integer[];
    comment on column event_results.strongest is 'Strongest gust at any site, a draw each (m/s)';
    comment on column event_results.sites_above is 'Sites that reach each of the chosen gusts, gust by gust, a draw each';
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('alter table event_results drop column strongest, drop column sites_above');
}
