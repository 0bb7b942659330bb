import { describe, expect, it } from 'vitest';
import type { ResolvedFix, TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { resolveFixes } from '#engine/track/resolution.ts';
import { prepareStorm, STATE, STATE_SIZE } from '#engine/track/storm.ts';
import { knotsFromMs, msFromKnots } from '#engine/units.ts';
import { coriolis } from '#engine/winds/coriolis.ts';
import { impliedMaxWind, relationB } from '#engine/winds/implied-wind.ts';
import { strongestWind } from '#engine/winds/vortex-fit.ts';
import { hollandGradientWind } from '#engine/winds/holland-1980.ts';
import { expectPrinted } from '../helpers/printed.ts';
import { workedFixes } from '../helpers/worked-storm.ts';

const optionsOf = (changed: Partial<ChainOptions>): ChainOptions => ({ ...DEFAULT_OPTIONS, ...changed });
const resolved = (changed: Partial<ChainOptions>, fixes: readonly TrackFix[] = workedFixes): readonly ResolvedFix[] =>
  resolveFixes(fixes, optionsOf(changed)).fixes;

/** The typical storm of the reference: the worked one at 12 h. */
const TYPICAL = {
  central: 94_800,
  deficit: 6200,
  tendency: 0,
  rMax: 36_000,
  latitude: 24.3,
  f: coriolis(24.3),
  speed: 6.736453,
};

// Computed from the published formulas; printed to a tenth of a metre per second.
describe('spread of the shape for a typical storm', () => {
  it.each([
    ['vickery-wadhera-2008', '1.5419', '52.7'],
    ['powell-2005', '1.3658', '49.8'],
  ] as const)('%s', (relation, b, maximum) => {
    expectPrinted(relationB(TYPICAL, relation), b);
    const vortex = { ...TYPICAL, b: relationB(TYPICAL, relation) };
    const gradient = hollandGradientWind(TYPICAL.rMax, vortex);
    expectPrinted(strongestWind(gradient, TYPICAL.speed, TYPICAL.rMax, TYPICAL.f, DEFAULT_OPTIONS, 1), maximum);
  });
  it('Holland (2008) speaks of the surface wind, and no surface factor is laid on it', () => {
    // bs 1.449: sqrt(1.449 x 6200 / (1.15 e)) = 53.6 m/s.
    expectPrinted(impliedMaxWind(TYPICAL, optionsOf({ shapeRelation: 'holland-2008' })), '53.6');
  });
  it('Willoughby & Rahn (2004) asks for the maximum that its B gives: the two agree at the end', () => {
    const b = relationB(TYPICAL, 'willoughby-rahn-2004');
    const wind = hollandGradientWind(TYPICAL.rMax, { ...TYPICAL, b });
    expect(b).toBeCloseTo(1.0036 + 0.0173 * wind - 0.0313 * Math.log(36) + 0.0087 * 24.3, 10);
  });
  it('keeps pressure, B and maximum together where B comes from the relation', () => {
    for (const intensity of ['pressure', 'wind'] as const) {
      const changed = { intensity, shapeSource: 'relation', anchor: 'mean' } as const;
      const storm = prepareStorm(workedFixes, optionsOf(changed), null);
      resolved(changed).forEach((fix) => {
        expect(fix.shapeB).toBeCloseTo(
          relationB(
            {
              ...TYPICAL,
              central: fix.centralPressurePa,
              deficit: fix.ambientPressurePa - fix.centralPressurePa,
              rMax: fix.radiusOfMaxWindM,
              f: coriolis(fix.latitude),
            },
            'vickery-wadhera-2008',
          ),
          9,
        );
        const at = storm.outer[Math.round(fix.timeS / 300)]! * STATE_SIZE;
        expect(storm.states[at + STATE.deficit]).toBeCloseTo(fix.ambientPressurePa - fix.centralPressurePa, 6);
      });
    }
    // A storm known by its pressure keeps the maximum that its pressure implies.
    const asImplied = resolved({}).map(({ maxWindMs }) => maxWindMs);
    resolved({ shapeSource: 'relation' }).forEach(({ maxWindMs }, i) =>
      expect(maxWindMs).toBeCloseTo(asImplied[i]!, 9),
    );
  });
});

describe('what fills a missing radius or pressure', () => {
  const bare = (fixes: readonly TrackFix[]): TrackFix[] => fixes.map((fix) => ({ ...fix, radiusOfMaxWindM: null }));
  // Computed from the published formulas for the worked storm at 12 h, whose gradient maximum is 54.57 m/s: km.
  it.each([
    ['willoughby-rahn-2004', '30.3'],
    ['willoughby-2006', '30.0'],
    ['vickery-wadhera-2008', '36.3'],
    ['vickery-wadhera-2008-gulf', '35.3'],
    ['knaff-2015', '46.5'],
  ] as const)('%s', (radiusRelation, km) => {
    const fix = resolved({ radiusRelation, intensity: 'wind', anchor: 'mean' }, bare(workedFixes))[2]!;
    expectPrinted(fix.radiusOfMaxWindM / 1000, km);
    expect(fix.filled.radiusOfMaxWindM).toMatch(/\(20\d\d\)/);
  });
  it('goes to the relation straight away when told so, past 64-kt radii and neighbours', () => {
    const radii: TrackFix[] = bare(workedFixes).map((fix) => ({ ...fix, radius64KtM: [60e3, 60e3, 60e3, 60e3] }));
    expect(resolved({}, radii)[2]!.filled.radiusOfMaxWindM).toBe('64-kt radii');
    expectPrinted(resolved({ radiusSource: 'relation' }, radii)[2]!.radiusOfMaxWindM / 1000, '36.3');
    const one = workedFixes.map((fix, i) => (i === 2 ? { ...fix, radiusOfMaxWindM: null } : fix));
    expectPrinted(resolved({ radiusSource: 'relation' }, one)[2]!.radiusOfMaxWindM / 1000, '36.3');
  });
  it('takes the pressure of a wind by Atkinson & Holliday, back and forth', () => {
    // 93.58456 kt belong to 950 hPa.
    const fixes = workedFixes.map((fix) => ({
      ...fix,
      centralPressurePa: null,
      maxWindMs: msFromKnots(93.58456),
    }));
    const fix = resolved({ windPressure: 'atkinson-holliday-1977' }, fixes)[0]!;
    expect(fix.centralPressurePa).toBeCloseTo(95_000, 1);
    expect(fix.filled.centralPressureHpa).toBe('Atkinson & Holliday (1977)');
  });
});

describe('decay over land', () => {
  /** A track that knows nothing of its landfall at 6 h: the same intensity throughout, a second landfall at 30 h. */
  const steady: TrackFix[] = [0, 6, 12, 18, 24, 30, 36].map((hour, i) => ({
    ...workedFixes[0]!,
    timeS: 3600 * hour,
    latitude: 27 + 0.5 * i,
    longitude: -80,
    centralPressurePa: 95_000,
    maxWindMs: msFromKnots(100),
    radiusOfMaxWindM: 40_000,
    hoursInland: [0, 0, 6, 12, 0, 0, 6][i]!,
  }));
  const changed = { intensity: 'wind', anchor: 'mean', decay: 'kaplan-demaria' } as const;

  it('follows Kaplan & DeMaria as over open sea from landfall on, and holds over water again', () => {
    const knots = resolved(changed, steady).map(({ maxWindMs }) => knotsFromMs(maxWindMs));
    expect(knots[0]).toBeCloseTo(100, 9);
    expect(knots[1]).toBeCloseTo(100, 9);
    // Computed from the published formula, south of 36 degrees: 6 and 12 h after landfall.
    expectPrinted(knots[2]!, '69.4420');
    expectPrinted(knots[3]!, '52.1606');
    expect(knots[4]).toBeCloseTo(knots[3]!, 9);
    expect(knots[5]).toBeCloseTo(knots[3]!, 9);
    expect(knots[6]).toBeLessThan(knots[5]!);
    expect(resolved(changed, steady)[2]!.filled.maxWindMs).toContain('Kaplan & DeMaria');
  });
  it('weakens at every moment over land and not before', () => {
    const storm = prepareStorm(steady, optionsOf(changed), null);
    const winds = [...storm.outer].map((k) => {
      const at = k * STATE_SIZE;
      const [rMax, b, deficit] = [STATE.rMax, STATE.b, STATE.deficit].map((o) => storm.states[at + o]!);
      const gradient = hollandGradientWind(rMax!, {
        rMax: rMax!,
        b: b!,
        deficit: deficit!,
        f: 2 * storm.states[at + STATE.halfF]!,
      });
      const speed = storm.states[at + STATE.speed]!;
      return {
        hour: storm.states[at + STATE.timeS]! / 3600,
        wind: strongestWind(gradient, speed, rMax!, 0, DEFAULT_OPTIONS, 1),
      };
    });
    winds.forEach(({ hour, wind }, i) => {
      if (i === 0) return;
      const before = winds[i - 1]!.wind;
      if (hour <= 6 || (hour > 18.2 && hour <= 30)) expect(wind).toBeCloseTo(before, 9);
      else expect(wind).toBeLessThan(before + 1e-9);
    });
    expectPrinted(knotsFromMs(winds.find(({ hour }) => hour === 12)!.wind), '69.4420');
  });
  it('fills after Vickery with the shape held, more slowly than the wind of Kaplan & DeMaria falls', () => {
    const gulf = resolved({ ...changed, decay: 'vickery-gulf' }, steady);
    expect(gulf[3]!.shapeB).toBeCloseTo(gulf[1]!.shapeB, 2);
    const rate = 0.0413 + (0.0018 * 60 * gulf[1]!.translationMs) / 40;
    expect(gulf[3]!.ambientPressurePa - gulf[3]!.centralPressurePa).toBeCloseTo(6000 * Math.exp(-12 * rate), 6);
    expect(gulf[3]!.maxWindMs).toBeGreaterThan(resolved(changed, steady)[3]!.maxWindMs);
    expect(gulf[3]!.maxWindMs).toBeLessThan(gulf[1]!.maxWindMs);
    // The other coasts fill more slowly, New England slowest.
    const left = (['florida', 'mid-atlantic', 'new-england'] as const).map(
      (coast) => resolved({ ...changed, decay: `vickery-${coast}` }, steady)[3]!.maxWindMs,
    );
    expect(left.every((wind) => wind > gulf[3]!.maxWindMs)).toBe(true);
    expect(Math.max(...left)).toBe(left[2]);
  });
  it('says when there is no landfall, and leaves a spell alone that began before the track', () => {
    const sea = steady.map((fix) => ({ ...fix, hoursInland: 0 }));
    const { notices, fixes } = resolveFixes(sea, optionsOf(changed));
    expect(notices.map(({ code }) => code)).toContain('decay-without-effect');
    expect(fixes[3]!.maxWindMs).toBe(msFromKnots(100));
    const ashore = steady.slice(2, 5);
    expect(resolved(changed, ashore)[1]!.maxWindMs).toBe(msFromKnots(100));
  });
});

describe('outer wind', () => {
  const radii: TrackFix[] = workedFixes.map((fix) => ({ ...fix, radius34KtM: [260e3, 230e3, 150e3, 190e3] }));
  const codes = (changed: Partial<ChainOptions>, fixes = radii): string[] =>
    resolveFixes(fixes, optionsOf(changed)).notices.map(({ code }) => code);

  it('says when the radii have no effect', () => {
    expect(codes({ outerWind: 'radii-34' })).toContain('outer-wind-without-effect');
    expect(codes({ outerWind: 'radii-34', profile: 'holland-2010' })).not.toContain('outer-wind-without-effect');
    expect(codes({ outerWind: 'radii-34', profile: 'holland-2010' }, workedFixes)).toContain('outer-wind-not-met');
    expect(codes({ quadrants: 'radii' }, workedFixes)).toContain('quadrants-without-effect');
    expect(codes({ quadrants: 'radii' })).not.toContain('quadrants-without-effect');
  });
  it('carries 34 kt at the mean reach, and keeps the peak', () => {
    const storm = prepareStorm(radii, optionsOf({ outerWind: 'radii-34', profile: 'holland-2010' }), null);
    const { revised } = storm.field![storm.outer[144]!]!;
    // 0.85 of the mean of the four reaches.
    expect(revised!.outerRadius).toBeCloseTo((0.85 * (260e3 + 230e3 + 150e3 + 190e3)) / 4, 6);
    const x = (revised!.rMax / revised!.outerRadius) ** revised!.bs;
    const wind = revised!.maxWind * (x * Math.exp(1 - x)) ** revised!.outerExponent;
    expect(knotsFromMs(1.05 * wind)).toBeCloseTo(34, 6);
  });
});
