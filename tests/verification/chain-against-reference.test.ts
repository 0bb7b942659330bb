import { describe, expect, it } from 'vitest';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { siteSeries } from '#engine/footprint/site-series.ts';
import { drawPeaks, makeDrawWork } from '#engine/footprint/draws-of-site.ts';
import { secondsAtLeast } from '#engine/footprint/durations.ts';
import { drawMean, drawQuantiles } from '#engine/ring/draws.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { siteExposure, windAt, type Site } from '#engine/footprint/wind-at.ts';
import { REFERENCE_CURVE, meanDamage } from '#engine/loss/damage-curve.ts';
import { expectedGross } from '#engine/loss/secondary-uncertainty.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { hoursInlandOf } from '#engine/track/inland.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { referenceScores } from '../helpers/reference-chain.ts';
import { batchOf, mirroredFixes, workedFixes, workedSites, type TestSite } from '../helpers/worked-storm.ts';

/** The same stream of numbers on every machine: a linear congruential generator. */
function generator(seed: number): () => number {
  let state = seed;
  return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 32;
}

function scattered(count: number, south: boolean): TestSite[] {
  const next = generator(south ? 7 : 5);
  return Array.from({ length: count }, () => {
    const latitude = 21 + 7 * next();
    const atSea = next() < 0.3;
    return {
      latitude: south ? -latitude : latitude,
      longitude: 177.5 + 4.5 * next(),
      roughness: atSea ? null : 0.002 + next() ** 3,
      fetch: Array.from({ length: 8 }, () => (next() < 0.2 ? 0 : 1e5 * next() * next())),
      hill: 1 + 0.3 * next(),
      value: 1e5 + 1e6 * next(),
      deductible: 1e4 * next(),
      limit: next() < 0.3 ? Infinity : 5e5 * next(),
    };
  });
}

// A thin ring with an empty eye, small and fast, so that the layer works hard.
const small: TrackFix[] = workedFixes.map((fix, i) => ({
  ...fix,
  centralPressurePa: 91_000 + 500 * i,
  maxWindMs: 75 - 2 * i,
  radiusOfMaxWindM: 14_000 + 1000 * i,
  ringWidthFraction: 0.22,
  eyeVorticityRatio: 0.05,
}));

const cases: [string, TrackFix[], Partial<ChainOptions>, boolean, number][] = [
  ['by pressure', workedFixes, {}, false, 60],
  ['by wind, peaks divided out', workedFixes, { intensity: 'wind' }, false, 60],
  ['in the south', mirroredFixes(workedFixes), {}, true, 60],
  ['with a small, fast ring', small, { intensity: 'wind', anchor: 'mean' }, false, 20],
  ['without vortices', workedFixes, { mesovortices: false }, false, 60],
];

describe.each(cases)('the fast chain agrees with a slow one written apart: %s', (_, fixes, options, south, inner) => {
  const storm = prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...options }, null);
  const sites = scattered(12, south);
  const scores = scoreSites(storm, batchOf(sites), REFERENCE_CURVE);
  const slow = sites.map((site) =>
    referenceScores(storm.fixes, storm.wavenumber, site, hoursInlandOf(fixes, null), 300, inner),
  );

  it('in gusts, times and durations', () => {
    slow.forEach((expected, i) => {
      expect(scores.plainGust[i]!).toBeCloseTo(expected.plain, 8);
      expect(scores.plainTimeS[i]!).toBe(expected.timeS);
      // The slow duration counts slices of 1/2000 of a step at each crossing.
      expect(Math.abs(scores.secondsAbove25[i]! - expected.above25)).toBeLessThan(1);
      expect(Math.abs(scores.secondsAbove33[i]! - expected.above33)).toBeLessThan(1);
      expect(scores.enhancedMean[i]!).toBeCloseTo(expected.mean, 8);
      expect(scores.p5[i]!).toBeCloseTo(expected.quantile(0.05), 8);
      expect(scores.p50[i]!).toBeCloseTo(expected.quantile(0.5), 8);
      expect(scores.p90[i]!).toBeCloseTo(expected.quantile(0.9), 8);
      expect(scores.p95[i]!).toBeCloseTo(expected.quantile(0.95), 8);
      expect(scores.p99[i]!).toBeCloseTo(expected.quantile(0.99), 8);
    });
  });
  it('in every single draw, and in its losses', () => {
    const eventGross = new Float64Array(264);
    sites.forEach((site, i) => {
      const place = siteOf(site);
      const passage = makePassage(storm);
      const count = followPassage(storm, site.latitude, site.longitude, siteExposure(place), passage);
      expect(count).toBe(slow[i]!.times);
      const gusts = new Float64Array(264);
      const peak = passage.gust.subarray(0, count).indexOf(Math.max(...passage.gust.subarray(0, count)));
      drawPeaks(passage, count, peak, makeDrawWork(storm.stateCount), gusts);
      slow[i]!.draws.forEach((value, d) => {
        expect(Math.abs(gusts[d]! - value)).toBeLessThan(2e-9);
        const mu = meanDamage(REFERENCE_CURVE, value);
        eventGross[d]! += expectedGross(mu, site.value, site.deductible, site.limit);
      });
    });
    eventGross.forEach((value, d) => expect(Math.abs(scores.eventGross[d]! - value)).toBeLessThan(0.01));
  });
  it('step by step, where a site is explained', () => {
    sites.forEach((site) => {
      const place = siteOf(site);
      const passage = makePassage(storm);
      const count = followPassage(storm, site.latitude, site.longitude, siteExposure(place), passage);
      for (let i = 0; i < count; i += 17) {
        const wind = windAt(storm, passage.state[i]!, place);
        expect(Math.abs(wind.gustMs - passage.gust[i]!)).toBeLessThan(1e-9);
        expect(Math.abs(wind.eastwardMs - passage.seaU[i]!)).toBeLessThan(1e-9);
        expect(Math.abs(wind.terrainFactor - passage.meanFactor[i]!)).toBeLessThan(1e-11);
      }
    });
  });
});

