import type { Notice } from '#contract/common.ts';
import type { Calibration, CurveSet, DamageCurve } from '#contract/models.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import type { ChainOptions } from '#engine/track/options.ts';
import type { Tx } from '../../transact.ts';

/** A version of a scenario as a study needs it. */
export interface StudyTrack {
  scenarioId: string;
  name: string;
  number: number;
  fixes: TrackFix[];
  observations: ObservedVortices[];
  /** When the track is an advisory: its issue time. */
  asOf: string | null;
}

export interface StudyTracks {
  /** The version with that number, the latest without one; null when the scenario or the version isn't there. */
  version(tx: Tx, orgId: string, scenarioId: string, number?: number): Promise<StudyTrack | null>;
}

/** A site as far as its score goes. */
export interface StudySite {
  ref: string;
  latitude: number;
  longitude: number;
  /** Null at sea. */
  roughnessM: number | null;
  tivMinor: number;
  deductibleMinor: number;
  limitMinor: number | null;
}

export interface LargestSites {
  sites: StudySite[];
  /** Sites that are ready to be scored, within reach or not. */
  of: number;
  /** “Lodging, edition 3”. */
  edition: string;
  currency: string;
}

export interface StudyEditions {
  /** The largest values among the sites ready to be scored that pass the test; null when the edition isn't there. */
  largestSites(
    tx: Tx,
    orgId: string,
    editionId: string,
    most: number,
    isWithinReach: (latitude: number, longitude: number) => boolean,
  ): Promise<LargestSites | null>;
}

/** A finished track of a run, with everything its results rest on. */
export interface StudiedRun {
  runNumber: string;
  runScenarioId: string;
  storedAt: Date;
  editionId: string;
  engineVersion: string;
  currency: string;
  fixes: readonly TrackFix[];
  observations: readonly ObservedVortices[];
  options: ChainOptions;
  curve: string;
  damageCurve: DamageCurve;
  notices: Notice[];
}

export interface StudiedRuns {
  /** Refuses what isn’t there (`not_found`) and what isn’t finished (`result_not_ready`). */
  require(tx: Tx, orgId: string, runId: string, runScenarioId: string): Promise<StudiedRun>;
}

type StoredTrack = Pick<StudiedRun, 'runScenarioId' | 'storedAt' | 'editionId'>;

export interface LossSites {
  /** The largest gross, within reach of the track; and how many sites are. */
  largest(tx: Tx, orgId: string, track: StoredTrack, most: number): Promise<{ sites: StudySite[]; of: number }>;
  /** One of them; null when there is no such site, or it is out of reach. */
  one(tx: Tx, orgId: string, track: StoredTrack, siteNo: number): Promise<StudySite | null>;
}

export interface StudyModels {
  calibrations(tx: Tx, orgId: string): Promise<Calibration[]>;
  curveSets(tx: Tx, orgId: string): Promise<CurveSet[]>;
}
