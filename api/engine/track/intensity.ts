import { LEAST_PRESSURE_DEFICIT, STANDARD_AMBIENT_PRESSURE } from '../constants.ts';
import { msFromKnots } from '../units.ts';
import { coriolis } from '../winds/coriolis.ts';
import { impliedMaxWind, relationB, surfaceShare } from '../winds/implied-wind.ts';
import {
  clampedRadius,
  knaffRadius,
  vickeryWadheraGulfRadius,
  vickeryWadheraRadius,
  willoughbyRadius,
  willoughbyRahnRadius,
} from '../winds/radius-of-maximum-wind.ts';
import { profileState, radialProfile } from '../winds/radial-profile.ts';
import { SURFACE_FACTORS } from '../winds/surface-factor.ts';
import { fitVortex, type FittedVortex } from '../winds/vortex-fit.ts';
import { atkinsonHollidayPressure, centralPressure } from '../winds/wind-pressure.ts';
import type { EngineNotice, Intensity, TrackFix, WindAveraging } from './fixes.ts';
import { motionAt } from './motion.ts';
import { oneMinuteOverTen, type ChainOptions } from './options.ts';

/** Averaged reach of hurricane-force wind over the greatest reach in a quadrant [1]. From memory. */
const QUADRANT_SHARE = 0.85;
const HURRICANE_FORCE = msFromKnots(64);
const LEAST_SEARCHED_RADIUS = 6_000;
const NEIGHBOUR_SPAN = 6 * 3600;
/** Two standard deviations of the Vickery–Wadhera regression for B, rounded [1]. */
const NOTABLE_B_GAP = 0.45;
const FIXED_POINT_STEPS = 60;

/** What the order of filling gives a fix, before inland decay, ring and anchoring. */
export type IntensityFix = {
  readonly centralPressure: number;
  readonly ambientPressure: number;
  readonly reportedMaxWind: number | null;
  readonly impliedMaxWind: number | null;
  readonly maxWind: number;
  readonly source: Intensity;
  readonly rMax: number;
  readonly speed: number;
  readonly heading: number;
  /** Rate of change of the central pressure [Pa s⁻¹]. */
  readonly tendency: number;
  readonly filled: Record<string, string>;
  readonly flags: string[];
};

/**
 * Factor from a reported maximum to a maximum 1-min wind, at sea.
 *
 * @param averaging Averaging period of the report [s].
 * @param overTen   Maximum 1-min over 10-min wind [1].
 * @returns Factor [1].
 * @source At-sea gust factors of Harper, Kepert & Ginger (2010), WMO/TD-1555: 1.05 (60 s), 1.02 (120 s), 1.00 (180 s).
 */
function oneMinuteFactor(averaging: WindAveraging, overTen: number): number {
  if (averaging === 60) return 1;
  return averaging === 120 ? overTen / 1.02 : overTen;
}

/**
 * Fills what a track leaves open and settles each fix's maximum wind, fix by fix, in a fixed order.
 *
 * @param fixes   A track that requireTrack accepts.
 * @param options Choices of the chain.
 * @returns One entry per fix, and notices.
 * @source Order of this chain; the relations are named in `filled`.
 */
export function resolveIntensity(
  fixes: readonly TrackFix[],
  options: ChainOptions,
): { fixes: IntensityFix[]; notices: EngineNotice[] } {
  const started = fixes.map((fix) => startFix(fixes, fix, options));
  fillTendencies(fixes, started);
  fillRadii(fixes, started, options);
  const notices: EngineNotice[] = [];
  const done = started.map((entry, i) => finishFix(fixes[i]!, entry, i, notices, options));
  return { fixes: done, notices };
}

type Started = Omit<IntensityFix, 'maxWind' | 'impliedMaxWind' | 'rMax' | 'tendency'> & {
  rMax: number | null;
  tendency: number;
};

/** Steps 1 to 4: ambient pressure, 1-min wind, central pressure, source of intensity. */
function startFix(fixes: readonly TrackFix[], fix: TrackFix, options: ChainOptions): Started {
  const filled: Record<string, string> = {};
  const { speed, heading } = motionAt(fixes, fix.timeS);
  if (fix.ambientPressurePa === null) filled.ambientPressureHpa = 'standard 1010 hPa';
  const ambientPressure = fix.ambientPressurePa ?? STANDARD_AMBIENT_PRESSURE;
  const reportedMaxWind =
    fix.maxWindMs === null
      ? null
      : fix.maxWindMs * oneMinuteFactor(fix.windAveragingS, oneMinuteOverTen(options.averaging));
  let pressure = fix.centralPressurePa;
  if (pressure === null) {
    const estimate =
      options.windPressure === 'atkinson-holliday-1977'
        ? { pressure: atkinsonHollidayPressure(reportedMaxWind!), relation: 'Atkinson & Holliday (1977)' }
        : centralPressure(reportedMaxWind!, speed, fix.latitude, ambientPressure);
    pressure = estimate.pressure;
    filled.centralPressureHpa = estimate.relation;
  }
  const byWind = reportedMaxWind !== null && (options.intensity === 'wind' || fix.centralPressurePa === null);
  return {
    centralPressure: pressure,
    ambientPressure,
    reportedMaxWind,
    source: byWind ? 'wind' : 'pressure',
    rMax: fix.radiusOfMaxWindM,
    speed,
    heading,
    tendency: 0,
    filled,
    flags: [],
  };
}

