import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import knex from 'knex';
import { expect, it } from 'vitest';
import { ROOT } from '../../api/bin/postgres.mjs';
import { testDatabase } from '../helpers/database.ts';

const { ownerUrl, superUser } = await testDatabase();
const FOLDER = join(ROOT, 'migrations');

const SHAPE = `
  select 'column' as kind, table_name || '.' || column_name || ' ' || data_type || ' ' || is_nullable as what
    from information_schema.columns where table_schema = 'public'
  union all select 'constraint', conrelid::regclass || ' ' || pg_get_constraintdef(oid) from pg_constraint where connamespace = 'public'::regnamespace
  union all select 'index', indexdef from pg_indexes where schemaname = 'public'
  union all select 'policy', tablename || ' ' || policyname || ' ' || coalesce(qual, '') || coalesce(with_check, '') from pg_policies
  union all select 'trigger', pg_get_triggerdef(oid) from pg_trigger where not tgisinternal
  union all select 'function', proname || ' ' || prosrc from pg_proc where pronamespace = 'public'::regnamespace and pg_get_userbyid(proowner) = 'gustloom_owner'
  union all select 'grant', table_name || ' ' || grantee || ' ' || privilege_type from information_schema.table_privileges where table_schema = 'public'
  order by 1, 2`;
const shape = async () => (await superUser.raw<{ rows: { kind: string; what: string }[] }>(SHAPE)).rows;

it('go up, down and up again to the same shape, and down leaves nothing behind', async () => {
  const migrator = knex({
    client: 'pg',
    connection: ownerUrl,
    migrations: { directory: FOLDER, extension: 'ts', loadExtensions: ['.ts'] },
  });
  try {
    const before = await shape();
    await migrator.migrate.rollback(undefined, true);
    const left = (await shape()).filter(
      ({ what }) => !/knex_migrations|spatial_ref_sys|geography_columns|geometry_columns/.test(what),
    );
    expect(left).toEqual([]);
    await migrator.migrate.latest();
    expect(await shape()).toEqual(before);
  } finally {
    await migrator.destroy();
  }
});

it('each have a way down and import nothing but types', () => {
  for (const name of readdirSync(FOLDER)) {
    const source = readFileSync(join(FOLDER, name), 'utf8');
    expect([name, /export async function down/.test(source)]).toEqual([name, true]);
    const imports = source.match(/^import .*$/gm) ?? [];
    expect([name, imports.filter((line) => !line.startsWith('import type'))]).toEqual([name, []]);
  }
});
