import { expect, it } from 'vitest';
import { Problem } from '#contract/errors.ts';
import { Validation } from '#contract/validation.ts';
import { createTestApp } from '../helpers/app.ts';

const { signIn } = await createTestApp();

it('gives the published comparison to those who read results, whatever their organisation', async () => {
  const modeler = await signIn('modeler');
  const reply = await modeler.get('/validation').expect(200);
  const { observations, errors, settings } = Validation.parse(reply.body);
  expect(observations.length).toBeGreaterThan(50);
  expect(settings[0]!.key).toBe('default');
  expect(errors.filter(({ group, rows }) => group === 'all' && rows === 'peaks')).toHaveLength(4 * settings.length);
  const auditor = await signIn('auditor');
  expect((await auditor.get('/validation').expect(200)).body).toEqual(reply.body);
});

it('is not for account admins', async () => {
  const admin = await signIn('admin');
  expect(Problem.parse((await admin.get('/validation').expect(403)).body).code).toBe('not_allowed');
});
