import type { Knex } from 'knex';
import { Client } from 'pg';
import { afterAll, inject } from 'vitest';
import { createDatabase } from '../../api/db/database.ts';
import { createTransact, type Transact } from '../../api/transact.ts';

export interface TestDatabase {
  name: string;
  /** As the service connects: row-level security in force, owns nothing. */
  appUrl: string;
  app: Knex;
  transact: Transact;
  ownerUrl: string;
  owner: Knex;
  /** Bound by nothing: for tampering with what the service can't touch, and for looking across organisations. */
  superUser: Knex;
}

let copies = 0;

const asAdmin = async (sql: string): Promise<void> => {
  const admin = new Client({ connectionString: inject('cluster').superUrl });
  await admin.connect();
  try {
    await admin.query(sql);
  } finally {
    await admin.end();
  }
};

/** A migrated database of the test file's own, dropped after it. Call it at the top of the file, with await. */
export const testDatabase = async (): Promise<TestDatabase> => {
  const cluster = inject('cluster');
  copies += 1;
  const name = `test_${process.pid}_${Date.now().toString(36)}_${copies}`;
  await asAdmin(`create database "${name}" template "${cluster.template}" owner gustloom_owner`);
  const appUrl = `${cluster.appUrl}${name}`;
  const ownerUrl = `${cluster.ownerUrl}${name}`;
  const app = createDatabase(appUrl);
  const owner = createDatabase(ownerUrl, 3);
  const superUser = createDatabase(cluster.superUrl.replace(/\/postgres$/, `/${name}`), 2);
  afterAll(async () => {
    await Promise.all([app.destroy(), owner.destroy(), superUser.destroy()]);
    await asAdmin(`drop database if exists "${name}" with (force)`);
  });
  return { name, appUrl, app, transact: createTransact(app), ownerUrl, owner, superUser };
};
