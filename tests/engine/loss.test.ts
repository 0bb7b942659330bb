import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  GUST_BASIS,
  REFERENCE_CURVE,
  damageCurveFaults,
  damageThreshold,
  meanDamage,
  type DamageCurve,
  type PointsCurve,
} from '#engine/loss/damage-curve.ts';
import { LOSS_QUANTUM, drawLosses, quantisedLoss } from '#engine/loss/draw-losses.ts';
import { betaStopLoss, damageStopLoss, expectedGross } from '#engine/loss/secondary-uncertainty.ts';
import { integrate01 } from './quadrature.ts';

// Uniform over the range: fc.double spreads over bit patterns and rarely visits the top of it.
const between = (min: number, max: number) => fc.nat(1e6).map((i) => min + ((max - min) * i) / 1e6);
const KNOT = 0.514444444444;
const head = { gustBasis: GUST_BASIS, fittedOn: 'plain', source: 'test', version: '1' } as const;
const emanuel = (thresholdMs: number, halfMs: number): DamageCurve => ({
  ...head,
  code: 'E',
  kind: 'emanuel',
  thresholdMs,
  halfMs,
});
const points: PointsCurve = {
  ...head,
  code: 'P',
  kind: 'points',
  speedsMs: [30, 40, 60, 80],
  ratios: [0, 0.02, 0.3, 0.9],
};
const curves = fc.oneof(
  fc.tuple(between(20, 45), between(10, 90)).map(([vt, span]) => emanuel(vt, vt + span)),
  fc.constant<DamageCurve>(points),
);

describe('damage curve', () => {
  it("gives Emanuel's printed ratios for 1-min winds and for gusts", () => {
    const oneMinute = emanuel(50 * KNOT, 150 * KNOT);
    [
      [40, 0.02093052],
      [60, 0.2282859],
      [77.1666667, 0.5],
      [100, 0.7506212],
    ].forEach(([v, d]) => expect(meanDamage(oneMinute, v!)).toBeCloseTo(d!, 7));
    expect(REFERENCE_CURVE.thresholdMs).toBeCloseTo(32.1528, 4);
    expect(REFERENCE_CURVE.halfMs).toBeCloseTo(96.4583, 4);
    [
      [40, 0.001813902],
      [60, 0.0751088],
      [80, 0.2917502],
    ].forEach(([v, d]) => expect(meanDamage(REFERENCE_CURVE, v!)).toBeCloseTo(d!, 7));
    [
      [110, 0.2256],
      [150, 0.0592],
      [190, 0.0224],
    ].forEach(([kt, d]) => expect(meanDamage(emanuel(62.5 * KNOT, 1.25 * kt! * KNOT), 57.7295)).toBeCloseTo(d!, 4));
  });

  it('lies in 0..1, never falls with gust and is nil up to its threshold', () => {
    fc.assert(
      fc.property(curves, between(0, 150), between(0, 30), (curve, gust, more) => {
        const damage = meanDamage(curve, gust);
        expect(damage).toBeGreaterThanOrEqual(0);
        expect(damage).toBeLessThanOrEqual(1);
        expect(meanDamage(curve, gust + more)).toBeGreaterThanOrEqual(damage);
        if (gust <= damageThreshold(curve)) expect(damage).toBe(0);
        else expect(damage).toBeGreaterThan(0);
      }),
    );
  });

  it('never charges stronger construction more', () => {
    fc.assert(
      fc.property(
        between(25, 40),
        between(20, 80),
        between(0, 10),
        between(0, 20),
        between(0, 150),
        (vt, span, a, b, gust) => {
          expect(meanDamage(emanuel(vt + a, vt + a + span + b), gust)).toBeLessThanOrEqual(
            meanDamage(emanuel(vt, vt + span), gust) + 1e-15,
          );
        },
      ),
    );
  });

  it('interpolates points and stays flat outside them', () => {
    expect([0, 30, 35, 40, 50, 60, 70, 80, 200].map((v) => meanDamage(points, v))).toEqual(
      [0, 0, 0.01, 0.02, 0.16, 0.3, 0.6, 0.9, 0.9].map((d) => expect.closeTo(d, 12)),
    );
    expect(damageThreshold(points)).toBe(30);
    expect(damageThreshold({ ...points, ratios: [0.1, 0.1, 0.3, 0.9] })).toBe(0);
    expect(damageThreshold({ ...points, ratios: [0, 0, 0, 0] })).toBe(Infinity);
    expect(meanDamage(points, Number.NaN)).toBeNaN();
    expect(meanDamage(REFERENCE_CURVE, Number.NaN)).toBeNaN();
    expect(meanDamage(REFERENCE_CURVE, Infinity)).toBe(1);
  });

  it('lists what is wrong with a curve', () => {
    expect(damageCurveFaults(points)).toEqual([]);
    expect(damageCurveFaults(REFERENCE_CURVE)).toEqual([]);
    const basis = { averagingS: 60, heightM: 10, exposure: 'as found' } as unknown as typeof GUST_BASIS;
    const faulty: [DamageCurve, string][] = [
      [{ ...points, gustBasis: basis }, 'gust basis'],
      [{ ...points, speedsMs: [30, 40, 40, 80] }, 'not above'],
      [{ ...points, speedsMs: [-1, 40, 50, 80] }, 'Gust 1'],
      [{ ...points, ratios: [0, 0.3, 0.2, 0.9] }, 'below the one before'],
      [{ ...points, ratios: [0, 0.3, 0.4, 1.1] }, 'between 0 and 1'],
      [{ ...points, ratios: [0, 0.3, 0.4] }, 'each gust needs one ratio'],
      [{ ...points, speedsMs: [30], ratios: [0] }, 'at least 2'],
      [emanuel(40, 40), 'Half damage'],
      [emanuel(-1, 40), 'threshold'],
    ];
    for (const [curve, said] of faulty) expect(damageCurveFaults(curve).join(' ')).toContain(said);
  });
});

