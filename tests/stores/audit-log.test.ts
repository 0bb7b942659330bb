import { randomUUID } from 'node:crypto';
import { beforeEach, describe, expect, it } from 'vitest';
import { AuditLog } from '../../api/features/audit/audit-log.ts';
import { testDatabase } from '../helpers/database.ts';
import { FakeClock } from '../helpers/fakes.ts';
import { addOrganisations, DUNE, REEF, type TestOrganisation } from '../helpers/people.ts';

const { owner, superUser, transact } = await testDatabase();
await addOrganisations(owner, DUNE, REEF);
const audit = new AuditLog(new FakeClock(), { next: () => randomUUID() });

const record = (org: TestOrganisation, action: string, details: object = {}) =>
  transact(org.id, (tx) =>
    audit.record(tx, { orgId: org.id, userId: org.people.admin.id }, action, 'thing 1', details),
  );
const breakOf = (org: TestOrganisation) => transact(org.id, (tx) => audit.findBreak(tx));
const links = (org: TestOrganisation) => superUser('audit_chain').where({ org_id: org.id }).orderBy('seq');
/** As somebody with the database in their hands would. */
const tamper = (sql: string, values: unknown[] = []) =>
  superUser.transaction(async (tx) => {
    await tx.raw(`set local session_replication_role = replica`);
    await tx.raw(sql, values as string[]);
  });

beforeEach(() => tamper('delete from audit_chain; delete from audit_entries'));

describe('the audit log', () => {
  it('chains each organisation’s entries in the order they were committed', async () => {
    for (const action of ['one', 'two', 'three']) await record(DUNE, action);
    await record(REEF, 'one');
    const chain = await links(DUNE);
    expect(chain.map(({ seq }) => seq)).toEqual(['1', '2', '3']);
    expect(chain.map(({ previous_hash }) => previous_hash)).toEqual(['', chain[0].hash, chain[1].hash]);
    expect(await links(REEF)).toHaveLength(1);
    expect([await breakOf(DUNE), await breakOf(REEF)]).toEqual([null, null]);
  });
  it('stays one chain when many commit at once', async () => {
    await Promise.all(Array.from({ length: 12 }, (_, at) => record(DUNE, `parallel ${at}`)));
    expect((await links(DUNE)).map(({ seq }) => Number(seq))).toEqual(Array.from({ length: 12 }, (_, at) => at + 1));
    expect(await breakOf(DUNE)).toBeNull();
  });
  it('holds several entries of one transaction, and none of one that fails', async () => {
    await transact(DUNE.id, async (tx) => {
      const by = { orgId: DUNE.id, userId: null };
      await audit.record(tx, by, 'first', 'x');
      await audit.record(tx, by, 'second', 'x');
    });
    await expect(
      transact(DUNE.id, async (tx) => {
        await audit.record(tx, { orgId: DUNE.id, userId: null }, 'never', 'x');
        throw new Error('undone');
      }),
    ).rejects.toThrow('undone');
    expect(await links(DUNE)).toHaveLength(2);
    expect(await breakOf(DUNE)).toBeNull();
  });
  it.each([
    ['a changed detail', `update audit_entries set details = '{"amount": 1}' where action = 'two'`],
    ['a changed person', `update audit_entries set actor_id = null where action = 'two'`],
    ['a changed time', `update audit_entries set at = at - interval '1 hour' where action = 'two'`],
    ['a changed hash', `update audit_chain set hash = repeat('0', 64) where seq = 2`],
    ['a removed entry', `delete from audit_chain where seq = 2; delete from audit_entries where action = 'two'`],
    [
      'an entry put in beside the chain',
      `insert into audit_entries select gen_random_uuid(), org_id, at, actor_id, 'slipped in', object, details from audit_entries where action = 'two'`,
    ],
  ])('finds %s', async (_what, sql) => {
    for (const action of ['one', 'two', 'three']) await record(DUNE, action, { amount: 5 });
    await record(REEF, 'untouched');
    await tamper(sql);
    expect(await breakOf(DUNE)).not.toBeNull();
    expect(await breakOf(REEF)).toBeNull();
  });
  it.each([
    ['change', `update audit_entries set action = 'x'`],
    ['remove', 'delete from audit_entries'],
    ['empty', 'truncate audit_entries cascade'],
    ['rechain', `update audit_chain set hash = 'x'`],
  ])('refuses to %s, even to the tables’ owner', async (_what, sql) => {
    await record(DUNE, 'one');
    await expect(
      owner.transaction(async (tx) => {
        await tx.raw(`select set_config('app.org_id', ?, true)`, [DUNE.id]);
        await tx.raw(sql);
      }),
    ).rejects.toThrow(/append-only/);
  });
  it('gives the app no way to write links itself', async () => {
    const forged = { org_id: DUNE.id, seq: 9, entry_id: randomUUID(), previous_hash: '', hash: '' };
    await expect(transact(DUNE.id, (tx) => tx('audit_chain').insert(forged))).rejects.toMatchObject({ code: '42501' });
  });
});
