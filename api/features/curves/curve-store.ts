import type { CurveSet, DamageCurve } from '#contract/models.ts';
import type { Tx } from '../../transact.ts';

type CurveSetRow = {
  id: string;
  org_id: string;
  name: string;
  version: number;
  state: CurveSet['state'];
  note: string;
  curve: DamageCurve;
  digest: string;
};

const toCurveSet = ({ id, name, version, state, note, curve, digest }: CurveSetRow): CurveSet => ({
  id,
  name,
  version,
  state,
  note,
  curve,
  digest,
});

/** Damage curves as data, with the gust they expect. */
export class CurveStore {
  async list(tx: Tx, orgId: string): Promise<CurveSet[]> {
    const rows = await tx<CurveSetRow>('curve_sets')
      .where({ org_id: orgId })
      .orderBy([{ column: 'name' }, { column: 'version', order: 'desc' }]);
    return rows.map(toCurveSet);
  }
}
