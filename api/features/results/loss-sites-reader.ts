import { toMinor, toMinorOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';
import type { Place } from './result-store.ts';

/** A site of a finished track as far as its score goes. */
export interface LossSite {
  siteNo: number;
  ref: string;
  latitude: number;
  longitude: number;
  /** Null at sea. */
  roughnessM: number | null;
  tivMinor: number;
  deductibleMinor: number;
  limitMinor: number | null;
}

interface Row {
  site_no: number;
  site_ref: string;
  latitude: number;
  longitude: number;
  roughness_m: number | null;
  tiv_minor: string;
  deductible_minor: string;
  limit_minor: string | null;
}

const OUT_OF_REACH = 1;

/** Answers studies: which sites of a finished track lose most? */
export class LossSitesReader {
  /** The largest gross, then the strongest gusts, within reach of the track; and how many sites are. */
  async largest(tx: Tx, orgId: string, place: Place, most: number): Promise<{ sites: LossSite[]; of: number }> {
    const within = () => this.within(tx, orgId, place);
    const rows = await within()
      .orderByRaw('result.gross_mean_minor desc nulls last, result.p50 desc nulls last, result.site_no')
      .limit(most)
      .select<Row[]>(...COLUMNS);
    const [{ count }] = (await within().count({ count: '*' })) as [{ count: string }];
    return { sites: rows.map(toSite), of: Number(count) };
  }

  /** One of them; null when there is no such site, or it is out of reach. */
  async one(tx: Tx, orgId: string, place: Place, siteNo: number): Promise<LossSite | null> {
    const row = await this.within(tx, orgId, place)
      .where('result.site_no', siteNo)
      .first<Row | undefined>(...COLUMNS);
    return row ? toSite(row) : null;
  }

  private within(tx: Tx, orgId: string, { runScenarioId, storedAt, editionId }: Place) {
    return tx('site_results as result')
      .join('sites as site', (join) =>
        join.on('site.site_no', 'result.site_no').andOnVal('site.org_id', orgId).andOnVal('site.edition_id', editionId),
      )
      .where({ 'result.org_id': orgId, 'result.run_scenario_id': runScenarioId, 'result.stored_at': storedAt })
      .whereNot('result.reach', OUT_OF_REACH);
  }
}

const COLUMNS = [
  'result.site_no',
  'result.site_ref',
  'site.latitude',
  'site.longitude',
  'site.roughness_m',
  'result.tiv_minor',
  'site.deductible_minor',
  'site.limit_minor',
];

const toSite = (row: Row): LossSite => ({
  siteNo: row.site_no,
  ref: row.site_ref,
  latitude: row.latitude,
  longitude: row.longitude,
  roughnessM: row.roughness_m,
  tivMinor: toMinor(row.tiv_minor),
  deductibleMinor: toMinor(row.deductible_minor),
  limitMinor: toMinorOrNull(row.limit_minor),
});
