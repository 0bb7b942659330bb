import { randomUUID } from 'node:crypto';
import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { LedgerService } from '../../api/features/billing/ledger-service.ts';
import { LedgerStore } from '../../api/features/billing/ledger-store.ts';
import { TariffStore } from '../../api/features/billing/tariff-store.ts';
import { randomIds } from '../../api/ports/ids.ts';
import type { Tariff } from '../../api/ports/billing-desk.ts';
import { addBareRun, type BareRun } from '../helpers/bare-runs.ts';
import { testDatabase } from '../helpers/database.ts';
import { FakeClock } from '../helpers/fakes.ts';
import { addOrganisations, DUNE, organisation, REEF, type TestOrganisation } from '../helpers/people.ts';

const database = await testDatabase();
const { transact, superUser } = database;
const store = new LedgerStore();
const desk = new LedgerService(store, new TariffStore(), new FakeClock(), randomIds);
const UNDERWRITER = DUNE.people.underwriter;

let tariff: Tariff;
beforeAll(async () => {
  await addOrganisations(database.owner, DUNE, REEF);
  tariff = await transact(DUNE.id, (tx) => desk.tariffInForce(tx));
});

const topUp = (org: TestOrganisation, amountMinor: number) =>
  transact(org.id, (tx) =>
    desk.credit(tx, org.id, { topUpId: randomUUID(), amountMinor, currency: 'USD', actorId: org.people.admin.id }),
  );
const reserve = (org: TestOrganisation, run: BareRun, grossMinor: number) =>
  transact(org.id, (tx) =>
    desk.reserve(tx, org.id, run, { grossMinor, currency: 'USD', actorId: org.people.underwriter.id }),
  );
const settle = (
  org: TestOrganisation,
  run: BareRun,
  charge: { netMinor: number; taxMinor: number; grossMinor: number },
) => transact(org.id, (tx) => desk.settle(tx, org.id, run, charge));
const held = (org: TestOrganisation) => transact(org.id, (tx) => store.held(tx, org.id));

const freshOrganisation = async (): Promise<TestOrganisation> => {
  // Same people, another organisation: hashing passwords again would only cost time.
  const org = { ...organisation(900, 'Ledger test'), id: randomUUID() };
  await superUser('organisations').insert({ id: org.id, name: `Ledger ${org.id}`, initials: 'LT' });
  return { ...org, people: DUNE.people };
};

it('reads the tariff as exact decimals', () =>
  expect(tariff).toMatchObject({ version: 1, unitPrice: '0.004000', minimumMinor: 500, taxRate: '0.070000' }));

describe('one run from reservation to release', () => {
  it('charges net and tax, gives back the rest, and is told in words', async () => {
    const org = await freshOrganisation();
    await topUp(org, 10_000);
    const run = await addBareRun(database, org, UNDERWRITER);
    await reserve(org, run, 2_363);
    expect(await held(org)).toEqual({ freeMinor: 7_637, reservedMinor: 2_363, currency: 'USD' });
    // One of three tracks failed on our side: 14.72 net, 1.03 tax.
    await settle(org, run, desk.settlement(tariff, 5_520, { units: 3_680, tracksCompleted: 2, tracksFailed: 1 }));
    expect(await held(org)).toEqual({ freeMinor: 8_425, reservedMinor: 0, currency: 'USD' });
    const told = await transact(org.id, (tx) => store.movements(tx, org.id, { before: null, limit: 10 }));
    expect(told.map(({ kind, amountMinor, runNumber }) => [kind, amountMinor, runNumber])).toEqual([
      ['release', 788, run.number],
      ['charge', 0, run.number],
      ['reserve', -2_363, run.number],
      ['top_up', 10_000, null],
    ]);
    expect(told[1]!.text).toBe(`Charged USD 15.75 for ${run.number}`);
    const month = await transact(org.id, (tx) => store.chargedSince(tx, org.id, new Date('2026-12-01T00:00:00Z')));
    expect(month).toEqual({ chargedMinor: 1_575, runs: 1 });
  });

  it('does nothing twice', async () => {
    const org = await freshOrganisation();
    await topUp(org, 10_000);
    const run = await addBareRun(database, org, UNDERWRITER);
    await Promise.all([reserve(org, run, 2_363), reserve(org, run, 2_363)]);
    const charge = { netMinor: 1_000, taxMinor: 70, grossMinor: 1_070 };
    await Promise.all([settle(org, run, charge), settle(org, run, charge)]);
    await settle(org, run, { netMinor: 0, taxMinor: 0, grossMinor: 0 });
    expect(await held(org)).toEqual({ freeMinor: 8_930, reservedMinor: 0, currency: 'USD' });
  });

  it('never charges more than was reserved', async () => {
    const org = await freshOrganisation();
    await topUp(org, 10_000);
    const run = await addBareRun(database, org, UNDERWRITER);
    await reserve(org, run, 1_000);
    await expect(settle(org, run, { netMinor: 1_001, taxMinor: 0, grossMinor: 1_001 })).rejects.toThrow('doesn’t fit');
    expect(await held(org)).toMatchObject({ freeMinor: 9_000, reservedMinor: 1_000 });
  });
});

it('lets exactly one of two simultaneous runs have the last of the balance', async () => {
  const org = await freshOrganisation();
  await topUp(org, 2_400);
  for (let round = 0; round < 10; round++) {
    const runs = [await addBareRun(database, org, UNDERWRITER), await addBareRun(database, org, UNDERWRITER)];
    const outcomes = await Promise.allSettled(runs.map((run) => reserve(org, run, 2_363)));
    const lost = outcomes.flatMap((outcome) => (outcome.status === 'rejected' ? [outcome.reason as unknown] : []));
    expect(lost).toHaveLength(1);
    expect(lost[0]).toMatchObject({ code: 'balance_too_low' });
    expect(await held(org)).toMatchObject({ freeMinor: 37, reservedMinor: 2_363 });
    const winner = runs[outcomes.findIndex(({ status }) => status === 'fulfilled')]!;
    await settle(org, winner, { netMinor: 0, taxMinor: 0, grossMinor: 0 });
  }
});

