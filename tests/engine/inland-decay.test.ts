import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { knotsFromMs, msFromKnots } from '#engine/units.ts';
import {
  kaplanDeMariaWind,
  LANDFALL_REDUCTION,
  seaEquivalent,
  vickeryDeficit,
  type FillingRegion,
} from '#engine/winds/inland-decay.ts';
import { between } from '../helpers/arbitrary.ts';
import { expectPrinted } from '../helpers/printed.ts';

/** Wind in knots of a storm that was at 100 kt when it crossed the coast. */
const after = (hours: number, latitude: number, km: number | null = null): number =>
  knotsFromMs(kaplanDeMariaWind(msFromKnots(100), hours, latitude, km === null ? null : km * 1000));

describe('wind over land after Kaplan & DeMaria, computed from the published formula (constants from memory)', () => {
  it.each([
    [0, 30, '90.0000'],
    [6, 30, '62.4978'],
    [12, 30, '46.9445'],
    [24, 30, '33.1746'],
    [6, 42, '49.2679'],
    [12, 42, '36.0044'],
    [24, 42, '30.2791'],
  ])('%i h inland at %i degrees', (hours, latitude, knots) => expectPrinted(after(hours, latitude), knots));
  it.each([
    [6, '55.8828'],
    [12, '41.4745'],
    [24, '31.7268'],
  ])('%i h inland at 38 degrees: halfway between the winds, not between the constants', (hours, knots) => {
    expect(Math.abs(after(hours, 38) - Number(knots))).toBeLessThan(1e-4);
    expect(after(hours, 38)).toBeCloseTo((after(hours, 36) + after(hours, 40)) / 2, 10);
  });
  it.each([
    [6, '69.4420'],
    [12, '52.1606'],
    [24, '36.8607'],
  ])('as over open sea, %i h inland', (hours, knots) =>
    expectPrinted(knotsFromMs(seaEquivalent(msFromKnots(after(hours, 30)))), knots),
  );
  it.each([
    [20, '54.9914'],
    [100, '46.9918'],
    [300, '41.5313'],
  ])('with the distance term, 12 h inland and %i km from the coast', (km, knots) =>
    expectPrinted(after(12, 30, km), knots),
  );
});

describe('wind over land', () => {
  it('falls without a break, never above what came ashore, and is the same on both hemispheres', () =>
    fc.assert(
      fc.property(between(0, 90), between(0, 60), between(0, 24), between(0, 55), (wind, hours, more, latitude) => {
        const here = kaplanDeMariaWind(wind, hours, latitude);
        expect(kaplanDeMariaWind(wind, hours + more, latitude)).toBeLessThanOrEqual(here);
        expect(here).toBeLessThanOrEqual(LANDFALL_REDUCTION * wind);
        expect(kaplanDeMariaWind(wind, hours, -latitude)).toBe(here);
      }),
    ));
  it('falls faster farther north', () => {
    for (const hours of [1, 3, 6, 12, 24]) {
      expect(after(hours, 38)).toBeLessThan(after(hours, 36));
      expect(after(hours, 40)).toBeLessThan(after(hours, 38));
    }
    expect(after(6, 20)).toBe(after(6, 36));
    expect(after(6, 50)).toBe(after(6, 40));
  });
  it('with terrain laid on top starts from the wind that came ashore: the step onto land is counted once', () =>
    fc.assert(
      fc.property(between(0, 90), between(0, 50), (wind, latitude) => {
        expect(seaEquivalent(kaplanDeMariaWind(wind, 0, latitude))).toBeCloseTo(wind, 10);
      }),
    ));
  it('leaves a storm below the background wind as it is', () => {
    expect(kaplanDeMariaWind(10, 0, 30)).toBe(9);
    expect(kaplanDeMariaWind(10, 40, 30)).toBe(9);
  });
  it('with the distance term is weaker farther inland, never negative and never above what came ashore', () =>
    fc.assert(
      fc.property(between(0, 90), between(0, 72), between(0, 1000), between(0, 500), (wind, hours, km, more) => {
        const here = kaplanDeMariaWind(wind, hours, 30, km * 1000);
        expect(kaplanDeMariaWind(wind, hours, 30, (km + more) * 1000)).toBeLessThanOrEqual(here);
        expect(here).toBeGreaterThanOrEqual(0);
        expect(here).toBeLessThanOrEqual(LANDFALL_REDUCTION * wind);
      }),
    ));
  it('drops the distance term after 50 h, in the north, and within a kilometre of the coast holds it', () => {
    expect(after(60, 30, 300)).toBe(after(60, 30));
    expect(after(50, 30, 300)).toBe(after(50, 30));
    expect(after(12, 42, 300)).toBe(after(12, 42));
    expect(after(12, 30, 0)).toBe(after(12, 30, 1));
  });
  it('says what it cannot take', () => {
    expect(() => kaplanDeMariaWind(-1, 6, 30)).toThrow('landfall wind');
    expect(() => kaplanDeMariaWind(50, -1, 30)).toThrow('hours');
    expect(() => kaplanDeMariaWind(50, NaN, 30)).toThrow('hours');
    expect(() => kaplanDeMariaWind(50, 6, 30, -1)).toThrow('distance from the coast');
  });
});

