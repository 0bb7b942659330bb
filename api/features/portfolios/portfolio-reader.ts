import type { Edition, Reconciliation } from '#contract/portfolios.ts';
import { toMinor, toMinorOrNull } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';
import type { SealedSite } from './intake/site.ts';

/** What a quote, a run slip and a result say about the edition they rest on. */
export interface EditionHeader {
  id: string;
  portfolioId: string;
  portfolioName: string;
  number: number;
  state: Edition['state'];
  currency: string;
  asAt: string | null;
  digest: string | null;
  reconciliation: Reconciliation | null;
  assumedTivMinor: number;
  assumedSites: number;
}

/** Coordinates of an edition's sites in site order: all that a quote needs. */
export interface SiteCoordinates {
  siteNo: Int32Array;
  latitude: Float64Array;
  longitude: Float64Array;
}

interface HeaderRow {
  id: string;
  portfolio_id: string;
  portfolio_name: string;
  number: number;
  state: Edition['state'];
  currency: string;
  as_at: string | null;
  digest: string | null;
  reconciliation: Reconciliation | null;
  assumed_tiv_minor: string;
  assumed_sites: number;
}

interface SiteRow {
  site_no: number;
  file_row: number;
  site_ref: string;
  label: string;
  account_ref: string;
  policy_ref: string;
  town: string;
  region: string;
  country: string;
  line_of_business: string;
  latitude: number;
  longitude: number;
  location_quality: string;
  building_minor: string;
  other_structures_minor: string;
  contents_minor: string;
  time_element_minor: string;
  tiv_minor: string;
  construction: string;
  occupancy: string;
  year_built: number | null;
  storeys: number | null;
  terrain: SealedSite['terrain'];
  roughness_m: number | null;
  deductible_minor: string;
  limit_minor: string | null;
  state: SealedSite['state'];
  assumed: string[];
}

const toSite = (row: SiteRow): SealedSite => ({
  siteNo: row.site_no,
  fileRow: row.file_row,
  ref: row.site_ref,
  label: row.label,
  accountRef: row.account_ref,
  policyRef: row.policy_ref,
  town: row.town,
  region: row.region,
  country: row.country,
  lineOfBusiness: row.line_of_business,
  latitude: row.latitude,
  longitude: row.longitude,
  locationQuality: row.location_quality,
  buildingMinor: toMinor(row.building_minor),
  otherStructuresMinor: toMinor(row.other_structures_minor),
  contentsMinor: toMinor(row.contents_minor),
  timeElementMinor: toMinor(row.time_element_minor),
  tivMinor: toMinor(row.tiv_minor),
  construction: row.construction,
  occupancy: row.occupancy,
  yearBuilt: row.year_built,
  storeys: row.storeys,
  terrain: row.terrain,
  roughnessM: row.roughness_m,
  deductibleMinor: toMinor(row.deductible_minor),
  limitMinor: toMinorOrNull(row.limit_minor),
  state: row.state,
  assumed: row.assumed,
});

/** What other features may know of portfolios; every amount is in hundredths of the edition's currency. */
export class PortfolioReader {
  async findEdition(tx: Tx, orgId: string, editionId: string): Promise<EditionHeader | null> {
    const row = await tx('editions')
      .join('portfolios', 'portfolios.id', 'editions.portfolio_id')
      .where({ 'editions.org_id': orgId, 'editions.id': editionId })
      .first<HeaderRow | undefined>(
        'editions.id',
        'editions.portfolio_id',
        'portfolios.name as portfolio_name',
        'editions.number',
        'editions.state',
        'editions.currency',
        tx.raw(`to_char(editions.as_at, 'YYYY-MM-DD') as as_at`),
        'editions.digest',
        'editions.reconciliation',
        'editions.assumed_tiv_minor',
        'editions.assumed_sites',
      );
    if (!row) return null;
    return {
      id: row.id,
      portfolioId: row.portfolio_id,
      portfolioName: row.portfolio_name,
      number: row.number,
      state: row.state,
      currency: row.currency,
      asAt: row.as_at,
      digest: row.digest,
      reconciliation: row.reconciliation,
      assumedTivMinor: toMinor(row.assumed_tiv_minor),
      assumedSites: row.assumed_sites,
    };
  }

  async coordinates(tx: Tx, orgId: string, editionId: string): Promise<SiteCoordinates> {
    const rows = await tx('sites')
      .where({ org_id: orgId, edition_id: editionId })
      .orderBy('site_no')
      .select<Pick<SiteRow, 'site_no' | 'latitude' | 'longitude'>[]>('site_no', 'latitude', 'longitude');
    return {
      siteNo: Int32Array.from(rows, ({ site_no: siteNo }) => siteNo),
      latitude: Float64Array.from(rows, ({ latitude }) => latitude),
      longitude: Float64Array.from(rows, ({ longitude }) => longitude),
    };
  }

  /** Sites after a number, in site order; call again from the last one until none come. */
  async sitesAfter(tx: Tx, orgId: string, editionId: string, after: number, limit: number): Promise<SealedSite[]> {
    const rows = await tx('sites')
      .where({ org_id: orgId, edition_id: editionId })
      .where('site_no', '>', after)
      .orderBy('site_no')
      .limit(limit)
      .select<SiteRow[]>();
    return rows.map(toSite);
  }

  /** All sites in site order, a batch at a time; no more than one batch is held. */
  async *siteBatches(tx: Tx, orgId: string, editionId: string, size: number): AsyncGenerator<SealedSite[]> {
    for (let after = 0; ;) {
      const batch = await this.sitesAfter(tx, orgId, editionId, after, size);
      if (batch.length === 0) return;
      yield batch;
      after = batch.at(-1)!.siteNo;
    }
  }
}
