import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { motionWind } from '#engine/winds/asymmetry.ts';
import { hollandSurfaceWind, type SurfaceProfile } from '#engine/winds/holland-2010.ts';
import {
  meanReach,
  outerFit,
  quadrantFactors,
  quadrantLogFactor,
  type QuadrantFactors,
  type QuadrantReach,
} from '#engine/winds/wind-radii.ts';
import { between } from '../helpers/arbitrary.ts';

const KM = 1000;
const KNOT = 1852 / 3600;
const [GALE, STORM, HURRICANE] = [34 * KNOT, 50 * KNOT, 64 * KNOT];
const core = { maxWind: 50, rMax: 30 * KM, bs: 1.5 };
const everywhere = (reach: number): QuadrantReach => [reach, reach, reach, reach];
const radians = (degrees: number) => (degrees * Math.PI) / 180;

/** Open-sea wind of a vortex and its motion: cyclonic in the north, without inflow. */
function field(profile: SurfaceProfile, speed: number, heading: number): (r: number, bearing: number) => number {
  const { u, v } = motionWind(speed, heading, 1);
  return (r, bearing) => {
    const towards = radians(bearing - 90);
    const wind = hollandSurfaceWind(r, profile);
    return Math.hypot(u + wind * Math.sin(towards), v + wind * Math.cos(towards));
  };
}
const plain: SurfaceProfile = { ...core, outerRadius: 200 * KM, outerExponent: 0.5 };
const standing = field(plain, 0, 0);
const moving = field(plain, 6, 20);
const fitted = (windAt: (r: number, bearing: number) => number, factors: QuadrantFactors, rMax = core.rMax) => {
  return (r: number, bearing: number) => {
    const unfitted = windAt(r, bearing);
    const gap = Math.log(windAt(rMax, bearing) / unfitted);
    return unfitted * Math.exp(quadrantLogFactor(factors, r / rMax, bearing, gap));
  };
};
/** Where a falling wind comes down to a speed, by bisection. */
function reachOf(windAt: (r: number) => number, wind: number): number {
  let [low, high] = [core.rMax, 1000 * KM];
  for (let k = 0; k < 60; k++) {
    const middle = (low + high) / 2;
    if (windAt(middle) > wind) low = middle;
    else high = middle;
  }
  return low;
}

describe('outer exponent from 34-kt radii', () => {
  it('counts 0.85 of the mean over the quadrants the wind reaches', () => {
    expect(meanReach([200, 100, 0, 0])).toBeCloseTo(127.5, 12);
    expect(meanReach([0, 0, 0, 0])).toBeNull();
  });
  it('carries 34 kt at the mean reach, found there again by bisection', () =>
    fc.assert(
      fc.property(between(100, 300), between(100, 300), between(100, 300), (ne, se, sw) => {
        const reach = [ne * KM, se * KM, sw * KM, 0] as const;
        const fit = outerFit(core, reach, GALE);
        fc.pre(fit.reason === null && !fit.clamped);
        if (fit.reason !== null) return;
        const r = reachOf((at) => hollandSurfaceWind(at, { ...core, ...fit }), GALE);
        expect(r / KM).toBeCloseTo((0.85 * (ne + se + sw)) / 3, 5);
      }),
    ));
  it('finds the exponent a profile was drawn with', () => {
    const drawn = { ...core, outerRadius: 170 * KM, outerExponent: 0.8 };
    const fit = outerFit(core, everywhere((170 * KM) / 0.85), hollandSurfaceWind(170 * KM, drawn));
    expect(fit.outerRadius).toBeCloseTo(170 * KM, 6);
    expect(fit.outerExponent).toBeCloseTo(0.8, 10);
  });
  it('keeps the wind falling outwards, clamped or not', () =>
    fc.assert(
      fc.property(between(20, 80), between(8, 80), between(0.8, 2.5), between(30, 700), (maxWind, km, bs, reachKm) => {
        const storm = { maxWind, rMax: km * KM, bs };
        const fit = outerFit(storm, everywhere(reachKm * KM), GALE);
        if (fit.reason !== null) return;
        expect(fit.outerExponent).toBeGreaterThanOrEqual(0.3);
        expect(fit.outerExponent).toBeLessThanOrEqual(1.5);
        let before = maxWind;
        for (let x = 1; x <= 20; x *= 1.02) {
          const wind = hollandSurfaceWind(x * km * KM, { ...storm, ...fit });
          expect(wind).toBeLessThanOrEqual(before * (1 + 1e-9));
          before = wind;
        }
      }),
    ));
  it('says that it was clamped', () => {
    expect(outerFit(core, everywhere(45 * KM), GALE)).toMatchObject({ outerExponent: 1.5, clamped: true });
    const wide = outerFit({ ...core, rMax: 10 * KM }, everywhere(700 * KM), GALE);
    expect(wide.clamped).toBe(true);
    expect(wide.outerExponent).toBeGreaterThan(0.3);
  });
  it('gives a reason where there is none', () => {
    expect(outerFit(core, null, GALE).reason).toBe('no radii given');
    expect(outerFit(core, everywhere(0), GALE).reason).toBe('no radii given');
    expect(outerFit(core, everywhere(35 * KM), GALE).reason).toContain('within the radius of maximum wind');
    expect(outerFit({ ...core, maxWind: 15 }, everywhere(200 * KM), GALE).reason).toContain('no stronger');
    expect(outerFit(core, everywhere(35 * KM), GALE).outerExponent).toBeNull();
    expect(() => outerFit(core, everywhere(200 * KM), 0)).toThrow('outerWind');
  });
  it('does not depend on the units of length and speed', () => {
    const metres = outerFit(core, everywhere(200 * KM), GALE);
    const knots = outerFit({ maxWind: 50 / KNOT, rMax: 30, bs: 1.5 }, everywhere(200), 34);
    expect(knots.outerRadius! * KM).toBeCloseTo(metres.outerRadius!, 6);
    expect(knots.outerExponent).toBeCloseTo(metres.outerExponent!, 12);
  });
});

