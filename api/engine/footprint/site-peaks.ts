import { GUST_CEILING, GUST_FLOOR } from '../constants.ts';
import { DomainError } from '../errors.ts';
import { normalisedBearing } from '../geo/geodesy.ts';
import { meanDamage, type DamageCurve } from '../loss/damage-curve.ts';
import { drawLosses, quantisedLoss } from '../loss/draw-losses.ts';
import { expectedGross } from '../loss/secondary-uncertainty.ts';
import { DRAW_COUNT, drawMean, drawQuantiles } from '../ring/draws.ts';
import { SECTOR_COUNT } from '../terrain/fetch.ts';
import type { Storm } from '../track/storm.ts';
import { degrees } from '../units.ts';
import { drawPeaks, makeDrawWork } from './draws-of-site.ts';
import { secondsAtLeast } from './durations.ts';
import { exposureOf } from './exposure.ts';
import { followPassage, gustWhenNearest, makePassage, unitPlace } from './passage.ts';
import { outOfReach, reachPath } from './reach.ts';

/** Sites to be scored; one entry per site in every array. */
export type SiteBatch = {
  readonly count: number;
  /** [deg] */
  readonly latitude: Float64Array;
  /** [deg], any turn. */
  readonly longitude: Float64Array;
  /** Roughness length [m]; NaN = at sea. */
  readonly roughnessM: Float64Array;
  /** Overland distance for wind FROM 0, 45, ..., 315 degrees [m], shape (count, 8) row-major. */
  readonly fetchM: Float64Array;
  /** Speed-up of the gust by a hill [1]; 1 = flat. */
  readonly topographicFactor: Float64Array;
  /** Insured value [currency]; NaN = no loss asked. */
  readonly value: Float64Array;
  readonly deductible: Float64Array;
  /** Infinity = none. */
  readonly limit: Float64Array;
};

/** Site state in SiteScores.reach. */
export const SITE_SCORED = 0;
export const SITE_OUT_OF_REACH = 1;
export const SITE_BELOW_FLOOR = 2;

/** Columns of numbers in SiteScores, one entry per site in each. */
const COLUMNS = [
  'plainGust',
  'plainMean',
  'plainSeaWind',
  'plainDirection',
  'plainTimeS',
  'secondsAbove25',
  'secondsAbove33',
  'enhancedMean',
  'p5',
  'p50',
  'p90',
  'p95',
  'p99',
  'damagePlain',
  'groundUpPlain',
  'grossPlain',
  'groundUpMean',
  'grossMean',
  'grossP5',
  'grossP50',
  'grossP95',
  'damageMean',
  'damageP5',
  'damageP95',
] as const;

/**
 * Scores of a batch. Gusts are 3-s at 10 m [m s⁻¹], plainMean and plainSeaWind 10-min at 10 m, plainDirection FROM [deg],
 * times [s] on the track's clock, durations [s], damage [1], losses [currency]. A site out of reach holds NaN throughout;
 * losses of a site without value are NaN.
 */
export type SiteScores = Record<(typeof COLUMNS)[number], Float64Array> & {
  /** 0 scored, 1 out of reach, 2 scored but below the floor. */
  readonly reach: Uint8Array;
  /** Sum over the sites per draw [currency], shape (264,). */
  readonly eventGroundUp: Float64Array;
  readonly eventGross: Float64Array;
  /** Strongest gust at any of the sites per draw [m s⁻¹], shape (264,). */
  readonly eventPeak: Float64Array;
  /** Sites whose peak reaches each of the gusts asked for, per draw [1], shape (gusts, 264) row-major. */
  readonly eventAbove: Float64Array;
};

/** Asked every 64 sites: whether to stop, and told how many sites are done; told of each site that is within reach. */
export type ScoreControl = {
  readonly shouldStop?: () => boolean;
  readonly onProgress?: (done: number) => void;
  /** Given the site, its gusts in the scores so far, and its peak in every draw, shape (264,), which is used again. */
  readonly onSite?: (site: number, scores: SiteScores, draws: Float64Array) => void;
};

const GUST_LEVELS = [0.05, 0.5, 0.9, 0.95, 0.99];
const CONTROL_STRIDE = 64;
const LOWER_THRESHOLD = 25;
const UPPER_THRESHOLD = 33;

/**
 * Peak gusts, durations and losses of many sites under one storm, without and with the vortex layer.
 *
 * @param storm   The storm.
 * @param sites   The sites.
 * @param curve   Damage curve, without faults.
 * @param control Asked for stopping, told of progress.
 * @param countAboveMs Gusts [m s⁻¹] for which the sites that reach them are counted, draw by draw.
 * @returns The scores; when stopped, sites not reached hold NaN.
 * @throws {DomainError} naming the site when its input is outside its range, or when a gust comes out negative, above
 *         120 m/s or as no number: a result is refused, never clipped.
 * @source The chain: passage.ts, draws-of-site.ts, loss/draw-losses.ts. Each draw's loss of a site is rounded to 1/1024
 *         of a currency unit, so that event sums are exact and do not depend on order or chunks.
 */
