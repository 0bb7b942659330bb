import { describe, expect, it } from 'vitest';
import { testDatabase } from '../helpers/database.ts';
import { addOrganisations, DUNE, REEF } from '../helpers/people.ts';

const { app, owner, superUser, transact } = await testDatabase();
await addOrganisations(owner, DUNE, REEF);

/** Shared by everybody, or reached only through the owner's function. */
const WITHOUT_ORGANISATION = new Set([
  'tariffs',
  'sign_in_failures',
  'knex_migrations',
  'knex_migrations_lock',
  'spatial_ref_sys',
]);

interface TableRow {
  name: string;
  forced: boolean;
  has_org: boolean;
  is_partition: boolean;
}
const tables = (
  await superUser.raw<{ rows: TableRow[] }>(`
    select pg_class.relname as name, pg_class.relrowsecurity and pg_class.relforcerowsecurity as forced,
      pg_class.relispartition as is_partition,
      exists (select from pg_attribute where attrelid = pg_class.oid and attname = 'org_id') as has_org
    from pg_class join pg_namespace on pg_namespace.oid = pg_class.relnamespace
    where pg_namespace.nspname = 'public' and pg_class.relkind in ('r', 'p') order by 1`)
).rows;
const tenantTables = tables.filter(
  ({ name, has_org, is_partition }) => has_org && !is_partition && !WITHOUT_ORGANISATION.has(name),
);