describe('filling after Vickery (2005), computed from the published formula (constants from memory)', () => {
  const regions = ['gulf', 'florida', 'mid-atlantic', 'new-england'] as const;
  it.each([
    ['gulf', '30.09456'],
    ['florida', '38.12021'],
    ['mid-atlantic', '32.61410'],
    ['new-england', '51.70449'],
  ] as const)('60 hPa after 12 h, %s', (region, hPa) =>
    expectPrinted(vickeryDeficit(6000, 12, 6, 40_000, region) / 100, hPa),
  );
  it('fills at 0.0575 per hour on the Gulf coast', () =>
    expectPrinted(-Math.log(vickeryDeficit(6000, 1, 6, 40_000, 'gulf') / 6000), '0.0575'));
  // Wind goes roughly with the root of the deficit.
  it('leaves 0.708 of the wind after 12 h where Kaplan & DeMaria leave 0.522', () => {
    expectPrinted(Math.sqrt(vickeryDeficit(6000, 12, 6, 40_000, 'gulf') / 6000), '0.708');
    expectPrinted(seaEquivalent(kaplanDeMariaWind(msFromKnots(100), 12, 30)) / msFromKnots(100), '0.522');
  });
  it('falls all the time, faster for a deeper, faster and smaller storm', () =>
    fc.assert(
      fc.property(
        fc.constantFrom<FillingRegion>(...regions),
        between(500, 10_000),
        between(0.1, 48),
        between(0, 15),
        between(8_000, 120_000),
        (region, deficit, hours, speed, rMax) => {
          const left = (d: number, h: number, c: number, r: number): number => vickeryDeficit(d, h, c, r, region) / d;
          const here = left(deficit, hours, speed, rMax);
          expect(vickeryDeficit(deficit, 0, speed, rMax, region)).toBe(deficit);
          expect(left(deficit, hours + 1, speed, rMax)).toBeLessThan(here);
          expect(left(deficit, hours, speed + 1, rMax)).toBeLessThan(here);
          expect(left(deficit, hours, speed, 1.1 * rMax)).toBeGreaterThanOrEqual(here);
          expect(left(1.1 * deficit, hours, speed, rMax)).toBeLessThanOrEqual(here);
        },
      ),
    ));
  it('depends on the deficit times the speed over the radius alone', () =>
    fc.assert(
      fc.property(between(0.5, 2), between(0.5, 2), (a, b) => {
        for (const region of regions) {
          const share = vickeryDeficit(6000, 12, 6, 40_000, region) / 6000;
          expect(vickeryDeficit(6000 * a, 12, 6 * b, 40_000 * a * b, region) / (6000 * a)).toBeCloseTo(share, 12);
        }
      }),
    ));
  it('says what it cannot take', () => {
    expect(() => vickeryDeficit(-1, 6, 6, 40_000, 'gulf')).toThrow('landfall deficit');
    expect(() => vickeryDeficit(6000, -1, 6, 40_000, 'gulf')).toThrow('hours');
    expect(() => vickeryDeficit(6000, 6, -1, 40_000, 'gulf')).toThrow('speed');
    expect(() => vickeryDeficit(6000, 6, 6, 0, 'gulf')).toThrow('rMax');
  });
});
