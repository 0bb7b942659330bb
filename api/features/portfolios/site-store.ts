import { copyInto, type CopyCell } from '../../db/copy.ts';
import type { Tx } from '../../transact.ts';
import type { SealedSite } from './intake/site.ts';

const COPIED = [
  'org_id',
  'edition_id',
  'site_no',
  'file_row',
  'site_ref',
  'label',
  'account_ref',
  'policy_ref',
  'town',
  'region',
  'country',
  'line_of_business',
  'point',
  'latitude',
  'longitude',
  'location_quality',
  'building_minor',
  'other_structures_minor',
  'contents_minor',
  'time_element_minor',
  'tiv_minor',
  'construction',
  'occupancy',
  'year_built',
  'storeys',
  'terrain',
  'roughness_m',
  'deductible_minor',
  'limit_minor',
  'state',
  'assumed',
] as const;

const cells = (orgId: string, editionId: string, site: SealedSite): CopyCell[] => [
  orgId,
  editionId,
  site.siteNo,
  site.fileRow,
  site.ref,
  site.label,
  site.accountRef,
  site.policyRef,
  site.town,
  site.region,
  site.country,
  site.lineOfBusiness,
  `SRID=4326;POINT(${site.longitude} ${site.latitude})`,
  site.latitude,
  site.longitude,
  site.locationQuality,
  site.buildingMinor,
  site.otherStructuresMinor,
  site.contentsMinor,
  site.timeElementMinor,
  site.tivMinor,
  site.construction,
  site.occupancy,
  site.yearBuilt,
  site.storeys,
  site.terrain,
  site.roughnessM,
  site.deductibleMinor,
  site.limitMinor,
  site.state,
  `{${site.assumed.join(',')}}`,
];

/** The sites of sealed editions. */
export class SiteStore {
  async add(tx: Tx, orgId: string, editionId: string, sites: readonly SealedSite[]): Promise<void> {
    await copyInto(
      tx,
      'sites',
      COPIED,
      sites.map((site) => cells(orgId, editionId, site)),
    );
  }
}
