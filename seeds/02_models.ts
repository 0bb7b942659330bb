import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import type { CalibrationSettings, DamageCurve } from '#contract/models.ts';

const ORG_ID = '5a175a17-0000-4000-8000-000000000001';
/** Wrote the calibration and has left since: nobody signs what they wrote. */
const AUTHOR_ID = '5a175a17-0000-4000-8000-000000000109';
const APPROVER_ID = '5a175a17-0000-4000-8000-000000000102';
const CURVE_SET_ID = '5a175a17-0000-4000-8000-000000000201';
const CALIBRATION_ID = '5a175a17-0000-4000-8000-000000000301';

const MS_PER_KNOT = 1852 / 3600;
const GUST_OVER_ONE_MINUTE = 1.25;

const CURVE: DamageCurve = {
  kind: 'emanuel',
  code: 'EM50-150',
  name: 'Cubic curve on local gusts',
  thresholdMs: GUST_OVER_ONE_MINUTE * 50 * MS_PER_KNOT,
  halfMs: GUST_OVER_ONE_MINUTE * 150 * MS_PER_KNOT,
  gustBasis: { averagingS: 3, heightM: 10, exposure: 'as found' },
  fittedOn: 'plain',
  source:
    'Emanuel (2011), Weather, Climate, and Society 3, 261–268; constants from memory; thresholds × 1.25 for 3-s gusts',
  version: '1',
};
const SETTINGS: CalibrationSettings = {
  intensity: 'pressure',
  anchor: 'auto',
  ringWidthFraction: 0.35,
  eyeVorticityRatio: 0.2,
};
const digest = (content: unknown) => createHash('sha256').update(JSON.stringify(content)).digest('hex');

/** A damage curve and a signed calibration, both marked as demonstration values. */
export async function seed(knex: Knex): Promise<void> {
  await knex.transaction(async (tx) => {
    await tx.raw(`select set_config('app.org_id', ?, true)`, [ORG_ID]);
    if (await tx('curve_sets').where({ id: CURVE_SET_ID }).first('id')) return;
    const at = new Date('2026-11-30T09:00:00Z');
    await tx('users').insert({
      id: AUTHOR_ID,
      name: 'Signe Ravn',
      email: 'signe.ravn@saltmarsh.example',
      // Not the hash of any password: this account can't sign in.
      password_hash: '!',
    });
    await tx('memberships').insert({ org_id: ORG_ID, user_id: AUTHOR_ID, roles: ['modeler'], ended_at: at });
    await tx('curve_sets').insert({
      id: CURVE_SET_ID,
      org_id: ORG_ID,
      name: 'Demonstration curve',
      version: 1,
      state: 'approved',
      note: 'Demonstration values: one published curve for every building. Calibrate by class before relying on any loss.',
      curve: JSON.stringify(CURVE),
      digest: digest(CURVE),
      created_at: at,
    });
    await tx('calibrations').insert({
      id: CALIBRATION_ID,
      org_id: ORG_ID,
      code: 'CAL-1',
      version: 1,
      state: 'signed',
      note: 'Demonstration values: defaults of the published relations, not fitted to observations of this book.',
      settings: JSON.stringify(SETTINGS),
      curve_set_id: CURVE_SET_ID,
      author_id: AUTHOR_ID,
      signed_by: APPROVER_ID,
      signed_at: at,
      digest: digest([SETTINGS, digest(CURVE)]),
      created_at: at,
    });
  });
}