describe('quadrant factors from radii', () => {
  it('carry the winds at the radii of a standing storm, at the middle of each quadrant', () => {
    const reach = [220 * KM, 180 * KM, 150 * KM, 170 * KM] as const;
    const windAt = fitted(standing, quadrantFactors(core.rMax, [{ wind: GALE, reach }], standing));
    reach.forEach((r, q) => expect(windAt(r, 45 + 90 * q)).toBeCloseTo(GALE, 10));
  });
  it('change nothing where the field carries the radii already', () => {
    const reach = everywhere(reachOf((r) => standing(r, 0), GALE));
    quadrantFactors(core.rMax, [{ wind: GALE, reach }], standing).forEach((log) => expect(log).toBeCloseTo(0, 10));
    expect(quadrantFactors(core.rMax, [], moving)).toEqual([0, 0, 0, 0]);
    expect(moving(90 * KM, 77) * Math.exp(quadrantLogFactor([0, 0, 0, 0], 3, 77, 0.4))).toBe(moving(90 * KM, 77));
  });
  it('know the motion: radii drawn from the moving field itself ask for no change', () => {
    // Greatest reach in each quadrant, searched every 15 degrees.
    const reach = [0, 1, 2, 3].map((q) => {
      const bearings = [0, 15, 30, 45, 60, 75, 90].map((away) => 90 * q + away);
      return Math.max(...bearings.map((bearing) => reachOf((r) => moving(r, bearing), GALE)));
    });
    const radii = [{ wind: GALE, reach: [reach[0]!, reach[1]!, reach[2]!, reach[3]!] as const }];
    quadrantFactors(core.rMax, radii, moving).forEach((log) => expect(log).toBeCloseTo(0, 8));
  });
  it('are the least squares of log wind, as a search over all factors finds them', () =>
    fc.assert(
      fc.property(between(110, 260), between(70, 160), between(40, 100), (gale, storm, hurricane) => {
        const radii = [
          { wind: GALE, reach: everywhere(gale * KM) },
          { wind: STORM, reach: everywhere(storm * KM) },
          { wind: HURRICANE, reach: everywhere(hurricane * KM) },
        ];
        const cost = (log: number) => {
          const windAt = fitted(standing, [log, log, log, log]);
          return radii.reduce((sum, { wind, reach }) => sum + Math.log(windAt(reach[0], 45) / wind) ** 2, 0);
        };
        const log = quadrantFactors(core.rMax, radii, standing)[0];
        const found = cost(log);
        for (let factor = 0.6; factor <= 1.5; factor += 0.01) {
          expect(found).toBeLessThanOrEqual(cost(Math.log(factor)) + 1e-12);
        }
      }),
    ));
  const logs = between(Math.log(0.6), Math.log(1.5));
  it('never move or raise the peak, nor change the wind inside it', () =>
    fc.assert(
      fc.property(fc.tuple(logs, logs, logs, logs), between(0, 18), between(0.9, 2.2), (factors, speed, bs) => {
        const unfitted = field({ ...plain, bs }, speed, 300);
        const windAt = fitted(unfitted, factors);
        for (let bearing = 0; bearing < 360; bearing += 20) {
          const peak = unfitted(core.rMax, bearing);
          for (let x = 0.2; x < 12; x *= 1.07) {
            const r = x * core.rMax;
            if (x <= 1) expect(windAt(r, bearing)).toBe(unfitted(r, bearing));
            else expect(windAt(r, bearing)).toBeLessThanOrEqual(Math.max(peak, unfitted(r, bearing)) * (1 + 1e-12));
          }
        }
      }),
    ));
  it('go over smoothly in azimuth and radius, between their neighbours', () =>
    fc.assert(
      fc.property(fc.tuple(logs, logs, logs, logs), between(-720, 720), (factors, bearing) => {
        const at = (x: number, b: number) => quadrantLogFactor(factors, x, b, 10);
        expect(at(3, bearing)).toBeLessThanOrEqual(Math.max(...factors) + 1e-12);
        expect(at(3, bearing)).toBeGreaterThanOrEqual(Math.min(...factors) - 1e-12);
        expect(at(3, bearing + 360)).toBeCloseTo(at(3, bearing), 10);
        expect(at(3, bearing + 1e-6)).toBeCloseTo(at(3, bearing), 6);
        for (const x of [1, 1.5]) expect(at(x + 1e-7, bearing)).toBeCloseTo(at(x - 1e-7, bearing), 6);
        expect(at(2, 45)).toBeCloseTo(factors[0], 12);
        expect(at(2, -45)).toBeCloseTo(factors[3], 12);
        expect(at(2, 90)).toBeCloseTo((factors[0] + factors[1]) / 2, 12);
      }),
    ));
  it('stay in their range, and leave a quadrant alone that has no radius outside the core', () => {
    const wide = quadrantFactors(core.rMax, [{ wind: HURRICANE, reach: [300 * KM, 40 * KM, 0, 37 * KM] }], standing);
    expect(Math.exp(wide[0])).toBeCloseTo(1.5, 12);
    expect(wide[1]).toBeLessThan(0);
    expect(wide.slice(2)).toEqual([0, 0]);
    const narrow = quadrantFactors(core.rMax, [{ wind: GALE, reach: everywhere(50 * KM) }], standing);
    narrow.forEach((log) => expect(Math.exp(log)).toBeCloseTo(0.6, 12));
  });
  it('turn with the storm', () => {
    const reach = [220 * KM, 180 * KM, 120 * KM, 150 * KM] as const;
    const turned = [150 * KM, 220 * KM, 180 * KM, 120 * KM] as const;
    const factors = quadrantFactors(core.rMax, [{ wind: GALE, reach }], field(plain, 7, 30));
    const quarter = quadrantFactors(core.rMax, [{ wind: GALE, reach: turned }], field(plain, 7, 120));
    factors.forEach((log, q) => expect(quarter[(q + 1) % 4]).toBeCloseTo(log, 9));
  });
  it('do not depend on the units of length and speed', () => {
    const reach = [220, 180, 120, 150] as const;
    const inMetres = quadrantFactors(
      core.rMax,
      [{ wind: GALE, reach: [220 * KM, 180 * KM, 120 * KM, 150 * KM] }],
      moving,
    );
    const inKm = quadrantFactors(30, [{ wind: 34, reach }], (r, bearing) => moving(r * KM, bearing) / KNOT);
    inKm.forEach((log, q) => expect(log).toBeCloseTo(inMetres[q]!, 10));
  });
  it('refuse what makes no sense', () => {
    expect(() => quadrantFactors(0, [], standing)).toThrow('rMax');
    expect(() => quadrantFactors(1, [{ wind: NaN, reach: everywhere(1) }], standing)).toThrow('wind');
    expect(quadrantLogFactor([0.1, 0.1, 0.1, 0.1], 2, NaN, 1)).toBeNaN();
    expect(quadrantLogFactor([0.1, 0.1, 0.1, 0.1], 2, 10, -1)).toBe(0);
  });
});
