import fc from 'fast-check';
import { EigenvalueDecomposition, Matrix, inverse } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { describeRing } from '#engine/ring/description.ts';
import { ringNodes, ringShape, sharpRingMode, sharpRingModes, smoothRingModes } from '#engine/ring/stability.ts';

// Uniform over the range: fc.double spreads over bit patterns and rarely visits the top of it.
const between = (min: number, max: number) => fc.nat(1e6).map((i) => min + ((max - min) * i) / 1e6);
const mode = (delta: number, gamma: number, m: number) => smoothRingModes(delta, gamma).find((one) => one.m === m)!;

describe('ring with sharp edges', () => {
  // Computed from the published formula, and by a 2 x 2 eigenvalue routine.
  it.each([
    [0.6, 0, 3, 0.78125, 0.71875, -0.11, 0.16583, 0.75, -100.67, 0.6],
    [0.6, 0.3, 3, 0.99687, 0.80312, -0.03358, 0.09163, 0.9, -136.59, 0.53152],
    [0.7, 0, 4, 0.98039, 1.01961, -0.2201, 0.23457, 1, -85.22, 0.7],
    [0.7, 0.2, 4, 1.18431, 1.11569, -0.15522, 0.19699, 1.15, -99.88, 0.65923],
    [0.75, 0.5, 5, 1.82143, 1.67857, -0.08532, 0.14605, 1.75, -116.06, 0.62554],
    [0.8, 0.2, 5, 1.61111, 1.28889, -0.47414, 0.34429, 1.45, -115.08, 0.76626],
    [0.8, 0.4, 6, 2.03333, 1.96667, -0.23226, 0.24096, 2, -97.88, 0.71842],
    [0.85, 0, 7, 1.8018, 1.6982, -1.32383, 0.57529, 1.75, -95.15, 0.85],
    [0.9, 0.3, 9, 3.19211, 2.50789, -1.73505, 0.65861, 2.85, -117.45, 0.86545],
  ])(
    'has the growing wave of the table at delta %d, gamma %d, m %d',
    (delta, gamma, m, a, b, disc, sigma, nu, lag, ratio) => {
      const wave = sharpRingMode(delta, gamma, m);
      expect(Math.abs(wave.innerEdge - a)).toBeLessThan(1.1e-5);
      expect(Math.abs(wave.outerEdge - b)).toBeLessThan(1.1e-5);
      expect(wave.discriminant).toBeCloseTo(disc, 5);
      expect(wave.growth).toBeCloseTo(sigma, 5);
      expect(wave.frequency).toHaveLength(1);
      expect(wave.frequency[0]).toBeCloseTo(nu, 5);
      expect(wave.phaseLagDeg).toBeCloseTo(lag, 2);
      expect(wave.amplitudeRatio).toBeCloseTo(ratio, 5);
    },
  );

  it.each([
    [0.5, 0, 2, 0, [0.5, 0.5]],
    [0.85, 0.2, 2, 0.1256, [0.7272, 0.3728]],
    [0.7, 0.2, 1, 0.25, [0.5, 0]],
  ])('has the neutral pair of the table at delta %d, gamma %d, m %d', (delta, gamma, m, disc, pair) => {
    const wave = sharpRingMode(delta, gamma, m);
    expect(wave.discriminant).toBeCloseTo(disc, 5);
    expect(wave.growth).toBe(0);
    expect(wave.frequency).toHaveLength(2);
    wave.frequency.forEach((nu, k) => expect(nu).toBeCloseTo(pair[k]!, 5));
    expect(wave.phaseLagDeg).toBeNull();
    expect(wave.amplitudeRatio).toBeNull();
  });

  it('agrees with the eigenvalues of its two coupled edges', () => {
    fc.assert(
      fc.property(between(0.3, 0.95), between(0, 0.9), fc.integer({ min: 1, max: 12 }), (delta, gamma, m) => {
        const ring = (1 - gamma * delta ** 2) / (1 - delta ** 2);
        const [j1, j2] = [ring - gamma, -ring];
        const eigen = new EigenvalueDecomposition(
          new Matrix([
            [(m * gamma) / 2 + j1 / 2, (j2 / 2) * delta ** (m - 1)],
            [(j1 / 2) * delta ** (m + 1), m / 2 + j2 / 2],
          ]),
        );
        const wave = sharpRingMode(delta, gamma, m);
        // Near the boundary a rounding of 1e-15 under the root is 3e-8 outside it.
        expect(wave.growth).toBeCloseTo(Math.max(...eigen.imaginaryEigenvalues), 6);
        expect(wave.frequency[0]).toBeCloseTo(Math.max(...eigen.realEigenvalues), 6);
      }),
    );
  });

  it.each([
    [3, [0.5, 0.44829, 0.32506]],
    [4, [Math.sqrt(Math.SQRT2 - 1), 0.61865, 0.56929, 0.40825]],
    [5, [0.72212, 0.70711, 0.67887, 0.60375]],
    [6, [0.77206, 0.76198, 0.74352, 0.69799]],
    [7, [0.8067, 0.79946, 0.7864, 0.75554]],
    [8, [0.83217, 0.82671, 0.81697, 0.79459]],
  ])('begins to grow at the tabulated thickness for m = %d', (m, edges) => {
    edges.forEach((edge, k) => {
      const gamma = 0.2 * k;
      expect(sharpRingMode(edge - 2e-5, gamma, m).growth).toBe(0);
      expect(sharpRingMode(edge + 2e-5, gamma, m).growth).toBeGreaterThan(0);
    });
  });

  it('wobbles with the flow at the radius of maximum wind and can be shifted freely (m = 1)', () => {
    fc.assert(
      fc.property(between(0.2, 0.95), between(0, 0.9), (delta, gamma) => {
        const { frequency } = sharpRingMode(delta, gamma, 1);
        expect(frequency[0]).toBeCloseTo(0.5, 10);
        expect(frequency[1]).toBeCloseTo(0, 10);
      }),
    );
  });

  it('refuses a ring without width', () => {
    expect(() => sharpRingMode(1, 0, 3)).toThrow('delta');
    expect(() => sharpRingMode(0.5, 1, 3)).toThrow('gamma');
    expect(() => sharpRingMode(0.5, 0, 2.5)).toThrow('m is');
    expect(sharpRingModes(0.5, 0).map(({ m }) => m)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12]);
  });
});

