import { spawnSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, expect, it, vi } from 'vitest';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { Quote, Run } from '#contract/runs.ts';
import { Session } from '#contract/session.ts';
import { destroyCluster, ROOT, startCluster } from '../../api/bin/postgres.mjs';
import { createDatabase } from '../../api/db/database.ts';
import { freePort, newDataFolder } from '../helpers/own-product.ts';
import { addOrganisations, DUNE, PASSWORD } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';
import { expectLedgerTies, expectWholeRun, scenariosOf, until } from '../helpers/run-invariants.ts';
import { endServices, startService } from '../helpers/service-process.ts';

vi.setConfig({ testTimeout: 400_000 });

// A cluster of the test's own: it is going to be killed.
const folder = newDataFolder();
afterAll(async () => {
  await endServices();
  await database.destroy();
  await destroyCluster({ folder });
  rmSync(folder, { recursive: true, force: true });
}, 60_000);
let cluster = await startCluster({ folder });
const NAME = 'killed';
const admin = createDatabase(cluster.superUrl('postgres'), 1);
await admin.raw(`create database ${NAME} template template_postgis owner gustloom_owner`);
await admin.destroy();
spawnSync(process.execPath, ['--import', 'tsx', 'node_modules/knex/bin/cli.js', 'migrate:latest'], {
  cwd: ROOT,
  env: { ...process.env, DATABASE_URL: cluster.ownerUrl(NAME) },
});
let database = createDatabase(cluster.superUrl(NAME), 3);
await addOrganisations(database, DUNE);
const SITES = 2_500;
const book = await addRunFixture({ superUser: database }, { sites: SITES });
const tracks = await Promise.all(['Aster', 'Bryony'].map((name, i) => book.addTrack(name, gulfTrack(i / 10))));

const port = await freePort();
const startApi = () => startService('server', cluster.appUrl(NAME), { PORT: String(port) });
const startWorker = () => startService('worker', cluster.appUrl(NAME), { COMPUTE_THREADS: '1' });
let api = await startApi();

const cookies = new Map<string, string>();
let csrf = '';
const call = async (method: string, path: string, body?: object, key: string = randomUUID()): Promise<Response> => {
  const reply = await fetch(`http://127.0.0.1:${port}/api/v1${path}`, {
    method,
    headers: {
      cookie: [...cookies].map(([name, value]) => `${name}=${value}`).join('; '),
      'x-csrf-token': csrf,
      'idempotency-key': key,
      'content-type': 'application/json',
    },
    body: body && JSON.stringify(body),
  });
  for (const cookie of reply.headers.getSetCookie()) {
    const [, name, value] = /^([^=]+)=([^;]*)/.exec(cookie)!;
    cookies.set(name!, value!);
  }
  return reply;
};
const { email, name } = DUNE.people.underwriter;
csrf = Session.parse(await (await call('POST', '/session', { email, password: PASSWORD })).json()).csrfToken;
await call('POST', '/session/acceptance', { version: NOTICE_VERSION, name });
const quoteFor = async (versions: string[]): Promise<Quote> =>
  Quote.parse(await (await call('POST', '/quotes', book.request(versions))).json());

/** Milliseconds after an accept was sent; a fixed list, so that a failure can be had again. */
const API_KILL_POINTS = [4, 15, 40];

it('accepts once and reserves once, whenever the API is killed meanwhile', async () => {
  for (const delayMs of API_KILL_POINTS) {
    const quote = await quoteFor([tracks[0]!]);
    const key = randomUUID();
    const sent = call('POST', `/quotes/${quote.id}/accept`, undefined, key).catch(() => null);
    await new Promise((resolve) => setTimeout(resolve, delayMs));
    await api.kill();
    await sent;
    const runs = await database('runs').where({ quote_id: quote.id });
    const reserved = await database('ledger_entries').whereIn(
      'run_id',
      runs.map(({ id }) => id),
    );
    const jobs = await database('pgboss.job').whereRaw(`name = 'runs.score' and data ->> 'runId' = ?`, [
      runs[0]?.id ?? '',
    ]);
    // All of it or nothing of it.
    expect([runs.length, reserved.length, jobs.length]).toEqual(runs.length === 0 ? [0, 0, 0] : [1, 2, 1]);
    await expectLedgerTies(database, DUNE.id);

    api = await startApi();
    // The repeat of the same request waits until the killed one counts as left behind; that time is set back here.
    await database.raw(`update idempotency_keys set claimed_at = claimed_at - interval '1 hour' where key = ?`, [key]);
    const again = await call('POST', `/quotes/${quote.id}/accept`, undefined, key);
    expect(again.status).toBe(201);
    const run = Run.parse(await again.json());
    expect(await database('runs').where({ quote_id: quote.id })).toHaveLength(1);
    if (runs.length === 1) expect(run.id).toBe(runs[0].id);
    await call('POST', `/runs/${run.id}/cancel`);
    await expectLedgerTies(database, DUNE.id);
  }
});

it('finishes a run once after the database was killed in the middle of it, and the API comes back by itself', async () => {
  const quote = await quoteFor(tracks);
  const run = Run.parse(await (await call('POST', `/quotes/${quote.id}/accept`)).json());
  const worker = await startWorker();
  await until(
    () => scenariosOf(database, run.id),
    (all) => all.some(({ state }) => state === 'scoring'),
  );
  const state = JSON.parse(readFileSync(join(folder, 'postgres.json'), 'utf8')) as { cluster: string };
  const postmaster = Number(readFileSync(join(state.cluster, 'postmaster.pid'), 'utf8').split('\n')[0]);
  process.kill(postmaster, 'SIGKILL');
  // It can't know any more which jobs are its own, so it ends and is started anew, as the start program does.
  if (worker.child.exitCode === null) await new Promise((resolve) => worker.child.once('exit', resolve));
  await database.destroy();
  cluster = await startCluster({ folder });
  database = createDatabase(cluster.superUrl(NAME), 3);
  await startWorker();
  await until(
    () => database('runs').where({ id: run.id }).first('state'),
    ({ state: now }) => now !== 'waiting' && now !== 'working',
  );
  await expectWholeRun(database, run.id, SITES);
  const answer = await until(
    () => call('GET', `/runs/${run.id}`).catch(() => null),
    (reply) => reply?.status === 200,
  );
  expect(Run.parse(await answer!.json())).toMatchObject({ state: 'complete', scenariosDone: 2 });
});
