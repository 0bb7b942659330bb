import { expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import { Calibration, listCalibrations } from '#contract/models.ts';
import { createTestApp } from '../helpers/app.ts';
import { addRunFixture } from '../helpers/run-fixture.ts';

const { database, signIn } = await createTestApp();
await addRunFixture(database, { sites: 1, near: 1 });
const modeler = await signIn('modeler');
const listed = async () => listCalibrations.response.parse((await modeler.get('/calibrations').expect(200)).body).items;
const [base] = await listed();
const draft = {
  basedOnId: base!.id,
  ringWidthFraction: 0.28,
  eyeVorticityRatio: 0.1,
  note: 'Thinner, as radar showed',
};

it('drafts the next version of the same code with another ring, unsigned, by its author, and notes it', async () => {
  const reply = Calibration.parse((await modeler.post('/calibrations', draft).expect(201)).body);
  expect(reply).toMatchObject({
    ...{ code: base!.code, version: base!.version + 1, state: 'draft', signedBy: null, signedAt: null },
    ...{ note: 'Thinner, as radar showed', curveSetId: base!.curveSetId },
    settings: { ...base!.settings, ringWidthFraction: 0.28, eyeVorticityRatio: 0.1 },
  });
  expect(reply.digest).not.toBe(base!.digest);
  const items = await listed();
  expect(items.find(({ id }) => id === reply.id)).toEqual(reply);
  expect(items.find(({ id }) => id === base!.id)).toEqual(base);
  const row = await database.superUser('calibrations').where({ id: reply.id }).first();
  expect(row.author_id).toBe(modeler.session.person.id);
  const [entry] = await database.superUser('audit_entries').where({ action: 'calibration.drafted' });
  expect(entry).toMatchObject({
    object: `calibration ${reply.id}`,
    details: { version: reply.version, basedOn: base!.version, ringWidthFraction: 0.28 },
  });
});

it('gives each of two drafts sent at the same moment a version of its own, or says that one was faster', async () => {
  const replies = await Promise.all([1, 2].map(() => modeler.post('/calibrations', draft)));
  const made = replies.filter(({ status }) => status === 201).map(({ body }) => Calibration.parse(body).version);
  expect(made.length).toBeGreaterThan(0);
  expect(new Set(made).size).toBe(made.length);
  for (const { status, body } of replies.filter(({ status }) => status !== 201))
    expect([status, Problem.parse(body).code]).toEqual([409, 'conflict']);
});

it('is for modelers, wants a reason, and names a ring out of range', async () => {
  for (const role of ['underwriter', 'auditor', 'admin'] as const)
    await (await signIn(role)).post('/calibrations', draft).expect(403);
  const bad = await modeler
    .post('/calibrations', { ...draft, ringWidthFraction: 0.6, eyeVorticityRatio: -1, note: '  ' })
    .expect(422);
  expect(Problem.parse(bad.body).faults?.map(({ message }) => message)).toEqual([
    'The ring width over the radius of maximum wind is 0.6. Give 0.1 to 0.45.',
    'The eye’s vorticity over the average is -1. Give 0 to 0.9.',
    'Say why, in a few words.',
  ]);
});