describe('smooth ring', () => {
  /** The dense matrix on the same nodes, given to a general eigenvalue routine. */
  const denseSpectrum = (delta: number, gamma: number, m: number) => {
    const { radius, spacing, gradient, rotation } = ringNodes(delta, gamma);
    const n = radius.length;
    const matrix = Matrix.zeros(n, n);
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) {
        const [small, large] = [Math.min(radius[i]!, radius[j]!), Math.max(radius[i]!, radius[j]!)];
        const induced = (gradient[i]! / (2 * radius[i]!)) * (small / large) ** m * radius[j]! * spacing[j]!;
        matrix.set(i, j, induced + (i === j ? m * rotation[i]! : 0));
      }
    }
    const eigen = new EigenvalueDecomposition(matrix);
    return eigen.imaginaryEigenvalues.map((im, k) => ({ im, re: eigen.realEigenvalues[k]! }));
  };

  it('equals a dense eigenvalue routine on the same nodes', () => {
    for (const [delta, gamma] of [
      [0.55, 0],
      [0.65, 0.2],
      [0.65, 0.6],
      [0.72, 0.35],
      [0.8, 0],
      [0.9, 0.1],
      [0.8877581953, 0.869373],
    ] as const) {
      for (const fast of smoothRingModes(delta, gamma)) {
        const top = denseSpectrum(delta, gamma, fast.m).reduce((a, b) => (b.im > a.im ? b : a));
        if (top.im >= 0.02) {
          expect(Math.abs(fast.growth - top.im)).toBeLessThan(1e-12);
          expect(Math.abs(fast.pattern! - top.re / fast.m)).toBeLessThan(1e-12);
        } else {
          expect(fast.growth).toBe(0);
          expect(fast.pattern).toBeNull();
        }
      }
    }
  });

  /**
   * Another discretisation: every radius carries a node, the stream function comes from finite differences with an
   * open outer edge instead of the Green's function, and the flow from summing the vorticity numerically.
   */
  const fullRadiusGrowth = (delta: number, gamma: number, m: number, n: number) => {
    const half = 0.375 * (1 - delta);
    const edge = 1.4;
    const h = edge / n;
    const ring = (1 - gamma * delta * delta) / (1 - delta * delta);
    const fall = (r: number, centre: number) => {
      const s = Math.min(Math.max((r - centre + half) / (2 * half), 0), 1);
      return 1 - 3 * s * s + 2 * s ** 3;
    };
    const vorticity = (r: number) => gamma * fall(r, delta) + ring * (fall(r, 1) - fall(r, delta));
    const radius = Array.from({ length: n }, (_, i) => (i + 0.5) * h);
    const laplace = Matrix.zeros(n, n);
    const rotation: number[] = [];
    let circulation = 0;
    radius.forEach((r, i) => {
      for (let k = 0; k < 20; k++) {
        const x = r - h / 2 + (h * (k + 0.5)) / 20;
        if (k === 10) rotation.push(circulation / (r * r));
        circulation += (vorticity(x) * x * h) / 20;
      }
      const inner = (r - h / 2) / (r * h * h);
      const outer = (r + h / 2) / (r * h * h);
      laplace.set(i, i, -inner - outer - (m / r) ** 2);
      if (i > 0) laplace.set(i, i - 1, inner);
      if (i < n - 1) laplace.set(i, i + 1, outer);
      else laplace.set(i, i, laplace.get(i, i) + outer * (r / (r + h)) ** m);
    });
    const stream = inverse(laplace);
    const slope = (r: number) => (vorticity(r + 1e-6) - vorticity(r - 1e-6)) / 2e-6;
    const live = radius.map((_, i) => i).filter((i) => Math.abs(slope(radius[i]!)) > 1e-6);
    const matrix = Matrix.zeros(live.length, live.length);
    live.forEach((i, row) =>
      live.forEach((j, column) => {
        const advected = i === j ? m * rotation[i]! : 0;
        matrix.set(row, column, advected - (m / radius[i]!) * slope(radius[i]!) * stream.get(i, j));
      }),
    );
    const eigen = new EigenvalueDecomposition(matrix);
    let best = 0;
    eigen.imaginaryEigenvalues.forEach((im, k) => (best = im > eigen.imaginaryEigenvalues[best]! ? k : best));
    return { growth: eigen.imaginaryEigenvalues[best]!, pattern: eigen.realEigenvalues[best]! / m };
  };

  it.each([
    [0.65217, 0.19918, 3],
    [0.65217, 0.19918, 4],
    [0.8, 0.2, 5],
    [0.6, 0, 3],
  ])('agrees with finite differences over the whole radius at delta %d, gamma %d, m %d', (delta, gamma, m) => {
    const compact = mode(delta, gamma, m);
    const errors = [160, 320].map((n) => {
      const full = fullRadiusGrowth(delta, gamma, m, n);
      expect(full.pattern).toBeCloseTo(compact.pattern!, 3);
      return Math.abs(full.growth / compact.growth - 1);
    });
    expect(errors[1]).toBeLessThan(0.003);
  });

  it('gives the published control ring four vortices with an e-fold of about one hour', () => {
    const zav = 2.09988e-3;
    // Inner radius 37.5 km, outer 57.5 km, shoulders of 7.5 km; minutes, then 1e-3 rad/s. Computed from the published model.
    for (const [m, minutes, pattern] of [
      [3, 80.81, 0.60773],
      [4, 57.43, 0.63183],
      [5, 143.87, 0.65756],
    ] as const) {
      const wave = mode(37.5 / 57.5, 0.19918, m);
      expect(1 / (wave.growth * zav * 60)).toBeCloseTo(minutes, 1);
      expect(wave.pattern! * zav * 1e3).toBeCloseTo(pattern, 4);
    }
  });

  const STABLE = null;
  // Most unstable wave: m, growth, pattern speed; computed from the published model.
  const TABLE: [number, (readonly [number, number, number] | null)[]][] = [
    [
      0.55,
      [[3, 0.1075, 0.2703], [3, 0.0793, 0.2826], [4, 0.0527, 0.3151], [4, 0.0389, 0.3257], STABLE, STABLE, STABLE],
    ],
    [
      0.6,
      [
        [3, 0.1448, 0.2646],
        [3, 0.1128, 0.2787],
        [4, 0.09, 0.3076],
        [4, 0.0708, 0.3214],
        [4, 0.0372, 0.3319],
        STABLE,
        STABLE,
      ],
    ],
    [
      0.65,
      [
        [3, 0.1829, 0.26],
        [4, 0.1553, 0.285],
        [4, 0.1359, 0.3013],
        [4, 0.108, 0.3171],
        [5, 0.0689, 0.3445],
        [5, 0.0426, 0.3576],
        [3, 0.0237, 0.4162],
      ],
    ],
    [
      0.7,
      [
        [4, 0.2453, 0.2617],
        [4, 0.2178, 0.2791],
        [4, 0.1861, 0.2965],
        [4, 0.1475, 0.3136],
        [5, 0.1157, 0.3396],
        [5, 0.0763, 0.3558],
        [6, 0.0378, 0.379],
      ],
    ],
    [
      0.75,
      [
        [4, 0.3221, 0.2569],
        [4, 0.2816, 0.275],
        [5, 0.2416, 0.2986],
        [5, 0.2084, 0.3174],
        [5, 0.1679, 0.336],
        [6, 0.1238, 0.3609],
        [7, 0.0758, 0.385],
      ],
    ],
    [
      0.8,
      [
        [5, 0.4306, 0.2556],
        [5, 0.3833, 0.2751],
        [5, 0.3338, 0.2946],
        [6, 0.2836, 0.3184],
        [6, 0.2384, 0.3383],
        [6, 0.1844, 0.3581],
        [7, 0.1324, 0.3823],
      ],
    ],
    [
      0.85,
      [
        [6, 0.6001, 0.2534],
        [6, 0.5353, 0.274],
        [7, 0.4742, 0.2969],
        [7, 0.4124, 0.3179],
        [7, 0.3471, 0.3389],
        [8, 0.2795, 0.3628],
        [8, 0.2107, 0.3839],
      ],
    ],
    [
      0.9,
      [
        [9, 0.9398, 0.2523],
        [9, 0.844, 0.2744],
        [9, 0.7471, 0.2965],
        [10, 0.6505, 0.3199],
        [10, 0.5553, 0.3421],
        [10, 0.4565, 0.3644],
        [11, 0.3573, 0.3882],
      ],
    ],
  ];
  it.each(TABLE)('has the most unstable waves of the table at delta %d', (delta, row) => {
    row.forEach((expected, k) => {
      const modes = smoothRingModes(delta, k / 10);
      const best = modes.reduce((a, b) => (b.growth > a.growth ? b : a));
      if (expected === null) {
        expect(best.growth).toBe(0);
        return;
      }
      expect(best.m).toBe(expected[0]);
      expect(Math.abs(best.growth - expected[1])).toBeLessThan(1.5e-4);
      expect(Math.abs(best.pattern! - expected[2])).toBeLessThan(1.5e-4);
    });
  });

  it('lets a wave much longer than its shoulders grow as on the sharp ring', () => {
    // A wave much longer than the shoulders hardly feels them.
    const wave = mode(0.9, 0, 3);
    expect(wave.growth / sharpRingMode(0.9, 0, 3).growth).toBeGreaterThan(0.97);
    expect(wave.growth / sharpRingMode(0.9, 0, 3).growth).toBeLessThan(1.03);
  });

  it('finds every counted wave anywhere in the clamped range', () => {
    fc.assert(
      fc.property(between(0.55, 0.9), between(0, 0.9), (delta, gamma) => {
        const modes = smoothRingModes(delta, gamma);
        expect(modes.map(({ m }) => m)).toEqual([3, 4, 5, 6, 7, 8, 9, 10, 11, 12]);
        // Howard's semicircle: no wave grows faster than half the range of angular velocity allows.
        for (const { m, growth, pattern } of modes) {
          expect(growth).toBeLessThan(0.3 * m);
          if (growth > 0) {
            expect(pattern).toBeGreaterThan(0);
            expect(pattern).toBeLessThan(0.56);
          } else expect(pattern).toBeNull();
        }
      }),
      { numRuns: 300 },
    );
  });

  it('solves all ten waves in milliseconds', () => {
    smoothRingModes(0.7, 0.1);
    const times = Array.from({ length: 9 }, (_, k) => {
      const start = performance.now();
      smoothRingModes(0.6 + 0.03 * k, 0.15);
      return performance.now() - start;
    });
    expect(Math.min(...times)).toBeLessThan(15);
  });

  it('clamps ring width and eye ratio and refuses what is not a number', () => {
    expect(ringShape(0.35, 0.2)).toEqual({ delta: 0.65, gamma: 0.2 });
    expect(ringShape(0.01, -1)).toEqual({ delta: 0.9, gamma: 0 });
    expect(ringShape(0.8, 2)).toEqual({ delta: 0.55, gamma: 0.9 });
    expect(() => ringShape(Number.NaN, 0)).toThrow('ring width');
    expect(() => ringShape(0.3, Number.NaN)).toThrow('eye vorticity');
    expect(() => smoothRingModes(0.2, 0)).toThrow('delta');
    expect(() => smoothRingModes(0.7, -0.1)).toThrow('gamma');
    expect(() => ringNodes(0.2, 0, 48, 0.5)).toThrow('delta');
  });
});