describe('row-level security', () => {
  it('is forced on every table but the few that belong to nobody', () => {
    const open = tables.filter(({ forced, name }) => !forced && !WITHOUT_ORGANISATION.has(name));
    expect(open.map(({ name }) => name)).toEqual([]);
    expect(tenantTables.length).toBeGreaterThan(15);
  });
  it('binds a role that owns nothing and may not pass it', async () => {
    const { rows } = await superUser.raw(`
      select rolsuper, rolbypassrls, rolcreaterole, rolcreatedb from pg_roles where rolname = 'gustloom_app'`);
    expect(rows).toEqual([{ rolsuper: false, rolbypassrls: false, rolcreaterole: false, rolcreatedb: false }]);
    const owned = await superUser.raw(`
      select relname from pg_class join pg_namespace on pg_namespace.oid = relnamespace
      where nspname = 'public' and pg_get_userbyid(relowner) = 'gustloom_app'`);
    expect(owned.rows).toEqual([]);
  });
  it('hides another organisation’s rows even from a query that forgets to ask for its own', async () => {
    const seen = await transact(DUNE.id, (tx) => tx('memberships').select('org_id'));
    expect(new Set(seen.map(({ org_id }) => org_id))).toEqual(new Set([DUNE.id]));
    const people = await transact(DUNE.id, (tx) => tx('users').select('email'));
    expect(people).toHaveLength(4);
    const organisations = await transact(REEF.id, (tx) => tx('organisations').select('id'));
    expect(organisations).toEqual([{ id: REEF.id }]);
  });
  it('shows nothing at all outside a transaction that names an organisation', async () => {
    for (const { name } of tenantTables) {
      const { rows } = await app
        .raw(
          `select case when has_table_privilege('gustloom_app', ?, 'select') then (select count(*) from ??) end as count`,
          [name, name],
        )
        .catch((error: { code: string }) => ({ rows: [{ count: error.code === '42501' ? null : error.code }] }));
      expect([name, rows[0].count === null ? '0' : rows[0].count]).toEqual([name, '0']);
    }
  });
  it('lets nobody write into another organisation', async () => {
    const foreign = {
      org_id: REEF.id,
      user_id: REEF.people.admin.id,
      version: 'x',
      name: 'x',
      accepted_at: new Date(),
    };
    await expect(transact(DUNE.id, (tx) => tx('acceptances').insert(foreign))).rejects.toMatchObject({ code: '42501' });
    const changed = await transact(DUNE.id, (tx) =>
      tx('memberships').where({ org_id: REEF.id }).update({ is_approver: true }),
    );
    expect(changed).toBe(0);
  });
  it('leaves no organisation behind on a pooled connection', async () => {
    for (let turn = 0; turn < 12; turn += 1) {
      await transact(DUNE.id, (tx) => tx('memberships').select('user_id'));
      const { rows } = await app.raw(`select current_setting('app.org_id', true) as org`);
      expect(rows[0].org ?? '').toBe('');
    }
  });
  it('gives the app no grant on partitions, which would lie outside the parent’s policy', async () => {
    await transact(DUNE.id, (tx) => tx.raw(`select open_site_results_month('2026-12-01T00:00:00Z')`));
    const { rows } = await superUser.raw<{ rows: { name: string; granted: boolean; forced: boolean }[] }>(`
      select relname as name, has_table_privilege('gustloom_app', oid, 'select, insert, update, delete') as granted,
        relrowsecurity and relforcerowsecurity as forced
      from pg_class where relispartition and relkind = 'r' and relnamespace = 'public'::regnamespace`);
    expect(rows.length).toBeGreaterThan(1);
    for (const partition of rows) expect(partition).toMatchObject({ granted: false, forced: true });
  });
  it('keeps password hashes from the app, but for the one function that sign-in uses', async () => {
    await expect(transact(DUNE.id, (tx) => tx('users').select('password_hash'))).rejects.toMatchObject({
      code: '42501',
    });
    const { rows } = await app.raw('select * from person_for_sign_in(?)', [DUNE.people.admin.email]);
    expect(rows).toHaveLength(1);
    const nobody = await app.raw('select * from person_for_sign_in(?)', [`' or true --`]);
    expect(nobody.rows).toEqual([]);
  });
  it('is passed by no other function', async () => {
    const { rows } = await superUser.raw<{ rows: { name: string }[] }>(`
      select proname as name from pg_proc
      where pronamespace = 'public'::regnamespace and prosecdef and pg_get_userbyid(proowner) = 'gustloom_owner' order by 1`);
    expect(rows.map(({ name }) => name)).toEqual([
      'chain_audit_entry',
      'open_site_results_month',
      'person_for_sign_in',
    ]);
  });
  it('isn’t fooled by a temporary table that takes the name of a real one', async () => {
    const found = await app.transaction(async (tx) => {
      await tx.raw(`create temporary table users (id uuid, email text, password_hash text) on commit drop`);
      await tx.raw(`insert into pg_temp.users values (?, ?, 'planted')`, [
        DUNE.people.admin.id,
        DUNE.people.admin.email,
      ]);
      const { rows } = await tx.raw<{ rows: { password_hash: string }[] }>(
        'select password_hash from person_for_sign_in(?)',
        [DUNE.people.admin.email],
      );
      return rows.map((row) => row.password_hash);
    });
    expect(found).toHaveLength(1);
    expect(found[0]).not.toBe('planted');
    const { rows } = await superUser.raw<{ rows: { name: string }[] }>(`
      select proname as name from pg_proc where pronamespace = 'public'::regnamespace and prosecdef
        and pg_get_userbyid(proowner) = 'gustloom_owner' and not 'search_path=public, pg_temp' = any(proconfig)`);
    expect(rows).toEqual([]);
  });
  it('keeps the app from changing what was quoted, asked of a card or sealed into a quote', async () => {
    const refused = { code: '42501' };
    const change = (table: string, values: object) => transact(DUNE.id, (tx) => tx(table).update(values));
    await expect(change('runs', { quoted_minor: 1 })).rejects.toMatchObject(refused);
    await expect(change('payments', { amount_minor: 1 })).rejects.toMatchObject(refused);
    await expect(change('quotes', { gross_minor: 1 })).rejects.toMatchObject(refused);
    await expect(change('balances', { currency: 'AUD' })).rejects.toMatchObject(refused);
    await expect(change('ledger_entries', { amount_minor: 1 })).rejects.toMatchObject(refused);
  });
});
