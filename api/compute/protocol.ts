import type { EngineNotice, TrackFix } from '#engine/track/fixes.ts';
import type { GustLadder, SiteSeries } from '#engine/footprint/site-series.ts';
import type { SiteBatch, SiteScores } from '#engine/footprint/site-peaks.ts';
import type { Site } from '#engine/footprint/wind-at.ts';
import type { Area } from '#engine/footprint/strong-wind-area.ts';
import type { FootprintGrid, Net } from '#engine/footprint/grid.ts';
import type { DamageCurve } from '#engine/loss/damage-curve.ts';
import type { ChainOptions } from '#engine/track/options.ts';
import type { Storm } from '#engine/track/storm.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { BreakdownFrame, BreakdownSetup } from '#engine/ring/breakdown.ts';
import type { Bands, BandView } from './bands.ts';
import type { DrawView } from './draws.ts';
import type { SpreadBase, Trial, TrialResult } from './spread.ts';
import type { WindField, WindFieldQuestion } from './wind-field.ts';

/** Sites scored in one task. Fixed, and part of no setting: results must not depend on how many threads there are. */
export const CHUNK_SITES = 2_000;

/** A flag both sides see at once: anything but 0 asks the running task to stop. */
export type StopFlag = Int32Array;

export type StormTask = {
  readonly fixes: readonly TrackFix[];
  /** What radar or satellite showed of the storm's vortices. */
  readonly observations: readonly ObservedVortices[];
  readonly options: ChainOptions;
};

export type ScoreTask = {
  readonly storm: Storm;
  /** NaN as the first of a site's eight fetches asks for the land polygons. */
  readonly sites: SiteBatch;
  readonly curve: DamageCurve;
  /** Gusts for which the sites that reach them are counted, draw by draw. */
  readonly countAboveMs: readonly number[];
  readonly stop: StopFlag;
};

/** Places on land whose overland distances are asked for [deg]. */
export type OverlandTask = { readonly latitude: Float64Array; readonly longitude: Float64Array };

export type FootprintTask = {
  readonly storm: Storm;
  /** Bounds of the sites, in longitudes that run on from the track's first. */
  readonly focus: Area | null;
  readonly stop: StopFlag;
};
export type FootprintReply = { readonly grid: FootprintGrid; readonly bands: Record<BandView, Bands> };

export type DrawBandsTask = StormTask & { readonly net: Net; readonly view: DrawView; readonly stop: StopFlag };

export type DrawSitesTask = {
  readonly storm: Storm;
  /** NaN as the first of a site's eight fetches asks for the land polygons. */
  readonly sites: SiteBatch;
  /** 0..263. */
  readonly draw: number;
  readonly stop: StopFlag;
};
/** Sites, as indices into the batch, where the draw changes the gust, and what it makes of it [m s⁻¹]. */
export type DrawSitesReply = { readonly site: Int32Array; readonly gustMs: Float64Array };

export type ExplainTask = StormTask & {
  /** Without overland distances they come from the land polygons. */
  readonly site: Omit<Site, 'fetchM'> & { readonly fetchM: readonly number[] | null };
  readonly gustsMs: readonly number[];
  /** Roughness lengths under which the site’s plain gust is asked for, too [m]. */
  readonly otherRoughnessM: readonly number[];
};
export type ExplainReply = {
  readonly fetchM: number[];
  readonly series: SiteSeries;
  readonly ladder: GustLadder;
  readonly staysInEye: boolean;
  /** Where the centre passes nearest: how far away, and on which side of its heading the site lies. */
  readonly passing: { readonly distanceM: number; readonly side: 'left' | 'right' };
  /** Weighted share of the draws whose peak reaches each of the gusts asked for. */
  readonly chances: number[];
  /** Plain peak gust under each of the roughness lengths asked for [m s⁻¹]. */
  readonly otherPlainMs: number[];
  readonly wavenumber: number | null;
  readonly notices: readonly EngineNotice[];
};

export type SpreadTask = {
  readonly base: Trial;
  /** Each is compared with the base, by itself. */
  readonly trials: readonly Trial[];
  /** NaN as the first of a site's eight fetches asks for the land polygons. */
  readonly sites: SiteBatch;
  readonly stop: StopFlag;
};
export type SpreadReply = { readonly base: SpreadBase; readonly trials: readonly TrialResult[] };

export type WindFieldTask = StormTask & { readonly question: WindFieldQuestion; readonly stop: StopFlag };

export type BreakdownTask = {
  readonly setup: BreakdownSetup;
  /** Without it the frames come with their measures only. */
  readonly withVorticity: boolean;
  readonly stop: StopFlag;
};

/** What a thread can be asked for: name → task and reply. */
export type Tasks = {
  storm: { task: StormTask; reply: Storm };
  overland: { task: OverlandTask; reply: Float64Array };
  score: { task: ScoreTask; reply: SiteScores };
  footprint: { task: FootprintTask; reply: FootprintReply | null };
  drawBands: { task: DrawBandsTask; reply: Bands };
  drawSites: { task: DrawSitesTask; reply: DrawSitesReply };
  explain: { task: ExplainTask; reply: ExplainReply };
  spread: { task: SpreadTask; reply: SpreadReply };
  windField: { task: WindFieldTask; reply: WindField };
  breakdown: { task: BreakdownTask; reply: BreakdownFrame[] };
};

/** A thread's answer; the engine's refusals travel as words, since error classes don't survive the journey. */
export type Answer<Reply> = { readonly reply: Reply } | { readonly refused: string } | { readonly stopped: true };
