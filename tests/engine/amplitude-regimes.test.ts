import { describe, expect, it } from 'vitest';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { siteSeries } from '#engine/footprint/site-series.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { AMPLITUDE_NODES, AMPLITUDE_WEIGHTS, MEAN_AMPLITUDE } from '#engine/ring/draws.ts';
import { AMPLITUDE_REGIMES, amplitudeNodes, meanAmplitude, type AmplitudeRegime } from '#engine/ring/regimes.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { batchOf, workedFixes, workedSites } from '../helpers/worked-storm.ts';

const { latitude, longitude, fetch } = workedSites[0]!;
const SEA = { latitude, longitude, fetchM: fetch, roughnessM: null, topographicFactor: 1 };
const meanOf = (nodes: readonly number[]) => nodes.reduce((sum, a, i) => sum + a * AMPLITUDE_WEIGHTS[i]!, 0);
const at = (regime: AmplitudeRegime, anchor: 'mean' | 'peak' = 'mean') =>
  prepareStorm(workedFixes, { ...DEFAULT_OPTIONS, regime, anchor }, null);

describe('strength factors of a regime', () => {
  it('are the condensed nodes themselves where regimes are mixed', () => {
    expect(amplitudeNodes('mixed')).toBe(AMPLITUDE_NODES);
    expect(meanAmplitude('mixed')).toBe(MEAN_AMPLITUDE);
    expect(at('mixed').strengths).toBe(AMPLITUDE_NODES);
  });

  // The individual strengths 0.5, 0.65, 0.75, 0.85, 1 with weights 0.2, 0.2, 0.2, 0.3, 0.1 have the mean 0.735.
  it.each([
    ['quasi-steady', 0.4],
    ['breakdown', 1.1],
  ] as const)('%s: keep the mean of the distribution, rise, and end at its ends', (regime, factor) => {
    const nodes = amplitudeNodes(regime);
    expect(nodes).toHaveLength(11);
    expect(meanOf(nodes)).toBeCloseTo(0.735 * factor, 14);
    expect(meanAmplitude(regime)).toBeCloseTo(0.735 * factor, 14);
    nodes.slice(1).forEach((a, i) => expect(a).toBeGreaterThanOrEqual(nodes[i]!));
    expect(nodes[0]).toBeCloseTo(0.5 * factor, 14);
    expect(nodes[10]).toBeCloseTo(factor, 14);
  });

  it('make up the mixture: 75 % kept up, 15 % between (0.75), 10 % breaking down', () => {
    const mixture = 0.75 * meanAmplitude('quasi-steady') + 0.15 * 0.75 * 0.735 + 0.1 * meanAmplitude('breakdown');
    // The condensed nodes are rounded to two or three digits.
    expect(mixture).toBeCloseTo(MEAN_AMPLITUDE, 3);
  });

  it('are each nearest to the quantiles of the distribution they stand for, within half a step of it', () => {
    const cumulative = [0.2, 0.4, 0.6, 0.9, 1];
    const strengths = [0.5, 0.65, 0.75, 0.85, 1];
    let reached = 0;
    amplitudeNodes('breakdown').forEach((a, i) => {
      const middle = reached + AMPLITUDE_WEIGHTS[i]! / 2;
      reached += AMPLITUDE_WEIGHTS[i]!;
      const quantile = strengths[cumulative.findIndex((c) => c >= middle)]!;
      expect(Math.abs(a / 1.1 - quantile)).toBeLessThan(0.05);
    });
  });

  it('leave the plain gust as it is, and order the enhanced ones', () => {
    const scores = AMPLITUDE_REGIMES.map((regime) => scoreSites(at(regime), batchOf(workedSites), REFERENCE_CURVE));
    const [mixed, steady, breakdown] = scores;
    expect(steady!.plainGust).toEqual(mixed!.plainGust);
    expect(breakdown!.plainGust).toEqual(mixed!.plainGust);
    expect(mixed!.enhancedMean[0]).toBeGreaterThan(steady!.enhancedMean[0]!);
    expect(breakdown!.p50[0]).toBeGreaterThan(mixed!.p50[0]!);
    mixed!.plainGust.forEach((plain, i) => {
      expect(steady!.enhancedMean[i]).toBeGreaterThanOrEqual(plain);
      expect(breakdown!.p99[i]).toBeGreaterThanOrEqual(steady!.p99[i]!);
    });
  });

  it('give at each time gusts no higher than the peak of the draws', () => {
    const storm = at('breakdown');
    const { p95 } = siteSeries(storm, SEA);
    const { p99 } = scoreSites(storm, batchOf([workedSites[0]!]), REFERENCE_CURVE);
    expect(Math.max(...p95)).toBeGreaterThan(0);
    expect(Math.max(...p95)).toBeLessThanOrEqual(p99[0]!);
  });

  it('divide their own mean out of a maximum that holds vortex peaks', () => {
    for (const regime of AMPLITUDE_REGIMES) {
      const { anchoredMaxWindMs, maxWindMs, amplitude, hoursInland } = at(regime, 'peak').fixes[2]!;
      const held = 1 + meanAmplitude(regime) * amplitude * Math.exp(-hoursInland / 2);
      expect(anchoredMaxWindMs).toBeCloseTo(maxWindMs / held, 12);
    }
  });

  it('are refused by name where there is no such regime', () => {
    const options = { ...DEFAULT_OPTIONS, regime: 'calm' as AmplitudeRegime };
    expect(() => prepareStorm(workedFixes, options, null)).toThrow(/regime.*calm.*mixed, quasi-steady, breakdown/);
  });
});
