import type { Calibration, CalibrationSettings } from '#contract/models.ts';
import { toInstantOrNull } from '../../db/mapping.ts';
import { AppError } from '../../errors.ts';
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

const UNIQUE_VIOLATION = '23505';

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

  /** Highest version of a code. */
  async lastVersion(tx: Tx, orgId: string, code: string): Promise<number> {
    const row = await tx('calibrations')
      .where({ org_id: orgId, code })
      .max<{ last: number | null } | undefined>('version as last')
      .first();
    return row?.last ?? 0;
  }

  async curveDigest(tx: Tx, orgId: string, curveSetId: string): Promise<string> {
    const row = await tx('curve_sets').where({ org_id: orgId, id: curveSetId }).first<{ digest: string }>('digest');
    return row.digest;
  }

  async insert(
    tx: Tx,
    orgId: string,
    { id, code, version, state, note, settings, curveSetId, digest }: Calibration,
    { authorId, at }: { authorId: string; at: Date },
  ): Promise<void> {
    try {
      await tx('calibrations').insert({
        ...{ id, org_id: orgId, code, version, state, note, settings: JSON.stringify(settings) },
        ...{ curve_set_id: curveSetId, author_id: authorId, digest, created_at: at },
      });
    } catch (error) {
      if ((error as { code?: unknown }).code !== UNIQUE_VIOLATION) throw error;
      throw new AppError(
        'conflict',
        `Someone drafted a version of ${code} a moment ago. Look at it, then send yours.`,
        {
          cause: error,
        },
      );
    }
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
