import type { Knex } from 'knex';
import type { Client } from 'pg';

/** The driver's connection under a transaction, for COPY and for libraries that speak to the driver themselves. */
export const connectionOf = (tx: Knex.Transaction): Promise<Client> =>
  (tx.client as { acquireConnection(): Promise<Client> }).acquireConnection();
