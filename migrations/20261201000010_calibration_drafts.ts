import type { Knex } from 'knex';

/** Modelers draft versions: the service adds rows, and still changes none. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw('grant insert on calibrations to gustloom_app');
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('revoke insert on calibrations from gustloom_app');
}
