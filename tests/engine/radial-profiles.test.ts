import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { coriolis } from '#engine/winds/coriolis.ts';
import { georgiouWind } from '#engine/winds/georgiou.ts';
import { hollandGradientWind } from '#engine/winds/holland-1980.ts';
import { hollandSurfaceWind, outerExponentThrough } from '#engine/winds/holland-2010.ts';
import { dualExponential, dualExponentialWind } from '#engine/winds/willoughby-2006.ts';
import { between } from '../helpers/arbitrary.ts';
import { expectPrinted } from '../helpers/printed.ts';

const KM = 1000;

/** Place and height of the maximum of a function with one peak, by golden section. */
function peakOf(f: (r: number) => number, from: number, to: number): { place: number; height: number } {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [from, to];
  for (let k = 0; k < 100; k++) {
    const left = high - ratio * (high - low);
    const right = low + ratio * (high - low);
    if (f(left) < f(right)) low = left;
    else high = right;
  }
  const place = (low + high) / 2;
  return { place, height: f(place) };
}

describe('Holland (2010) surface profile, computed from the published formula (constants from memory)', () => {
  const plain = { maxWind: 50, rMax: 40 * KM, bs: 1.3, outerRadius: 200 * KM, outerExponent: 0.5 };
  it.each([
    [20, '37.766568'],
    [40, '50'],
    [100, '39.036709'],
    [200, '27.226342'],
  ])('has its plain wind at %i km', (km, wind) => expectPrinted(hollandSurfaceWind(km * KM, plain), wind));
  it.each([
    [20, '37.766568'],
    [100, '38.318715'],
    [200, '24.109775'],
  ])('has its wind with an outer exponent of 0.6 at %i km', (km, wind) =>
    expectPrinted(hollandSurfaceWind(km * KM, { ...plain, outerExponent: 0.6 }), wind),
  );
  it('passes through an outer wind', () => {
    expectPrinted(outerExponentThrough(plain, 200 * KM, 27.226342), '0.500000');
    expectPrinted(outerExponentThrough(plain, 200 * KM, 24.109775), '0.600000');
    fc.assert(
      fc.property(between(0.8, 2), between(60, 400), between(10, 45), (bs, km, wind) => {
        const core = { ...plain, bs };
        const outerExponent = outerExponentThrough(core, km * KM, wind);
        const through = hollandSurfaceWind(km * KM, { ...core, outerRadius: km * KM, outerExponent });
        expect(through).toBeCloseTo(wind, 9);
      }),
    );
  });
  it('keeps its exponent beyond the outer radius, and takes no notice of that radius while plain', () => {
    const bent = { ...plain, outerExponent: 0.7 };
    const x = (40 / 350) ** 1.3;
    expect(hollandSurfaceWind(350 * KM, bent)).toBeCloseTo(50 * (x * Math.exp(1 - x)) ** 0.7, 10);
    expect(hollandSurfaceWind(120 * KM, { ...plain, outerRadius: Infinity })).toBe(hollandSurfaceWind(120 * KM, plain));
  });
  it('is a share of its maximum: units of length and speed may be changed', () =>
    fc.assert(
      fc.property(between(0, 500), between(0.4, 1.2), (km, outerExponent) => {
        const bent = { ...plain, outerExponent };
        const knots = 3600 / 1852;
        const scaled = { ...bent, maxWind: 50 * knots, rMax: 80 * KM, outerRadius: 400 * KM };
        fc.pre(km >= 1);
        expect(hollandSurfaceWind(2 * km * KM, scaled)).toBeCloseTo(hollandSurfaceWind(km * KM, bent) * knots, 9);
      }),
    ));
  it('is calm at the centre, and says what it cannot take', () => {
    expect(hollandSurfaceWind(0, plain)).toBe(0);
    expect(hollandSurfaceWind(NaN, plain)).toBeNaN();
    expect(() => hollandSurfaceWind(1, { ...plain, bs: 0 })).toThrow('bs is 0');
    expect(() => hollandSurfaceWind(1, { ...plain, rMax: NaN })).toThrow('rMax');
    expect(() => hollandSurfaceWind(1, { ...plain, maxWind: -1 })).toThrow('maxWind');
    expect(() => hollandSurfaceWind(1, { ...plain, outerRadius: 40 * KM })).toThrow('outerRadius');
    expect(() => hollandSurfaceWind(1, { ...plain, outerExponent: 0 })).toThrow('outerExponent');
    expect(() => outerExponentThrough(plain, 30 * KM, 20)).toThrow('outerRadius');
    expect(() => outerExponentThrough(plain, 90 * KM, 50)).toThrow('outerWind');
  });
});

