import { randomUUID } from 'node:crypto';
import { hash } from '@node-rs/argon2';
import knex from 'knex';
import type { Role } from '#contract/roles.ts';
import type { Product } from './product.ts';

/** The demo organisation as seeded: its curves, calibration and balance serve all journeys. */
const ORG_ID = '5a175a17-0000-4000-8000-000000000001';

/** Somebody new at the demo organisation who has accepted nothing yet; gives the e-mail address to sign in with. */
export const newcomer = async (
  { databaseUrl, password }: Pick<Product, 'databaseUrl' | 'password'>,
  name: string,
  ...roles: Role[]
): Promise<string> => {
  const owner = knex({ client: 'pg', connection: databaseUrl });
  const id = randomUUID();
  const email = `${name.toLowerCase().replaceAll(/[^a-z]+/g, '.')}.${id.slice(0, 8)}@saltmarsh.example`;
  try {
    await owner.transaction(async (tx) => {
      await tx.raw(`select set_config('app.org_id', ?, true)`, [ORG_ID]);
      await tx('users').insert({ id, name, email, password_hash: await hash(password) });
      await tx('memberships').insert({ org_id: ORG_ID, user_id: id, roles, is_approver: false });
    });
  } finally {
    await owner.destroy();
  }
  return email;
};