/** Rate of change of the central pressure, over the neighbouring fixes. */
function fillTendencies(fixes: readonly TrackFix[], started: Started[]): void {
  const tendencies = pressureTendencies(
    fixes.map(({ timeS }, i) => ({ timeS, centralPressurePa: started[i]!.centralPressure })),
  );
  started.forEach((entry, i) => (entry.tendency = tendencies[i]!));
}

/**
 * Rate of change of the central pressure at every fix.
 *
 * @param fixes Times [s] and central pressures [Pa].
 * @returns Rates [Pa s⁻¹].
 * @source Difference between the neighbours, one-sided at the ends.
 */
export function pressureTendencies(
  fixes: readonly { readonly timeS: number; readonly centralPressurePa: number }[],
): number[] {
  return fixes.map((_, i) => {
    const a = fixes[Math.max(i - 1, 0)]!;
    const b = fixes[Math.min(i + 1, fixes.length - 1)]!;
    return (b.centralPressurePa - a.centralPressurePa) / (b.timeS - a.timeS);
  });
}

/** Step 5: the radius of maximum wind from 64-kt radii, else from neighbours within 6 h, else from a regression. */
function fillRadii(fixes: readonly TrackFix[], started: Started[], options: ChainOptions): void {
  const byRadii = options.radiusSource === 'radii-64';
  started.forEach((entry, i) => {
    if (entry.rMax !== null || !byRadii) return;
    const radius = radiusFromHurricaneForce(fixes[i]!, entry, options);
    if (radius === null) return;
    entry.rMax = radius;
    entry.filled.radiusOfMaxWindM = '64-kt radii';
  });
  const known = started.flatMap(({ rMax }, i) => (rMax === null ? [] : [{ timeS: fixes[i]!.timeS, rMax }]));
  started.forEach((entry, i) => {
    if (entry.rMax !== null) return;
    const { timeS } = fixes[i]!;
    if (byRadii && known.some((fix) => Math.abs(fix.timeS - timeS) <= NEIGHBOUR_SPAN)) {
      entry.rMax = linear(known, timeS);
      entry.filled.radiusOfMaxWindM = 'linear in time from fixes within 6 h';
    } else {
      entry.rMax = radiusByRelation(fixes[i]!, entry, options);
      entry.filled.radiusOfMaxWindM = RADIUS_RELATIONS[options.radiusRelation];
    }
  });
}

const RADIUS_RELATIONS: Readonly<Record<ChainOptions['radiusRelation'], string>> = {
  'vickery-wadhera-2008': 'Vickery & Wadhera (2008), all hurricanes',
  'vickery-wadhera-2008-gulf': 'Vickery & Wadhera (2008), Gulf of Mexico',
  'willoughby-rahn-2004': 'Willoughby & Rahn (2004)',
  'willoughby-2006': 'Willoughby et al. (2006)',
  'knaff-2015': 'Knaff et al. (2015)',
};

/** A relation to the wind needs the maximum this fix will have, which may depend on the radius: solved by repetition. */
function radiusByRelation(fix: TrackFix, entry: Started, options: ChainOptions): number {
  const { latitude } = fix;
  const usual = clampedRadius(vickeryWadheraRadius(deficitOf(entry), latitude));
  switch (options.radiusRelation) {
    case 'vickery-wadhera-2008':
      return usual;
    case 'vickery-wadhera-2008-gulf':
      return clampedRadius(vickeryWadheraGulfRadius(deficitOf(entry)));
    case 'willoughby-rahn-2004':
      return settled((rMax) => willoughbyRahnRadius(vortexOf(fix, entry, rMax, options).gradientMax, latitude), usual);
    case 'willoughby-2006':
      return settled((rMax) => willoughbyRadius(vortexOf(fix, entry, rMax, options).gradientMax, latitude), usual);
    case 'knaff-2015':
      return settled((rMax) => knaffRadius(maxWindOf(fix, entry, rMax, options), latitude), usual);
  }
}

function settled(relation: (rMax: number) => number, from: number): number {
  let rMax = from;
  for (let k = 0; k < FIXED_POINT_STEPS; k++) rMax = clampedRadius(relation(rMax));
  return rMax;
}

/** Maximum 1-min wind a fix has with a radius: as reported, or as its pressure implies. */
function maxWindOf(fix: TrackFix, entry: Started, rMax: number, options: ChainOptions): number {
  if (entry.source === 'wind' && options.shapeSource === 'max-wind') return entry.reportedMaxWind!;
  return impliedMaxWind(pressureStorm(fix, entry, rMax), options, surfaceShare(entry.source === 'pressure', options));
}

