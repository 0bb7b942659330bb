import type { Knex } from 'knex';

const ORG_ID = '5a175a17-0000-4000-8000-000000000001';
const OPENING_MOVEMENT_ID = '5a175a17-0000-4000-8000-000000000401';
const OPENING_MINOR = 50_000;

/** A starting balance of USD 500.00, as an entry of the ledger like any other. */
export async function seed(knex: Knex): Promise<void> {
  await knex.transaction(async (tx) => {
    await tx.raw(`select set_config('app.org_id', ?, true)`, [ORG_ID]);
    if (await tx('ledger_entries').where({ movement_id: OPENING_MOVEMENT_ID }).first('id')) return;
    const entry = {
      org_id: ORG_ID,
      movement_id: OPENING_MOVEMENT_ID,
      kind: 'opening',
      currency: 'USD',
      text: 'Opening balance of the demonstration',
      at: new Date('2026-12-01T00:00:00Z'),
    };
    await tx('ledger_entries').insert([
      { ...entry, account: 'free', amount_minor: OPENING_MINOR },
      { ...entry, account: 'opening', amount_minor: -OPENING_MINOR },
    ]);
    await tx('balances').insert({ org_id: ORG_ID, free_minor: OPENING_MINOR, reserved_minor: 0, currency: 'USD' });
  });
}
