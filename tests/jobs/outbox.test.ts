import { randomUUID } from 'node:crypto';
import { beforeEach, describe, expect, it } from 'vitest';
import { deliverLetter, Outbox } from '../../api/jobs/outbox.ts';
import { testDatabase } from '../helpers/database.ts';
import { FakeClock, FakeMail } from '../helpers/fakes.ts';
import { addOrganisations, DUNE, REEF } from '../helpers/people.ts';

const { owner, superUser, transact } = await testDatabase();
await addOrganisations(owner, DUNE, REEF);
const clock = new FakeClock();
let mail = new FakeMail();
let asked: object[] = [];
const jobs = { enqueue: async (_tx: unknown, _name: string, data: object) => void asked.push(data) };
const outbox = new Outbox(jobs, clock, { next: () => randomUUID() });
const post = () =>
  transact(DUNE.id, (tx) => outbox.post(tx, DUNE.id, { to: 'x@dune.example', subject: 'Run 7', text: 'Done.' }));
const deliver = (data: unknown) => deliverLetter(transact, mail, clock)({ data });
const row = () => superUser('outbox').first();

beforeEach(async () => {
  mail = new FakeMail();
  asked = [];
  await superUser('outbox').delete();
});

describe('a letter in the outbox', () => {
  it('is delivered once, however often its job runs', async () => {
    await post();
    await deliver(asked[0]);
    await deliver(asked[0]);
    expect(mail.sent).toMatchObject([{ to: 'x@dune.example', subject: 'Run 7', text: 'Done.' }]);
    expect(await row()).toMatchObject({ attempts: 1, last_error: null, delivered_at: clock.now() });
  });
  it('is delivered once by two workers at the same time', async () => {
    await post();
    await Promise.all([deliver(asked[0]), deliver(asked[0])]);
    expect(mail.sent).toHaveLength(1);
  });
  it('stays until the mail server answers; the job fails so that it comes again', async () => {
    await post();
    mail.failure = new Error('no answer');
    await expect(deliver(asked[0])).rejects.toThrow('no answer');
    expect(await row()).toMatchObject({ attempts: 1, last_error: 'no answer', delivered_at: null });
    mail.failure = null;
    await deliver(asked[0]);
    expect(mail.sent).toHaveLength(1);
  });
  it('isn’t there when the fact it announces isn’t', async () => {
    await expect(
      transact(DUNE.id, async (tx) => {
        await outbox.post(tx, DUNE.id, { to: 'x', subject: 'x', text: 'x' });
        throw new Error('undone');
      }),
    ).rejects.toThrow('undone');
    expect(await row()).toBeUndefined();
  });
  it('isn’t found under another organisation', async () => {
    await post();
    await deliver({ ...asked[0], orgId: REEF.id });
    expect(mail.sent).toEqual([]);
  });
});
