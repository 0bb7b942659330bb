import type { Calibration, CurveSet, DamageCurve } from '#contract/models.ts';
import type { Tx } from '../../transact.ts';
import type { CalibrationStore } from './calibration-store.ts';

/** Answers runs: which calibration, which curve? */
export class ModelsReader {
  constructor(private readonly calibrations: CalibrationStore) {}

  calibration(tx: Tx, orgId: string, id: string): Promise<Calibration | null> {
    return this.calibrations.find(tx, orgId, id);
  }

  async curveSet(tx: Tx, orgId: string, id: string): Promise<CurveSet | null> {
    const row = await tx('curve_sets')
      .where({ org_id: orgId, id })
      .first<(Omit<CurveSet, 'curve'> & { curve: DamageCurve }) | undefined>(
        'id',
        'name',
        'version',
        'state',
        'note',
        'curve',
        'digest',
      );
    return row ?? null;
  }
}
