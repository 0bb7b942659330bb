import { beforeAll, describe, expect, it } from 'vitest';
import { listCalibrations, listCurveSets } from '#contract/models.ts';
import { damageCurveFaults, REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { CalibrationStore } from '../../api/features/calibrations/calibration-store.ts';
import { ModelsReader } from '../../api/features/calibrations/models-reader.ts';
import { seed as seedPeople } from '../../seeds/01_people.ts';
import { seed as seedModels } from '../../seeds/02_models.ts';
import { seed as seedMoney } from '../../seeds/03_money.ts';
import { createTestApp } from '../helpers/app.ts';
import { organisation, REEF } from '../helpers/people.ts';

const { database, signIn } = await createTestApp();
const PASSWORD = 'high water in march';
const demo = organisation(3, 'Demo');
const SALTMARSH = {
  ...demo,
  id: '5a175a17-0000-4000-8000-000000000001',
  people: {
    ...demo.people,
    modeler: { ...demo.people.modeler, email: 'teodor.brask@saltmarsh.example' },
    admin: { ...demo.people.admin, email: 'oda.renn@saltmarsh.example' },
  },
};
const seedAll = async () => {
  for (const seed of [seedPeople, seedModels, seedMoney]) await seed(database.owner);
};

beforeAll(async () => {
  process.env.DEMO_PASSWORD = PASSWORD;
  await seedAll();
});

describe('the demonstration’s models', () => {
  it('are a curve marked as demonstration values, equal to the engine’s reference', async () => {
    const browser = await signIn('modeler', { org: SALTMARSH });
    const { items } = listCurveSets.response.parse((await browser.get(listCurveSets.path).expect(200)).body);
    expect(items).toMatchObject([{ name: 'Demonstration curve', state: 'approved' }]);
    const { curve, note } = items[0]!;
    expect(note).toContain('Demonstration values');
    expect(damageCurveFaults(curve)).toEqual([]);
    const { code, kind, thresholdMs, halfMs, gustBasis, fittedOn } = REFERENCE_CURVE;
    expect(curve).toMatchObject({ code, kind, thresholdMs, halfMs, gustBasis, fittedOn });
  });

  it('and a calibration paired with it, signed by somebody other than its author', async () => {
    const browser = await signIn('modeler', { org: SALTMARSH });
    const { items } = listCalibrations.response.parse((await browser.get(listCalibrations.path).expect(200)).body);
    expect(items).toMatchObject([
      {
        ...{ code: 'CAL-1', version: 1, state: 'signed', signedBy: 'Teodor Brask' },
        settings: { intensity: 'pressure', anchor: 'auto', ringWidthFraction: 0.35, eyeVorticityRatio: 0.2 },
      },
    ]);
    const [row] = await database.superUser('calibrations').where({ id: items[0]!.id });
    expect((row as { author_id: string; signed_by: string }).author_id).not.toBe(
      (row as { signed_by: string }).signed_by,
    );
  });

  it('can’t be signed by their author, whatever wrote the row', () =>
    expect(
      database.superUser('calibrations').update({ author_id: database.superUser.ref('signed_by') }),
    ).rejects.toThrow('calibrations_four_eyes'));

  it('are read for runs, by their own organisation only', async () => {
    const reader = new ModelsReader(new CalibrationStore());
    const [row] = await database.superUser('calibrations').select('id', 'curve_set_id');
    const { id, curve_set_id: curveSetId } = row as { id: string; curve_set_id: string };
    const found = (orgId: string) =>
      database.transact(orgId, async (tx) => [
        await reader.calibration(tx, orgId, id),
        await reader.curveSet(tx, orgId, curveSetId),
      ]);
    expect(await found(SALTMARSH.id)).toMatchObject([{ code: 'CAL-1' }, { name: 'Demonstration curve' }]);
    expect(await found(REEF.id)).toEqual([null, null]);
  });
});

it('seeds a starting balance of 500.00 once, however often it runs', async () => {
  await seedAll();
  const browser = await signIn('admin', { org: SALTMARSH });
  expect((await browser.get('/billing/balance').expect(200)).body).toMatchObject({
    freeMinor: 50_000,
    currency: 'USD',
  });
  const [{ sum }] = (await database.superUser('ledger_entries').sum('amount_minor as sum')) as [{ sum: string }];
  expect(Number(sum)).toBe(0);
});
