import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    -- Of a variant: the scenario, version and change it was made from, as they were then. Written once, with the scenario.
    alter table scenarios add column derivation jsonb;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('alter table scenarios drop column derivation');
}
