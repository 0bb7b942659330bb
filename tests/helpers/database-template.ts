import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Client } from 'pg';
import PgBoss from 'pg-boss';
import type { TestProject } from 'vitest/node';
import { ROOT, startCluster } from '../../api/bin/postgres.mjs';
import { QUEUE_SCHEMA } from '../../api/jobs/queue.ts';

export interface TestCluster {
  template: string;
  superUrl: string;
  ownerUrl: string;
  appUrl: string;
}
declare module 'vitest' {
  interface ProvidedContext {
    cluster: TestCluster;
  }
}

const shortHash = (text: string) => createHash('sha256').update(text).digest('hex').slice(0, 12);

/** `npm test` names a cluster of its own; a lone run of Vitest keeps one outside the repository, never the product's. */
export const testClusterFolder = (): string =>
  process.env.TEST_CLUSTER ?? join(tmpdir(), `gustloom-test-${process.getuid?.() ?? 0}-${shortHash(ROOT)}`);

const migrationsDigest = () => {
  const folder = join(ROOT, 'migrations');
  const files = readdirSync(folder).sort();
  return shortHash(files.map((name) => `${name}\0${readFileSync(join(folder, name), 'utf8')}`).join('\0'));
};

const migrate = (url: string) => {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    ['--import', 'tsx', 'node_modules/knex/bin/cli.js', 'migrate:latest'],
    { cwd: ROOT, env: { ...process.env, DATABASE_URL: url }, encoding: 'utf8' },
  );
  if (status !== 0) throw new Error(`Migrating the test template failed:\n${stdout}${stderr}`);
};

const installQueue = async (url: string) => {
  const boss = new PgBoss({ connectionString: url, schema: QUEUE_SCHEMA, supervise: false, schedule: false });
  await boss.start();
  await boss.stop({ graceful: false });
};

const isAlive = (pid: number) => {
  try {
    process.kill(pid, 0);
    return true;
  } catch {
    return false;
  }
};

/** Vitest's global set-up: one migrated database, from which every test file gets a copy. */
export default async function setup(project: TestProject): Promise<void> {
  const cluster = await startCluster({ folder: testClusterFolder(), durable: false });
  const template = `template_${migrationsDigest()}`;
  const admin = new Client({ connectionString: cluster.superUrl('postgres') });
  await admin.connect();
  try {
    // Several runs may begin together; one makes the template, the others wait.
    await admin.query(`select pg_advisory_lock(hashtext($1))`, [template]);
    const { rows } = await admin.query<{ datname: string }>('select datname from pg_database');
    const names = rows.map(({ datname }) => datname);
    for (const name of names) {
      const pid = Number(/^test_(\d+)_/.exec(name)?.[1]);
      if (pid > 0 && !isAlive(pid)) await admin.query(`drop database if exists "${name}" with (force)`);
    }
    if (!names.includes(template)) {
      const building = `${template}_building`;
      await admin.query(`drop database if exists "${building}" with (force)`);
      await admin.query(`create database "${building}" template template_postgis owner gustloom_owner`);
      migrate(cluster.ownerUrl(building));
      await installQueue(cluster.appUrl(building));
      await admin.query(`alter database "${building}" rename to "${template}"`);
    }
  } finally {
    await admin.end();
  }
  project.provide('cluster', {
    template,
    superUrl: cluster.superUrl('postgres'),
    ownerUrl: cluster.ownerUrl(''),
    appUrl: cluster.appUrl(''),
  });
}
