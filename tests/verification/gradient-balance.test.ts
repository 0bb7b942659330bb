import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hollandGradientWind, hollandPressure } from '#engine/winds/holland-1980.ts';
import { between } from '../helpers/arbitrary.ts';

const vortices = fc.record({
  rMax: between(10e3, 120e3),
  b: between(0.8, 2.5),
  deficit: between(1000, 12_000),
  f: between(1e-5, 1.2e-4),
});
const DENSITY = 1.15;

describe('gradient wind of the Holland vortex', () => {
  it('balances pressure gradient, Coriolis and centrifugal force, with the gradient taken numerically', () =>
    fc.assert(
      fc.property(vortices, between(0.2, 12), (vortex, x) => {
        const r = x * vortex.rMax;
        // Fourth-order central difference.
        const h = 1e-3 * r;
        const p = (at: number) => hollandPressure(at, 95_000, vortex);
        const slope = (8 * (p(r + h) - p(r - h)) - (p(r + 2 * h) - p(r - 2 * h))) / (12 * h);
        const wind = hollandGradientWind(r, vortex);
        const balance = (wind * wind) / r + vortex.f * wind - slope / DENSITY;
        expect(Math.abs(balance)).toBeLessThan(1e-6 * (slope / DENSITY) + 1e-9);
      }),
    ));
  it('is what a parcel started at rest relaxes to on the balanced circle', () => {
    // Root of v²/r + f v = (dp/dr)/rho by bisection, another way than the closed form.
    fc.assert(
      fc.property(vortices, between(0.3, 8), (vortex, x) => {
        const r = x * vortex.rMax;
        const term = (vortex.rMax / r) ** vortex.b;
        const force = (vortex.deficit * vortex.b * term * Math.exp(-term)) / (DENSITY * r);
        let low = 0;
        let high = 300;
        for (let k = 0; k < 80; k++) {
          const v = (low + high) / 2;
          if ((v * v) / r + vortex.f * v < force) low = v;
          else high = v;
        }
        expect(hollandGradientWind(r, vortex)).toBeCloseTo(low, 8);
      }),
    );
  });
  it('holds the whole pressure deficit between centre and far away', () =>
    fc.assert(
      fc.property(vortices, (vortex) => {
        expect(hollandPressure(1, 95_000, vortex)).toBeCloseTo(95_000, 3);
        expect(hollandPressure(1e12, 95_000, vortex)).toBeCloseTo(95_000 + vortex.deficit, 0);
      }),
    ));
  it('is a speed: new units of length and time change it by length over time', () =>
    fc.assert(
      fc.property(vortices, between(0.2, 8), between(0.1, 10), between(0.1, 10), (vortex, x, length, time) => {
        // Air density is fixed, so a pressure deficit scales as a speed squared.
        const speed = length / time;
        const rescaled = {
          rMax: vortex.rMax * length,
          b: vortex.b,
          deficit: vortex.deficit * speed * speed,
          f: vortex.f / time,
        };
        const r = x * vortex.rMax;
        const expected = hollandGradientWind(r, vortex) * speed;
        // In m/s of the new units: deep in the eye the wind is a small difference of larger numbers.
        expect(Math.abs(hollandGradientWind(r * length, rescaled) - expected)).toBeLessThan(1e-9 * speed);
      }),
    ));
});
