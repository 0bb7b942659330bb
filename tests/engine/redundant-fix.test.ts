import { describe, expect, it } from 'vitest';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { betweenPlaces } from '#engine/geo/geodesy.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { batchOf, workedFixes, workedSites } from '../helpers/worked-storm.ts';

const HOUR = 3600;
const LIMIT = 0.002;

const scored = (fixes: TrackFix[], options: Partial<ChainOptions>) =>
  scoreSites(prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...options }, null), batchOf(workedSites), REFERENCE_CURVE);

/** A fix that tells nothing new: on the great circle between two others, its numbers between theirs. */
const between = (a: TrackFix, b: TrackFix, share: number): TrackFix => {
  const mix = (from: number | null, to: number | null) => from! + share * (to! - from!);
  const timeS = mix(a.timeS, b.timeS);
  return {
    ...a,
    ...betweenPlaces(a, b, share),
    timeS,
    centralPressurePa: mix(a.centralPressurePa, b.centralPressurePa),
    maxWindMs: mix(a.maxWindMs, b.maxWindMs),
    radiusOfMaxWindM: mix(a.radiusOfMaxWindM, b.radiusOfMaxWindM),
    // Hours since landfall run with the clock; before it they are 0.
    hoursInland: Math.max(0, b.hoursInland! - (b.timeS - timeS) / HOUR),
  };
};

const deficitOf = ({ ambientPressurePa, centralPressurePa }: TrackFix) => ambientPressurePa! - centralPressurePa!;

/**
 * Where the pressure sets the intensity the wind at a fix goes nearly with the root of the deficit, and is straight
 * between fixes: by so much the root of the mean lies above the mean of the roots.
 */
const bendOfRoot = (a: TrackFix, b: TrackFix, share: number): number => {
  const [from, to] = [deficitOf(a), deficitOf(b)];
  return Math.sqrt(from + share * (to - from)) / (Math.sqrt(from) + share * (Math.sqrt(to) - Math.sqrt(from))) - 1;
};

// The logical-relationship tests of regulators ask that a model does not depend on how a track is written down.
describe.each<[string, Partial<ChainOptions>, typeof bendOfRoot]>([
  ['intensity by wind', { intensity: 'wind', anchor: 'mean' }, () => 0],
  ['intensity by pressure, beyond the bend of the root', {}, bendOfRoot],
])('a redundant fix, %s', (_, options, bend) => {
  const base = scored(workedFixes, options);
  it.each([1, 2, 3, 4])('in leg %i changes no gust by 2 in 1000, plain or enhanced', (leg) => {
    const [a, b] = [workedFixes[leg - 1]!, workedFixes[leg]!];
    for (const share of [1 / 3, 0.5]) {
      const more = scored([...workedFixes.slice(0, leg), between(a, b, share), ...workedFixes.slice(leg)], options);
      workedSites.forEach((site, s) => {
        for (const column of ['plainGust', 'p50', 'p95'] as const) {
          const change = Math.abs(more[column][s]! / base[column][s]! - 1);
          expect(change, `${column} at ${site.latitude}`).toBeLessThan(LIMIT + bend(a, b, share));
        }
      });
    }
  });
});

describe.each<[string, Partial<ChainOptions>]>([
  ['half', { timeStepS: 150, innerTimeStepS: 30 }],
  ['a fifth', { timeStepS: 60, innerTimeStepS: 12 }],
])('time steps of %s', (_, steps) => {
  it('never lower the plain peak, and raise it by less than 0.2 %', () => {
    const [coarse, fine] = [scored(workedFixes, {}), scored(workedFixes, steps)];
    workedSites.forEach((site, s) => {
      const rise = fine.plainGust[s]! / coarse.plainGust[s]! - 1;
      expect(rise, `at ${site.latitude}`).toBeGreaterThanOrEqual(-1e-12);
      expect(rise, `at ${site.latitude}`).toBeLessThan(LIMIT);
    });
  });
});
