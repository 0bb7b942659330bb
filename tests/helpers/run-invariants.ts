import type { Knex } from 'knex';
import { expect } from 'vitest';

/** Repeats a question until the answer is what is waited for. */
export const until = async <T>(ask: () => Promise<T>, isIt: (answer: T) => boolean, limitMs = 300_000): Promise<T> => {
  for (const deadline = Date.now() + limitMs; ;) {
    const answer = await ask();
    if (isIt(answer)) return answer;
    if (Date.now() > deadline) throw new Error(`Waited in vain; last seen: ${JSON.stringify(answer)}`);
    await new Promise((resolve) => setTimeout(resolve, 25));
  }
};

export interface ScenarioLook {
  id: string;
  state: string;
  sites_done: number;
  restarts: number;
  result_digest: string | null;
}

export const scenariosOf = (db: Knex, runId: string): Promise<ScenarioLook[]> =>
  db('run_scenarios')
    .where({ run_id: runId })
    .orderBy('seq')
    .select('id', 'state', 'sites_done', 'restarts', 'result_digest');

/** Whatever happened on the way: one result a track, one charge, one letter, and a ledger that ties. */
export const expectWholeRun = async (db: Knex, runId: string, sites: number): Promise<void> => {
  const run = await db('runs').where({ id: runId }).first();
  expect(run).toMatchObject({ state: 'complete' });
  for (const { id, state } of await scenariosOf(db, runId)) {
    expect(state).toBe('stored');
    const [rows] = await db('site_results').where({ run_scenario_id: id }).count();
    expect(Number(rows!.count)).toBe(sites);
    expect(await db('event_results').where({ run_scenario_id: id })).toHaveLength(1);
  }
  const ledger = await db('ledger_entries').where({ run_id: runId, account: 'reserved' }).orderBy('id');
  expect(ledger.map(({ kind }) => kind)).toEqual(['reserve', 'charge']);
  expect(Number(run.charged_minor)).toBe(Number(run.quoted_minor));
  expect(await db('outbox').whereRaw(`payload ->> 'text' like ?`, [`%${runId}%`])).toHaveLength(1);
  expect(await db('audit_entries').where({ object: `run:${runId}`, action: 'run.complete' })).toHaveLength(1);
  await expectLedgerTies(db, run.org_id);
};

export const expectLedgerTies = async (db: Knex, orgId: string): Promise<void> => {
  const balance = await db('balances').where({ org_id: orgId }).first();
  for (const account of ['free', 'reserved']) {
    const [row] = await db('ledger_entries').where({ org_id: orgId, account }).sum('amount_minor as sum');
    expect([account, Number(row!.sum)]).toEqual([account, Number(balance[`${account}_minor`])]);
  }
};