/** Expected excess by integrating the tail of the density: an independent route to the same number. */
const excess = (a: number, b: number, k: number) => {
  const density = (x: number, fromOne: number) => x ** (a - 1) * fromOne ** (b - 1);
  const width = 1 - k;
  return (width * integrate01((y, rest) => width * y * density(k + width * y, width * rest))) / integrate01(density);
};

describe('expected excess of a spread damage ratio', () => {
  it('has the printed values', () => {
    // Computed from the published formula, and by quadrature.
    expect(betaStopLoss(0.8, 7.2, 0.02)).toBeCloseTo(0.08241704, 8);
    expect(betaStopLoss(0.8, 7.2, 0.5)).toBeCloseTo(2.625188e-4, 10);
  });

  it('agrees with quadrature', () => {
    fc.assert(
      fc.property(between(0.02, 0.98), between(0.001, 0.98), (mu, k) => {
        const direct = excess(4 * mu, 4 - 4 * mu, k);
        expect(Math.abs(damageStopLoss(mu, k) - direct)).toBeLessThan(1e-11);
        expect(Math.abs(betaStopLoss(4 * mu, 4 - 4 * mu, k) - direct)).toBeLessThan(1e-11);
      }),
      { numRuns: 200 },
    );
  });

  it('keeps its relative accuracy for tiny damage and at the joins of its two forms', () => {
    for (const mu of [1e-9, 1e-4, 0.0124999, 0.0125001, 0.1, 0.25, 0.5, 0.75, 0.9999]) {
      const [a, b] = [4 * mu, 4 - 4 * mu];
      for (const k of [0.003, 0.02, 0.2, 0.499999, 0.500001, 0.8, 0.97]) {
        // A shape near 0 puts a pole into the density that no quadrature resolves; its first moment from that side has none.
        const density = (x: number, fromOne: number) => x ** (a - 1) * fromOne ** (b - 1);
        const above = () => (1 - k) ** 2 * integrate01((y, rest) => y * density(k + (1 - k) * y, (1 - k) * rest));
        const below = () => k ** 2 * integrate01((y, rest) => rest * density(k * y, 1 - k + k * rest));
        const direct =
          mu < 0.5
            ? (mu * above()) / integrate01((x, fromOne) => x * density(x, fromOne))
            : mu - k + ((1 - mu) * below()) / integrate01((x, fromOne) => fromOne * density(x, fromOne));
        expect(damageStopLoss(mu, k) / direct).toBeCloseTo(1, 9);
      }
    }
  });

  it('does not jump at whole shapes, where its formula has removable zeros', () => {
    for (const mu of [0.25, 0.5, 0.75]) {
      for (const k of [0.1, 0.6]) {
        const [low, at, high] = [mu - 1e-7, mu, mu + 1e-7].map((m) => damageStopLoss(m, k));
        expect(Math.abs((low! + high!) / 2 - at!)).toBeLessThan(1e-12);
      }
    }
  });

  it('is the mean less the attachment below 0, nothing from 1 on, and a point mass at 0 and 1', () => {
    expect(damageStopLoss(0.3, -0.2)).toBeCloseTo(0.5, 15);
    expect(betaStopLoss(1.2, 2.8, -0.2)).toBeCloseTo(0.5, 15);
    expect(damageStopLoss(0.3, 1)).toBe(0);
    expect(betaStopLoss(1.2, 2.8, 1.5)).toBe(0);
    expect(damageStopLoss(0, 0.4)).toBe(0);
    expect(damageStopLoss(1, 0.4)).toBeCloseTo(0.6, 15);
    expect(damageStopLoss(Number.NaN, 0.4)).toBeNaN();
  });
});

