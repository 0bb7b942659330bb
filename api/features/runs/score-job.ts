import { z } from 'zod';
import { outOfReach, reachPath } from '#engine/footprint/reach.ts';
import type { Area } from '#engine/footprint/strong-wind-area.ts';
import type { Storm } from '#engine/track/storm.ts';
import type { DamageCurve } from '#engine/loss/damage-curve.ts';
import { EngineRefusal, type EnginePool } from '../../compute/pool.ts';
import { CHUNK_SITES } from '../../compute/protocol.ts';
import { fixesWithRing } from '../../compute/ring-defaults.ts';
import type { Job, Queue } from '../../jobs/queue.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { RunClosing } from './run-closing.ts';
import { chainOptions, setUpRemarks } from './run-inputs.ts';
import type {
  AuditTrail,
  Editions,
  Models,
  ResultSink,
  RunTrack,
  SitePlaces,
  StoredFootprint,
  Tracks,
} from './run-ports.ts';
import type { RunRecord, RunStore } from './run-store.ts';
import { filledWords, scenarioResult } from './scenario-result.ts';
import { batchOf, ScoredSites } from './scored-sites.ts';
import type { SiteFetchStore } from './site-fetch-store.ts';
import { chunkFetches } from './site-fetches.ts';

export const SCORE_QUEUE = 'runs.score';
export const ScorePayload = z.object({ orgId: z.uuid(), runId: z.uuid(), runScenarioId: z.uuid() });
type Payload = z.infer<typeof ScorePayload>;

export interface ScoreParts {
  transact: Transact;
  runs: RunStore;
  closing: RunClosing;
  editions: Editions;
  tracks: Tracks;
  models: Models;
  results: ResultSink;
  fetches: SiteFetchStore;
  pool: EnginePool;
  audit: AuditTrail;
  engineVersion: () => string;
  clock: Clock;
}

/** Times a track is taken up again before we say that we can't finish it; the queue itself tries a few more. */
const TRIES = 5;
const PROGRESS_MS = 200;

class CancelAsked extends Error {}

/** The inputs of a track, read once. */
interface Inputs {
  run: RunRecord;
  track: RunTrack;
  storm: Storm;
  curve: DamageCurve;
  remarks: { code: string; text: string }[];
}

/**
 * The background half of a run, one track at a time: storm, scores chunk by chunk, footprint, then everything stored in
 * one transaction. Whatever is repeated after a killed worker is either done again from the start or found done.
 */
export class ScoreJob {
  constructor(private readonly parts: ScoreParts) {}

  async run({ data, restarts, signal }: Pick<Job, 'data' | 'restarts' | 'signal'>): Promise<void> {
    const payload = ScorePayload.parse(data);
    if (!(await this.begin(payload))) return;
    // A track that takes its worker down each time would come back for ever.
    if (restarts > TRIES) return this.fail(payload, OUR_FAULT);
    try {
      await this.score(payload, signal);
    } catch (error) {
      if (error instanceof CancelAsked) return this.cancel(payload);
      if (error instanceof EngineRefusal) return this.fail(payload, refusalWords(error));
      if (error instanceof OutOfDate) return this.fail(payload, error.message);
      if (restarts < TRIES) throw error;
      await this.fail(payload, OUR_FAULT);
    }
  }

  private begin({ orgId, runId, runScenarioId }: Payload): Promise<boolean> {
    const { transact, runs, closing, clock } = this.parts;
    return transact(orgId, async (tx) => {
      const run = await runs.lock(tx, orgId, runId);
      if (!run) return false;
      if (run.cancelAsked) {
        await runs.end(tx, orgId, runScenarioId, { state: 'cancelled', at: clock.now() });
        await closing.closeIfDone(tx, orgId, runId);
        await runs.announce(tx, runId);
        return false;
      }
      if (!(await runs.begin(tx, orgId, runScenarioId, clock.now()))) return false;
      await runs.setWorking(tx, orgId, runId);
      await runs.announce(tx, runId);
      return true;
    });
  }

