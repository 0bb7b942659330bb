import type { Calibration, CalibrationSettings } from '#contract/models.ts';
import { toInstantOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';

type CalibrationRow = {
  id: string;
  code: string;
  version: number;
  state: Calibration['state'];
  note: string;
  settings: CalibrationSettings;
  curve_set_id: string;
  signed_by_name: string | null;
  signed_at: Date | null;
  digest: string;
};

const toCalibration = (row: CalibrationRow): Calibration => ({
  id: row.id,
  code: row.code,
  version: row.version,
  state: row.state,
  note: row.note,
  settings: row.settings,
  curveSetId: row.curve_set_id,
  signedBy: row.signed_by_name,
  signedAt: toInstantOrNull(row.signed_at),
  digest: row.digest,
});

/** Signed sets of hazard settings, each paired with a curve set. */
export class CalibrationStore {
  async list(tx: Tx, orgId: string): Promise<Calibration[]> {
    const rows = await this.select(tx, orgId).orderBy([
      { column: 'calibrations.code' },
      { column: 'calibrations.version', order: 'desc' },
    ]);
    return rows.map(toCalibration);
  }

  async find(tx: Tx, orgId: string, id: string): Promise<Calibration | null> {
    const row = await this.select(tx, orgId).where('calibrations.id', id).first();
    return row ? toCalibration(row) : null;
  }

  private select(tx: Tx, orgId: string) {
    return tx('calibrations')
      .leftJoin('users', 'users.id', 'calibrations.signed_by')
      .where('calibrations.org_id', orgId)
      .select<CalibrationRow[]>(
        'calibrations.id',
        'calibrations.code',
        'calibrations.version',
        'calibrations.state',
        'calibrations.note',
        'calibrations.settings',
        'calibrations.curve_set_id',
        'users.name as signed_by_name',
        'calibrations.signed_at',
        'calibrations.digest',
      );
  }
}
