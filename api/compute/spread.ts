import { LEAST_PRESSURE_DEFICIT } from '#engine/constants.ts';
import { DomainError } from '#engine/errors.ts';
import {
  eventSummary,
  scoreSites,
  SITE_OUT_OF_REACH,
  type SiteBatch,
  type SiteScores,
} from '#engine/footprint/site-peaks.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import type { DamageCurve } from '#engine/loss/damage-curve.ts';
import type { ObservedVortices } from '#engine/ring/observed-vortices.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import type { ChainOptions } from '#engine/track/options.ts';
import { resolveFixes } from '#engine/track/resolution.ts';
import { prepareStorm, type Storm } from '#engine/track/storm.ts';
import { coriolis } from '#engine/winds/coriolis.ts';
import { clampedB, vickeryWadheraB } from '#engine/winds/holland-b.ts';
import { toCents } from './minor-units.ts';

/** What one computation of a spread is given. */
export type Trial = {
  readonly fixes: readonly TrackFix[];
  readonly observations: readonly ObservedVortices[];
  readonly options: ChainOptions;
  readonly curve: DamageCurve;
  /** Times every radius of maximum wind in use, those filled in included. */
  readonly radiusFactor: number;
};

type Range = { readonly plain: number; readonly p5: number; readonly p50: number; readonly p95: number };

/** What came out of it, for all sites together. */
export type Outcome = {
  /** Strongest gust at any site [m s⁻¹]; percentiles over the draws of the event. */
  readonly peakMs: Range;
  /** Index of the site with the strongest median gust; null when none is within reach. */
  readonly strongest: number | null;
  /** Null when no site within reach has a value. */
  readonly grossMinor: (Range & { readonly mean: number }) | null;
};

export type TrialResult =
  | { readonly outcome: Outcome; readonly sameGusts: boolean; readonly sameLosses: boolean }
  | { readonly refused: string };

/** One reading of a fix: its 1-min maximum [m s⁻¹], and the radius [m] and shape that go with it. */
export type Reading = { readonly maxWindMs: number; readonly radiusOfMaxWindM: number; readonly shapeB: number };

/** What the reasons of a trial without effect are read from, and both readings of the strongest fix. */
export type SpreadBase = {
  readonly storm: Pick<Storm, 'fixes' | 'notices' | 'wavenumber'>;
  readonly outcome: Outcome;
  readonly readings: {
    /** Index of the fix with the largest maximum in use. */
    readonly fix: number;
    readonly pressure: Reading | null;
    readonly wind: Reading | null;
    readonly relationB: number;
  };
};

type Control = { readonly land: LandIndex; readonly shouldStop: () => boolean };

/**
 * Less than anybody could tell apart: the chosen relations take another way through the arithmetic than the defaults, so
 * the same wind comes out alike but for its last bits.
 */
const UNSEEN = 1e-6;

const alike = (a: ArrayLike<number>, b: ArrayLike<number>): boolean => {
  for (let i = 0; i < a.length; i++) {
    if (Math.abs(a[i]! - b[i]!) > UNSEEN * Math.max(1, Math.abs(a[i]!))) return false;
    if (Number.isNaN(a[i]!) !== Number.isNaN(b[i]!)) return false;
  }
  return true;
};

const GUSTS = ['plainGust', 'enhancedMean', 'p5', 'p50', 'p90', 'p95', 'p99', 'eventPeak', 'reach'] as const;
const LOSSES = ['groundUpPlain', 'groundUpMean', 'grossPlain', 'grossMean', 'eventGroundUp', 'eventGross'] as const;

const same = (a: SiteScores, b: SiteScores, columns: readonly (keyof SiteScores)[]): boolean =>
  columns.every((column) => alike(a[column], b[column]));

const centsOf = (column: Float64Array): number => column.reduce((sum, amount) => sum + (toCents(amount) ?? 0), 0);

