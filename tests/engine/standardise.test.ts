import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  standardiseExposed,
  standardiseGust,
  standardiseMean,
  type StationWind,
} from '#engine/calibration/standardise.ts';
import { PEAK_FACTOR } from '#engine/footprint/exposure.ts';
import { turbulenceIntensity } from '#engine/gust/turbulence.ts';
import { heightRatio, logLawRatio, equilibriumRatio } from '#engine/terrain/roughness.ts';
import { between } from '../helpers/arbitrary.ts';
import { expectPrinted } from '../helpers/printed.ts';

const station = (wind: number, height: number, roughness: number, peakAveraging: number | null): StationWind => ({
  wind,
  height,
  roughness,
  peakAveraging,
});

describe('station winds brought to 10 m, computed from the published formulas', () => {
  it('a mean at 6.1 m, by the logarithmic law alone', () => expectPrinted(30 * heightRatio(0.05, 6.1), '33.08677'));
  it('a mean at 6.1 m over roughness 0.1 m, to open terrain', () =>
    expectPrinted(standardiseMean(station(30, 6.1, 0.1, null)), '38.967062'));
  it('a 3-s gust at 10 m in open terrain, to the mean', () =>
    expectPrinted(standardiseMean(station(45, 10, 0.03, 3)), '31.39858'));
  // The scale of turbulence belongs to the height of the anemometer: 20 m here, not 10 m.
  it('a 3-s gust at 20 m over roughness 0.1 m, to the mean in open terrain', () =>
    expectPrinted(standardiseMean(station(45, 20, 0.1, 3)), '30.67841'));
  it('leaves what is standard already as it is', () => {
    expect(standardiseMean(station(31, 10, 0.03, null))).toBeCloseTo(31, 12);
    expect(standardiseGust(station(47, 10, 0.3, 3))).toBeCloseTo(47, 12);
  });
  it('makes of a mean the gust that the chain makes of it', () =>
    expect(standardiseGust(station(30, 10, 0.03, null))).toBeCloseTo(
      30 * (1 + PEAK_FACTOR * turbulenceIntensity(0.03)),
      12,
    ));
});

describe('station winds brought to 10 m', () => {
  it('a short peak stands for less wind than a long one, and both for less than a mean', () =>
    fc.assert(
      fc.property(between(3, 40), between(0.001, 1), (height, roughness) => {
        const mean = (averaging: number | null): number =>
          standardiseExposed(station(40, height, roughness, averaging));
        expect(mean(1)).toBeLessThan(mean(3));
        expect(mean(3)).toBeLessThan(mean(60));
        expect(mean(60)).toBeLessThan(mean(null));
      }),
    ));
  it('a wind read lower down stands for more wind', () =>
    fc.assert(
      fc.property(between(3, 40), between(1, 20), between(0.001, 1), (height, more, roughness) => {
        const gust = (z: number): number => standardiseGust(station(40, z, roughness, 3));
        expect(gust(height)).toBeGreaterThan(gust(height + more));
      }),
    ));
  it('speeds may be in any unit', () =>
    fc.assert(
      fc.property(between(0, 80), between(3, 40), between(0.001, 1), (wind, height, roughness) => {
        const knots = 3600 / 1852;
        for (const f of [standardiseExposed, standardiseMean, standardiseGust]) {
          expect(f(station(wind * knots, height, roughness, 3))).toBeCloseTo(
            f(station(wind, height, roughness, 3)) * knots,
            9,
          );
        }
      }),
    ));
  it('says what it cannot take', () => {
    expect(() => standardiseMean(station(-1, 10, 0.03, null))).toThrow('wind is -1');
    expect(() => standardiseMean(station(NaN, 10, 0.03, null))).toThrow('wind is NaN');
    expect(() => standardiseMean(station(30, 0, 0.03, null))).toThrow('roughness length');
    expect(() => standardiseGust(station(30, 10, 10, 3))).toThrow('roughness length');
    expect(() => standardiseGust(station(30, 10, 0.03, 0.3))).toThrow('averaging time');
  });
});

describe('land against sea by two logarithmic laws joined at 500 m, computed from the formula', () => {
  // Roughness of the sea from the drag coefficient 2.4e-3.
  const sea = 2.84446e-3;
  it.each([
    [0.03, '0.8839'],
    [0.1, '0.7997'],
    [0.3, '0.6991'],
    [1, '0.5480'],
  ])('over roughness %f m', (z0, ratio) => expectPrinted(logLawRatio(z0, sea), ratio));
  it('leaves 5 to 29 % more wind than the terrain categories of EN 1991-1-4', () => {
    expect(logLawRatio(0.03, sea) / equilibriumRatio(0.03, sea) - 1).toBeCloseTo(0.05, 2);
    expect(logLawRatio(1, sea) / equilibriumRatio(1, sea) - 1).toBeCloseTo(0.29, 2);
  });
  it('is 1 over land as smooth as the sea, falls with roughness, and lengths may be in any unit', () => {
    expect(logLawRatio(sea, sea)).toBe(1);
    fc.assert(
      fc.property(between(0.001, 2), between(1, 2), (z0, more) => {
        expect(logLawRatio(z0 * more, sea)).toBeLessThanOrEqual(logLawRatio(z0, sea));
        expect(heightRatio(z0 * 3.2808, 60, 32.808)).toBeCloseTo(heightRatio(z0, 60 / 3.2808, 10), 12);
      }),
    );
    expect(() => logLawRatio(10, sea)).toThrow('roughness length');
    expect(() => logLawRatio(0.03, 0)).toThrow('roughness length');
  });
});