describe('policy terms', () => {
  it('has the printed layer, which is not the layer of the mean', () => {
    expect(expectedGross(0.1, 1e6, 2e4, 3e5)).toBeCloseTo(74604.22, 2);
  });

  it('turns the printed plain gusts of the worked chain into its printed losses', () => {
    // Gust, value, deductible, limit, ground-up, gross: pressure and wind variants, sites S1-S5.
    const rows: [number, number, number, number, number, number][] = [
      [61.416515, 1e6, 2e4, 8e5, 86125.26, 72627.79],
      [54.854776, 1e6, 2e4, 8e5, 42145.05, 33839.31],
      [44.787471, 1e6, 2e4, 8e5, 7527.78, 5733.11],
      [46.694467, 2e6, 5e4, 1e6, 22863.14, 16444.07],
      [23.910312, 5e5, 1e4, 4e5, 0, 0],
      [65.842954, 1e6, 2e4, 8e5, 125722.67, 109456.21],
      [57.733, 1e6, 2e4, 8e5, 59218.35, 48561],
      [47.803725, 1e6, 2e4, 8e5, 14212.15, 10948.11],
      [47.491153, 2e6, 5e4, 1e6, 26777.42, 19328.16],
    ];
    for (const [gust, value, deductible, limit, groundUp, gross] of rows) {
      const mu = meanDamage(REFERENCE_CURVE, gust);
      // The printed gust is rounded to 1e-6 m/s, which moves the loss by up to half a cent.
      expect(Math.abs(mu * value - groundUp)).toBeLessThan(0.011);
      expect(Math.abs(expectedGross(mu, value, deductible, limit) - gross)).toBeLessThan(0.011);
    }
  });

  const terms = fc.record({
    mu: between(0, 1),
    value: between(0, 2e6),
    deductible: between(0, 1e6),
    limit: between(0, 3e6),
  });

  it('never lets gross grow with the deductible, fall with the limit, or leave its bounds', () => {
    fc.assert(
      fc.property(terms, between(0, 1e5), ({ mu, value, deductible, limit }, more) => {
        const gross = expectedGross(mu, value, deductible, limit);
        const slack = 1e-12 * value;
        expect(gross).toBeGreaterThanOrEqual(0);
        expect(gross).toBeLessThanOrEqual(Math.min(limit, mu * value));
        expect(expectedGross(mu, value, deductible + more, limit)).toBeLessThanOrEqual(gross + slack);
        expect(expectedGross(mu, value, deductible, limit + more)).toBeGreaterThanOrEqual(gross - slack);
        expect(expectedGross(mu, value, 0, value)).toBe(mu * value);
        expect(expectedGross(mu, value, 0, Infinity)).toBe(mu * value);
      }),
    );
  });

  it('scales with the value when the terms scale too', () => {
    fc.assert(
      fc.property(terms, between(0.1, 10), ({ mu, value, deductible, limit }, scale) => {
        const gross = expectedGross(mu, value, deductible, limit);
        const scaled = expectedGross(mu, value * scale, deductible * scale, limit * scale);
        expect(Math.abs(scaled - gross * scale)).toBeLessThanOrEqual(1e-11 * value * scale);
      }),
    );
  });

  it('adds up: what the layers below and above the limit pay is what one without a limit pays', () => {
    fc.assert(
      fc.property(terms, ({ mu, value, deductible, limit }) => {
        const both =
          expectedGross(mu, value, deductible, limit) + expectedGross(mu, value, deductible + limit, Infinity);
        expect(Math.abs(both - expectedGross(mu, value, deductible, Infinity))).toBeLessThanOrEqual(1e-11 * value);
      }),
    );
  });

  it('refuses negative terms, insures nothing for nothing, and passes NaN on', () => {
    expect(() => expectedGross(1.1, 1, 0, 1)).toThrow('damage ratio');
    expect(() => expectedGross(0.1, -1, 0, 1)).toThrow('value');
    expect(() => expectedGross(0.1, 1, -1, 1)).toThrow('deductible');
    expect(() => expectedGross(0.1, 1, 0, -1)).toThrow('limit');
    expect(expectedGross(0.1, 0, 0, 1)).toBe(0);
    expect(expectedGross(0.1, Number.NaN, 0, 1)).toBeNaN();
  });
});

