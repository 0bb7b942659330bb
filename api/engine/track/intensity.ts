import { LEAST_PRESSURE_DEFICIT, ONE_MINUTE_OVER_TEN, STANDARD_AMBIENT_PRESSURE } from '../constants.ts';
import { msFromKnots } from '../units.ts';
import { coriolis } from '../winds/coriolis.ts';
import { hollandGradientWind } from '../winds/holland-1980.ts';
import { clampedB, vickeryWadheraB } from '../winds/holland-b.ts';
import { clampedRadius, vickeryWadheraRadius } from '../winds/radius-of-maximum-wind.ts';
import { surfaceFactor } from '../winds/surface-factor.ts';
import { fitVortex, impliedMaxWind } from '../winds/vortex-fit.ts';
import { centralPressure } from '../winds/wind-pressure.ts';
import type { EngineNotice, Intensity, TrackFix, WindAveraging } from './fixes.ts';
import { motionAt } from './motion.ts';

/** Averaged reach of hurricane-force wind over the greatest reach in a quadrant [1]. From memory. */
const QUADRANT_SHARE = 0.85;
const HURRICANE_FORCE = msFromKnots(64);
const LEAST_SEARCHED_RADIUS = 6_000;
const NEIGHBOUR_SPAN = 6 * 3600;
/** Two standard deviations of the Vickery–Wadhera regression for B, rounded [1]. */
const NOTABLE_B_GAP = 0.45;

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
  readonly filled: Record<string, string>;
  readonly flags: string[];
};

/**
 * Factor from a reported maximum to a maximum 1-min wind, at sea.
 *
 * @param averaging Averaging period of the report [s].
 * @returns Factor [1].
 * @source At-sea gust factors of Harper, Kepert & Ginger (2010), WMO/TD-1555: 1.05 (60 s), 1.02 (120 s), 1.00 (180 s).
 */
function oneMinuteFactor(averaging: WindAveraging): number {
  if (averaging === 60) return 1;
  return averaging === 120 ? ONE_MINUTE_OVER_TEN / 1.02 : ONE_MINUTE_OVER_TEN;
}

/**
 * Fills what a track leaves open and settles each fix's maximum wind, fix by fix, in a fixed order.
 *
 * @param fixes     A track that requireTrack accepts.
 * @param intensity Which source rules where a fix has both a pressure and a wind.
 * @returns One entry per fix, and notices.
 * @source Order of this chain; the relations are named in `filled`.
 */
export function resolveIntensity(
  fixes: readonly TrackFix[],
  intensity: Intensity,
): { fixes: IntensityFix[]; notices: EngineNotice[] } {
  const started = fixes.map((fix) => startFix(fixes, fix, intensity));
  fillRadii(fixes, started);
  const notices: EngineNotice[] = [];
  const done = started.map((entry, i) => finishFix(fixes[i]!, entry, i, notices));
  return { fixes: done, notices };
}

type Started = Omit<IntensityFix, 'maxWind' | 'impliedMaxWind' | 'rMax'> & { rMax: number | null };

/** Steps 1 to 4: ambient pressure, 1-min wind, central pressure, source of intensity. */
function startFix(fixes: readonly TrackFix[], fix: TrackFix, intensity: Intensity): Started {
  const filled: Record<string, string> = {};
  const { speed, heading } = motionAt(fixes, fix.timeS);
  if (fix.ambientPressurePa === null) filled.ambientPressureHpa = 'standard 1010 hPa';
  const ambientPressure = fix.ambientPressurePa ?? STANDARD_AMBIENT_PRESSURE;
  const reportedMaxWind = fix.maxWindMs === null ? null : fix.maxWindMs * oneMinuteFactor(fix.windAveragingS);
  let pressure = fix.centralPressurePa;
  if (pressure === null) {
    const estimate = centralPressure(reportedMaxWind!, speed, fix.latitude, ambientPressure);
    pressure = estimate.pressure;
    filled.centralPressureHpa = estimate.relation;
  }
  const byWind = reportedMaxWind !== null && (intensity === 'wind' || fix.centralPressurePa === null);
  return {
    centralPressure: pressure,
    ambientPressure,
    reportedMaxWind,
    source: byWind ? 'wind' : 'pressure',
    rMax: fix.radiusOfMaxWindM,
    speed,
    heading,
    filled,
    flags: [],
  };
}

