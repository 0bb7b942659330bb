import knex, { type Knex } from 'knex';

/** A pool of connections as the app role. */
export const createDatabase = (url: string, max = 10): Knex =>
  knex({
    client: 'pg',
    connection: { connectionString: url, application_name: 'gustloom' },
    pool: { min: 0, max },
    acquireConnectionTimeout: 15_000,
    // Whoever asked gets the error and says so once.
    log: { error: () => undefined, warn: () => undefined },
  });