export function scoreSites(
  storm: Storm,
  sites: SiteBatch,
  curve: DamageCurve,
  control: ScoreControl = {},
  countAboveMs: readonly number[] = [],
): SiteScores {
  const { count } = sites;
  const scores = emptyScores(count, countAboveMs.length);
  const passage = makePassage(storm);
  const work = makeDrawWork(storm.stateCount);
  const path = reachPath(storm.fixes);
  const weights = new Float64Array(SECTOR_COUNT);
  const gusts = new Float64Array(DRAW_COUNT);
  const groundUp = new Float64Array(DRAW_COUNT);
  const gross = new Float64Array(DRAW_COUNT);
  const levels = new Float64Array(GUST_LEVELS.length);
  for (let s = 0; s < count; s++) {
    if (s % CONTROL_STRIDE === 0 && s > 0) {
      control.onProgress?.(s);
      if (control.shouldStop?.()) return scores;
    }
    const latitude = sites.latitude[s]!;
    const longitude = sites.longitude[s]!;
    if (!(Math.abs(latitude) <= 90)) throw new DomainError(`latitude of site ${s}`, latitude, 'in [-90, 90] degrees');
    if (!Number.isFinite(longitude)) throw new DomainError(`longitude of site ${s}`, longitude, 'a finite number');
    if (outOfReach(path, latitude, longitude)) {
      scores.reach[s] = SITE_OUT_OF_REACH;
      continue;
    }
    const hill = sites.topographicFactor[s]!;
    const exposure = exposureOf(`site ${s}`, sites.roughnessM[s]!, sites.fetchM, SECTOR_COUNT * s, hill, weights);
    // Gusts below the lower threshold matter only at a site that never reaches it, plain or in some draw.
    const place = unitPlace(latitude, longitude);
    const floor = Math.min(LOWER_THRESHOLD, gustWhenNearest(storm, place, exposure, passage));
    let times = followPassage(storm, latitude, longitude, exposure, passage, floor);
    let peak = highest(passage.gust, times);
    let touched = drawPeaks(passage, times, peak, work, gusts);
    if (touched && floor > 0 && lowest(gusts) < floor) {
      times = followPassage(storm, latitude, longitude, exposure, passage);
      peak = highest(passage.gust, times);
      touched = drawPeaks(passage, times, peak, work, gusts);
    }
    const plain = passage.gust[peak]!;
    requireGust('plain gust', s, plain);
    const u = passage.seaU[peak]!;
    const v = passage.seaV[peak]!;
    const sea = Math.sqrt(u * u + v * v);
    scores.plainGust[s] = plain;
    scores.plainSeaWind[s] = sea;
    scores.plainMean[s] = sea * passage.meanFactor[peak]!;
    scores.plainDirection[s] = normalisedBearing(degrees(Math.atan2(-u, -v)));
    scores.plainTimeS[s] = passage.timeS[passage.state[peak]!]!;
    scores.secondsAbove25[s] = plain >= LOWER_THRESHOLD ? secondsAtLeast(passage, times, LOWER_THRESHOLD) : 0;
    scores.secondsAbove33[s] = plain >= UPPER_THRESHOLD ? secondsAtLeast(passage, times, UPPER_THRESHOLD) : 0;

    if (touched) drawQuantiles(gusts, GUST_LEVELS, levels);
    else levels.fill(plain);
    requireGust('99th percentile of the gust', s, levels[4]!);
    if (!touched) gusts.fill(plain);
    addGusts(scores, gusts, countAboveMs);
    scores.enhancedMean[s] = touched ? drawMean(gusts) : plain;
    scores.p5[s] = levels[0]!;
    scores.p50[s] = levels[1]!;
    scores.p90[s] = levels[2]!;
    scores.p95[s] = levels[3]!;
    scores.p99[s] = levels[4]!;
    scores.reach[s] = Math.max(plain, levels[4]!) < GUST_FLOOR ? SITE_BELOW_FLOOR : SITE_SCORED;
    control.onSite?.(s, scores, gusts);

    const damagePlain = meanDamage(curve, plain);
    scores.damagePlain[s] = damagePlain;
    // Damage and gross never fall with the gust, so their quantiles are those of the gust's draws.
    const damageP5 = meanDamage(curve, levels[0]!);
    const damageP95 = meanDamage(curve, levels[3]!);
    scores.damageP5[s] = damageP5;
    scores.damageP95[s] = damageP95;
    const value = sites.value[s]!;
    if (Number.isNaN(value)) {
      drawLosses(curve, 1, 0, Infinity, gusts, groundUp, gross);
      scores.damageMean[s] = touched ? drawMean(groundUp) : damagePlain;
      continue;
    }
    const deductible = sites.deductible[s]!;
    const limit = sites.limit[s]!;
    const grossPlain = expectedGross(damagePlain, value, deductible, limit);
    scores.groundUpPlain[s] = damagePlain * value;
    scores.grossPlain[s] = grossPlain;
    if (!touched) {
      scores.damageMean[s] = damagePlain;
      scores.groundUpMean[s] = damagePlain * value;
      scores.grossMean[s] = grossPlain;
      scores.grossP5[s] = grossPlain;
      scores.grossP50[s] = grossPlain;
      scores.grossP95[s] = grossPlain;
      if (damagePlain > 0) addEverywhere(scores, quantisedLoss(damagePlain * value), quantisedLoss(grossPlain));
      continue;
    }
    drawLosses(curve, value, deductible, limit, gusts, groundUp, gross);
    const groundUpMean = drawMean(groundUp);
    scores.groundUpMean[s] = groundUpMean;
    scores.grossMean[s] = drawMean(gross);
    scores.damageMean[s] = value > 0 ? groundUpMean / value : meanDamageOf(curve, gusts, groundUp);
    scores.grossP5[s] = gross[gusts.indexOf(levels[0]!)]!;
    scores.grossP50[s] = gross[gusts.indexOf(levels[1]!)]!;
    scores.grossP95[s] = gross[gusts.indexOf(levels[3]!)]!;
    if (groundUpMean > 0) {
      for (let d = 0; d < DRAW_COUNT; d++) {
        scores.eventGroundUp[d]! += quantisedLoss(groundUp[d]!);
        scores.eventGross[d]! += quantisedLoss(gross[d]!);
      }
    }
  }
  control.onProgress?.(count);
  return scores;
}

