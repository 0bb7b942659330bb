import type { Calibration, CurveSet } from '#contract/models.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
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

export interface StudyModels {
  calibrations(tx: Tx, orgId: string): Promise<Calibration[]>;
  curveSets(tx: Tx, orgId: string): Promise<CurveSet[]>;
}
