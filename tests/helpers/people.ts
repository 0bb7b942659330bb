import { hash } from '@node-rs/argon2';
import type { Knex } from 'knex';
import type { Role } from '#contract/roles.ts';

export const PASSWORD = 'high water in march';

export interface TestPerson {
  id: string;
  name: string;
  email: string;
  role: Role;
}
export interface TestOrganisation {
  id: string;
  name: string;
  people: Record<Role, TestPerson>;
}

const ROLES: Role[] = ['underwriter', 'modeler', 'admin', 'auditor'];
const passwordHash = hash(PASSWORD, { memoryCost: 1024, timeCost: 1 });

const idOf = (org: number, person: number) =>
  `00000000-0000-4000-8000-${String(org).padStart(6, '0')}${String(person).padStart(6, '0')}`;

/** An organisation with one person for each role; the modeler is an approver. */
export const organisation = (no: number, name: string): TestOrganisation => {
  const people = ROLES.map((role, at): [Role, TestPerson] => [
    role,
    { id: idOf(no, at + 1), name: `${role} of ${name}`, email: `${role}@org${no}.example`, role },
  ]);
  return { id: idOf(no, 0), name, people: Object.fromEntries(people) as Record<Role, TestPerson> };
};

export const DUNE = organisation(1, 'Dune Mutual');
export const REEF = organisation(2, 'Reef Assurance');

/** Stores organisations as the owner role; nobody has accepted anything yet. */
export const addOrganisations = async (owner: Knex, ...organisations: TestOrganisation[]): Promise<void> => {
  for (const org of organisations) {
    await owner.transaction(async (tx) => {
      await tx.raw(`select set_config('app.org_id', ?, true)`, [org.id]);
      await tx('organisations').insert({ id: org.id, name: org.name, initials: org.name.slice(0, 2).toUpperCase() });
      for (const { id, name, email, role } of Object.values(org.people)) {
        await tx('users').insert({ id, name, email, password_hash: await passwordHash });
        await tx('memberships').insert({ org_id: org.id, user_id: id, roles: [role], is_approver: role === 'modeler' });
      }
    });
  }
};