  private async score(payload: Payload, workerStops: AbortSignal): Promise<void> {
    const { orgId } = payload;
    const { transact, results, clock } = this.parts;
    const stopping = new AbortController();
    const stop = () => stopping.abort(workerStops.reason);
    if (workerStops.aborted) stop();
    workerStops.addEventListener('abort', stop, { once: true });
    try {
      const inputs = await this.inputs(payload, stopping.signal);
      // Beside the chunks: it is one long task, and they fill the other threads meanwhile.
      const [footprint, scored] = await Promise.all([
        this.drawFootprint(payload, inputs, stopping.signal),
        this.scoreSites(payload, inputs, stopping),
      ]);
      const storedAt = clock.now();
      await transact(orgId, (tx) => results.prepare(tx, storedAt));
      await transact(orgId, (tx) => this.store(tx, payload, inputs, scored, footprint, storedAt));
    } catch (error) {
      // Whatever asked the work to stop is the cause; what stopped because of it isn't.
      stopping.abort(error);
      throw stopping.signal.reason;
    } finally {
      workerStops.removeEventListener('abort', stop);
    }
  }

  private async inputs({ orgId, runId, runScenarioId }: Payload, signal: AbortSignal): Promise<Inputs> {
    const { transact, runs, tracks, models, pool, engineVersion } = this.parts;
    const { run, track, calibration, curveSet } = await transact(orgId, async (tx) => {
      const run = (await runs.find(tx, orgId, runId))!;
      const scenario = (await runs.scenario(tx, orgId, runId, runScenarioId))!;
      const [track] = await tracks.versions(tx, orgId, [scenario.scenarioVersionId]);
      const calibration = await models.calibration(tx, orgId, run.calibrationId);
      const curveSet = await models.curveSet(tx, orgId, run.curveSetId);
      return { run, track: track!, calibration: calibration!, curveSet: curveSet! };
    });
    if (run.engineVersion !== engineVersion()) throw new OutOfDate();
    const { options } = run;
    const fixes = fixesWithRing(track.fixes, calibration.settings);
    const storm = await pool.run(
      'storm',
      { fixes, observations: track.observations, options: chainOptions(options) },
      signal,
    );
    const remarks = setUpRemarks(options, calibration, curveSet, track.fixes);
    return { run, track, storm, curve: curveSet.curve, remarks };
  }

  private async scoreSites(
    payload: Payload,
    { run, storm, curve }: Inputs,
    stopping: AbortController,
  ): Promise<ScoredSites> {
    const { transact, editions, fetches, pool } = this.parts;
    const { signal } = stopping;
    const countAboveMs = run.options.gustThresholdsMs;
    const scored = new ScoredSites(countAboveMs.length);
    const progress = new Progress(this.parts, payload, stopping);
    await progress.report(0);
    await transact(payload.orgId, (tx) => fetches.forgetOthers(tx, payload.orgId, run.editionId));
    const running = new Set<Promise<void>>();
    let after = 0;
    for (let index = 0; ; index += 1) {
      // One chunk waits read while every thread has one; more would only hold memory.
      while (running.size > pool.threads) await Promise.race(running);
      signal.throwIfAborted();
      const sites = await transact(payload.orgId, (tx) =>
        editions.sitesAfter(tx, payload.orgId, run.editionId, after, CHUNK_SITES),
      );
      if (sites.length === 0) break;
      after = sites.at(-1)!.siteNo;
      const chunk = chunkFetches(this.parts, payload.orgId, run.editionId, sites, signal)
        .then((fetchM) =>
          pool.run('score', { storm, sites: { ...batchOf(sites), fetchM }, curve, countAboveMs }, signal),
        )
        .then(async (scores) => {
          scored.add(index, sites, scores);
          await progress.report(sites.length);
        })
        .catch((error: unknown) => stopping.abort(error))
        .finally(() => running.delete(chunk));
      running.add(chunk);
    }
    await Promise.all(running);
    signal.throwIfAborted();
    return scored;
  }

  private async drawFootprint(
    { orgId }: Payload,
    { run, storm }: Inputs,
    signal: AbortSignal,
  ): Promise<StoredFootprint | null> {
    const { transact, editions, pool } = this.parts;
    const places = await transact(orgId, (tx) => editions.coordinates(tx, orgId, run.editionId));
    return pool.run('footprint', { storm, focus: boundsOf(places, storm) }, signal);
  }

