import { afterAll, expect, it } from 'vitest';
import { Run } from '#contract/runs.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';
import { expectWholeRun, scenariosOf, until } from '../helpers/run-invariants.ts';
import { endServices, startService, type ServiceProcess } from '../helpers/service-process.ts';

const SITES = 2_500;
/** Where each worker is killed; the last one is left alone. */
const KILL_POINTS = ['building', 'scoring', 'storing', 'between'] as const;
const SECONDS_TO_RESUME = 20;

const { container, database, signIn } = await createTestApp({ pool: inlinePool() });
const { superUser } = database;
const book = await addRunFixture(database, { sites: SITES });
const tracks = await Promise.all(
  ['Aster', 'Bryony', 'Clover'].map((name, i) => book.addTrack(name, gulfTrack(i / 10))),
);
const underwriter = await signIn('underwriter');
afterAll(endServices);

const accepted = async (): Promise<Run> => {
  const quote = (await underwriter.post('/quotes', book.request(tracks)).expect(201)).body;
  return Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
};

const isCopying = async () => {
  const { rows } = await superUser.raw(
    `select from pg_stat_activity where datname = current_database() and state = 'active'
     and (query ilike 'copy copy_site_results%' or query ilike 'insert into site_results%')`,
  );
  return rows.length > 0;
};

/** Waits for the moment in which the worker is to be killed. */
const momentOf = async (point: (typeof KILL_POINTS)[number], runId: string): Promise<void> => {
  const scenarios = () => scenariosOf(superUser, runId);
  const isOver = (all: Awaited<ReturnType<typeof scenarios>>) => all.every(({ state }) => state === 'stored');
  const some = (state: string, done = 0) =>
    until(scenarios, (all) => isOver(all) || all.some((one) => one.state === state && one.sites_done >= done));
  if (point === 'building') await some('building');
  else if (point === 'scoring') await some('scoring', 1);
  else if (point === 'between') await some('stored');
  else await until(async () => (await isCopying()) || isOver(await scenarios()), Boolean);
};

it('loses no run, stores no result twice and charges once, wherever the worker is killed', async () => {
  const run = await accepted();
  for (const point of KILL_POINTS) {
    const worker: ServiceProcess = await startService('worker', database.appUrl, { COMPUTE_THREADS: '1' });
    await momentOf(point, run.id);
    await worker.kill();
    const held = await scenariosOf(superUser, run.id);
    for (const { id, state } of held) {
      const [rows] = await superUser('site_results').where({ run_scenario_id: id }).count();
      expect([state, Number(rows!.count)]).toEqual([state, state === 'stored' ? SITES : 0]);
    }
  }
  const inHand = (all: Awaited<ReturnType<typeof scenariosOf>>) =>
    all.filter(({ state }) => state === 'building' || state === 'scoring');
  const [lost] = inHand(await scenariosOf(superUser, run.id));
  const last = await startService('worker', database.appUrl, { COMPUTE_THREADS: '1' });
  const ready = performance.now();
  // Somebody is at work again, on the lost track or on one that was waiting.
  await until(
    () => scenariosOf(superUser, run.id),
    (all) =>
      all.every(({ state }) => state === 'stored') ||
      inHand(all).some((one) => one.id !== lost?.id || one.restarts > lost.restarts),
  );
  expect((performance.now() - ready) / 1000).toBeLessThan(SECONDS_TO_RESUME);
  await until(
    () => superUser('runs').where({ id: run.id }).first(),
    ({ state }) => state !== 'waiting' && state !== 'working',
  );
  await last.kill();
  await expectWholeRun(superUser, run.id, SITES);
  const restarts = (await scenariosOf(superUser, run.id)).reduce((sum, one) => sum + one.restarts, 0);
  expect(restarts).toBeGreaterThanOrEqual(1);

  // The same inputs in a process nobody disturbs: the same digests, bit for bit.
  const calm = await accepted();
  for (const { id } of calm.scenarios) {
    await container.scoreJob.run({
      data: { orgId: DUNE.id, runId: calm.id, runScenarioId: id },
      restarts: 0,
      signal: new AbortController().signal,
    });
  }
  const digests = async (id: string) => (await scenariosOf(superUser, id)).map((one) => one.result_digest);
  expect(await digests(calm.id)).toEqual(await digests(run.id));
  expect(await container.transact(DUNE.id, (tx) => container.audit.findBreak(tx))).toBeNull();
}, 400_000);