/** Step 5: the radius of maximum wind from 64-kt radii, else from neighbours within 6 h, else from a regression. */
function fillRadii(fixes: readonly TrackFix[], started: Started[]): void {
  started.forEach((entry, i) => {
    if (entry.rMax !== null) return;
    const radius = radiusFromHurricaneForce(fixes[i]!, entry);
    if (radius === null) return;
    entry.rMax = radius;
    entry.filled.radiusOfMaxWindM = '64-kt radii';
  });
  const known = started.flatMap(({ rMax }, i) => (rMax === null ? [] : [{ timeS: fixes[i]!.timeS, rMax }]));
  started.forEach((entry, i) => {
    if (entry.rMax !== null) return;
    const { timeS, latitude } = fixes[i]!;
    if (known.some((fix) => Math.abs(fix.timeS - timeS) <= NEIGHBOUR_SPAN)) {
      entry.rMax = linear(known, timeS);
      entry.filled.radiusOfMaxWindM = 'linear in time from fixes within 6 h';
    } else {
      entry.rMax = clampedRadius(vickeryWadheraRadius(deficitOf(entry), latitude));
      entry.filled.radiusOfMaxWindM = 'Vickery & Wadhera (2008), all hurricanes';
    }
  });
}

/** Step 6 and the comparison of both maxima. */
function finishFix(fix: TrackFix, entry: Started, i: number, notices: EngineNotice[]): IntensityFix {
  const rMax = entry.rMax!;
  const deficit = deficitOf(entry);
  const f = coriolis(fix.latitude);
  const implied =
    fix.centralPressurePa === null ? null : impliedMaxWind(entry.centralPressure, deficit, rMax, f, entry.speed);
  const maxWind = entry.source === 'wind' ? entry.reportedMaxWind! : implied!;
  if (fix.maxWindMs === null) entry.filled.maxWindMs = 'implied by the central pressure';
  const where = `Fix ${i + 1}`;
  if (implied !== null && entry.reportedMaxWind !== null) {
    const fitted = fitVortex(entry.reportedMaxWind, entry.speed, rMax, f, deficit).unclampedB;
    const usual = clampedB(vickeryWadheraB(rMax, f, deficit, entry.centralPressure));
    if (Math.abs(fitted - usual) > NOTABLE_B_GAP) {
      notices.push({
        code: 'wind-and-pressure-differ',
        text: `${where}: the reported wind is ${entry.reportedMaxWind.toFixed(1)} m/s, the pressure implies ${implied.toFixed(1)} m/s (both 1-min). The ${entry.source} is used.`,
      });
    }
  }
  const used = fitVortex(maxWind, entry.speed, rMax, f, deficit);
  if (used.b !== used.unclampedB) {
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
function radiusFromHurricaneForce(fix: TrackFix, entry: Started): number | null {
  const quadrants = (fix.radius64KtM ?? []).filter((radius) => radius > 0);
  if (quadrants.length === 0) return null;
  const reach = (QUADRANT_SHARE * quadrants.reduce((sum, radius) => sum + radius, 0)) / quadrants.length;
  const f = coriolis(fix.latitude);
  const deficit = deficitOf(entry);
  const carried = (rMax: number): number => {
    const maxWind =
      entry.source === 'wind'
        ? entry.reportedMaxWind!
        : impliedMaxWind(entry.centralPressure, deficit, rMax, f, entry.speed);
    const vortex = fitVortex(maxWind, entry.speed, rMax, f, deficit);
    return ONE_MINUTE_OVER_TEN * surfaceFactor(reach) * hollandGradientWind(reach, vortex);
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
