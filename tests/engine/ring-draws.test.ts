import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { amplitudeLaw, dominantMode, inlandFade, intensitySwitch, neutralPattern } from '#engine/ring/amplitude.ts';
import {
  AMPLITUDE_NODES,
  AMPLITUDE_WEIGHTS,
  DRAW_COUNT,
  DRAW_WEIGHT_TOTAL,
  DRAW_WEIGHT_UNITS,
  MEAN_AMPLITUDE,
  PHASE_COUNT,
  azimuthalShape,
  drawMean,
  drawQuantiles,
  radialShape,
  startingPhase,
} from '#engine/ring/draws.ts';
import { sharpRingMode, smoothRingModes } from '#engine/ring/stability.ts';

const between = (min: number, max: number) => fc.nat(1e6).map((i) => min + ((max - min) * i) / 1e6);

describe('amplitude law', () => {
  // Computed from the published formula; columns gamma = 0, 0.1, ..., 0.6.
  it.each([
    [0.55, [0.1331, 0.0895, 0.0537, 0.0389, 0, 0, 0]],
    [0.6, [0.1634, 0.1278, 0.0901, 0.0625, 0.0325, 0, 0]],
    [0.65, [0.2095, 0.1735, 0.1256, 0.09, 0.0594, 0.0294, 0.0316]],
    [0.7, [0.2425, 0.2017, 0.1608, 0.1274, 0.0856, 0.0528, 0.0271]],
    [0.75, [0.2838, 0.2389, 0.1951, 0.1569, 0.1168, 0.0773, 0.0417]],
    [0.8, [0.3237, 0.2793, 0.235, 0.1901, 0.1456, 0.106, 0.0647]],
    [0.85, [0.3677, 0.3202, 0.2708, 0.224, 0.1789, 0.1352, 0.0912]],
    [0.9, [0.4298, 0.3803, 0.3307, 0.2816, 0.2324, 0.1839, 0.1352]],
  ])('gives the table at delta %d', (delta, row) => {
    row.forEach((expected, k) => {
      expect(Math.abs(amplitudeLaw(smoothRingModes(delta, k / 10)) - expected)).toBeLessThan(1.1e-4);
    });
  });

  it('is the mixing length of the only growing wave, capped at one half', () => {
    expect(amplitudeLaw([{ m: 4, growth: 0.1, pattern: 0.3 }])).toBeCloseTo(0.1, 12);
    expect(amplitudeLaw([{ m: 3, growth: 0.9, pattern: 0.3 }])).toBe(0.5);
  });

  it('weighs several waves with the square of their growth and leaves out those below the floor', () => {
    const modes = [
      { m: 3, growth: 0.1, pattern: 0.3 },
      { m: 4, growth: 0.2, pattern: 0.3 },
      { m: 5, growth: 0.0199, pattern: 0.3 },
    ];
    // (0.01 · 0.13333 + 0.04 · 0.2) / 0.05, by hand.
    expect(amplitudeLaw(modes)).toBeCloseTo(0.186666667, 8);
    expect(amplitudeLaw([])).toBe(0);
    expect(dominantMode(modes)?.m).toBe(4);
    expect(dominantMode(modes.slice(2))).toBeNull();
  });

  it('switches on between 33 and 50 m/s and off between 40 and 80 km', () => {
    expect([33, 41.5, 50, 90].map((v) => intensitySwitch(v, 30_000))).toEqual([0, 0.5, 1, 1]);
    expect([20_000, 40_000, 60_000, 80_000, 2e5].map((r) => intensitySwitch(70, r))).toEqual([1, 1, 0.5, 0, 0]);
    expect(() => intensitySwitch(Number.NaN, 1)).toThrow('vmax');
    expect(() => intensitySwitch(50, Number.NaN)).toThrow('rmw');
  });

  it('halves every 2 ln 2 hours inland', () => {
    expect(inlandFade(0)).toBe(1);
    expect(inlandFade(2 * Math.LN2)).toBeCloseTo(0.5, 12);
  });

  it('falls back on the pattern speed of the sharp ring, growing or not', () => {
    fc.assert(
      fc.property(between(0.55, 0.9), between(0, 0.9), fc.integer({ min: 2, max: 12 }), (delta, gamma, m) => {
        const { frequency } = sharpRingMode(delta, gamma, m);
        const mean = frequency.reduce((a, b) => a + b) / frequency.length;
        expect(neutralPattern(gamma, m)).toBeCloseTo(mean / m, 10);
      }),
    );
  });
});

