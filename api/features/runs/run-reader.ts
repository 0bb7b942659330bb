import type { Notice } from '#contract/common.ts';
import type { DamageCurve } from '#contract/models.ts';
import { staleness, trackAgeHours } from '#contract/track-age.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import type { ChainOptions } from '#engine/track/options.ts';
import { fixesWithRing } from '../../compute/ring-defaults.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Tx } from '../../transact.ts';
import { chainOptions } from './run-inputs.ts';
import type { Models, Tracks } from './run-ports.ts';
import type { RunStore } from './run-store.ts';
import { runNotices } from './run-view.ts';

/** A finished track of a run: where its results are, and what they were computed from. */
export interface FinishedTrack {
  runNumber: string;
  trackName: string;
  runScenarioId: string;
  storedAt: Date;
  editionId: string;
  engineVersion: string;
  currency: string;
  fixes: readonly TrackFix[];
  observations: readonly ObservedVortices[];
  options: ChainOptions;
  gustThresholdsMs: readonly number[];
  curve: string;
  damageCurve: DamageCurve;
  calibration: string;
  calibrationState: string;
  /** When the track is an advisory: its issue time. */
  trackAsOf: string | null;
  /** How old the advisory was when the run was accepted [h], and whether that was too old. */
  trackAgeHoursWhenRun: number | null;
  trackStaleWhenRun: boolean;
  path: readonly [number, number][];
  /** Whether any draw changes anything at any site. */
  hasVortexRange: boolean;
  notices: Notice[];
}

/** Answers results: what stands behind this track of this run? */
export class RunReader {
  constructor(private readonly parts: { runs: RunStore; tracks: Tracks; models: Models; staleAfterHours: number }) {}

  async require(tx: Tx, orgId: string, runId: string, runScenarioId: string): Promise<FinishedTrack> {
    const { runs, tracks, models, staleAfterHours } = this.parts;
    const run = await runs.find(tx, orgId, runId);
    if (!run) throw notFound('Run', runId);
    const scenario = await runs.scenario(tx, orgId, runId, runScenarioId);
    if (!scenario) throw notFound('Track of this run', runScenarioId);
    const [track] = await tracks.versions(tx, orgId, [scenario.scenarioVersionId]);
    if (scenario.state !== 'stored' || scenario.finishedAt === null) {
      throw new AppError('result_not_ready', notReadyWords(scenario.state, track!.name));
    }
    const calibration = (await models.calibration(tx, orgId, run.calibrationId))!;
    const curveSet = (await models.curveSet(tx, orgId, run.curveSetId))!;
    return {
      runNumber: run.number,
      trackName: track!.name,
      runScenarioId,
      storedAt: scenario.finishedAt,
      editionId: run.editionId,
      engineVersion: run.engineVersion,
      currency: run.lossCurrency,
      fixes: fixesWithRing(track!.fixes, calibration.settings),
      observations: track!.observations,
      options: chainOptions(run.options),
      gustThresholdsMs: run.options.gustThresholdsMs,
      curve: `${curveSet.curve.name} (${curveSet.name}, version ${curveSet.version})`,
      damageCurve: curveSet.curve,
      calibration: `${calibration.code} version ${calibration.version}`,
      calibrationState: calibration.state,
      trackAsOf: track!.asOf,
      trackAgeHoursWhenRun: track!.asOf === null ? null : trackAgeHours(track!.asOf, run.acceptedAt),
      trackStaleWhenRun: staleness(track!.asOf, run.acceptedAt, staleAfterHours) !== null,
      path: track!.path,
      hasVortexRange: scenario.result !== null && scenario.result.gross !== null,
      notices: runNotices(run, staleAfterHours, [track!]),
    };
  }
}

const notReadyWords = (state: string, name: string): string => {
  if (state === 'failed') return `${name} failed on our side, so it has no results. The run page says why; it is free.`;
  if (state === 'cancelled') return `${name} was cancelled before it was finished, so it has no results.`;
  return `${name} is still being computed. Its results appear as soon as it is finished.`;
};