/** Mean, median and range of an event over its draws. */
export type EventSummary = { readonly mean: number; readonly p5: number; readonly p50: number; readonly p95: number };

/**
 * Summarises an event's loss over its draws. Percentiles of sites are never added up; those of the event come from here.
 *
 * @param draws Event loss per draw [currency], shape (264,).
 * @returns Weighted mean and percentiles [currency].
 * @throws {DomainError} when the number of draws is not 264.
 * @source Weights of ring/draws.ts.
 */
export function eventSummary(draws: ArrayLike<number>): EventSummary {
  const [p5, p50, p95] = drawQuantiles(draws, [0.05, 0.5, 0.95]);
  return { mean: drawMean(draws), p5: p5!, p50: p50!, p95: p95! };
}

function emptyScores(count: number, gusts: number): SiteScores {
  const columns = Object.fromEntries(COLUMNS.map((name) => [name, new Float64Array(count).fill(NaN)]));
  return {
    ...(columns as Record<(typeof COLUMNS)[number], Float64Array>),
    reach: new Uint8Array(count),
    eventGroundUp: new Float64Array(DRAW_COUNT),
    eventGross: new Float64Array(DRAW_COUNT),
    eventPeak: new Float64Array(DRAW_COUNT),
    eventAbove: new Float64Array(gusts * DRAW_COUNT),
  };
}

function addGusts({ eventPeak, eventAbove }: SiteScores, gusts: Float64Array, countAboveMs: readonly number[]): void {
  for (let d = 0; d < DRAW_COUNT; d++) {
    const gust = gusts[d]!;
    if (gust > eventPeak[d]!) eventPeak[d] = gust;
    for (let k = 0; k < countAboveMs.length; k++) if (gust >= countAboveMs[k]!) eventAbove[k * DRAW_COUNT + d]! += 1;
  }
}

/** Index of the first maximum. */
function highest(gust: Float64Array, count: number): number {
  let peak = 0;
  for (let i = 1; i < count; i++) if (gust[i]! > gust[peak]!) peak = i;
  return peak;
}

function lowest(values: Float64Array): number {
  let least = Infinity;
  for (let i = 0; i < values.length; i++) if (values[i]! < least) least = values[i]!;
  return least;
}

function requireGust(quantity: string, site: number, value: number): void {
  if (!(value >= 0 && value <= GUST_CEILING)) {
    throw new DomainError(`${quantity} of site ${site}`, value, `in 0..${GUST_CEILING} m/s`);
  }
}

function addEverywhere(scores: SiteScores, groundUp: number, gross: number): void {
  for (let d = 0; d < DRAW_COUNT; d++) {
    scores.eventGroundUp[d]! += groundUp;
    scores.eventGross[d]! += gross;
  }
}

function meanDamageOf(curve: DamageCurve, gusts: Float64Array, work: Float64Array): number {
  for (let d = 0; d < DRAW_COUNT; d++) work[d] = meanDamage(curve, gusts[d]!);
  return drawMean(work);
}