describe('vortex shapes', () => {
  it('passes through the radial nodes, is linear between them and nil outside', () => {
    const nodes = [
      [0, 0],
      [0.3, 0.56],
      [0.4, 0.73],
      [0.5, 0.85],
      [0.6, 1.03],
      [0.7, 1.15],
      [0.8, 1.25],
      [0.9, 1.1],
      [1, 1],
      [1.1, 0.87],
      [1.2, 0.7],
      [1.3, 0.5],
      [1.4, 0.35],
      [1.5, 0.26],
      [1.7, 0.17],
      [2, 0],
    ] as const;
    nodes.forEach(([x, e], k) => {
      expect(radialShape(x)).toBeCloseTo(e, 12);
      const next = nodes[k + 1];
      if (next) expect(radialShape((x + next[0]) / 2)).toBeCloseTo((e + next[1]) / 2, 12);
    });
    expect(radialShape(2.5)).toBe(0);
    expect(radialShape(28 / 30)).toBeCloseTo(1.06667, 5);
    expect(radialShape(Number.NaN)).toBeNaN();
  });

  it('has maximum 1, minimum -1/2 and no mean around the eye', () => {
    expect(azimuthalShape(0)).toBe(1);
    fc.assert(
      fc.property(between(-10, 10), (x) => {
        expect(azimuthalShape(x)).toBeGreaterThanOrEqual(-0.5 - 1e-12);
        expect(azimuthalShape(x)).toBeLessThanOrEqual(1);
        expect(azimuthalShape(x)).toBeCloseTo((Math.cos(x) + 0.5 * Math.cos(2 * x)) / 1.5, 12);
        let sum = 0;
        for (let j = 0; j < PHASE_COUNT; j++) sum += azimuthalShape(x - startingPhase(j));
        expect(sum).toBeCloseTo(0, 12);
      }),
    );
    // The worked example: 4 (phi - theta) with phi = pi / 2, theta = 8.67633, phase 0.
    expect(azimuthalShape(4 * (Math.PI / 2 - 8.67633) - startingPhase(0))).toBeCloseTo(-0.35806, 4);
  });
});

describe('draws', () => {
  it('are 264 with weights that sum to one and a mean strength of 0.38415', () => {
    expect(DRAW_COUNT).toBe(264);
    expect(AMPLITUDE_WEIGHTS.reduce((a, b) => a + b)).toBeCloseTo(1, 14);
    expect(DRAW_WEIGHT_UNITS.reduce((a, b) => a + b)).toBe(DRAW_WEIGHT_TOTAL);
    expect(AMPLITUDE_NODES.reduce((sum, a, i) => sum + a * AMPLITUDE_WEIGHTS[i]!, 0)).toBeCloseTo(MEAN_AMPLITUDE, 14);
    const strengths = Float64Array.from({ length: DRAW_COUNT }, (_, d) => AMPLITUDE_NODES[Math.floor(d / 24)]!);
    expect(drawMean(strengths)).toBeCloseTo(0.38415, 14);
    expect([...drawQuantiles(strengths, [0.05, 0.15, 0.1500001, 0.45, 0.5, 0.9, 0.99, 1])]).toEqual([
      0.2, 0.2, 0.28, 0.28, 0.34, 0.64, 0.935, 1.1,
    ]);
  });

  const byDefinition = (values: number[], level: number) => {
    const order = values.map((_, d) => d).sort((a, b) => values[a]! - values[b]!);
    let reached = 0;
    for (const d of order) {
      reached += AMPLITUDE_WEIGHTS[Math.floor(d / PHASE_COUNT)]! / PHASE_COUNT;
      if (reached >= level - 1e-12) return values[d]!;
    }
    return values[order[order.length - 1]!]!;
  };
  const levels = [0.01, 0.05, 0.5, 0.9, 0.95, 0.99];

  it('have the quantiles of the definition, with ties, outliers and any spread', () => {
    const values = fc.array(fc.oneof(between(-1, 1), fc.constantFrom(0, 0.25, 1e6)), {
      minLength: 264,
      maxLength: 264,
    });
    fc.assert(
      fc.property(values, between(1e-9, 1e9), (drawn, scale) => {
        const scaled = drawn.map((v) => v * scale);
        const found = drawQuantiles(Float64Array.from(scaled), levels);
        levels.forEach((level, k) => expect(found[k]).toBe(byDefinition(scaled, level)));
      }),
      { numRuns: 200 },
    );
  });

  it('keep a common value, pass NaN on and refuse another number of draws', () => {
    const same = new Float64Array(264).fill(61.416515);
    expect([...drawQuantiles(same, levels)]).toEqual(levels.map(() => 61.416515));
    same[7] = Number.NaN;
    expect(drawQuantiles(same, [0.5])[0]).toBeNaN();
    expect(drawMean(same)).toBeNaN();
    expect(() => drawMean(new Float64Array(5))).toThrow('draws');
    expect(() => drawQuantiles(new Float64Array(5), [0.5])).toThrow('draws');
  });
});
