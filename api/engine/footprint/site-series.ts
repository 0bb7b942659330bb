import { greatCircleDistance, normalisedBearing, type Place } from '../geo/geodesy.ts';
import { azimuthalShape, DRAW_COUNT, drawQuantiles, PHASE_COUNT } from '../ring/draws.ts';
import { SECTOR_COUNT } from '../terrain/fetch.ts';
import { STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { degrees } from '../units.ts';
import { drawPeaks, makeDrawWork } from './draws-of-site.ts';
import { followPassage, makePassage, type Passage } from './passage.ts';
import { siteExposure, windAt, type Site, type WindSteps } from './wind-at.ts';

/** Gusts at one site through the storm; one entry per time in every array. */
export type SiteSeries = {
  readonly timeS: Float64Array;
  /** Plain 3-s gust [m s⁻¹]. */
  readonly plain: Float64Array;
  /** Percentiles over the draws at each time [m s⁻¹]; their peaks are not the percentiles of the peak. */
  readonly p5: Float64Array;
  readonly p50: Float64Array;
  readonly p95: Float64Array;
  /** Direction the wind comes FROM [deg]. */
  readonly directionDeg: Float64Array;
};

/**
 * Gusts through the storm at one site.
 *
 * @param storm The storm.
 * @param site  The site.
 * @returns The series at the times the chain looks at.
 * @throws {DomainError} when a value of the site is outside its range.
 * @source followPassage; draws as in drawPeaks, at each time by itself.
 */
export function siteSeries(storm: Storm, site: Site): SiteSeries {
  const { passage, count } = follow(storm, site);
  const series = {
    timeS: new Float64Array(count),
    plain: passage.gust.slice(0, count),
    p5: passage.gust.slice(0, count),
    p50: passage.gust.slice(0, count),
    p95: passage.gust.slice(0, count),
    directionDeg: new Float64Array(count),
  };
  const gusts = new Float64Array(DRAW_COUNT);
  for (let i = 0; i < count; i++) {
    series.timeS[i] = passage.timeS[passage.state[i]!]!;
    series.directionDeg[i] = normalisedBearing(degrees(Math.atan2(-passage.seaU[i]!, -passage.seaV[i]!)));
    const crest = passage.crest[i]!;
    if (crest === 0) continue;
    const phase = Math.atan2(passage.phaseSin[i]!, passage.phaseCos[i]!);
    for (let d = 0; d < DRAW_COUNT; d++) {
      const shape = azimuthalShape(phase - storm.phases[d % PHASE_COUNT]!);
      gusts[d] = Math.max(passage.gust[i]! + storm.strengths[Math.floor(d / PHASE_COUNT)]! * crest * shape, 0);
    }
    const [p5, p50, p95] = drawQuantiles(gusts, [0.05, 0.5, 0.95]);
    series.p5[i] = p5!;
    series.p50[i] = p50!;
    series.p95[i] = p95!;
  }
  return series;
}

/** One rung: what is done to the wind, and what comes out [m s⁻¹]. */
export type LadderStep = {
  readonly step: 'gradient' | 'surface' | 'motion' | 'terrain' | 'gust-factor' | 'hills' | 'plain' | 'vortices';
  /** Factor or summand that leads here; null where there is none. Vortices: summand at the 5th and 95th percentile. */
  readonly times: number | null;
  readonly plus: readonly number[] | null;
  /** Result, or its 5th and 95th percentile. */
  readonly resultMs: readonly number[];
};

/** How a site's gust comes about at its plain peak. */
export type GustLadder = {
  readonly steps: readonly LadderStep[];
  /** The same with every intermediate quantity. */
  readonly wind: WindSteps;
  /** Overland distance in the wind's direction, between the two nearest sectors [m]; null at sea. */
  readonly upwindFetchM: number | null;
  readonly wavenumber: number | null;
  readonly draws: number;
};

/**
 * Explains a site's gust: from the wind above the friction layer down to the gust, at the time of the plain peak.
 *
 * @param storm The storm.
 * @param site  The site.
 * @returns The rungs in order. Vortices: percentiles of the peak over all draws, at whatever time it falls.
 * @throws {DomainError} when a value of the site is outside its range.
 * @source windAt for the plain rungs, drawPeaks for the vortices.
 */
export function gustLadder(storm: Storm, site: Site): GustLadder {
  const { passage, count } = follow(storm, site);
  let peak = 0;
  for (let i = 1; i < count; i++) if (passage.gust[i]! > passage.gust[peak]!) peak = i;
  const wind = windAt(storm, passage.state[peak]!, site);
  const gusts = new Float64Array(DRAW_COUNT);
  drawPeaks(passage, count, peak, makeDrawWork(storm.stateCount), gusts);
  const [p5, p95] = drawQuantiles(gusts, [0.05, 0.95]);
  const flat = wind.meanMs * wind.gustFactor;
  const times = (step: LadderStep['step'], factor: number, result: number): LadderStep => ({
    step,
    times: factor,
    plus: null,
    resultMs: [result],
  });
  const bare = { times: null, plus: null };
  return {
    wind,
    upwindFetchM: upwindFetch(site, wind.directionDeg),
    wavenumber: storm.wavenumber,
    draws: DRAW_COUNT,
    steps: [
      { step: 'gradient', ...bare, resultMs: [wind.gradientMs] },
      times('surface', wind.surfaceFactor, wind.surfaceMs),
      { step: 'motion', times: null, plus: [wind.seaWindMs - wind.surfaceMs], resultMs: [wind.seaWindMs] },
      times('terrain', wind.terrainFactor, wind.meanMs),
      times('gust-factor', wind.gustFactor, flat),
      times('hills', wind.topographicFactor, wind.gustMs),
      { step: 'plain', ...bare, resultMs: [wind.gustMs] },
      { step: 'vortices', times: null, plus: [p5! - wind.gustMs, p95! - wind.gustMs], resultMs: [p5!, p95!] },
    ],
  };
}

/**
 * Whether a site lies within half the radius of maximum wind at every time: its enhanced gust then means nothing.
 *
 * @param storm The storm.
 * @param site  The site.
 * @returns True when it never leaves the inner eye.
 * @source The amplitude law holds around the ring only.
 */
export function staysInEye(storm: Storm, site: Place): boolean {
  for (const k of storm.outer) {
    const at = k * STATE_SIZE;
    const latitude = storm.states[at + STATE.latitude]!;
    const longitude = storm.states[at + STATE.longitude]!;
    const distance = greatCircleDistance({ latitude, longitude }, site);
    if (distance > EYE_SHARE * storm.states[at + STATE.rMax]!) return false;
  }
  return true;
}

const EYE_SHARE = 0.5;

function follow(storm: Storm, site: Site): { passage: Passage; count: number } {
  const passage = makePassage(storm);
  return { passage, count: followPassage(storm, site.latitude, site.longitude, siteExposure(site), passage) };
}

function upwindFetch({ roughnessM, fetchM }: Site, directionDeg: number): number | null {
  if (roughnessM === null) return null;
  const sector = Math.floor(directionDeg / 45);
  const share = directionDeg / 45 - sector;
  return fetchM[sector % SECTOR_COUNT]! * (1 - share) + fetchM[(sector + 1) % SECTOR_COUNT]! * share;
}
