import { readConfig } from './config.ts';
import { createContainer } from './container.ts';
import { registerPortfolioJobs } from './features/portfolios/check-job.ts';
import { registerRunJobs } from './features/runs/score-job.ts';
import { registerOutboxJobs } from './jobs/outbox.ts';
import { Reaper } from './jobs/reaper.ts';
import { whenAskedToStop } from './stopping.ts';

const config = readConfig(process.env);
const container = createContainer(config, 'worker', {}, (error) => {
  container.log.error({ err: error }, 'starting anew');
  process.exit(1);
});
const { queue, transact, mail, clock, log, checkJob, scoreJob } = container;
await queue.start();
await registerOutboxJobs(queue, { transact, mail, clock });
await registerPortfolioJobs(queue, checkJob);
await registerRunJobs(queue, scoreJob);

const reaper = new Reaper(config.databaseUrl, log);
reaper.start();
process.send?.('ready');

whenAskedToStop(log, async () => {
  await reaper.stop();
  await container.close();
});
