import { DomainError } from '#engine/errors.ts';
import { drawPeaks, makeDrawWork } from '#engine/footprint/draws-of-site.ts';
import { chanceOf } from '#engine/footprint/draw-fields.ts';
import { footprintGrid } from '#engine/footprint/grid.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { scoreSites, type SiteBatch } from '#engine/footprint/site-peaks.ts';
import { gustLadder, siteSeries, staysInEye } from '#engine/footprint/site-series.ts';
import { siteExposure, type Site } from '#engine/footprint/wind-at.ts';
import { greatCircleDistance, initialBearing } from '#engine/geo/geodesy.ts';
import { fetchBySector } from '#engine/geo/land.ts';
import { DRAW_COUNT } from '#engine/ring/draws.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { radians } from '#engine/units.ts';
import { footprintBands } from './bands.ts';
import { breakdownFrames } from './breakdown.ts';
import * as draws from './draws.ts';
import { landIndex } from './land.ts';
import type {
  Answer,
  BreakdownTask,
  DrawBandsTask,
  DrawSitesTask,
  ExplainTask,
  OverlandTask,
  FootprintTask,
  ScoreTask,
  SpreadTask,
  StopFlag,
  StormTask,
  Tasks,
  WindFieldTask,
} from './protocol.ts';
import { computeSpread } from './spread.ts';
import { windFieldAt } from './wind-field.ts';

const STOPPED = { stopped: true } as const;
const isStopped = (stop: StopFlag) => Atomics.load(stop, 0) !== 0;

const answer = <Reply>(work: () => Answer<Reply>): Answer<Reply> => {
  try {
    return work();
  } catch (error) {
    if (error instanceof DomainError) return { refused: error.message };
    throw error;
  }
};

export const storm = ({ fixes, observations, options }: StormTask): Answer<Tasks['storm']['reply']> =>
  answer(() => ({ reply: prepareStorm(fixes, options, landIndex(), observations) }));

/** Eight overland distances for each place, one after another [m]. */
export const overland = ({ latitude, longitude }: OverlandTask): Answer<Tasks['overland']['reply']> =>
  answer(() => {
    const fetchM = new Float64Array(SECTOR_COUNT * latitude.length);
    for (let i = 0; i < latitude.length; i++) {
      fetchBySector(landIndex(), latitude[i]!, longitude[i]!, fetchM, SECTOR_COUNT * i);
    }
    return { reply: fetchM };
  });

/** Overland distances from the land polygons, for the sites on land that come without. */
const fillFetch = ({ count, roughnessM, latitude, longitude, fetchM }: SiteBatch): void => {
  for (let i = 0; i < count; i++) {
    const at = SECTOR_COUNT * i;
    if (!Number.isNaN(fetchM[at]!)) continue;
    if (Number.isNaN(roughnessM[i]!)) fetchM.fill(0, at, at + SECTOR_COUNT);
    else fetchBySector(landIndex(), latitude[i]!, longitude[i]!, fetchM, at);
  }
};

export const score = ({
  storm: prepared,
  sites,
  curve,
  countAboveMs,
  stop,
}: ScoreTask): Answer<Tasks['score']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    fillFetch(sites);
    const scores = scoreSites(prepared, sites, curve, { shouldStop: () => isStopped(stop) }, countAboveMs);
    return isStopped(stop) ? STOPPED : { reply: scores };
  });

export const footprint = ({ storm: prepared, focus, stop }: FootprintTask): Answer<Tasks['footprint']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    const grid = footprintGrid(prepared, landIndex(), { focus }, { shouldStop: () => isStopped(stop) });
    if (isStopped(stop)) return STOPPED;
    return { reply: grid && { grid, bands: footprintBands(grid) } };
  });

export const drawBands = ({
  fixes,
  observations,
  options,
  net,
  view,
  stop,
}: DrawBandsTask): Answer<Tasks['drawBands']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    const prepared = prepareStorm(fixes, options, landIndex(), observations);
    const bands = draws.drawBands(prepared, landIndex(), net, view, { shouldStop: () => isStopped(stop) });
    return isStopped(stop) ? STOPPED : { reply: bands };
  });

