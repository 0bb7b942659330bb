import { fork, spawnSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { once } from 'node:events';
import { chmodSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { readConfig } from '../../config.ts';
import { createContainer } from '../../container.ts';
import { createDatabase } from '../../db/database.ts';
import { destroyCluster, ROOT, startCluster, type Cluster } from '../postgres.mjs';
import { addBenchBook } from './bench-book.ts';
import { median, rounded, type Bench, type Measured } from './bench.ts';

const SITES = 10_000;
const RUNS = 3;
const THREADS = 2;
const LOOK_MS = 25;
const DATABASE = 'bench';
const WORKER = fileURLToPath(new URL('../../worker.ts', import.meta.url));

const environment = (databaseUrl: string): Record<string, string> => ({
  NODE_ENV: 'development',
  PORT: '3000',
  PUBLIC_URL: 'http://localhost:3000',
  DATABASE_URL: databaseUrl,
  TOKEN_SECRET: randomUUID() + randomUUID(),
  CSRF_SECRET: randomUUID() + randomUUID(),
  LOG_LEVEL: 'error',
  SMTP_URL: 'smtp://127.0.0.1:9',
  MAIL_FROM: 'bench@gustloom.example',
  STRIPE_SECRET_KEY: 'sk_test_bench',
  STRIPE_WEBHOOK_SECRET: 'whsec_bench',
  STRIPE_API_URL: 'http://127.0.0.1:9',
  COMPUTE_THREADS: String(THREADS),
});

/** Megabytes a process has held at most. */
const peakMemoryMb = (pid: number): number => {
  const [, kilobytes] = /^VmHWM:\s+(\d+) kB$/m.exec(readFileSync(`/proc/${pid}/status`, 'utf8')) ?? [];
  return Number(kilobytes) / 1024;
};

/**
 * A run as a person waits for it, on a database of its own: from accepting the quote until the sites table answers.
 * A worker of two threads does the computing; its start isn't counted, since it waits for work.
 */
export const runBench: Bench = {
  keys: ['run10kSites', 'run10kSitesWorkerMemory'],
  async measure(say) {
    const folder = mkdtempSync(join(tmpdir(), 'gustloom-bench-'));
    chmodSync(folder, 0o755);
    const cluster = await startCluster({ folder });
    try {
      return await measure(cluster, say);
    } finally {
      await destroyCluster({ folder });
      rmSync(folder, { recursive: true, force: true });
    }
  },
};

const measure = async (cluster: Cluster, say: (line: string) => void): Promise<Record<string, Measured>> => {
  cluster.ensureDatabase(DATABASE);
  const migrated = spawnSync(process.execPath, ['--import', 'tsx', 'node_modules/knex/bin/cli.js', 'migrate:latest'], {
    cwd: ROOT,
    env: { ...process.env, DATABASE_URL: cluster.ownerUrl(DATABASE) },
    encoding: 'utf8',
  });
  if (migrated.status !== 0) throw new Error(`Migrating failed:\n${migrated.stdout}${migrated.stderr}`);
  const env = environment(cluster.appUrl(DATABASE));
  const superUser = createDatabase(cluster.superUrl(DATABASE), 1);
  const { actor, request } = await addBenchBook(superUser, SITES);
  await superUser.raw('analyze');
  await superUser.destroy();
  const { queue, services, close } = createContainer(readConfig(env), 'api');
  await queue.start();
  const worker = fork(WORKER, {
    execArgv: ['--import', 'tsx'],
    env: { ...process.env, ...env },
    stdio: ['ignore', 'ignore', 'inherit', 'ipc'],
  });
  await once(worker, 'message');

  const oneRun = async (): Promise<number> => {
    const quote = await services.quotes.create(actor, request);
    const begun = performance.now();
    const { id: runId, scenarios } = await services.runs.accept(actor, quote.id, randomUUID());
    const at = { runId, runScenarioId: scenarios[0]!.id };
    for (;;) {
      const { state } = await services.runs.get(actor, runId);
      if (state === 'complete') break;
      if (state !== 'waiting' && state !== 'working') throw new Error(`The run ended as ${state}`);
      await sleep(LOOK_MS);
    }
    const { total } = await services.results.sites(actor, at, {
      ...{ sort: 'gross', direction: 'desc', offset: 0, limit: 100 },
    });
    if (total !== SITES) throw new Error(`${total} of ${SITES} sites have results`);
    return (performance.now() - begun) / 1000;
  };
  const seconds: number[] = [];
  for (let run = 0; run < RUNS; run++) {
    seconds.push(await oneRun());
    say(`${SITES.toLocaleString('en')} sites from accept to readable results: ${seconds[run]!.toFixed(2)} s`);
  }
  const memory = peakMemoryMb(worker.pid!);
  worker.kill('SIGTERM');
  await once(worker, 'exit');
  await close();
  return {
    run10kSites: { value: rounded(median(seconds)), unit: `s from accept to readable results, ${THREADS} threads` },
    run10kSitesWorkerMemory: { value: rounded(memory), unit: 'MB at most in the worker' },
  };
};
