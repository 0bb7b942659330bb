import type { Movement } from '#contract/billing.ts';
import { toInstant, toMinor } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';

export type Account = 'free' | 'reserved' | 'provider' | 'revenue' | 'tax' | 'opening';
export type Entry = { account: Account; amountMinor: number };
export type NewMovement = {
  id: string;
  kind: Movement['kind'];
  entries: readonly Entry[];
  currency: string;
  runId: string | null;
  topUpId: string | null;
  actorId: string | null;
  text: string;
  at: Date;
};
export type Held = { freeMinor: number; reservedMinor: number; currency: string };

type BalanceRow = { org_id: string; free_minor: string; reserved_minor: string; currency: string };
type MovementRow = {
  id: string;
  movement_id: string;
  at: Date;
  kind: Movement['kind'];
  account: Account;
  text: string;
  run_number: string | null;
  run_id: string | null;
  by: string | null;
  amount_minor: string;
  currency: string;
};

const toHeld = (row: BalanceRow): Held => ({
  freeMinor: toMinor(row.free_minor),
  reservedMinor: toMinor(row.reserved_minor),
  currency: row.currency,
});

/** The ledger in double entry, and the one row a tenant that holds its sums and is locked while money moves. */
export class LedgerStore {
  /** Locks the tenant's money until the transaction ends; creates the row the first time. */
  async lock(tx: Tx, orgId: string, currency: string): Promise<Held> {
    await tx('balances').insert({ org_id: orgId, currency }).onConflict('org_id').ignore();
    const row = await tx<BalanceRow>('balances').where({ org_id: orgId }).forUpdate().first();
    return toHeld(row!);
  }

  async held(tx: Tx, orgId: string): Promise<Held | null> {
    const row = await tx<BalanceRow>('balances').where({ org_id: orgId }).first();
    return row ? toHeld(row) : null;
  }

  /** Writes a movement whose entries sum to zero and carries it into the locked row. */
  async post(tx: Tx, orgId: string, movement: NewMovement): Promise<void> {
    const entries = movement.entries.filter(({ amountMinor }) => amountMinor !== 0);
    await tx('ledger_entries').insert(
      entries.map(({ account, amountMinor }) => ({
        org_id: orgId,
        movement_id: movement.id,
        kind: movement.kind,
        account,
        amount_minor: amountMinor,
        currency: movement.currency,
        run_id: movement.runId,
        top_up_id: movement.topUpId,
        actor_id: movement.actorId,
        text: movement.text,
        at: movement.at,
      })),
    );
    const change = (name: Account) =>
      entries.reduce((sum, { account, amountMinor }) => (account === name ? sum + amountMinor : sum), 0);
    await tx('balances')
      .where({ org_id: orgId })
      .update({
        free_minor: tx.raw('free_minor + ?', [change('free')]),
        reserved_minor: tx.raw('reserved_minor + ?', [change('reserved')]),
      });
  }

  /** What is still reserved for a run, whether it ever was, and whether it has been settled. */
  async forRun(
    tx: Tx,
    orgId: string,
    runId: string,
  ): Promise<{ reservedMinor: number; known: boolean; settled: boolean }> {
    const rows = await tx('ledger_entries')
      .where({ org_id: orgId, run_id: runId, account: 'reserved' })
      .select<{ kind: Movement['kind']; amount_minor: string }[]>('kind', 'amount_minor');
    return {
      reservedMinor: rows.reduce((sum, row) => sum + toMinor(row.amount_minor), 0),
      known: rows.length > 0,
      settled: rows.some(({ kind }) => kind === 'charge' || kind === 'release'),
    };
  }

  /** Movements newest first; `before` is the entry id of the last one already seen. */
  async movements(
    tx: Tx,
    orgId: string,
    page: { before: number | null; limit: number },
  ): Promise<(Movement & { entryId: number })[]> {
    // One entry tells a movement: the free account's, or for a charge the reserved one, which leaves free as it was.
    const rows = await tx<MovementRow>('ledger_entries as entry')
      .leftJoin('runs', 'runs.id', 'entry.run_id')
      .leftJoin('users', 'users.id', 'entry.actor_id')
      .where('entry.org_id', orgId)
      .where((told) =>
        told.where('entry.account', 'free').orWhere({ 'entry.account': 'reserved', 'entry.kind': 'charge' }),
      )
      .modify((query) => {
        if (page.before !== null) void query.where('entry.id', '<', page.before);
      })
      .orderBy('entry.id', 'desc')
      .limit(page.limit)
      .select<MovementRow[]>(
        'entry.id',
        'entry.movement_id',
        'entry.at',
        'entry.kind',
        'entry.account',
        'entry.text',
        'runs.number as run_number',
        'entry.run_id',
        'users.name as by',
        'entry.amount_minor',
        'entry.currency',
      );
    return rows.map((row) => ({
      entryId: Number(row.id),
      id: row.movement_id,
      at: toInstant(row.at),
      kind: row.kind,
      text: row.text,
      runNumber: row.run_number,
      runId: row.run_id,
      by: row.by,
      amountMinor: row.account === 'free' ? toMinor(row.amount_minor) : 0,
      currency: row.currency,
    }));
  }

  /** Charged, and runs charged, since a moment. */
  async chargedSince(tx: Tx, orgId: string, since: Date): Promise<{ chargedMinor: number; runs: number }> {
    const row = await tx('ledger_entries')
      .where({ org_id: orgId, account: 'reserved', kind: 'charge' })
      .where('at', '>=', since)
      .first<{ charged: string | null; runs: string }>(
        tx.raw('-sum(amount_minor) as charged'),
        tx.raw('count(distinct run_id) as runs'),
      );
    return { chargedMinor: toMinor(row?.charged ?? 0), runs: Number(row?.runs ?? 0) };
  }
}
