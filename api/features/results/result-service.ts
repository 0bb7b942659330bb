import type { Footprint, ResultPoints, SiteDetail, SitesPage, SitesQuery, StoredView } from '#contract/runs.ts';
import type { Notice } from '#contract/common.ts';
import { Terrain, TERRAIN_ROUGHNESS_M } from '#contract/portfolios.ts';
import type { z } from 'zod';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import type { ChainOptions } from '#engine/track/options.ts';
import type { Actor } from '../../actor.ts';
import type { EnginePool } from '../../compute/pool.ts';
import type { ExplainReply } from '../../compute/protocol.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { DrawStore } from './draw-store.ts';
import { footprintReply, requireSameEngine } from './footprint-view.ts';
import { ladderOf } from './gust-reasons.ts';
import type { Place, ResultStore } from './result-store.ts';
import { seriesAroundPeak, NO_SERIES } from './site-series-view.ts';
import type { SiteRecord } from './stored-results.ts';

/** A track of a run whose results can be read, as the run knows it. */
export interface FinishedTrack extends Place {
  runNumber: string;
  trackName: string;
  engineVersion: string;
  currency: string;
  fixes: readonly TrackFix[];
  observations: readonly ObservedVortices[];
  options: ChainOptions;
  gustThresholdsMs: readonly number[];
  curve: string;
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

export interface FinishedTracks {
  /** Refuses what isn't there (`not_found`) and what isn't finished (`result_not_ready`). */
  require(tx: Tx, orgId: string, runId: string, runScenarioId: string): Promise<FinishedTrack>;
}

/** Overland distances measured when the edition was first scored, by site number. */
export interface MeasuredFetches {
  read(
    tx: Tx,
    orgId: string,
    editionId: string,
    first: number,
    last: number,
  ): Promise<ReadonlyMap<number, readonly number[]>>;
}

export interface ResultParts {
  transact: Transact;
  results: ResultStore;
  draws: DrawStore;
  tracks: FinishedTracks;
  fetches: MeasuredFetches;
  pool: EnginePool;
  audit: { record(tx: Tx, actor: Actor, action: string, object: string, details?: object): Promise<void> };
  engineVersion: () => string;
}

export type At = { runId: string; runScenarioId: string };
type Query = z.output<typeof SitesQuery>;

/** Each holds a connection of the database while its reader takes its time. */
const EXPORTS_AT_ONCE = 4;

/** Answers questions about what a finished track left behind. */
export class ResultService {
  private exporting = 0;

  constructor(private readonly parts: ResultParts) {}

  sites(actor: Actor, at: At, query: Query): Promise<SitesPage> {
    const { results } = this.parts;
    return this.read(actor, at, async (tx, track) => {
      const { total, totals, largestGustMs } = await results.totals(tx, actor.orgId, track, query);
      const items = total > query.offset ? await results.page(tx, actor.orgId, track, query) : [];
      return { items, total, totals, largestGustMs, notices: track.notices };
    });
  }

  points(actor: Actor, at: At): Promise<ResultPoints> {
    return this.read(actor, at, (tx, track) => this.parts.results.points(tx, actor.orgId, track));
  }

  footprint(actor: Actor, at: At, view: StoredView): Promise<Footprint> {
    const { results, draws } = this.parts;
    return this.read(actor, at, async (tx, track) => {
      const found = await results.footprint(tx, actor.orgId, track.runScenarioId, view);
      const net = found && (await draws.net(tx, actor.orgId, track.runScenarioId));
      return footprintReply(track, { view }, found, net);
    });
  }

  async detail(actor: Actor, at: At, siteNo: number): Promise<SiteDetail> {
    const { results, fetches, pool, engineVersion } = this.parts;
    const { track, site, fetchM } = await this.read(actor, at, async (tx, found) => {
      const record = await results.site(tx, actor.orgId, found, siteNo);
      if (!record) throw notFound('Site', siteNo);
      const measured = await fetches.read(tx, actor.orgId, found.editionId, siteNo, siteNo);
      return { track: found, site: record, fetchM: measured.get(siteNo) ?? null };
    });
    requireSameEngine(track, engineVersion());
    const common = { ...site, curve: track.curve, notices: track.notices };
    if (site.reach === 'out_of_reach') {
      return { ...common, ...NOTHING_TO_EXPLAIN, chanceAbove: [], series: NO_SERIES };
    }
    const { latitude, longitude, roughnessM } = site;
    const explained = await pool.run('explain', {
      fixes: track.fixes,
      observations: track.observations,
      options: track.options,
      site: { latitude, longitude, roughnessM, fetchM, topographicFactor: 1 },
      gustsMs: track.gustThresholdsMs,
      otherRoughnessM: roughnessM === null ? [] : CLASSES.map((terrain) => TERRAIN_ROUGHNESS_M[terrain]),
    });
    return { ...common, ...explanation(track, site, explained) };
  }

  /** All sites one after another, with what the export says about them; the caller writes them out as they come. */
  async export(
    actor: Actor,
    at: At,
    write: (track: FinishedTrack, sites: AsyncIterable<SiteRecord>) => Promise<void>,
  ): Promise<void> {
    const { results, audit } = this.parts;
    if (this.exporting >= EXPORTS_AT_ONCE) {
      const retryAfterS = 15;
      throw new AppError('unavailable', 'Several exports are being written. Try again in a moment.', { retryAfterS });
    }
    this.exporting += 1;
    try {
      // In a transaction of its own: whoever hangs up at the last byte has been given the file all the same.
      await this.read(actor, at, (tx) =>
        audit.record(tx, actor, 'result.exported', `run:${at.runId}`, { ...at, format: 'csv' }),
      );
      await this.read(actor, at, (tx, track) => write(track, results.all(tx, actor.orgId, track)));
    } finally {
      this.exporting -= 1;
    }
  }

  private read<T>(
    actor: Actor,
    { runId, runScenarioId }: At,
    work: (tx: Tx, track: FinishedTrack) => Promise<T>,
  ): Promise<T> {
    return this.parts.transact(actor, async (tx) =>
      work(tx, await this.parts.tracks.require(tx, actor.orgId, runId, runScenarioId)),
    );
  }
}

/** The classes a site’s ground can be of, from smooth to rough. */
const CLASSES = Terrain.exclude(['unknown']).options;

const NOTHING_TO_EXPLAIN = {
  fetchM: [],
  distanceToTrackKm: null,
  sideOfTrack: null,
  wavenumber: null,
  terrainEffects: [],
  ladder: [],
};

const IN_EYE: Notice = {
  code: 'inside-eye',
  text: 'This site stays within half the radius of maximum wind throughout. What vortices add there means nothing.',
  version: '1',
};

const explanation = (track: FinishedTrack, site: SiteRecord, explained: ExplainReply) => ({
  fetchM: explained.fetchM,
  distanceToTrackKm: explained.passing.distanceM / 1000,
  sideOfTrack: explained.passing.side,
  wavenumber: explained.wavenumber,
  chanceAbove: track.gustThresholdsMs.map((gustMs, i) => ({ gustMs, chance: explained.chances[i]! })),
  terrainEffects: explained.otherPlainMs.map((plainMs, i) => ({
    terrain: CLASSES[i]!,
    roughnessM: TERRAIN_ROUGHNESS_M[CLASSES[i]!],
    plainMs,
    isPresent: CLASSES[i] === (site.terrain === 'unknown' ? 'open' : site.terrain),
  })),
  ladder: ladderOf(explained.ladder, site),
  series: seriesAroundPeak(explained.series),
  notices: explained.staysInEye ? [IN_EYE, ...track.notices] : track.notices,
});
