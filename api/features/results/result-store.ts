import type { ResultPoints, SitesQuery } from '#contract/runs.ts';
import type { z } from 'zod';
import { copyInto, type CopyCell } from '../../db/copy.ts';
import { toInstantOrNull, toMinor, toMinorOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';
import type { FootprintBands, FootprintColumns, SiteRecord, StoredSite, TrackResults } from './stored-results.ts';

/** Where the results of a track are: its own id, and when they were stored, which names the month they lie in. */
export interface Place {
  runScenarioId: string;
  storedAt: Date;
  editionId: string;
}

const COLUMNS = [
  ['site_no', 'siteNo'],
  ['site_ref', 'ref'],
  ['tiv_minor', 'tivMinor'],
  ['reach', 'reach'],
  ['plain', 'plain'],
  ['plain_mean', 'plainMean'],
  ['sea_wind', 'seaWind'],
  ['direction', 'direction'],
  ['seconds_above_25', 'secondsAbove25'],
  ['seconds_above_33', 'secondsAbove33'],
  ['enhanced_mean', 'enhancedMean'],
  ['p5', 'p5'],
  ['p50', 'p50'],
  ['p90', 'p90'],
  ['p95', 'p95'],
  ['p99', 'p99'],
  ['damage_plain', 'damagePlain'],
  ['damage_mean', 'damageMean'],
  ['damage_p5', 'damageP5'],
  ['damage_p95', 'damageP95'],
  ['ground_up_plain_minor', 'groundUpPlainMinor'],
  ['ground_up_mean_minor', 'groundUpMeanMinor'],
  ['gross_plain_minor', 'grossPlainMinor'],
  ['gross_mean_minor', 'grossMeanMinor'],
  ['gross_p5_minor', 'grossP5Minor'],
  ['gross_p50_minor', 'grossP50Minor'],
  ['gross_p95_minor', 'grossP95Minor'],
] as const satisfies readonly (readonly [string, keyof StoredSite])[];
const HEAD = ['org_id', 'run_scenario_id', 'stored_at', 'peak_time'] as const;

const cellsOf = function* (
  orgId: string,
  runScenarioId: string,
  storedAt: string,
  sites: Iterable<StoredSite>,
): Generator<CopyCell[]> {
  for (const site of sites) {
    yield [
      ...[orgId, runScenarioId, storedAt, site.peakTime?.toISOString() ?? null],
      ...COLUMNS.map(([, field]) => site[field]),
    ];
  }
};

type Query = z.output<typeof SitesQuery>;

/** What the table is sorted by. Site numbers part equals, so that pages never overlap. */
const SORTS: Readonly<Record<Query['sort'], string>> = {
  ref: 'result.site_ref collate "C"',
  tiv: 'result.tiv_minor',
  plain: 'result.plain',
  p50: 'result.p50',
  p95: 'result.p95',
  damage: 'result.damage_mean',
  groundUp: 'result.ground_up_mean_minor',
  gross: 'result.gross_mean_minor',
};

interface SiteRow {
  site_no: number;
  site_ref: string;
  tiv_minor: string;
  reach: number;
  plain: number | null;
  plain_mean: number | null;
  sea_wind: number | null;
  direction: number | null;
  peak_time: Date | null;
  seconds_above_25: number | null;
  seconds_above_33: number | null;
  enhanced_mean: number | null;
  p5: number | null;
  p50: number | null;
  p90: number | null;
  p95: number | null;
  p99: number | null;
  damage_plain: number | null;
  damage_mean: number | null;
  damage_p5: number | null;
  damage_p95: number | null;
  ground_up_plain_minor: string | null;
  ground_up_mean_minor: string | null;
  gross_plain_minor: string | null;
  gross_mean_minor: string | null;
  gross_p5_minor: string | null;
  gross_p50_minor: string | null;
  gross_p95_minor: string | null;
  label: string;
  account_ref: string;
  policy_ref: string;
  town: string;
  region: string;
  latitude: number;
  longitude: number;
  state: 'ready' | 'notes';
  location_quality: SiteRecord['locationQuality'];
  assumed: string[];
  construction: string;
  occupancy: string;
  year_built: number | null;
  storeys: number | null;
  terrain: string;
  roughness_m: number | null;
  deductible_minor: string;
  limit_minor: string | null;
}

const REACH = ['scored', 'out_of_reach', 'below_floor'] as const;

const toRecord = (row: SiteRow): SiteRecord => ({
  siteNo: row.site_no,
  siteRef: row.site_ref,
  label: row.label,
  accountRef: row.account_ref,
  policyRef: row.policy_ref,
  town: row.town,
  region: row.region,
  latitude: row.latitude,
  longitude: row.longitude,
  state: row.state,
  locationQuality: row.location_quality,
  assumed: row.assumed,
  tivMinor: toMinor(row.tiv_minor),
  reach: REACH[row.reach]!,
  plainMs: row.plain,
  enhancedMeanMs: row.enhanced_mean,
  p5Ms: row.p5,
  p50Ms: row.p50,
  p90Ms: row.p90,
  p95Ms: row.p95,
  p99Ms: row.p99,
  peakTime: toInstantOrNull(row.peak_time),
  directionDeg: row.direction,
  damagePlain: row.damage_plain,
  damageMean: row.damage_mean,
  damageP5: row.damage_p5,
  damageP95: row.damage_p95,
  groundUpPlainMinor: toMinorOrNull(row.ground_up_plain_minor),
  groundUpMeanMinor: toMinorOrNull(row.ground_up_mean_minor),
  grossPlainMinor: toMinorOrNull(row.gross_plain_minor),
  grossMeanMinor: toMinorOrNull(row.gross_mean_minor),
  grossP5Minor: toMinorOrNull(row.gross_p5_minor),
  grossP50Minor: toMinorOrNull(row.gross_p50_minor),
  grossP95Minor: toMinorOrNull(row.gross_p95_minor),
  construction: row.construction,
  occupancy: row.occupancy,
  yearBuilt: row.year_built,
  storeys: row.storeys,
  terrain: row.terrain,
  roughnessM: row.roughness_m,
  deductibleMinor: toMinor(row.deductible_minor),
  limitMinor: toMinorOrNull(row.limit_minor),
  meanMs: row.plain_mean,
  seaWindMs: row.sea_wind,
  secondsAbove25: row.seconds_above_25,
  secondsAbove33: row.seconds_above_33,
});

const SITE_FIELDS = [
  'site.label',
  'site.account_ref',
  'site.policy_ref',
  'site.town',
  'site.region',
  'site.latitude',
  'site.longitude',
  'site.state',
  'site.location_quality',
  'site.assumed',
  'site.construction',
  'site.occupancy',
  'site.year_built',
  'site.storeys',
  'site.terrain',
  'site.roughness_m',
  'site.deductible_minor',
  'site.limit_minor',
];

export interface SitesFound {
  total: number;
  totals: { tivMinor: number; groundUpMeanMinor: number; grossMeanMinor: number; grossPlainMinor: number };
  largestGustMs: number | null;
}

const likeWords = (search: string) => `%${search.replace(/[\\%_]/g, '\\$&')}%`;

/** Results of tracks: written once, never changed, read in many orders. */
export class ResultStore {
  async prepare(tx: Tx, storedAt: Date): Promise<void> {
    await tx.raw('select open_site_results_month(?)', [storedAt]);
  }

  async save(tx: Tx, orgId: string, runScenarioId: string, results: TrackResults): Promise<void> {
    const { storedAt, sites, groundUp, gross, peak, above, footprint } = results;
    await copyInto(
      tx,
      'site_results',
      [...HEAD, ...COLUMNS.map(([column]) => column)],
      cellsOf(orgId, runScenarioId, storedAt.toISOString(), sites),
    );
    await tx('event_results').insert({
      org_id: orgId,
      run_scenario_id: runScenarioId,
      ground_up: [...groundUp],
      gross: [...gross],
      strongest: [...peak],
      sites_above: [...above],
    });
    if (!footprint) return;
    const { plain, p50, p90, difference } = footprint.bands;
    await tx('footprints').insert({
      org_id: orgId,
      run_scenario_id: runScenarioId,
      grid: JSON.stringify(gridText(footprint.grid)),
      plain: JSON.stringify(plain),
      p50: JSON.stringify(p50),
      p90: JSON.stringify(p90),
      difference: JSON.stringify(difference),
    });
  }

  /** A page of sites in the order asked for. */
  async page(tx: Tx, orgId: string, place: Place, query: Query): Promise<SiteRecord[]> {
    const { sort, direction, offset, limit } = query;
    const numbers = this.matching(tx, orgId, place, query)
      .orderByRaw(`${SORTS[sort]} ${direction} nulls last, result.site_no`)
      .offset(offset)
      .limit(limit)
      .select('result.site_no');
    const rows = await this.wide(tx, orgId, place)
      .whereIn('result.site_no', numbers)
      .orderByRaw(`${SORTS[sort]} ${direction} nulls last, result.site_no`);
    return rows.map(toRecord);
  }

  /** How many sites match, and their sums. */
  async totals(tx: Tx, orgId: string, place: Place, query: Pick<Query, 'search' | 'minGustMs'>): Promise<SitesFound> {
    const row = await this.matching(tx, orgId, place, query).first<Record<string, string | number | null>>(
      tx.raw(`count(*) as total, coalesce(sum(result.tiv_minor), 0) as tiv,
        coalesce(sum(result.ground_up_mean_minor), 0) as ground_up_mean, coalesce(sum(result.gross_mean_minor), 0) as gross_mean,
        coalesce(sum(result.gross_plain_minor), 0) as gross_plain, max(greatest(result.plain, result.p50)) as largest`),
    );
    return {
      total: Number(row.total),
      totals: {
        tivMinor: toMinor(row.tiv!),
        groundUpMeanMinor: toMinor(row.ground_up_mean!),
        grossMeanMinor: toMinor(row.gross_mean!),
        grossPlainMinor: toMinor(row.gross_plain!),
      },
      largestGustMs: row.largest === null ? null : Number(row.largest),
    };
  }

  async site(tx: Tx, orgId: string, place: Place, siteNo: number): Promise<SiteRecord | null> {
    const row = await this.wide(tx, orgId, place).where('result.site_no', siteNo).first();
    return row ? toRecord(row) : null;
  }

  /** Every site in the edition's order, read as it is written out. */
  async *all(tx: Tx, orgId: string, place: Place): AsyncGenerator<SiteRecord> {
    const rows = this.wide(tx, orgId, place).orderBy('result.site_no').stream({ batchSize: 1000, highWaterMark: 1000 });
    for await (const row of rows as AsyncIterable<SiteRow>) yield toRecord(row);
  }

  /** Column by column, put together by the database: a hundred thousand rows as objects would take seconds. */
  async points(tx: Tx, orgId: string, place: Place): Promise<ResultPoints> {
    const sites = this.joined(tx, orgId, place)
      .orderBy('result.site_no')
      .select(
        'result.site_no',
        'result.site_ref',
        'site.longitude',
        'site.latitude',
        'result.tiv_minor',
        'site.state',
        'result.plain',
        'result.p5',
        'result.p95',
      );
    const columns = await tx.from(sites.as('point')).first<ResultPoints>(
      tx.raw(`json_agg(site_no) as "siteNo", json_agg(site_ref) as ref, json_agg(longitude) as longitude,
          json_agg(latitude) as latitude, json_agg(tiv_minor) as "tivMinor", json_agg(state) as state,
          json_agg(plain) as "plainMs", json_agg(p5) as "p5Ms", json_agg(p95) as "p95Ms"`),
    );
    return columns;
  }

  /** Null when the storm never reaches the lowest band. */
  async footprint(
    tx: Tx,
    orgId: string,
    runScenarioId: string,
    view: FootprintColumns,
  ): Promise<FootprintBands | null> {
    const row = await tx('footprints')
      .where({ org_id: orgId, run_scenario_id: runScenarioId })
      .first<{ bands: FootprintBands } | undefined>({ bands: view });
    return row?.bands ?? null;
  }

  private matching(tx: Tx, orgId: string, place: Place, { search, minGustMs }: Pick<Query, 'search' | 'minGustMs'>) {
    return this.results(tx, orgId, place).modify((query) => {
      if (minGustMs !== undefined) {
        void query.whereRaw('greatest(result.plain, result.p50) >= ?', [minGustMs]);
      }
      if (search) {
        const like = likeWords(search);
        void query.whereRaw(
          `exists (select from sites as site where site.edition_id = ? and site.site_no = result.site_no
            and (site.site_ref ilike ? or site.label ilike ? or site.town ilike ?))`,
          [place.editionId, like, like, like],
        );
      }
    });
  }

  private wide(tx: Tx, orgId: string, place: Place) {
    return this.joined(tx, orgId, place).select<SiteRow[]>('result.*', ...SITE_FIELDS);
  }

  private joined(tx: Tx, orgId: string, place: Place) {
    return this.results(tx, orgId, place).join('sites as site', (join) => {
      join.on('site.site_no', 'result.site_no').andOnVal('site.edition_id', place.editionId);
    });
  }

  private results(tx: Tx, orgId: string, { runScenarioId, storedAt }: Place) {
    return tx('site_results as result').where({
      'result.org_id': orgId,
      'result.run_scenario_id': runScenarioId,
      'result.stored_at': storedAt,
    });
  }
}

const CENTI = 100;
const trimmed = (values: Float64Array) =>
  Array.from(values, (value) => (Number.isNaN(value) ? null : Math.round(value * CENTI) / CENTI));

const gridText = (grid: NonNullable<TrackResults['footprint']>['grid']) => ({
  ...grid,
  plain: trimmed(grid.plain),
  p50: trimmed(grid.p50),
  p90: trimmed(grid.p90),
});
