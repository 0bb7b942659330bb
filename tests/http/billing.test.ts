import { randomUUID } from 'node:crypto';
import { expect, it } from 'vitest';
import { Balance, getBalance, listCharges, listMovements, type Movement } from '#contract/billing.ts';
import { Problem } from '#contract/errors.ts';
import { LedgerService } from '../../api/features/billing/ledger-service.ts';
import { LedgerStore } from '../../api/features/billing/ledger-store.ts';
import { TariffStore } from '../../api/features/billing/tariff-store.ts';
import { randomIds } from '../../api/ports/ids.ts';
import { createTestApp } from '../helpers/app.ts';
import { addBareRun } from '../helpers/bare-runs.ts';
import { DUNE, REEF } from '../helpers/people.ts';

const { database, clock, signIn } = await createTestApp();
const desk = new LedgerService(new LedgerStore(), new TariffStore(), clock, randomIds);
const { underwriter, modeler, admin: adminOfDune } = DUNE.people;
const admin = await signIn('admin');

const topUp = (amountMinor: number) =>
  database.transact(DUNE.id, (tx) =>
    desk.credit(tx, DUNE.id, { topUpId: randomUUID(), amountMinor, currency: 'USD', actorId: adminOfDune.id }),
  );

it('shows an organisation without a movement nil, in the tariff’s currency', async () => {
  const stranger = await signIn('admin', { org: REEF });
  expect(Balance.parse((await stranger.get(getBalance.path).expect(200)).body)).toEqual({
    ...{ balanceMinor: 0, reservedMinor: 0, freeMinor: 0, currency: 'USD' },
    month: { label: 'December 2026', chargedMinor: 0, runs: 0 },
  });
});

it('counts balance less reserved as free, and the charges of this month', async () => {
  await topUp(20_000);
  const [charged, open] = [
    await addBareRun(database, DUNE, underwriter, { quotedMinor: 2_363 }),
    await addBareRun(database, DUNE, underwriter, { quotedMinor: 1_000 }),
  ];
  await database.transact(DUNE.id, async (tx) => {
    for (const [run, grossMinor] of [[charged, 2_363] as const, [open, 1_000] as const]) {
      await desk.reserve(tx, DUNE.id, run, { grossMinor, currency: 'USD', actorId: underwriter.id });
    }
    await desk.settle(tx, DUNE.id, charged, { netMinor: 2_208, taxMinor: 155, grossMinor: 2_363 });
  });
  expect((await admin.get(getBalance.path).expect(200)).body).toEqual({
    ...{ balanceMinor: 17_637, reservedMinor: 1_000, freeMinor: 16_637, currency: 'USD' },
    month: { label: 'December 2026', chargedMinor: 2_363, runs: 1 },
  });
  clock.pass(31 * 24 * 3600 * 1000);
  expect((await admin.get(getBalance.path).expect(200)).body).toMatchObject({
    balanceMinor: 17_637,
    month: { label: 'January 2027', chargedMinor: 0, runs: 0 },
  });
});

it('tells the movements newest first, page by page, with the free balance as their sum', async () => {
  for (const amount of [100, 200, 300, 400]) await topUp(amount);
  const told: Movement[] = [];
  for (let cursor: string | null = ''; cursor !== null;) {
    const query: string = cursor === '' ? '' : `&cursor=${cursor}`;
    const reply = await admin.get(`${listMovements.path}?limit=3${query}`).expect(200);
    const page = listMovements.response.parse(reply.body);
    told.push(...page.items);
    cursor = page.nextCursor;
  }
  expect(told.slice(0, 4).map(({ amountMinor }) => amountMinor)).toEqual([400, 300, 200, 100]);
  expect(new Set(told.map(({ id }) => id)).size).toBe(told.length);
  const { freeMinor } = Balance.parse((await admin.get(getBalance.path).expect(200)).body);
  expect(told.reduce((sum, { amountMinor }) => sum + amountMinor, 0)).toBe(freeMinor);
});

it('shows people their own charges, and admins everybody’s', async () => {
  const made = [
    { by: underwriter, quotedMinor: 2_363, chargedMinor: 1_575, portfolioName: 'Lodging 4471' },
    { by: modeler, quotedMinor: 535, chargedMinor: 0, portfolioName: 'Marina 3902' },
    { by: modeler, quotedMinor: 535, chargedMinor: null, portfolioName: 'Orchard Row' },
  ];
  for (const [at, { by, ...run }] of made.entries()) {
    await addBareRun(database, DUNE, by, { ...run, acceptedAt: new Date(Date.UTC(2026, 11, 2, 9, at)) });
  }
  const listed = async (browser: typeof admin) =>
    listCharges.response.parse((await browser.get(listCharges.path).expect(200)).body).items;
  expect(await listed(admin)).toMatchObject([
    { portfolioName: 'Orchard Row', state: 'reserved', chargedMinor: null, releasedMinor: null },
    { portfolioName: 'Marina 3902', state: 'released', chargedMinor: 0, releasedMinor: 535 },
    { portfolioName: 'Lodging 4471', state: 'charged', chargedMinor: 1_575, releasedMinor: 788 },
  ]);
  expect((await listed(await signIn('auditor'))).length).toBe(3);
  expect((await listed(await signIn('underwriter'))).map(({ portfolioName }) => portfolioName)).toEqual([
    'Lodging 4471',
  ]);
  const first = listCharges.response.parse((await admin.get(`${listCharges.path}?limit=2`).expect(200)).body);
  const rest = await admin.get(`${listCharges.path}?limit=2&cursor=${first.nextCursor}`).expect(200);
  expect(listCharges.response.parse(rest.body).items).toHaveLength(1);
});

it('keeps movements and top-ups to those whose business they are', async () => {
  const clerk = await signIn('underwriter');
  expect(Problem.parse((await clerk.get(listMovements.path)).body).code).toBe('not_allowed');
  expect(Problem.parse((await clerk.post('/billing/top-ups', { amountMinor: 5_000 })).body).code).toBe('not_allowed');
});

it('refuses a top-up below the smallest and above the largest', async () => {
  for (const amountMinor of [999, 10_000_001, 12.5]) {
    const reply = await admin.post('/billing/top-ups', { amountMinor });
    expect(Problem.parse(reply.body)).toMatchObject({ status: 422, faults: [{ path: 'body.amountMinor' }] });
  }
});

it('refuses a cursor that isn’t one of ours', async () => {
  expect((await admin.get(`${listCharges.path}?cursor=abc`)).status).toBe(422);
  expect((await admin.get(`${listMovements.path}?cursor=${Buffer.from('["x"]').toString('base64url')}`)).status).toBe(
    422,
  );
});
