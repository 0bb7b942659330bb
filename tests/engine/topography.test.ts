import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { topographicFactor, type AsceExposure, type HillShape, type HillSite } from '#engine/terrain/topography.ts';
import { between } from '../helpers/arbitrary.ts';
import { expectPrinted } from '../helpers/printed.ts';

const on = (
  shape: HillShape,
  height: number,
  halfLength: number,
  distance: number,
  siteHeight: number,
  exposure: AsceExposure,
): HillSite => ({ shape, height, halfLength, distance, siteHeight, exposure });

const anyHill = fc.record({
  shape: fc.constantFrom<HillShape>('ridge', 'escarpment', 'hill'),
  height: between(20, 200),
  halfLength: between(50, 600),
  distance: between(-800, 2000),
  siteHeight: between(0, 100),
  exposure: fc.constantFrom<AsceExposure>('B', 'C', 'D'),
});

describe('speed-up by hills after ASCE 7, computed from the published formula (constants from memory)', () => {
  it.each([
    ['on the crest of a ridge', on('ridge', 30, 100, 0, 10, 'C'), '1.322256'],
    ['behind the edge of an escarpment', on('escarpment', 50, 80, 40, 5, 'D'), '1.377267'],
    ['before the top of a hill', on('hill', 20, 100, -50, 10, 'B'), '1.084907'],
    ['on a low ridge in suburbs', on('ridge', 20, 100, 0, 10, 'B'), '1.192613'],
  ])('%s', (_, site, factor) => expectPrinted(topographicFactor(site), factor));
  it.each([
    // ASCE 7-16, figure 26.8-1, table of K1 at H/Lh = 0.5: ridges 0.72, escarpments 0.43, hills 0.53, in exposure C; from memory.
    ['ridge', 0.72],
    ['escarpment', 0.43],
    ['hill', 0.53],
  ] as const)('at ground level on the crest of the steepest %s has the table’s value, rounded', (shape, table) =>
    expect(Math.abs(topographicFactor(on(shape, 50, 100, 0, 0, 'C')) - 1 - table)).toBeLessThan(0.0051),
  );
});

describe('speed-up by hills', () => {
  it('begins at a steepness of 0.2', () => {
    expect(topographicFactor(on('ridge', 19.9, 100, 0, 10, 'C'))).toBe(1);
    expect(topographicFactor(on('ridge', 20, 100, 0, 10, 'C'))).toBeGreaterThan(1.2);
  });
  it('grows no more beyond a steepness of 0.5: only the height counts then', () => {
    const steep = topographicFactor(on('ridge', 60, 100, 30, 10, 'C'));
    expect(topographicFactor(on('ridge', 60, 20, 30, 10, 'C'))).toBe(steep);
    expect(topographicFactor(on('ridge', 60, 120, 30, 10, 'C'))).toBeCloseTo(steep, 12);
  });
  it('needs 18 m in suburbs, 4.5 m in the open', () => {
    expect(topographicFactor(on('hill', 17.9, 40, 0, 3, 'B'))).toBe(1);
    expect(topographicFactor(on('hill', 18, 40, 0, 3, 'B'))).toBeGreaterThan(1);
    for (const exposure of ['C', 'D'] as const) {
      expect(topographicFactor(on('hill', 4.4, 10, 0, 3, exposure))).toBe(1);
      expect(topographicFactor(on('hill', 4.5, 10, 0, 3, exposure))).toBeGreaterThan(1);
    }
  });
  it('ends one and a half half-lengths from the crest, behind an escarpment four', () => {
    for (const shape of ['ridge', 'hill'] as const) {
      for (const side of [-1, 1]) {
        expect(topographicFactor(on(shape, 40, 100, 149 * side, 10, 'C'))).toBeGreaterThan(1);
        expect(topographicFactor(on(shape, 40, 100, 150 * side, 10, 'C'))).toBe(1);
      }
    }
    expect(topographicFactor(on('escarpment', 40, 100, -150, 10, 'C'))).toBe(1);
    expect(topographicFactor(on('escarpment', 40, 100, 399, 10, 'C'))).toBeGreaterThan(1);
    expect(topographicFactor(on('escarpment', 40, 100, 400, 10, 'C'))).toBe(1);
  });
  it('never slows the wind, is greatest on the crest at the ground, and fades with height', () =>
    fc.assert(
      fc.property(anyHill, between(0, 50), (site, more) => {
        const here = topographicFactor(site);
        expect(here).toBeGreaterThanOrEqual(1);
        expect(here).toBeLessThanOrEqual(topographicFactor({ ...site, distance: 0 }));
        expect(topographicFactor({ ...site, siteHeight: site.siteHeight + more })).toBeLessThanOrEqual(here);
      }),
    ));
  it('is continuous over the crest, and symmetric but for escarpments', () =>
    fc.assert(
      fc.property(anyHill, (site) => {
        const there = topographicFactor({ ...site, distance: -site.distance });
        if (site.shape !== 'escarpment') expect(there).toBe(topographicFactor(site));
        expect(topographicFactor({ ...site, distance: 1e-9 })).toBeCloseTo(
          topographicFactor({ ...site, distance: -1e-9 }),
          9,
        );
      }),
    ));
  it('takes any unit of length, once the hill is high enough to count', () =>
    fc.assert(
      fc.property(anyHill, between(1, 5), (site, unit) => {
        const rescaled = {
          ...site,
          height: site.height * unit,
          halfLength: site.halfLength * unit,
          distance: site.distance * unit,
          siteHeight: site.siteHeight * unit,
        };
        fc.pre(Math.abs(site.height / site.halfLength - 0.2) > 1e-9);
        expect(topographicFactor(rescaled)).toBeCloseTo(topographicFactor(site), 12);
      }),
    ));
  it('says what it cannot take', () => {
    const good = on('ridge', 30, 100, 0, 10, 'C');
    expect(() => topographicFactor({ ...good, height: -1 })).toThrow('height of the hill');
    expect(() => topographicFactor({ ...good, halfLength: 0 })).toThrow('half length');
    expect(() => topographicFactor({ ...good, distance: NaN })).toThrow('distance from the crest');
    expect(() => topographicFactor({ ...good, siteHeight: -1 })).toThrow('height above ground');
  });
});