export const drawSites = ({ storm: prepared, sites, draw, stop }: DrawSitesTask): Answer<Tasks['drawSites']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    fillFetch(sites);
    const reply = draws.sitesInDraw(prepared, sites, draw, { shouldStop: () => isStopped(stop) });
    return isStopped(stop) ? STOPPED : { reply };
  });

const fetchOf = ({
  roughnessM,
  fetchM,
  latitude,
  longitude,
}: ExplainTask['site']): ArrayLike<number> & Iterable<number> => {
  const none = new Float64Array(SECTOR_COUNT);
  if (roughnessM === null) return none;
  return fetchM ?? fetchBySector(landIndex(), latitude, longitude, none);
};

export const explain = ({
  fixes,
  observations,
  options,
  site,
  gustsMs,
  otherRoughnessM,
}: ExplainTask): Answer<Tasks['explain']['reply']> =>
  answer(() => {
    const prepared = prepareStorm(fixes, options, landIndex(), observations);
    const fetchM = [...fetchOf(site)];
    const whole = { ...site, fetchM };
    return {
      reply: {
        fetchM,
        series: siteSeries(prepared, whole),
        ladder: gustLadder(prepared, whole),
        staysInEye: staysInEye(prepared, whole),
        passing: passingOf(prepared, whole),
        chances: chancesOf(prepared, whole, gustsMs),
        otherPlainMs: otherRoughnessM.map((roughnessM) => plainPeakOf(prepared, { ...whole, roughnessM })),
        wavenumber: prepared.wavenumber,
        notices: prepared.notices,
      },
    };
  });

export const spread = ({ base, trials, sites, stop }: SpreadTask): Answer<Tasks['spread']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    fillFetch(sites);
    const reply = computeSpread(base, trials, sites, { land: landIndex(), shouldStop: () => isStopped(stop) });
    return reply === null ? STOPPED : { reply };
  });

export const windField = ({
  fixes,
  observations,
  options,
  question,
  stop,
}: WindFieldTask): Answer<Tasks['windField']['reply']> =>
  answer(() => {
    if (isStopped(stop)) return STOPPED;
    return { reply: windFieldAt(prepareStorm(fixes, options, landIndex(), observations), question) };
  });

export const breakdown = ({ setup, withVorticity, stop }: BreakdownTask): Answer<Tasks['breakdown']['reply']> =>
  answer(() => {
    const reply = breakdownFrames(setup, withVorticity, () => isStopped(stop));
    return reply === null ? STOPPED : { reply };
  });

const passingOf = ({ states, outer }: Storm, site: Site): Tasks['explain']['reply']['passing'] => {
  let nearest = 0;
  let distanceM = Infinity;
  const centreAt = (at: number) => ({
    latitude: states[at + STATE.latitude]!,
    longitude: states[at + STATE.longitude]!,
  });
  for (const k of outer) {
    const distance = greatCircleDistance(centreAt(k * STATE_SIZE), site);
    if (distance >= distanceM) continue;
    distanceM = distance;
    nearest = k * STATE_SIZE;
  }
  const off = initialBearing(centreAt(nearest), site) - states[nearest + STATE.heading]!;
  return { distanceM, side: Math.sin(radians(off)) >= 0 ? 'right' : 'left' };
};

const plainPeakOf = (prepared: Storm, site: Site): number => {
  const passage = makePassage(prepared);
  const times = followPassage(prepared, site.latitude, site.longitude, siteExposure(site), passage);
  return passage.gust.subarray(0, times).reduce((peak, gust) => Math.max(peak, gust), 0);
};

const chancesOf = (prepared: Storm, site: Site, gustsMs: readonly number[]): number[] => {
  const passage = makePassage(prepared);
  const times = followPassage(prepared, site.latitude, site.longitude, siteExposure(site), passage);
  let peak = 0;
  for (let i = 1; i < times; i++) if (passage.gust[i]! > passage.gust[peak]!) peak = i;
  const peaks = new Float64Array(DRAW_COUNT);
  drawPeaks(passage, times, peak, makeDrawWork(prepared.stateCount), peaks);
  return gustsMs.map((gust) => chanceOf(peaks, gust));
};

/** Loads the land polygons before the first task needs them. */
export const warm = (): void => {
  landIndex();
};
