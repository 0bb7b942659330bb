import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { logGamma, regularisedBeta } from '#engine/numerics/beta.ts';
import { chebyshevCoefficients, chebyshevRule } from '#engine/numerics/chebyshev.ts';
import { integrate01 } from './quadrature.ts';

const between = (min: number, max: number) => fc.nat(1e6).map((i) => min + ((max - min) * i) / 1e6);

describe('gamma function', () => {
  it('has the factorials and the root of pi', () => {
    let factorial = 1;
    for (let n = 1; n < 20; n++) {
      expect(Math.abs(logGamma(n) - Math.log(factorial))).toBeLessThan(2e-14 * Math.max(1, Math.log(factorial)));
      factorial *= n;
    }
    expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.PI) / 2, 13);
    expect(() => logGamma(0)).toThrow('x is');
  });
});

describe('regularised incomplete beta', () => {
  it('has the closed forms of whole and half shapes', () => {
    fc.assert(
      fc.property(between(0.001, 0.999), (x) => {
        expect(regularisedBeta(x, 1, 1)).toBeCloseTo(x, 14);
        expect(regularisedBeta(x, 3, 1)).toBeCloseTo(x ** 3, 13);
        expect(regularisedBeta(x, 1, 3)).toBeCloseTo(1 - (1 - x) ** 3, 13);
        // I_x(2, 2) = 3 x² - 2 x³; the arcsine law for 1/2, 1/2.
        expect(regularisedBeta(x, 2, 2)).toBeCloseTo(3 * x * x - 2 * x ** 3, 13);
        expect(regularisedBeta(x, 0.5, 0.5)).toBeCloseTo((2 / Math.PI) * Math.asin(Math.sqrt(x)), 13);
      }),
    );
  });

  it('agrees with integrating the density numerically', () => {
    fc.assert(
      fc.property(between(0.1, 8), between(0.1, 8), between(0.01, 0.99), (a, b, x) => {
        const density = (y: number, fromOne: number) => y ** (a - 1) * fromOne ** (b - 1);
        const whole = integrate01(density);
        const part = x * integrate01((y, rest) => density(x * y, 1 - x + x * rest));
        expect(Math.abs(regularisedBeta(x, a, b) - part / whole)).toBeLessThan(1e-11);
      }),
      { numRuns: 200 },
    );
  });

  it('is symmetric, runs from 0 to 1, and refuses impossible shapes', () => {
    fc.assert(
      fc.property(between(0.05, 9), between(0.05, 9), between(0, 1), (a, b, x) => {
        expect(regularisedBeta(x, a, b) + regularisedBeta(1 - x, b, a)).toBeCloseTo(1, 12);
      }),
    );
    expect([-1, 0, 1, 2].map((x) => regularisedBeta(x, 0.8, 7.2))).toEqual([0, 0, 1, 1]);
    expect(regularisedBeta(Number.NaN, 1, 1)).toBeNaN();
    expect(() => regularisedBeta(0.5, 0, 1)).toThrow('a is');
    expect(() => regularisedBeta(0.5, 1, Number.NaN)).toThrow('b is');
  });
});

describe('Chebyshev interpolation', () => {
  it('recovers a polynomial of its own degree exactly', () => {
    const rule = chebyshevRule(8);
    const truth = [0.3, -1, 2, 0.5, 0, 0.25, -0.125, 4, -3];
    // T_k(x) = cos(k arccos x).
    const at = (x: number) => truth.reduce((sum, c, k) => sum + c * Math.cos(k * Math.acos(x)), 0);
    const found = chebyshevCoefficients(rule, rule.points.map(at), new Float64Array(9));
    truth.forEach((c, k) => expect(found[k]).toBeCloseTo(c, 13));
  });
});
