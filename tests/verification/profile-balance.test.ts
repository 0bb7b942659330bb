import fc from 'fast-check';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { georgiouWind } from '#engine/winds/georgiou.ts';
import { hollandGradientWind, hollandPressure } from '#engine/winds/holland-1980.ts';
import { hollandSurfaceWind } from '#engine/winds/holland-2010.ts';
import { dualExponential, dualExponentialWind } from '#engine/winds/willoughby-2006.ts';
import { between } from '../helpers/arbitrary.ts';

const DENSITY = 1.15;
const KM = 1000;

/** Gauss–Legendre rule of 16 points: eigenvalues and vectors of its Jacobi matrix (Golub & Welsch 1969), by ml-matrix. */
const gauss = (() => {
  const n = 16;
  const jacobi = Matrix.zeros(n, n);
  for (let k = 1; k < n; k++) {
    const off = k / Math.sqrt(4 * k * k - 1);
    jacobi.set(k - 1, k, off);
    jacobi.set(k, k - 1, off);
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(jacobi, { assumeSymmetric: true });
  return realEigenvalues.map((node, j) => ({ node, weight: 2 * eigenvectorMatrix.get(0, j) ** 2 }));
})();

/** Integral by that rule on equal panels. */
function integral(f: (x: number) => number, from: number, to: number, panels = 200): number {
  const half = (to - from) / panels / 2;
  let sum = 0;
  for (let k = 0; k < panels; k++) {
    const middle = from + (2 * k + 1) * half;
    for (const { node, weight } of gauss) sum += weight * f(middle + half * node);
  }
  return sum * half;
}

/** Rise of pressure between two radii that holds a wind on its circle: ∫ ρ (V² + f r V) d ln r. */
const rise = (wind: (r: number) => number, f: number, from: number, to: number, panels = 200) =>
  integral(
    (log) => {
      const r = Math.exp(log);
      const v = wind(r);
      return DENSITY * (v * v + f * r * v);
    },
    Math.log(from),
    Math.log(to),
    panels,
  );

/** Exponential integral E1 by its continued fraction, for arguments of 0.1 and more. */
function exponentialIntegral(x: number): number {
  let tail = 0;
  for (let k = 2000; k >= 1; k--) tail = k / (1 + k / (x + tail));
  return Math.exp(-x) / (x + tail);
}

describe('the rule of integration', () => {
  it('integrates polynomials of degree 31 exactly, and knows E1(1)', () => {
    expect(gauss.reduce((sum, { weight }) => sum + weight, 0)).toBeCloseTo(2, 13);
    expect(integral((x) => x ** 30, -1, 1, 1)).toBeCloseTo(2 / 31, 13);
    // Abramowitz & Stegun (1964), table 5.1: E1(1) = 0.219383934.
    expect(exponentialIntegral(1)).toBeCloseTo(0.219383934, 9);
  });
});

describe('pressure integrated inwards from the wind', () => {
  const vortices = fc.record({
    rMax: between(10e3, 120e3),
    b: between(0.8, 2.5),
    deficit: between(1000, 12_000),
    f: between(0, 1.2e-4),
  });
  it('of Holland (1980) is its pressure formula', () =>
    fc.assert(
      fc.property(vortices, between(0.1, 1), between(1, 20), (vortex, inner, outer) => {
        const [from, to] = [inner * vortex.rMax, outer * vortex.rMax];
        const formula = hollandPressure(to, 95_000, vortex) - hollandPressure(from, 95_000, vortex);
        const integrated = rise((r) => hollandGradientWind(r, vortex), vortex.f, from, to);
        expect(Math.abs(integrated - formula)).toBeLessThan(1e-6 * vortex.deficit);
      }),
      { numRuns: 30 },
    ));
  it('of Georgiou (1985) ahead of and behind the storm is that of Holland’s, motion or not', () => {
    const vortex = { rMax: 40 * KM, b: 1.4, deficit: 6000, f: 6e-5 };
    const integrated = rise((r) => georgiouWind(r, vortex, 12, 0), vortex.f, 4 * KM, 400 * KM);
    const formula = hollandPressure(400 * KM, 0, vortex) - hollandPressure(4 * KM, 0, vortex);
    expect(integrated).toBeCloseTo(formula, 2);
  });
  it('of the plain Holland (2010) profile without rotation of the earth is the whole deficit ρ e V²/bs', () =>
    fc.assert(
      fc.property(between(20, 80), between(10, 80), between(0.9, 2.4), (maxWind, km, bs) => {
        const rMax = km * KM;
        const profile = { maxWind, rMax, bs, outerRadius: 2 * rMax, outerExponent: 0.5 };
        const deficit = (DENSITY * Math.E * maxWind * maxWind) / bs;
        const integrated = rise((r) => hollandSurfaceWind(r, profile), 0, 10, 1e12);
        expect(Math.abs(integrated / deficit - 1)).toBeLessThan(1e-6);
      }),
      { numRuns: 20 },
    ));
  it('of the dual exponential has the closed forms of its power law and its exponentials', () => {
    for (const exactPeak of [false, true]) {
      const storm = dualExponential({ maxWind: 55, rMax: 40 * KM, latitude: 20 }, exactPeak);
      const wind = (r: number) => dualExponentialWind(r, storm);
      const { maxWind, rMax, innerExponent: n, fastShare: a, slowLength, transitionStart } = storm;
      // Inside: ∫ V²/r from r1 to r2 = Vm² [(r2/rm)^2n - (r1/rm)^2n] / 2n.
      const power = (r: number) => (r / rMax) ** (2 * n) / (2 * n);
      const inside = DENSITY * maxWind ** 2 * (power(transitionStart) - power(KM));
      expect(rise(wind, 0, KM, transitionStart)).toBeCloseTo(inside, 4);
      // Outside, each product of two exponentials: ∫ exp(-(r - rm) s)/r from r2 on = exp(rm s) E1(r2 s).
      const from = transitionStart + storm.transitionWidth;
      const beyond = (s: number) => Math.exp(rMax * s) * exponentialIntegral(from * s);
      const [slow, fast] = [1 / slowLength, 1 / 25_000];
      const products =
        (1 - a) ** 2 * beyond(2 * slow) + 2 * a * (1 - a) * beyond(slow + fast) + a * a * beyond(2 * fast);
      const outside = DENSITY * maxWind ** 2 * products;
      expect(Math.abs(rise(wind, 0, from, 20_000 * KM) / outside - 1)).toBeLessThan(1e-8);
    }
  });
  it('rises outwards everywhere, and to a deficit such storms have', () => {
    // Between those of Holland vortices of the same peak with B of 2.5 and 0.8, the range in which B is found.
    const peaks = [30, 45, 60, 75];
    for (const maxWind of peaks) {
      const rMax = 35 * KM;
      const core = { maxWind, rMax, bs: 1.4, outerRadius: 200 * KM };
      const published = dualExponential({ maxWind, rMax, latitude: 22 }, false);
      const exact = dualExponential({ maxWind, rMax, latitude: 22 }, true);
      const winds: ((r: number) => number)[] = [
        (r) => dualExponentialWind(r, published),
        (r) => dualExponentialWind(r, exact),
        (r) => hollandSurfaceWind(r, { ...core, outerExponent: 0.45 }),
        (r) => hollandSurfaceWind(r, { ...core, outerExponent: 0.9 }),
      ];
      for (const wind of winds) {
        let deficit = 0;
        for (let r = 0.1 * KM; r < 800 * KM; r *= 1.5) {
          const more = rise(wind, 5.5e-5, r, Math.min(1.5 * r, 800 * KM), 10);
          // Deep in the eye the Holland wind is too small for a double.
          if (r > 0.2 * rMax) expect(more).toBeGreaterThan(0);
          else expect(more).toBeGreaterThanOrEqual(0);
          deficit += more;
        }
        const unit = DENSITY * Math.E * maxWind * maxWind;
        expect(deficit).toBeGreaterThan(unit / 2.5);
        expect(deficit).toBeLessThan(unit / 0.8);
      }
    }
  });
});

describe('peak of a profile by differences', () => {
  /** Derivative by central differences extrapolated to step 0 (Richardson), error of sixth order. */
  const slope = (f: (r: number) => number, r: number) => {
    const central = (h: number) => (f(r + h) - f(r - h)) / (2 * h);
    const [a, b, c] = [central(400), central(200), central(100)];
    const [ab, bc] = [(4 * b - a) / 3, (4 * c - b) / 3];
    return (16 * bc - ab) / 15;
  };
  it('is level at rMax for the exact dual exponential and falls there for the published one', () =>
    fc.assert(
      fc.property(between(25, 80), between(12, 100), between(10, 40), (maxWind, km, latitude) => {
        const storm = { maxWind, rMax: km * KM, latitude };
        const exact = dualExponential(storm, true);
        const published = dualExponential(storm, false);
        const scale = maxWind / storm.rMax;
        expect(Math.abs(slope((r) => dualExponentialWind(r, exact), storm.rMax)) / scale).toBeLessThan(1e-5);
        const fall = slope((r) => dualExponentialWind(r, published), storm.rMax) / scale;
        if (published.fastShare > 0.02) expect(fall).toBeLessThan(-1e-4);
        else expect(fall).toBeLessThan(1e-5);
      }),
    ));
  it('is level at rMax for Holland (2010), with a bend beyond it or not', () => {
    const core = { maxWind: 50, rMax: 40 * KM, bs: 1.6 };
    for (const outerExponent of [0.5, 0.9]) {
      const profile = { ...core, outerRadius: 180 * KM, outerExponent };
      expect(Math.abs(slope((r) => hollandSurfaceWind(r, profile), 40 * KM))).toBeLessThan(1e-6);
    }
  });
});

describe('integrals over the whole storm', () => {
  it('have the closed form of kinetic energy, ∫ V² r dr = e √π V² rMax² / 4 for a shape of 4', () => {
    // With x = (rm/r)^4 the integral is Γ(1/2) e Vm² rm²/4, and Γ(1/2) = √π.
    const rMax = 40 * KM;
    const gradient = { rMax, b: 4, deficit: 6000, f: 0 };
    const surface = { maxWind: 50, rMax, bs: 4, outerRadius: 2 * rMax, outerExponent: 0.5 };
    const energy = (wind: (r: number) => number) =>
      integral((log) => wind(Math.exp(log)) ** 2 * Math.exp(2 * log), Math.log(100), Math.log(1e9));
    const expected = (peak: number) => (Math.E * Math.sqrt(Math.PI) * peak * peak * rMax * rMax) / 4;
    const cyclostrophic = Math.sqrt((4 * 6000) / (DENSITY * Math.E));
    const holland = energy((r) => hollandGradientWind(r, gradient)) / expected(cyclostrophic);
    expect(Math.abs(holland - 1)).toBeLessThan(1e-8);
    expect(Math.abs(energy((r) => hollandSurfaceWind(r, surface)) / expected(50) - 1)).toBeLessThan(1e-8);
  });
  it('have angular momentum that grows outwards where profiles are in balance: inertially stable', () => {
    const f = 6e-5;
    const vortex = { rMax: 36 * KM, b: 1.6, deficit: 6200, f };
    const double = dualExponential({ maxWind: 55, rMax: 36 * KM, latitude: 24.3 }, true);
    for (const wind of [(r: number) => hollandGradientWind(r, vortex), (r: number) => dualExponentialWind(r, double)]) {
      let before = 0;
      for (let r = KM; r < 600 * KM; r += KM) {
        const momentum = r * wind(r) + 0.5 * f * r * r;
        expect(momentum).toBeGreaterThan(before);
        before = momentum;
      }
    }
  });
});