it('keeps nothing of a reservation when the rest of its transaction fails', async () => {
  const org = await freshOrganisation();
  await topUp(org, 5_000);
  const run = await addBareRun(database, org, UNDERWRITER);
  const failing = transact(org.id, async (tx) => {
    await desk.reserve(tx, org.id, run, { grossMinor: 2_000, currency: 'USD', actorId: UNDERWRITER.id });
    throw new Error('the queue is down');
  });
  await expect(failing).rejects.toThrow('the queue is down');
  expect(await held(org)).toMatchObject({ freeMinor: 5_000, reservedMinor: 0 });
});

describe('the database itself', () => {
  const entry = (over: object) => ({
    org_id: DUNE.id,
    movement_id: randomUUID(),
    kind: 'top_up',
    account: 'free',
    amount_minor: 100,
    currency: 'USD',
    text: 'x',
    at: new Date(),
    ...over,
  });
  it('refuses a movement that doesn’t sum to zero', () =>
    expect(transact(DUNE.id, (tx) => tx('ledger_entries').insert(entry({})))).rejects.toThrow('does not sum to zero'));
  it('refuses to change or delete an entry', async () => {
    await topUp(DUNE, 100);
    await expect(superUser('ledger_entries').where({ org_id: DUNE.id }).update({ text: 'y' })).rejects.toThrow(
      'append-only',
    );
    await expect(superUser('ledger_entries').where({ org_id: DUNE.id }).delete()).rejects.toThrow('append-only');
  });
  it('shows an organisation nothing of another’s money', async () => {
    await topUp(REEF, 12_345);
    const seen = await transact(DUNE.id, async (tx) => ({
      balances: await tx('balances').where({ org_id: REEF.id }),
      entries: await tx('ledger_entries').where({ org_id: REEF.id }),
    }));
    expect(seen).toEqual({ balances: [], entries: [] });
  });
});

describe('any history of top-ups, quotes and settlements', () => {
  type Step =
    | { do: 'topUp'; amount: number }
    | { do: 'reserve'; units: number }
    | { do: 'settle'; pick: number; share: number; completed: number; failed: number; again: boolean };
  const step = fc.oneof<fc.Arbitrary<Step>[]>(
    fc.record({ do: fc.constant('topUp' as const), amount: fc.integer({ min: 1, max: 20_000 }) }),
    fc.record({ do: fc.constant('reserve' as const), units: fc.nat(20_000) }),
    fc.record({
      do: fc.constant('settle' as const),
      pick: fc.nat(20),
      share: fc.nat(100),
      completed: fc.nat(3),
      failed: fc.nat(2),
      again: fc.boolean(),
    }),
  );

  it('balances: entries sum to zero, and the balance is their sum', { timeout: 240_000 }, () =>
    fc.assert(
      fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 9 }), async (steps) => {
        const org = await freshOrganisation();
        let free = 0;
        const open: { run: BareRun; units: number; quoted: number }[] = [];
        for (const action of steps) {
          if (action.do === 'topUp') {
            await topUp(org, action.amount);
            free += action.amount;
          } else if (action.do === 'reserve') {
            const run = await addBareRun(database, org, UNDERWRITER);
            const quoted = desk.price(tariff, action.units).grossMinor;
            const outcome = await reserve(org, run, quoted).then(
              () => 'reserved',
              (error: { code?: string }) => error.code,
            );
            expect(outcome).toBe(quoted > free ? 'balance_too_low' : 'reserved');
            if (outcome !== 'reserved') continue;
            free -= quoted;
            open.push({ run, units: action.units, quoted });
          } else if (open.length > 0) {
            const [{ run, units, quoted }] = open.splice(action.pick % open.length, 1) as [(typeof open)[number]];
            const charge = desk.settlement(tariff, units, {
              units: Math.floor((units * action.share) / 100),
              tracksCompleted: action.completed,
              tracksFailed: action.failed,
            });
            expect(charge.grossMinor).toBeLessThanOrEqual(quoted);
            await settle(org, run, charge);
            if (action.again) await settle(org, run, charge);
            free += quoted - charge.grossMinor;
          }
        }
        const reserved = open.reduce((sum, { quoted }) => sum + quoted, 0);
        const { accounts, crooked, balance } = await transact(org.id, async (tx) => ({
          accounts: await tx('ledger_entries').groupBy('account').select('account').sum('amount_minor as sum'),
          crooked: await tx('ledger_entries')
            .groupBy('movement_id')
            .havingRaw('sum(amount_minor) <> 0')
            .select('movement_id'),
          balance: await store.held(tx, org.id),
        }));
        const sums: Record<string, number> = Object.fromEntries(
          accounts.map(({ account, sum }) => [account, Number(sum)]),
        );
        expect(crooked).toEqual([]);
        expect(Object.values(sums).reduce((total, sum) => total + sum, 0)).toBe(0);
        expect([sums.free ?? 0, sums.reserved ?? 0]).toEqual([free, reserved]);
        if (balance) expect(balance).toMatchObject({ freeMinor: free, reservedMinor: reserved });
        expect(free).toBeGreaterThanOrEqual(0);
      }),
      { numRuns: 300, seed: 20261201 },
    ),
  );
});
