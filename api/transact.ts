import type { Knex } from 'knex';

/** An open transaction in which row-level security already knows the organisation. */
export type Tx = Knex.Transaction;

/** Does work for one organisation in one transaction: all of it is stored, or none. */
export type Transact = <T>(
  organisation: string | { readonly orgId: string },
  work: (tx: Tx) => Promise<T>,
) => Promise<T>;

export const createTransact =
  (database: Knex): Transact =>
  (organisation, work) =>
    database.transaction(async (tx) => {
      const orgId = typeof organisation === 'string' ? organisation : organisation.orgId;
      // Local to the transaction, so that nothing is left on a pooled connection.
      await tx.raw(`select set_config('app.org_id', ?, true)`, [orgId]);
      return work(tx);
    });
