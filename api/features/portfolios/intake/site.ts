import { TERRAIN_ROUGHNESS_M } from '#contract/portfolios.ts';
import { readSite, type Correction, type FileFacts, type FileRow, type TerrainClass } from './file-row.ts';
import { hasCorrection } from './file-row.ts';
import type { JudgedRow } from './judge.ts';
import { storeysOf, yearBuiltOf } from './rules/building.ts';

/** A site as it is sealed: what a run scores. */
export interface SealedSite {
  siteNo: number;
  fileRow: number;
  ref: string;
  label: string;
  accountRef: string;
  policyRef: string;
  town: string;
  region: string;
  country: string;
  lineOfBusiness: string;
  latitude: number;
  longitude: number;
  locationQuality: string;
  buildingMinor: number;
  otherStructuresMinor: number;
  contentsMinor: number;
  timeElementMinor: number;
  tivMinor: number;
  construction: string;
  occupancy: string;
  yearBuilt: number | null;
  storeys: number | null;
  terrain: TerrainClass;
  /** Null at sea. */
  roughnessM: number | null;
  deductibleMinor: number;
  limitMinor: number | null;
  state: 'ready' | 'notes';
  assumed: string[];
}

const counted = (amount: { kind: string; minor?: number }) => (amount.kind === 'amount' ? (amount.minor ?? 0) : 0);
const text = (cell: string | undefined) => cell?.trim() ?? '';

/** The site a scored row becomes. */
export function sealedSite(
  siteNo: number,
  row: FileRow,
  corrections: readonly Correction[],
  facts: FileFacts,
  judged: Pick<JudgedRow, 'state' | 'latitude' | 'longitude' | 'quality' | 'assumed'>,
): SealedSite {
  const site = readSite(row, facts, corrections);
  const terrain = site.terrain ?? 'unknown';
  return {
    siteNo,
    fileRow: row.row,
    ref: site.ref,
    label: text(row.received.site_label),
    accountRef: text(row.received.account_ref),
    policyRef: text(row.received.policy_ref),
    town: text(row.received.town),
    region: text(row.received.region),
    country: site.country?.code ?? text(row.received.country),
    lineOfBusiness: text(row.received.line_of_business),
    latitude: judged.latitude!,
    longitude: judged.longitude!,
    locationQuality: judged.quality,
    buildingMinor: counted(site.values.building_value),
    otherStructuresMinor: counted(site.values.other_structures_value),
    contentsMinor: counted(site.values.contents_value),
    timeElementMinor: counted(site.values.time_element_value),
    tivMinor: site.tivMinor,
    construction: site.construction ?? 'unknown',
    occupancy: site.occupancy ?? 'unknown',
    yearBuilt: yearBuiltOf(site, facts.year),
    storeys: storeysOf(site),
    terrain,
    roughnessM: hasCorrection(site, 'keep_all', 'PLACE-07') ? null : TERRAIN_ROUGHNESS_M[terrain],
    deductibleMinor: site.deductible.kind === 'applied' ? site.deductible.minor : 0,
    limitMinor: site.limit.minor,
    state: judged.state === 'ready' ? 'ready' : 'notes',
    assumed: judged.assumed,
  };
}

/** One line of the canonical text whose digest seals an edition: every column in a fixed order. */
export const canonicalSite = (site: SealedSite): string =>
  `${JSON.stringify([
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
    site.assumed,
  ])}\n`;