  private async store(
    tx: Tx,
    { orgId, runId, runScenarioId }: Payload,
    { run, storm, remarks }: Inputs,
    scored: ScoredSites,
    footprint: StoredFootprint | null,
    storedAt: Date,
  ): Promise<void> {
    const { runs, results, closing } = this.parts;
    const result = scenarioResult(scored, { storm, gustThresholdsMs: run.options.gustThresholdsMs, remarks });
    await runs.lock(tx, orgId, runId);
    // Another worker may have been given this track while this one was held up: the first to get here counts.
    const isOurs = await runs.end(tx, orgId, runScenarioId, {
      state: 'stored',
      result,
      resultDigest: scored.digest(),
      resolution: { filled: filledWords(storm.fixes) },
      at: storedAt,
    });
    if (!isOurs) return;
    const { groundUp, gross, peak, above } = scored;
    await results.save(tx, orgId, runScenarioId, { storedAt, sites: scored, groundUp, gross, peak, above, footprint });
    await closing.closeIfDone(tx, orgId, runId);
    await runs.announce(tx, runId);
  }

  private cancel({ orgId, runId, runScenarioId }: Payload): Promise<void> {
    const { transact, runs, closing, clock } = this.parts;
    return transact(orgId, async (tx) => {
      await runs.lock(tx, orgId, runId);
      await runs.end(tx, orgId, runScenarioId, { state: 'cancelled', at: clock.now() });
      await closing.closeIfDone(tx, orgId, runId);
      await runs.announce(tx, runId);
    });
  }

  private fail({ orgId, runId, runScenarioId }: Payload, error: string): Promise<void> {
    const { transact, runs, closing, audit, clock } = this.parts;
    return transact(orgId, async (tx) => {
      await runs.lock(tx, orgId, runId);
      if (!(await runs.end(tx, orgId, runScenarioId, { state: 'failed', error, at: clock.now() }))) return;
      await audit.record(tx, { orgId, userId: null }, 'run.track_failed', `run:${runId}`, { runScenarioId, error });
      await closing.closeIfDone(tx, orgId, runId);
      await runs.announce(tx, runId);
    });
  }
}

const OUR_FAULT =
  'We couldn’t finish this track after several attempts. It is free, and the other tracks go on. Quote it again, or tell us the run’s number.';

const refusalWords = ({ message }: EngineRefusal) =>
  `No result: ${message}. A number that can’t be right is never shown. This track is free; correct it and quote again.`;

class OutOfDate extends Error {
  constructor() {
    super(
      'The engine was updated between the quote and the run, so the numbers would no longer be those you were quoted for. This track is free; quote it again.',
    );
  }
}

/** Bounds of the sites within reach, in longitudes that run on from the track's first: 180 degrees is no border. */
function boundsOf({ latitude, longitude }: SitePlaces, { fixes }: Storm): Area | null {
  const path = reachPath(fixes);
  const centre = fixes[0]!.longitude;
  const bounds = { west: Infinity, south: Infinity, east: -Infinity, north: -Infinity };
  for (let i = 0; i < latitude.length; i++) {
    const lat = latitude[i]!;
    if (outOfReach(path, lat, longitude[i]!)) continue;
    const lon = longitude[i]! + 360 * Math.round((centre - longitude[i]!) / 360);
    bounds.west = Math.min(bounds.west, lon);
    bounds.east = Math.max(bounds.east, lon);
    bounds.south = Math.min(bounds.south, lat);
    bounds.north = Math.max(bounds.north, lat);
  }
  return bounds.west <= bounds.east ? bounds : null;
}

/** Writes progress now and then, and learns on the way whether to go on. */
class Progress {
  private done = 0;
  private lastMs = -Infinity;

  constructor(
    private readonly parts: Pick<ScoreParts, 'transact' | 'runs'>,
    private readonly payload: Payload,
    private readonly stopping: AbortController,
  ) {}

  async report(sites: number): Promise<void> {
    this.done += sites;
    const now = performance.now();
    if (now - this.lastMs < PROGRESS_MS) return;
    this.lastMs = now;
    const { orgId, runId, runScenarioId } = this.payload;
    const isCancelled = await this.parts.transact(orgId, async (tx) => {
      const asked = await this.parts.runs.progress(tx, orgId, runId, runScenarioId, this.done);
      await this.parts.runs.announce(tx, runId);
      return asked;
    });
    if (isCancelled) this.stopping.abort(new CancelAsked('Someone asked to cancel'));
  }
}

/** One track at a time in a process: its chunks keep every thread busy. */
export const registerRunJobs = (queue: Queue, job: ScoreJob): Promise<void> =>
  queue.work(SCORE_QUEUE, (taken) => job.run(taken));
