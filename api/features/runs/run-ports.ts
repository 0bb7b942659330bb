import type { Calibration, CurveSet } from '#contract/models.ts';
import type { Reconciliation } from '#contract/portfolios.ts';
import type { Track } from '#contract/scenarios.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import type { BandView, Bands } from '../../compute/bands.ts';
import type { FootprintGrid } from '#engine/footprint/grid.ts';
import type { Tx } from '../../transact.ts';
import type { ScoredSite } from './scored-sites.ts';

/** What a run rests on and says about the sealed edition. */
export interface EditionHeader {
  id: string;
  portfolioId: string;
  portfolioName: string;
  number: number;
  state: string;
  currency: string;
  asAt: string | null;
  digest: string | null;
  reconciliation: Reconciliation | null;
  assumedTivMinor: number;
  assumedSites: number;
}

/** A site as far as its score goes. */
export interface RunSite {
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

/** Places of an edition's sites in site order [deg]. */
export interface SitePlaces {
  latitude: Float64Array;
  longitude: Float64Array;
}

export interface Editions {
  findEdition(tx: Tx, orgId: string, editionId: string): Promise<EditionHeader | null>;
  coordinates(tx: Tx, orgId: string, editionId: string): Promise<SitePlaces>;
  sitesAfter(tx: Tx, orgId: string, editionId: string, after: number, limit: number): Promise<RunSite[]>;
}

/** A version of a scenario: what is computed, and what the run slip says about it. */
export interface RunTrack {
  id: string;
  name: string;
  number: number;
  digest: string;
  track: Track;
  fixes: TrackFix[];
  observations: ObservedVortices[];
  provenance: string;
  conversion: string;
  asOf: string | null;
  path: [number, number][];
}

export interface Tracks {
  versions(tx: Tx, orgId: string, ids: readonly string[]): Promise<RunTrack[]>;
}

export interface Models {
  calibration(tx: Tx, orgId: string, id: string): Promise<Calibration | null>;
  curveSet(tx: Tx, orgId: string, id: string): Promise<CurveSet | null>;
}

export interface StoredFootprint {
  grid: FootprintGrid;
  bands: Record<BandView, Bands>;
}

/** Everything a finished track leaves behind, beside its summary. */
export interface TrackResults {
  storedAt: Date;
  sites: Iterable<ScoredSite>;
  groundUp: Float64Array;
  gross: Float64Array;
  /** Strongest gust at any site, per draw [m/s], and sites that reach each chosen gust, gust by gust. */
  peak: Float64Array;
  above: Float64Array;
  footprint: StoredFootprint | null;
}

/** Where results go. */
export interface ResultSink {
  /** Makes room for results of that time; in a transaction of its own, because it locks the table for a moment. */
  prepare(tx: Tx, storedAt: Date): Promise<void>;
  save(tx: Tx, orgId: string, runScenarioId: string, results: TrackResults): Promise<void>;
}

export interface AuditTrail {
  record(
    tx: Tx,
    actor: { orgId: string; userId: string | null },
    action: string,
    object: string,
    details?: object,
  ): Promise<void>;
}

export interface Post {
  post(tx: Tx, orgId: string, letter: { to: string; subject: string; text: string }): Promise<void>;
}