const outcomeOf = (scores: SiteScores): Outcome => {
  const { eventPeak, eventGross, plainGust, p50, reach, grossPlain, grossMean } = scores;
  let plain = 0;
  let strongest: number | null = null;
  for (let i = 0; i < reach.length; i++) {
    if (reach[i] === SITE_OUT_OF_REACH) continue;
    plain = Math.max(plain, plainGust[i]!);
    if (strongest === null || p50[i]! > p50[strongest]!) strongest = i;
  }
  const peak = eventSummary(eventPeak);
  const gross = eventSummary(eventGross);
  const hasValues = grossPlain.some((amount) => !Number.isNaN(amount));
  return {
    peakMs: { plain, p5: peak.p5, p50: peak.p50, p95: peak.p95 },
    strongest,
    grossMinor: hasValues
      ? {
          plain: centsOf(grossPlain),
          mean: centsOf(grossMean),
          p5: toCents(gross.p5)!,
          p50: toCents(gross.p50)!,
          p95: toCents(gross.p95)!,
        }
      : null,
  };
};

/** Storms by what they were prepared from: trials that differ in their curve alone share one. */
const stormMaker = (land: LandIndex): ((trial: Trial) => Storm) => {
  const made = new Map<string, Storm>();
  const prepare = ({ fixes, options, observations }: Omit<Trial, 'curve' | 'radiusFactor'>): Storm => {
    const key = JSON.stringify([fixes, options, observations]);
    const known = made.get(key) ?? prepareStorm(fixes, options, land, observations);
    made.set(key, known);
    return known;
  };
  return ({ radiusFactor, ...trial }) => {
    if (radiusFactor === 1) return prepare(trial);
    const { fixes: resolved } = prepare(trial);
    const widened = trial.fixes.map((fix, i) => ({
      ...fix,
      radiusOfMaxWindM: radiusFactor * resolved[i]!.radiusOfMaxWindM,
    }));
    return prepare({ ...trial, fixes: widened });
  };
};

/** Without vortices and anchoring, which come after both readings. */
const readingsOf = ({ fixes, options }: Trial, base: Storm, land: LandIndex): SpreadBase['readings'] => {
  const fix = base.fixes.reduce((best, { maxWindMs }, i) => (maxWindMs > base.fixes[best]!.maxWindMs ? i : best), 0);
  const read = (intensity: ChainOptions['intensity']): Reading | null => {
    const bare = { ...options, intensity, anchor: 'mean' as const, mesovortices: false };
    const { maxWindMs, radiusOfMaxWindM, shapeB, intensitySource } = resolveFixes(fixes, bare, land).fixes[fix]!;
    return intensitySource === intensity ? { maxWindMs, radiusOfMaxWindM, shapeB } : null;
  };
  const { latitude, radiusOfMaxWindM, ambientPressurePa, centralPressurePa } = base.fixes[fix]!;
  const deficit = Math.max(ambientPressurePa - centralPressurePa, LEAST_PRESSURE_DEFICIT);
  const relationB = clampedB(vickeryWadheraB(radiusOfMaxWindM, coriolis(latitude), deficit, centralPressurePa));
  return { fix, pressure: read('pressure'), wind: read('wind'), relationB };
};

/**
 * The base and each trial alone at the same sites, one after another: the same bits on any machine with any number of
 * threads. Null when it was asked to stop.
 */
export const computeSpread = (
  base: Trial,
  trials: readonly Trial[],
  sites: SiteBatch,
  { land, shouldStop }: Control,
): { base: SpreadBase; trials: TrialResult[] } | null => {
  const stormOf = stormMaker(land);
  const storm = stormOf(base);
  const scores = scoreSites(storm, sites, base.curve, { shouldStop });
  const results: TrialResult[] = [];
  for (const trial of trials) {
    if (shouldStop()) return null;
    try {
      const tried = scoreSites(stormOf(trial), sites, trial.curve, { shouldStop });
      results.push({
        outcome: outcomeOf(tried),
        sameGusts: same(scores, tried, GUSTS),
        sameLosses: same(scores, tried, LOSSES),
      });
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      results.push({ refused: error.message });
    }
  }
  if (shouldStop()) return null;
  const { fixes, notices, wavenumber } = storm;
  const readings = readingsOf(base, storm, land);
  return { base: { storm: { fixes, notices, wavenumber }, outcome: outcomeOf(scores), readings }, trials: results };
};