function vortexOf(fix: TrackFix, entry: Started, rMax: number, options: ChainOptions): FittedVortex {
  const share = surfaceShare(entry.source === 'pressure', options);
  const maxWind = maxWindOf(fix, entry, rMax, options);
  return fitVortex(maxWind, entry.speed, rMax, coriolis(fix.latitude), deficitOf(entry), options, share);
}

function pressureStorm({ latitude }: TrackFix, entry: Started, rMax: number) {
  return {
    central: entry.centralPressure,
    deficit: deficitOf(entry),
    tendency: entry.tendency,
    rMax,
    latitude,
    f: coriolis(latitude),
    speed: entry.speed,
  };
}

/** Step 6 and the comparison of both maxima. */
function finishFix(
  fix: TrackFix,
  entry: Started,
  i: number,
  notices: EngineNotice[],
  options: ChainOptions,
): IntensityFix {
  const rMax = entry.rMax!;
  const deficit = deficitOf(entry);
  const f = coriolis(fix.latitude);
  const storm = pressureStorm(fix, entry, rMax);
  const share = surfaceShare(entry.source === 'pressure', options);
  const implied = fix.centralPressurePa === null ? null : impliedMaxWind(storm, options, share);
  const maxWind = maxWindOf(fix, entry, rMax, options);
  if (fix.maxWindMs === null) entry.filled.maxWindMs = 'implied by the central pressure';
  else if (entry.source === 'wind' && options.shapeSource === 'relation') {
    entry.filled.maxWindMs = 'implied by the central pressure and the shape B of the relation';
  }
  const where = `Fix ${i + 1}`;
  if (implied !== null && entry.reportedMaxWind !== null) {
    const fitted = fitVortex(entry.reportedMaxWind, entry.speed, rMax, f, deficit).unclampedB;
    const usual = relationB(storm, 'vickery-wadhera-2008');
    if (Math.abs(fitted - usual) > NOTABLE_B_GAP) {
      notices.push({
        code: 'wind-and-pressure-differ',
        text: `${where}: the reported wind is ${entry.reportedMaxWind.toFixed(1)} m/s, the pressure implies ${implied.toFixed(1)} m/s (both 1-min). The ${entry.source} is used.`,
      });
    }
  }
  const used = fitVortex(maxWind, entry.speed, rMax, f, deficit, options, share);
  // A maximum implied by B gives that B back only to rounding.
  if (Math.abs(used.b - used.unclampedB) > 1e-9) {
    const text = `B clamped to ${used.b}, pressure deficit adjusted from ${(deficit / 100).toFixed(1)} to ${(used.deficit / 100).toFixed(1)} hPa`;
    entry.flags.push(text);
    notices.push({ code: 'b-clamped', text: `${where}: ${text}.` });
  }
  if (Math.abs(fix.latitude) < 1) {
    const text = 'within 1 degree of the equator the wind profile means little';
    entry.flags.push(text);
    notices.push({ code: 'low-latitude', text: `${where}: ${text}.` });
  }
  return { ...entry, rMax, maxWind, impliedMaxWind: implied };
}

/**
 * Radius of maximum wind with which a fix's own vortex carries 64 kt at the mean reach of its 64-kt radii.
 */
function radiusFromHurricaneForce(fix: TrackFix, entry: Started, options: ChainOptions): number | null {
  const quadrants = (fix.radius64KtM ?? []).filter((radius) => radius > 0);
  if (quadrants.length === 0) return null;
  const reach = (QUADRANT_SHARE * quadrants.reduce((sum, radius) => sum + radius, 0)) / quadrants.length;
  const profile = radialProfile(options);
  const share = surfaceShare(entry.source === 'pressure', options);
  const carried = (rMax: number): number => {
    const state = profileState(vortexOf(fix, entry, rMax, options), fix.latitude, share, null, options);
    const factor = SURFACE_FACTORS[options.surfaceFactor](reach) * share;
    return oneMinuteOverTen(options.averaging) * factor * profile(reach, state);
  };
  let low = LEAST_SEARCHED_RADIUS;
  let high = reach;
  if (!(high > low) || carried(low) > HURRICANE_FORCE || carried(high) < HURRICANE_FORCE) return null;
  for (let k = 0; k < 60; k++) {
    const middle = (low + high) / 2;
    if (carried(middle) < HURRICANE_FORCE) low = middle;
    else high = middle;
  }
  return clampedRadius((low + high) / 2);
}

function deficitOf({ ambientPressure, centralPressure }: Started): number {
  return Math.max(ambientPressure - centralPressure, LEAST_PRESSURE_DEFICIT);
}

function linear(known: readonly { timeS: number; rMax: number }[], timeS: number): number {
  const after = known.findIndex((fix) => fix.timeS > timeS);
  if (after === 0) return known[0]!.rMax;
  if (after < 0) return known[known.length - 1]!.rMax;
  const a = known[after - 1]!;
  const b = known[after]!;
  return a.rMax + ((timeS - a.timeS) / (b.timeS - a.timeS)) * (b.rMax - a.rMax);
}
