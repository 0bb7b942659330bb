import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import pino from 'pino';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { ROOT } from '../../api/bin/postgres.mjs';
import { Queue } from '../../api/jobs/queue.ts';
import { testDatabase } from '../helpers/database.ts';
import { DUNE } from '../helpers/people.ts';

const { app, appUrl, transact } = await testDatabase();
const queue = new Queue({
  databaseUrl: appUrl,
  log: pino({ level: 'silent' }),
  supervise: false,
  onLocksLost: () => undefined,
});
const workers: ChildProcess[] = [];

interface Note {
  what: string;
  pid: number;
  at: Date;
}
const notes = () => app<Note>('pgboss.job_notes').orderBy('at').select('what', 'pid', 'at');
const noted = async (what: string, count = 1): Promise<Note[]> => {
  for (let waited = 0; waited < 30_000; waited += 50) {
    const found = (await notes()).filter((note) => note.what === what);
    if (found.length >= count) return found;
    await sleep(50);
  }
  throw new Error(`Nobody noted “${what}” in time: ${JSON.stringify(await notes())}`);
};

const startWorker = async (): Promise<ChildProcess> => {
  const worker = fork(join(ROOT, 'tests/helpers/queue-worker.ts'), {
    execArgv: ['--import', 'tsx'],
    env: { ...process.env, DATABASE_URL: appUrl },
  });
  workers.push(worker);
  await once(worker, 'message');
  return worker;
};
const end = async (worker: ChildProcess, signal: NodeJS.Signals) => {
  if (worker.exitCode !== null || worker.signalCode !== null) return;
  const gone = once(worker, 'exit');
  worker.kill(signal);
  await gone;
};
const enqueue = (data: object) => transact(DUNE.id, (tx) => queue.enqueue(tx, 'test.slow', data));

beforeAll(async () => {
  await queue.start();
  await app.raw(
    `create table pgboss.job_notes (job_id uuid, what text, pid integer, at timestamptz default clock_timestamp())`,
  );
});
afterEach(async () => {
  await Promise.all(workers.map((worker) => end(worker, 'SIGKILL')));
  workers.length = 0;
  await app.raw('truncate pgboss.job_notes; delete from pgboss.job');
});
afterAll(() => queue.stop());

describe('a job', () => {
  it('is there exactly when its transaction commits', async () => {
    await expect(
      transact(DUNE.id, async (tx) => {
        await queue.enqueue(tx, 'test.slow', { slowMs: 0 });
        throw new Error('undone');
      }),
    ).rejects.toThrow('undone');
    expect(await app('pgboss.job').where({ name: 'test.slow' })).toEqual([]);
    await enqueue({ slowMs: 0 });
    expect(await app('pgboss.job').where({ name: 'test.slow' })).toHaveLength(1);
  });

  it('of a killed worker is taken up by another within seconds, and done once', async () => {
    const [first] = await Promise.all([startWorker()]);
    await enqueue({ slowMs: 120_000 });
    await noted('started 0');
    const second = await startWorker();
    // Past the moment a worker is given between taking a job and locking it.
    await sleep(2_500);
    const killedAt = Date.now();
    await end(first, 'SIGKILL');
    const [restarted] = await noted('started 1');
    expect(restarted!.at.getTime() - killedAt).toBeLessThan(8_000);
    expect(restarted!.pid).toBe(second.pid);
    await noted('done');
    await sleep(2_500);
    expect((await notes()).map(({ what }) => what)).toEqual(['started 0', 'started 1', 'done']);
    expect(await app('pgboss.job').where({ name: 'test.slow' }).pluck('state')).toEqual(['completed']);
  });

  it('that is merely slow keeps its worker, with another one waiting', async () => {
    await startWorker();
    await startWorker();
    await enqueue({ slowMs: 6_000 });
    await noted('done');
    await sleep(2_500);
    expect((await notes()).map(({ what }) => what)).toEqual(['started 0', 'done']);
  });

  it('in hand is finished before its worker leaves when asked to', async () => {
    const worker = await startWorker();
    await enqueue({ slowMs: 1_500 });
    await noted('started 0');
    await end(worker, 'SIGTERM');
    expect(worker.exitCode).toBe(0);
    expect((await notes()).map(({ what }) => what)).toEqual(['started 0', 'done']);
  });

  it('that fails is tried again', async () => {
    await startWorker();
    await enqueue({ slowMs: 0, fails: 2 });
    await noted('done');
    expect((await notes()).map(({ what }) => what)).toEqual(['started 0', 'started 1', 'started 2', 'done']);
  });
});