describe('Willoughby (2006) dual exponential, computed from the published formula (constants from memory)', () => {
  const storm = { maxWind: 50, rMax: 35 * KM, latitude: 25 };
  it.each([
    [10, '13.729509'],
    [25, '36.794891'],
    [35, '50.000000'],
    [60, '41.290064'],
    [100, '33.608950'],
    [200, '22.618593'],
  ])('has its published wind at %i km', (km, wind) =>
    expectPrinted(dualExponentialWind(km * KM, dualExponential(storm, false)), wind),
  );
  it('has its wind at 25 km with the peak moved to its radius', () =>
    expectPrinted(dualExponentialWind(25 * KM, dualExponential(storm, true)), '35.839798'));

  const strong = { maxWind: 55, rMax: 36 * KM, latitude: 24.3 };
  it('peaks inside its radius as published, by a quarter of a per cent', () => {
    const published = dualExponential(strong, false);
    const { place, height } = peakOf((r) => dualExponentialWind(r, published), 15 * KM, 60 * KM);
    expectPrinted(place / KM, '35.07');
    expectPrinted(height, '55.136');
    expectPrinted(dualExponentialWind(30 * KM, published), '49.684');
    expectPrinted(dualExponentialWind(30 * KM, dualExponential(strong, true)), '47.700');
  });
  it('peaks at its radius in the exact version, whatever the storm', () =>
    fc.assert(
      fc.property(between(12, 85), between(12, 120), between(-45, 45), (maxWind, km, latitude) => {
        const exact = dualExponential({ maxWind, rMax: km * KM, latitude }, true);
        const { place, height } = peakOf((r) => dualExponentialWind(r, exact), 0.5 * km * KM, 2 * km * KM);
        expect(Math.abs(place / (km * KM) - 1)).toBeLessThan(1e-4);
        expect(Math.abs(height / maxWind - 1)).toBeLessThan(1e-9);
      }),
    ));
  it('is the same on both hemispheres', () =>
    expect(dualExponential({ ...storm, latitude: -25 }, true)).toEqual(dualExponential(storm, true)));
  it('agrees with the formula written in kilometres and knots', () => {
    // Far outside the transition only the two exponentials are left; one knot is 1852/3600 m/s.
    const knots = 100;
    const ms = (knots * 1852) / 3600;
    const prepared = dualExponential({ maxWind: ms, rMax: 40 * KM, latitude: 20 }, false);
    const share = 0.0696 + (0.0049 * (knots * 1852)) / 3600 - 0.0064 * 20;
    const slow = 317.1 - 2.026 * ms + 1.915 * 20;
    const inKnots = knots * ((1 - share) * Math.exp(-110 / slow) + share * Math.exp(-110 / 25));
    expect((dualExponentialWind(150 * KM, prepared) * 3600) / 1852).toBeCloseTo(inKnots, 10);
  });
  it('has no jump at the ends of its transition, and a narrower one for a small eye', () => {
    for (const [rMax, width] of [
      [35 * KM, 25 * KM],
      [20 * KM, 15 * KM],
    ] as const) {
      const prepared = dualExponential({ ...storm, rMax }, true);
      expect(prepared.transitionWidth).toBe(width);
      for (const end of [prepared.transitionStart, prepared.transitionStart + width]) {
        const step = dualExponentialWind(end + 1e-3, prepared) - dualExponentialWind(end - 1e-3, prepared);
        expect(Math.abs(step)).toBeLessThan(1e-4);
      }
    }
  });
  it('is nearly calm at the centre, and says what it cannot take', () => {
    expect(dualExponentialWind(0, dualExponential(storm, false))).toBe(0);
    expect(dualExponentialWind(0, dualExponential({ ...storm, rMax: 8 * KM }, true))).toBeLessThan(2.5);
    expect(dualExponentialWind(NaN, dualExponential(storm, false))).toBeNaN();
    expect(() => dualExponential({ ...storm, maxWind: 0 }, true)).toThrow('maxWind');
    expect(() => dualExponential({ ...storm, maxWind: 170 }, true)).toThrow('maxWind');
    expect(() => dualExponential({ ...storm, rMax: NaN }, true)).toThrow('rMax');
    expect(() => dualExponential({ ...storm, latitude: 91 }, true)).toThrow('latitude');
  });
});

