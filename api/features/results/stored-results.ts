import type { SiteDetail } from '#contract/runs.ts';
import type { FootprintGrid } from '#engine/footprint/grid.ts';
import type { BandView, Bands } from '../../compute/bands.ts';

/** A site's score on its way into the table; the run hands it over. */
export interface StoredSite {
  siteNo: number;
  ref: string;
  tivMinor: number;
  reach: number;
  plain: number | null;
  plainMean: number | null;
  seaWind: number | null;
  direction: number | null;
  peakTime: Date | null;
  secondsAbove25: number | null;
  secondsAbove33: number | null;
  enhancedMean: number | null;
  p5: number | null;
  p50: number | null;
  p90: number | null;
  p95: number | null;
  p99: number | null;
  damagePlain: number | null;
  damageMean: number | null;
  damageP5: number | null;
  damageP95: number | null;
  groundUpPlainMinor: number | null;
  groundUpMeanMinor: number | null;
  grossPlainMinor: number | null;
  grossMeanMinor: number | null;
  grossP5Minor: number | null;
  grossP50Minor: number | null;
  grossP95Minor: number | null;
}

export type FootprintColumns = BandView;
export type FootprintBands = Bands;

export interface TrackResults {
  storedAt: Date;
  sites: Iterable<StoredSite>;
  groundUp: Float64Array;
  gross: Float64Array;
  /** Strongest gust at any site, per draw [m/s], and sites that reach each chosen gust, gust by gust. */
  peak: Float64Array;
  above: Float64Array;
  footprint: { grid: FootprintGrid; bands: Record<BandView, Bands> } | null;
}

/** A site with its score, as it comes out of the tables. */
export type SiteRecord = Omit<
  SiteDetail,
  | 'curve'
  | 'fetchM'
  | 'distanceToTrackKm'
  | 'sideOfTrack'
  | 'wavenumber'
  | 'terrainEffects'
  | 'ladder'
  | 'series'
  | 'notices'
  | 'chanceAbove'
> & { accountRef: string; policyRef: string; region: string };
