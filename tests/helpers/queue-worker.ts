import knex from 'knex';
import pino from 'pino';
import { Queue } from '../../api/jobs/queue.ts';
import { Reaper } from '../../api/jobs/reaper.ts';
import { whenAskedToStop } from '../../api/stopping.ts';

/** A worker process for tests to kill. Notes each start and end of a job in `job_notes`; `slowMs` of a job applies to its first try. */
const databaseUrl = process.env.DATABASE_URL!;
const log = pino({ level: 'silent' });
const notes = knex({ client: 'pg', connection: databaseUrl, pool: { min: 0, max: 2 } });
const queue = new Queue({ databaseUrl, log, supervise: true, onLocksLost: () => process.exit(1) });
const reaper = new Reaper(databaseUrl, log);
const note = (jobId: string, what: string) =>
  notes('pgboss.job_notes').insert({ job_id: jobId, what, pid: process.pid });

await queue.start();
await queue.work(
  'test.slow',
  async ({ id, data, restarts }) => {
    const { slowMs, fails } = data as { slowMs: number; fails?: number };
    await note(id, `started ${restarts}`);
    if (restarts === 0) await new Promise((resolve) => setTimeout(resolve, slowMs));
    if (restarts < (fails ?? 0)) throw new Error('as asked');
    await note(id, 'done');
  },
  2,
);
reaper.start();
process.send?.('ready');

whenAskedToStop(log, async () => {
  await reaper.stop();
  await queue.stop();
  await notes.destroy();
});