describe('profiles of one storm, gradient wind matched at its radius, computed from the published formulas', () => {
  // Maximum 54.6 m/s at 36 km, 24.3 degrees north: winds in m/s at 18, 36, 72, 108, 200 and 300 km.
  const radii = [18, 36, 72, 108, 200, 300];
  const maxWind = (53 / 1.05 - 0.55 * 6.736453) / (0.9 / 1.05);
  const rMax = 36 * KM;
  it('agree near the peak and part company far out', () => {
    const f = coriolis(24.3);
    const b = 1.560682;
    const gradient = { rMax, b, deficit: 6200, f };
    const surface = { maxWind, rMax, bs: b, outerRadius: 200 * KM, outerExponent: 0.5 };
    const double = dualExponential({ maxWind, rMax, latitude: 24.3 }, true);
    const printed = {
      h80: ['35.5', '54.6', '43.0', '32.5', '18.0', '10.4'],
      h10: ['35.4', '54.6', '44.2', '34.9', '22.8', '16.9'],
      w06: ['25.5', '54.6', '41.1', '34.2', '23.4', '15.7'],
    };
    radii.forEach((km, i) => {
      expectPrinted(hollandGradientWind(km * KM, gradient), printed.h80[i]!);
      expectPrinted(hollandSurfaceWind(km * KM, surface), printed.h10[i]!);
      expectPrinted(dualExponentialWind(km * KM, double), printed.w06[i]!);
    });
  });
});

describe('Georgiou (1985) moving vortex, computed from the published formula (from memory)', () => {
  const vortex = { rMax: 40 * KM, b: 1.5, deficit: 6000, f: coriolis(25) };
  it.each([
    [1, '55.453224'],
    [0, '52.438286'],
    [-1, '49.590817'],
  ])('has its wind at rMax where the sine of the side is %i', (sine, wind) =>
    expectPrinted(georgiouWind(40 * KM, vortex, 6, sine), wind),
  );
  it('is the Holland vortex when it stands still, at every side', () =>
    fc.assert(
      fc.property(between(0.05, 12), between(-1, 1), (x, sine) => {
        const r = x * vortex.rMax;
        expect(georgiouWind(r, vortex, 0, sine)).toBeCloseTo(hollandGradientWind(r, vortex), 10);
      }),
    ));
  it('balances the forces on a parcel whose path is curved by the motion as well', () =>
    fc.assert(
      fc.property(between(0.3, 8), between(-1, 1), between(0, 18), (x, sine, speed) => {
        // V²/r (1 - c sin a / V) + f V = dp/dr / rho, Blaton's curvature of the trajectory.
        const r = x * vortex.rMax;
        const wind = georgiouWind(r, vortex, speed, sine);
        const term = x ** -vortex.b;
        const force = (vortex.deficit * vortex.b * term * Math.exp(-term)) / (1.15 * r);
        const balance = (wind * (wind - speed * sine)) / r + vortex.f * wind;
        expect(Math.abs(balance / force - 1)).toBeLessThan(1e-9);
      }),
    ));
  it('is a speed: new units of length and time change it by length over time', () => {
    const knots = 3600 / 1852;
    // Lengths in kilometres, so speeds in knots need times in units of 1e-3 / knots seconds.
    const scaled = { rMax: 40, b: 1.5, deficit: 6000 * knots * knots, f: vortex.f * knots * 1000 };
    expect(georgiouWind(100, scaled, 6 * knots, 0.4)).toBeCloseTo(georgiouWind(100 * KM, vortex, 6, 0.4) * knots, 10);
  });
  it('refuses an impossible vortex', () => {
    expect(georgiouWind(NaN, vortex, 5, 0)).toBeNaN();
    expect(() => georgiouWind(1, { ...vortex, rMax: 0 }, 5, 0)).toThrow('rMax');
    expect(() => georgiouWind(1, { ...vortex, b: 0 }, 5, 0)).toThrow('b is');
    expect(() => georgiouWind(1, { ...vortex, deficit: -1 }, 5, 0)).toThrow('deficit');
  });
});