describe('losses of all draws', () => {
  const run = (curve: DamageCurve, value: number, deductible: number, limit: number, gusts: Float64Array) => {
    const groundUp = new Float64Array(gusts.length);
    const gross = new Float64Array(gusts.length);
    drawLosses(curve, value, deductible, limit, gusts, groundUp, gross);
    return { groundUp, gross };
  };
  const spread = (low: number, high: number) =>
    Float64Array.from({ length: 264 }, (_, d) => low + ((high - low) * ((d * 97) % 264)) / 263);

  it('agree with the direct form to 2e-10', () => {
    const span = fc.tuple(between(20, 90), between(0, 45));
    const policy = fc.oneof(
      fc.tuple(between(0, 5e4), between(1e5, 1.2e6)),
      fc.tuple(between(0, 9.9e5), between(1e3, 1e6)),
      fc.constantFrom<[number, number]>([0, 1e6], [0, 4e5], [2e4, Infinity], [9.5e5, 1e5], [1e6, 1e6], [1, 2]),
    );
    fc.assert(
      fc.property(curves, span, policy, (curve, [low, width], [deductible, limit]) => {
        const gusts = spread(low, low + width);
        const { groundUp, gross } = run(curve, 1e6, deductible, limit, gusts);
        gusts.forEach((gust, d) => {
          const mu = meanDamage(curve, gust);
          const direct = expectedGross(mu, 1e6, deductible, limit);
          expect(groundUp[d]).toBe(mu * 1e6);
          expect(Math.abs(gross[d]! - direct)).toBeLessThanOrEqual(2e-10 * direct);
        });
      }),
      { numRuns: 300 },
    );
  });

  it('are one and the same when the vortex layer is off', () => {
    const { groundUp, gross } = run(REFERENCE_CURVE, 1e6, 2e4, 8e5, new Float64Array(264).fill(61.416515));
    expect(new Set(groundUp).size).toBe(1);
    expect(new Set(gross)).toEqual(new Set([expectedGross(meanDamage(REFERENCE_CURVE, 61.416515), 1e6, 2e4, 8e5)]));
  });

  it('are nil below the threshold, NaN without a value, and refuse negative terms', () => {
    const some = run(REFERENCE_CURVE, 1e6, 2e4, 8e5, spread(25, 40));
    spread(25, 40).forEach((gust, d) => expect(some.gross[d]! > 0).toBe(gust > REFERENCE_CURVE.thresholdMs));
    expect([...run(REFERENCE_CURVE, 1e6, 2e4, 8e5, spread(10, 30)).gross].every((loss) => loss === 0)).toBe(true);
    expect([...run(REFERENCE_CURVE, 0, 0, 8e5, spread(50, 60)).gross].every((loss) => loss === 0)).toBe(true);
    expect([...run(REFERENCE_CURVE, Number.NaN, 0, 8e5, spread(50, 60)).gross].every(Number.isNaN)).toBe(true);
    expect(() => run(REFERENCE_CURVE, -1, 0, 1, spread(50, 60))).toThrow('value');
    expect(() => run(REFERENCE_CURVE, 1, -1, 1, spread(50, 60))).toThrow('deductible');
    expect(() => run(REFERENCE_CURVE, 1, 0, -1, spread(50, 60))).toThrow('limit');
  });

  it('cost microseconds a site', () => {
    const gusts = spread(60.8, 67.3);
    const groundUp = new Float64Array(264);
    const gross = new Float64Array(264);
    const times = Array.from({ length: 10 }, () => {
      const start = performance.now();
      for (let k = 0; k < 500; k++) drawLosses(REFERENCE_CURVE, 1e6, 2e4, 8e5, gusts, groundUp, gross);
      return (performance.now() - start) / 500;
    });
    expect(Math.min(...times)).toBeLessThan(0.03);
  });

  it('rounded to 1/1024, add up to the same total in any order and grouping', () => {
    fc.assert(
      fc.property(
        fc.array(
          between(0, 1e6).map((v) => v * Math.PI),
          { minLength: 2, maxLength: 200 },
        ),
        fc.nat(),
        (losses, seed) => {
          const rounded = losses.map(quantisedLoss);
          rounded.forEach((loss, k) => expect(Math.abs(loss - losses[k]!)).toBeLessThanOrEqual(LOSS_QUANTUM / 2));
          const sum = (list: number[]) => list.reduce((a, b) => a + b, 0);
          const shuffled = rounded
            .map((loss, k) => ({ loss, key: (k * 7919 + seed) % 211 }))
            .sort((a, b) => a.key - b.key);
          const cut = seed % rounded.length;
          expect(sum(shuffled.map(({ loss }) => loss))).toBe(sum(rounded));
          expect(sum(rounded.slice(cut)) + sum(rounded.slice(0, cut))).toBe(sum(rounded));
        },
      ),
    );
  });
});
