import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PEAK_FACTOR } from '#engine/footprint/exposure.ts';
import { peakFactor } from '#engine/gust/gust-factor.ts';
import { turbulenceIntensity } from '#engine/gust/turbulence.ts';
import { seaDrag, seaRoughness } from '#engine/terrain/drag.ts';
import { fetchWeight, internalLayerDepth, sectorWeight } from '#engine/terrain/fetch.ts';
import { equilibriumRatio, roughnessFactor, terrainFactor } from '#engine/terrain/roughness.ts';
import { between } from '../helpers/arbitrary.ts';
import { expectPrinted } from '../helpers/printed.ts';

describe('gust factors, computed from the published formula', () => {
  it('has the peak factors at 10 m', () => {
    expectPrinted(PEAK_FACTOR, '2.516438');
    expectPrinted(peakFactor(3, 3600), '3.003464');
    expectPrinted(peakFactor(60, 600), '0.845919');
    expectPrinted(peakFactor(60, 3600), '1.114898');
  });
  it.each([
    [0.003, '0.123278', '1.310222', '1.104284'],
    [0.03, '0.172142', '1.433186', '1.145619'],
    [0.05, '0.188739', '1.474951', '1.159658'],
    [0.3, '0.285180', '1.717638', '1.241239'],
    [1, '0.434294', '2.092875', '1.367378'],
  ])('over roughness %f m', (z0, intensity, gust, minute) => {
    const turbulence = turbulenceIntensity(z0);
    expectPrinted(turbulence, intensity);
    expectPrinted(1 + peakFactor(3, 600) * turbulence, gust);
    expectPrinted(1 + peakFactor(60, 600) * turbulence, minute);
  });
  it('refuses times and roughness outside their range', () => {
    expect(() => peakFactor(0.5, 600)).toThrow('averaging time');
    expect(() => peakFactor(3, 30)).toThrow('period');
    expect(() => peakFactor(3, 600, 0)).toThrow('height');
    expect(() => turbulenceIntensity(10)).toThrow('roughness length');
  });
  it('has gust over 1-min over 10-min wind, in any terrain', () =>
    fc.assert(
      fc.property(between(1e-4, 2), (z0) => {
        const turbulence = turbulenceIntensity(z0);
        const gust = 1 + peakFactor(3, 600) * turbulence;
        const minute = 1 + peakFactor(60, 600) * turbulence;
        expect(gust).toBeGreaterThan(minute);
        expect(minute).toBeGreaterThan(1);
      }),
    ));
  it('has turbulence that grows with the roughness', () =>
    fc.assert(
      fc.property(between(1e-4, 2), between(1, 2), (z0, more) => {
        expect(turbulenceIntensity(z0 * more)).toBeGreaterThanOrEqual(turbulenceIntensity(z0));
      }),
    ));
});

describe('sea drag, computed from the published formula', () => {
  it.each([
    [8, '1.200e-3', '9.66494e-5'],
    [15, '1.465e-3', '2.89309e-4'],
    [25, '2.115e-3', '1.66968e-3'],
    [35, '2.400e-3', '2.84446e-3'],
    [70, '2.400e-3', '2.84446e-3'],
  ])('at %i m/s', (wind, drag, z0) => {
    expectPrinted(seaDrag(wind), drag);
    expectPrinted(seaRoughness(wind), z0);
  });
  it('levels off at 2.0e-3 or not at all where that is asked for, and is the same below', () => {
    expect(seaDrag(70, 'capped-2.0')).toBe(2.0e-3);
    expectPrinted(seaDrag(70, 'uncapped'), '5.04e-3');
    expect(seaDrag(70, 'capped-2.4')).toBe(seaDrag(70));
    for (const law of ['capped-2.4', 'capped-2.0', 'uncapped'] as const) {
      expect(seaDrag(8, law)).toBe(1.2e-3);
      expect(seaDrag(20, law)).toBe(seaDrag(20));
      expect(seaRoughness(20, law)).toBe(seaRoughness(20));
    }
    expect(seaRoughness(70, 'capped-2.0')).toBeLessThan(seaRoughness(70));
    expect(seaRoughness(70, 'uncapped')).toBeGreaterThan(seaRoughness(70));
  });
});

describe('land against sea, computed from the published formula', () => {
  it.each([
    [0.03, '0.839027'],
    [0.05, '0.793106'],
    [0.1, '0.723621'],
    [0.3, '0.595039'],
    [1, '0.425090'],
  ])('settles to its ratio over roughness %f m', (z0, ratio) =>
    expectPrinted(equilibriumRatio(z0, seaRoughness(50)), ratio),
  );
  it('has kr and cr of open country', () => {
    expectPrinted(terrainFactor(0.03), '0.183326');
    expectPrinted(roughnessFactor(0.03), '1.064967');
  });
});

describe('fetch, computed from the published formula', () => {
  it('has the depth of the settled layer', () => expectPrinted(internalLayerDepth(1000, 0.03), '34.88047'));
  it.each([
    [500, '0.169703'],
    [1000, '0.305138'],
    [5000, '0.619609'],
    [10_000, '0.755044'],
    [20_000, '0.890479'],
    [7863, '0.708069'],
    [5560, '0.640352'],
  ])('weighs %i m of open country', (metres, weight) => expectPrinted(fetchWeight(metres, 0.03), weight));
  it.each([
    [200, '0.103144'],
    [1000, '0.417615'],
    [5000, '0.732085'],
  ])('weighs %i m of suburbs', (metres, weight) => expectPrinted(fetchWeight(metres, 0.3), weight));
  it('starts at 210 m and ends at 35 km in open country', () => {
    expect(fetchWeight(0, 0.03)).toBe(0);
    expect(fetchWeight(-5, 0.03)).toBe(0);
    expect(fetchWeight(209, 0.03)).toBe(0);
    expect(fetchWeight(211, 0.03)).toBeGreaterThan(0);
    expect(fetchWeight(35_100, 0.03)).toBe(1);
  });
  it('never falls with the distance', () =>
    fc.assert(
      fc.property(between(0, 50_000), between(0, 50_000), between(0.001, 2), (a, b, z0) => {
        expect(fetchWeight(a + b, z0)).toBeGreaterThanOrEqual(fetchWeight(a, z0));
      }),
    ));
  it('is interpolated between sectors, around north', () => {
    const weights = [0, 1, 0.5, 0, 0, 0, 0, 0.8];
    expect(sectorWeight(weights, 0)).toBe(0);
    expect(sectorWeight(weights, 22.5)).toBeCloseTo(0.5, 12);
    expect(sectorWeight(weights, 337.5)).toBeCloseTo(0.4, 12);
    expect(sectorWeight(weights, 90)).toBeCloseTo(0.5, 12);
  });
});