it('shows a series whose highest plain value is the peak, inside its own band', () => {
  const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
  const scores = scoreSites(storm, batchOf(workedSites), REFERENCE_CURVE);
  workedSites.forEach((site, s) => {
    const series = siteSeries(storm, siteOf(site));
    expect(Math.max(...series.plain)).toBe(scores.plainGust[s]);
    expect(Math.max(...series.p95)).toBeLessThanOrEqual(scores.p95[s]! + 1e-9);
    series.plain.forEach((_, i) => {
      expect(series.p5[i]!).toBeLessThanOrEqual(series.p50[i]!);
      expect(series.p50[i]!).toBeLessThanOrEqual(series.p95[i]!);
    });
  });
});

function siteOf(site: TestSite): Site {
  return {
    latitude: site.latitude,
    longitude: site.longitude,
    roughnessM: site.roughness,
    fetchM: site.fetch,
    topographicFactor: site.hill,
  };
}

describe('times that are left out because the wind is surely too weak', () => {
  const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
  const sites = scattered(60, false).concat(
    // Far off, where everything is weak; and around the threshold of 25 m/s.
    scattered(60, false).map((site, i) => ({ ...site, latitude: site.latitude - 6 + i / 10, roughness: 0.5 })),
  );

  it('never change a peak, a duration or a draw', () => {
    const scores = scoreSites(storm, batchOf(sites), REFERENCE_CURVE);
    const passage = makePassage(storm);
    const gusts = new Float64Array(264);
    let leftOut = 0;
    sites.forEach((site, i) => {
      const exposure = siteExposure(siteOf(site));
      const few = followPassage(storm, site.latitude, site.longitude, exposure, passage, 25);
      const count = followPassage(storm, site.latitude, site.longitude, exposure, passage);
      leftOut += count - few;
      const peak = passage.gust.subarray(0, count).indexOf(Math.max(...passage.gust.subarray(0, count)));
      drawPeaks(passage, count, peak, makeDrawWork(storm.stateCount), gusts);
      expect(scores.plainGust[i]).toBe(passage.gust[peak]);
      expect(scores.secondsAbove25[i]!).toBeCloseTo(secondsAtLeast(passage, count, 25), 6);
      expect(scores.secondsAbove33[i]!).toBeCloseTo(secondsAtLeast(passage, count, 33), 6);
      expect(scores.p5[i]).toBe(drawQuantiles(gusts, [0.05])[0]);
      expect(scores.enhancedMean[i]!).toBeCloseTo(drawMean(gusts), 12);
    });
    expect(leftOut).toBeGreaterThan(1000);
  });
  it('are those at which the gust is below the floor', () => {
    const passage = makePassage(storm);
    for (const site of sites) {
      const exposure = siteExposure(siteOf(site));
      const few = followPassage(storm, site.latitude, site.longitude, exposure, passage, 25);
      const kept = new Set(passage.state.slice(0, few));
      const count = followPassage(storm, site.latitude, site.longitude, exposure, passage);
      for (let i = 0; i < count; i++) if (!kept.has(passage.state[i]!)) expect(passage.gust[i]!).toBeLessThan(25);
    }
  });
});
