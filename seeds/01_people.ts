import { hash } from '@node-rs/argon2';
import type { Knex } from 'knex';
import type { Role } from '#contract/roles.ts';

const ORG_ID = '5a175a17-0000-4000-8000-000000000001';

const PEOPLE: { id: string; name: string; email: string; roles: Role[]; isApprover: boolean }[] = [
  person(1, 'Ines Halvard', 'ines.halvard', ['underwriter'], false),
  person(2, 'Teodor Brask', 'teodor.brask', ['modeler'], true),
  person(3, 'Oda Renn', 'oda.renn', ['admin'], false),
  person(4, 'Pell Quist', 'pell.quist', ['auditor'], false),
];

function person(no: number, name: string, local: string, roles: Role[], isApprover: boolean) {
  const id = `5a175a17-0000-4000-8000-0000000001${String(no).padStart(2, '0')}`;
  return { id, name, email: `${local}@saltmarsh.example`, roles, isApprover };
}

/** Saltmarsh Mutual, an invented insurer, with one person for each role; nobody has accepted the standing notes yet. */
export async function seed(knex: Knex): Promise<void> {
  const password = process.env.DEMO_PASSWORD;
  if (!password) throw new Error('DEMO_PASSWORD is missing: the demo people would have no password');
  await knex.transaction(async (tx) => {
    await tx.raw(`select set_config('app.org_id', ?, true)`, [ORG_ID]);
    if (await tx('organisations').where({ id: ORG_ID }).first('id')) return;
    await tx('organisations').insert({ id: ORG_ID, name: 'Saltmarsh Mutual', initials: 'SM' });
    for (const { id, name, email, roles, isApprover } of PEOPLE) {
      await tx('users').insert({ id, name, email, password_hash: await hash(password) });
      await tx('memberships').insert({ org_id: ORG_ID, user_id: id, roles, is_approver: isApprover });
    }
  });
}