describe('description of a ring', () => {
  const worked = { maxWind: 60, radiusOfMaxWind: 30_000, widthFraction: 0.35, eyeRatio: 0.2, hoursInland: 0 };

  it('reproduces the worked example', () => {
    const ring = describeRing(worked);
    expect(ring.wavenumber).toBe(4);
    expect(ring.averageVorticity).toBeCloseTo(0.004, 12);
    expect(ring.eyeVorticity).toBeCloseTo(8e-4, 12);
    expect(ring.ringVorticity).toBeCloseTo(6.3411e-3, 7);
    expect(ring.growth! * 1e4).toBeCloseTo(5.4351, 4);
    expect(ring.eFold! / 60).toBeCloseTo(30.67, 2);
    expect(ring.pattern! * 1e3).toBeCloseTo(1.20505, 5);
    expect(ring.patternPeriod! / 60).toBeCloseTo(86.9, 2);
    expect(ring.passInterval! / 60).toBeCloseTo(21.73, 2);
    expect(ring.amplitude).toBeCloseTo(0.12558, 5);
    expect(ring.switch).toBe(1);
    expect(ring.lifetime / 60).toBeCloseTo(125, 6);
    expect(ring.orbitRadius / 1e3).toBeCloseTo(25.3, 2);
    expect(ring.coreRadius! / 1e3).toBeCloseTo(11.4, 2);
    expect(ring.circulation! / 1e6).toBeCloseTo(2.589, 3);
    const scaled = ring.modes.map(({ m, growth, pattern }) => [m, growth / 0.004, (pattern ?? 0) / 0.004]);
    [
      [3, 0.09652, 0.28958],
      [4, 0.13588, 0.30126],
      [5, 0.0508, 0.31375],
      [6, 0, 0],
    ].forEach((expected, k) => expected.forEach((value, c) => expect(scaled[k]![c]).toBeCloseTo(value, 5)));
  });

  it('carries units: new lengths and times change every field by its own dimension', () => {
    fc.assert(
      fc.property(between(0.5, 2), between(0.5, 2), (length, time) => {
        const a = describeRing(worked);
        const b = describeRing({ ...worked, maxWind: (60 * length) / time, radiusOfMaxWind: 30_000 * length });
        expect(b.growth! * time).toBeCloseTo(a.growth!, 12);
        expect(b.pattern! * time).toBeCloseTo(a.pattern!, 12);
        expect(b.patternPeriod! / time).toBeCloseTo(a.patternPeriod!, 6);
        expect(b.lifetime / time).toBeCloseTo(a.lifetime, 6);
        expect(b.coreRadius! / length).toBeCloseTo(a.coreRadius!, 6);
        expect(b.orbitRadius / length).toBeCloseTo(a.orbitRadius, 6);
        expect((b.circulation! * time) / length ** 2).toBeCloseTo(a.circulation!, 3);
        expect(b.sharpModes[2]!.growth * time).toBeCloseTo(a.sharpModes[2]!.growth, 12);
        expect(b.sharpModes[5]!.frequency[1]! * time).toBeCloseTo(a.sharpModes[5]!.frequency[1]!, 12);
      }),
      { numRuns: 10 },
    );
  });

  it('has no wavenumber for a filled eye, but keeps it when only the switch is off', () => {
    const filled = describeRing({ ...worked, eyeRatio: 0.9, widthFraction: 0.45 });
    expect(filled.wavenumber).toBeNull();
    expect(filled.growth).toBeNull();
    expect(filled.passInterval).toBeNull();
    expect(filled.amplitude).toBe(0);
    const weak = describeRing({ ...worked, maxWind: 30 });
    expect(weak.wavenumber).toBe(4);
    expect(weak.amplitude).toBe(0);
    expect(describeRing({ ...worked, hoursInland: 2 }).amplitude).toBeCloseTo(0.12558 / Math.E, 5);
  });

  it('refuses a storm without wind or size', () => {
    expect(() => describeRing({ ...worked, maxWind: 0 })).toThrow('maximum wind');
    expect(() => describeRing({ ...worked, radiusOfMaxWind: Number.NaN })).toThrow('radius');
    expect(() => describeRing({ ...worked, hoursInland: -1 })).toThrow('hours inland');
  });
});
