import { beforeAll, describe, expect, it } from 'vitest';
import { drawPeaks, makeDrawWork } from '#engine/footprint/draws-of-site.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { siteSeries } from '#engine/footprint/site-series.ts';
import { siteExposure } from '#engine/footprint/wind-at.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { breakdown, DEFAULT_BREAKDOWN, type BreakdownFrame } from '#engine/ring/breakdown.ts';
import { AMPLITUDE_NODES, azimuthalShape, startingPhase } from '#engine/ring/draws.ts';
import { kirchhoffRate, observedPhase, type ObservedVortices } from '#engine/ring/observed-vortices.ts';
import { nearestRingOf, widthsOf } from '#engine/ring/ring-of-count.ts';
import { STABILITY_TABLE } from '#engine/ring/stability-table.ts';
import { smoothRingModes } from '#engine/ring/stability.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { positionAt } from '#engine/track/position.ts';
import { resolveFixes } from '#engine/track/resolution.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { degrees, radians } from '#engine/units.ts';
import { COLUMNS, HOUR, offset, sea } from '../helpers/any-storm.ts';
import {
  batchOf,
  mirroredFixes,
  mirroredSite,
  workedFixes,
  workedSites,
  type TestSite,
} from '../helpers/worked-storm.ts';

const OPTIONS: ChainOptions = { ...DEFAULT_OPTIONS, intensity: 'wind', anchor: 'mean' };
const RADIUS = 30_000;
const RING = { width: 0.25, eye: 0.2 };
const SEEN_AT = 3 * HOUR;

/** Moves north, at 20 N at the time of the observation [m/s]. */
const moving = (speed: number): TrackFix[] =>
  [0, 3, 6].map((hour) => ({
    ...workedFixes[0]!,
    ...offset(20, 150, speed * Math.abs(hour - 3) * HOUR, hour < 3 ? 180 : 0),
    timeS: hour * HOUR,
    maxWindMs: 62,
    radiusOfMaxWindM: RADIUS,
    ringWidthFraction: RING.width,
    eyeVorticityRatio: RING.eye,
    hoursInland: 0,
  }));
const steady = moving(5);
const stormOf = (observations: readonly ObservedVortices[], fixes = steady, options = OPTIONS): Storm =>
  prepareStorm(fixes, options, null, observations);
const maxima = (azimuthsDeg: readonly number[], uncertaintyDeg = 8, timeS = SEEN_AT): ObservedVortices => ({
  kind: 'maxima',
  timeS,
  timeLabel: `hour ${timeS / HOUR}`,
  azimuthsDeg,
  uncertaintyDeg,
});
const regular = (m: number, first: number): number[] =>
  Array.from({ length: m }, (_, k) => (first + (360 * k) / m) % 360);
const apart = (a: number, b: number): number => Math.abs(((((a - b) % 360) + 540) % 360) - 180);
const codesOf = (storm: Pick<Storm, 'notices'>) => storm.notices.map(({ code }) => code);
const scoresOf = (storm: Storm, sites: readonly TestSite[]) => scoreSites(storm, batchOf(sites), REFERENCE_CURVE);

/** Bearings of the highest places of the vorticity, averaged across the ring, around a frame of the breakdown. */
const maximaOf = ({ vorticity }: BreakdownFrame, points: number, sideInRadii: number, count: number): number[] => {
  const around = Array.from({ length: 360 }, (_, bearing) => {
    let sum = 0;
    for (let r = 0.6; r <= 1.1; r += 0.025) {
      const i = Math.round(((r * Math.sin(radians(bearing))) / sideInRadii + 0.5) * points);
      const j = Math.round(((r * Math.cos(radians(bearing))) / sideInRadii + 0.5) * points);
      sum += vorticity[j * points + i]!;
    }
    return sum;
  });
  const smooth = around.map((_, k) => {
    let sum = 0;
    for (let d = -9; d <= 9; d++) sum += around[(k + d + 360) % 360]!;
    return sum;
  });
  const peaks = smooth.flatMap((value, k) => {
    for (let d = -20; d <= 20; d++) {
      const other = smooth[(k + d + 360) % 360]!;
      if (other > value || (other === value && d < 0)) return [];
    }
    return [{ k, value }];
  });
  return peaks
    .sort((a, b) => b.value - a.value)
    .slice(0, count)
    .map(({ k }) => k);
};

describe('vortices that the breakdown of the same ring showed', () => {
  let seen: number[];
  let conditioned: Storm;

  beforeAll(() => {
    const { points, sideInRadii } = DEFAULT_BREAKDOWN;
    const setup = { maxWind: 60, radiusOfMaxWind: RADIUS, widthFraction: RING.width, eyeRatio: RING.eye };
    for (const frame of breakdown({ ...DEFAULT_BREAKDOWN, ...setup, durationS: 3 * HOUR, frameStepS: 600 })) {
      if (frame.vortices < 4) continue;
      seen = maximaOf(frame, points, sideInRadii, frame.vortices);
      break;
    }
    conditioned = stormOf([maxima(seen)]);
  }, 60_000);

  it('set the number of vortices and the phase', () => {
    expect(seen.length).toBeGreaterThanOrEqual(4);
    expect(conditioned.wavenumber).toBe(seen.length);
    expect(conditioned.conditioned!.observations).toBe(1);
    expect(conditioned.notices.find(({ code }) => code === 'conditioned-on-observation')!.text).toMatch(
      `Conditioned on ${seen.length} observed vortices at hour 3`,
    );
  });
  it('stand where the median draw has its crests, within the uncertainty', () => {
    // Gains of the median draw at the observation's time, around the radius of maximum wind, as waves in the bearing.
    const centre = positionAt(conditioned.fixes, SEEN_AT);
    const gain = Array.from({ length: 120 }, (_, k) => {
      const at = offset(centre.latitude, centre.longitude, RADIUS, 3 * k);
      const series = siteSeries(conditioned, { ...at, roughnessM: null, fetchM: [], topographicFactor: 1 });
      const i = series.timeS.indexOf(SEEN_AT);
      return series.p50[i]! / series.plain[i]!;
    });
    const wave = (values: readonly number[], bearings: readonly number[], m: number) => {
      const x = values.reduce((sum, value, k) => sum + value * Math.cos(m * radians(bearings[k]!)), 0);
      const y = values.reduce((sum, value, k) => sum + value * Math.sin(m * radians(bearings[k]!)), 0);
      return { strength: Math.hypot(x, y), crest: degrees(Math.atan2(y, x)) / m };
    };
    const around = gain.map((_, k) => 3 * k);
    const m = seen.length;
    const own = wave(gain, around, m);
    for (let k = 1; k <= 8; k++) if (k !== m) expect(wave(gain, around, k).strength).toBeLessThan(own.strength / 2);
    const observed = wave(
      seen.map(() => 1),
      seen,
      m,
    );
    expect(apart(m * own.crest, m * observed.crest) / m).toBeLessThan(8);
  });
  it('narrow what the phase leaves open at sites around the ring, and so the whole range', () => {
    const sites = Array.from({ length: 24 }, (_, k) => {
      const at = offset(20, 150, 0.9 * RADIUS, 15 * k);
      return sea(at.latitude, at.longitude);
    });
    // Fast enough to be over a site before many vortices have passed it.
    const known = stormOf([maxima(seen)], moving(15));
    const unknown = stormOf(
      [],
      moving(15).map((fix, i) => ({ ...fix, ...ringOf(known, i) })),
    );
    expect(unknown.wavenumber).toBe(known.wavenumber);
    const sum = (values: Iterable<number>): number => [...values].reduce((total, value) => total + value, 0);
    const width = (storm: Storm): number => {
      const { p5, p95 } = scoresOf(storm, sites);
      return sum(p95) - sum(p5);
    };
    // Standard deviation over the phases at the strongest vortices, draws 240 to 263; alone, a site's draws are the event's.
    const byPhase = (storm: Storm): number =>
      sum(
        sites.map((site) => {
          const draws = scoresOf(storm, [site]).eventPeak.subarray(240);
          const mean = sum(draws) / draws.length;
          return Math.sqrt(sum(draws.map((gust) => (gust - mean) ** 2)) / draws.length);
        }),
      );
    expect(byPhase(known)).toBeLessThan(0.8 * byPhase(unknown));
    // Most of the whole range comes from the vortices' strength, which an observation leaves open.
    expect(width(known)).toBeLessThan(width(unknown));
  });
});

const ringOf = ({ fixes }: Storm, i: number): Pick<TrackFix, 'ringWidthFraction' | 'eyeVorticityRatio'> => ({
  ringWidthFraction: fixes[i]!.ringWidthFraction,
  eyeVorticityRatio: fixes[i]!.eyeVorticityRatio,
});

describe('a conditioned storm', () => {
  const conditioned = stormOf([maxima(regular(5, 20))]);

  it('gives each draw the largest gust over time of its own phase', () => {
    const passage = makePassage(conditioned);
    const work = makeDrawWork(conditioned.stateCount);
    const gusts = new Float64Array(264);
    for (const [metres, bearing] of [
      [20_000, 80],
      [30_000, 210],
      [45_000, 300],
    ] as const) {
      const at = offset(20, 150, metres, bearing);
      const exposure = siteExposure({ ...at, roughnessM: null, fetchM: [], topographicFactor: 1 });
      const count = followPassage(conditioned, at.latitude, at.longitude, exposure, passage);
      let peak = 0;
      for (let i = 1; i < count; i++) if (passage.gust[i]! > passage.gust[peak]!) peak = i;
      expect(drawPeaks(passage, count, peak, work, gusts)).toBe(true);
      for (let d = 0; d < 264; d++) {
        let most = 0;
        for (let i = 0; i < count; i++) {
          const phase = Math.atan2(passage.phaseSin[i]!, passage.phaseCos[i]!) - conditioned.phases[d % 24]!;
          const gain = passage.crest[i]! > 0 ? passage.crest[i]! * azimuthalShape(phase) : 0;
          most = Math.max(most, passage.gust[i]! + AMPLITUDE_NODES[Math.floor(d / 24)]! * gain);
        }
        expect(gusts[d]!).toBeCloseTo(most, 9);
      }
    }
  });
  it('keeps percentiles in order and plain as it is; its mean may lie below plain, as without one it can’t', () => {
    const sites = Array.from({ length: 72 }, (_, k) => {
      const at = offset(20, 150, RADIUS, 5 * k);
      return sea(at.latitude, at.longitude);
    });
    const short = steady.map((fix, i) => ({
      ...fix,
      timeS: SEEN_AT + (i - 1) * 72,
      ...offset(20, 150, 360 * Math.abs(i - 1), i < 1 ? 180 : 0),
    }));
    const unknown = scoresOf(stormOf([], short), sites);
    const known = scoresOf(stormOf([maxima(regular(5, 20), 1)], short), sites);
    for (let i = 0; i < sites.length; i++) {
      expect(known.plainGust[i]).toBe(unknown.plainGust[i]);
      const ordered = (['p5', 'p50', 'p90', 'p95', 'p99'] as const).map((column) => known[column][i]!);
      expect(ordered).toEqual([...ordered].sort((a, b) => a - b));
      expect(unknown.enhancedMean[i]!).toBeGreaterThanOrEqual(unknown.plainGust[i]! * (1 - 1e-12));
    }
    // Sites between two crests during these few minutes see less than plain.
    expect(sites.some((_, i) => known.enhancedMean[i]! < 0.99 * known.plainGust[i]!)).toBe(true);
    expect(sites.some((_, i) => known.p50[i]! > 1.05 * known.plainGust[i]!)).toBe(true);
  });
  it('converges to the unconditioned one as the uncertainty grows', () => {
    const same = stormOf(
      [],
      steady.map((fix, i) => ({ ...fix, ...ringOf(conditioned, i) })),
    );
    const sites = [40, 130, 250].map((bearing) => {
      const at = offset(20, 150, RADIUS, bearing);
      return sea(at.latitude, at.longitude);
    });
    const without = scoresOf(same, sites);
    const distance = (uncertainty: number): number => {
      const scores = scoresOf(stormOf([maxima(regular(5, 20), uncertainty)]), sites);
      return COLUMNS.reduce(
        (sum, c) => sum + scores[c].reduce((s, value, i) => s + Math.abs(value - without[c][i]!), 0),
        0,
      );
    };
    expect(distance(18)).toBeLessThan(0.6 * distance(4));
    // 5 x 21 degrees is more than pi / sqrt 3: bit for bit the even spread, and said.
    expect(distance(21)).toBe(0);
    expect(distance(60)).toBe(0);
    const wide = stormOf([maxima(regular(5, 20), 60)]);
    expect(wide.phases).toEqual(Array.from({ length: 24 }, (_, j) => startingPhase(j)));
    expect(wide.notices.find(({ code }) => code === 'conditioned-on-observation')!.text).toContain('only their number');
  });
  it('is what it is without observations, bit for bit', () => {
    const without = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
    expect(prepareStorm(workedFixes, DEFAULT_OPTIONS, null, [])).toEqual(without);
    expect(without.conditioned).toBeNull();
    expect(without.phases).toEqual(Array.from({ length: 24 }, (_, j) => startingPhase(j)));
  });
  it('mirrored to the south, bearings and all, gives the same gusts to 1e-12', () => {
    const bearings = [12, 105, 190, 281];
    const north = prepareStorm(workedFixes, DEFAULT_OPTIONS, null, [maxima(bearings, 6, 13 * HOUR)]);
    const mirrored = maxima(
      bearings.map((bearing) => (540 - bearing) % 360),
      6,
      13 * HOUR,
    );
    const south = prepareStorm(mirroredFixes(workedFixes), DEFAULT_OPTIONS, null, [mirrored]);
    const here = scoresOf(north, workedSites);
    const there = scoresOf(south, workedSites.map(mirroredSite));
    for (const column of COLUMNS) {
      workedSites.forEach((_, i) => expect(Math.abs(there[column][i]! / here[column][i]! - 1)).toBeLessThan(1e-12));
    }
  });
  it('is ignored with a word when the layer is off', () => {
    const off = stormOf([maxima(regular(5, 20))], steady, { ...OPTIONS, mesovortices: false });
    expect(codesOf(off)).toContain('observations-ignored');
    const plain = stormOf([], steady, { ...OPTIONS, mesovortices: false });
    expect(off.states).toEqual(plain.states);
    expect(off.fixes).toEqual(plain.fixes);
    expect(off.conditioned).toBeNull();
  });
});

describe('the phase', () => {
  it('is the weighted circular mean of the maxima', () => {
    // Two observations 40 degrees of phase apart, weights 4 to 1: 8 degrees from the better, to second order.
    const seen = (phaseDeg: number, uncertaintyDeg: number) => ({
      azimuths: [radians(phaseDeg / 4), radians(phaseDeg / 4 + 90)],
      turned: 0,
      uncertaintyDeg,
    });
    const { phase, sigma, residual } = observedPhase([seen(350, 5), seen(30, 10)], 4);
    // Closed form: direction of 4 (cos 350, sin 350) + (cos 30, sin 30).
    const x = 4 * Math.cos(radians(350)) + Math.cos(radians(30));
    const y = 4 * Math.sin(radians(350)) + Math.sin(radians(30));
    expect(degrees(phase)).toBeCloseTo((degrees(Math.atan2(y, x)) + 360) % 360, 9);
    // 1 / sqrt(1/20² + 1/40²) of phase, and the spread of the two about their mean: the larger counts.
    const pooled = 1 / Math.sqrt(1 / 400 + 1 / 1600);
    expect(degrees(residual)).toBeCloseTo(Math.sqrt(0.8 * 7.66 ** 2 + 0.2 * 32.34 ** 2), 1);
    expect(degrees(sigma)).toBeCloseTo(Math.max(pooled, degrees(residual)), 9);
  });
  it('turns with the pattern between two observations of one flow', () => {
    const once = stormOf([maxima(regular(5, 20))]);
    const angleAt = (timeS: number): number => {
      for (let k = 0; k < once.stateCount; k++) {
        if (once.states[k * STATE_SIZE + STATE.timeS] === timeS)
          return once.states[k * STATE_SIZE + STATE.patternAngle]!;
      }
      throw new Error('no such state');
    };
    // North: the pattern turns anticlockwise, bearings fall.
    const turned = degrees(angleAt(4 * HOUR) - angleAt(SEEN_AT));
    const later = regular(5, 20).map((bearing) => (((bearing - turned) % 360) + 360) % 360);
    const twice = stormOf([maxima(regular(5, 20)), maxima(later, 8, 4 * HOUR)]);
    expect(twice.conditioned!.phaseDeg).toBeCloseTo(once.conditioned!.phaseDeg, 6);
    expect(twice.conditioned!.sigmaDeg).toBeCloseTo(once.conditioned!.sigmaDeg / Math.SQRT2, 9);
  });
});

describe('the ring an observation bounds', () => {
  it('is left alone where it prefers that number, and moved to the nearest one that does otherwise', () => {
    // The printed growth table: width 0.35 and eye 0.2 prefer 4, width 0.20 prefers 5, width 0.15 prefers 7.
    const given = { ringWidth: 0.35, eyeRatio: 0.2 };
    expect(nearestRingOf(given, 4)).toBe(given);
    for (const m of [3, 5, 6, 7, 8]) {
      const ring = nearestRingOf(given, m)!;
      const modes = smoothRingModes(1 - ring.ringWidth, ring.eyeRatio);
      expect(modes.reduce((best, mode) => (mode.growth > best.growth ? mode : best)).m).toBe(m);
      // No ring of the table that prefers m is nearer.
      const scaled = (width: number, eye: number): number =>
        Math.hypot((width - given.ringWidth) / 0.35, (eye - given.eyeRatio) / 0.6);
      const least = STABILITY_TABLE.wavenumber.flatMap((row, k) =>
        row.flatMap((own, c) =>
          own === m ? [scaled(STABILITY_TABLE.widthFraction[c]!, STABILITY_TABLE.eyeRatio[k]!)] : [],
        ),
      );
      expect(scaled(ring.ringWidth, ring.eyeRatio)).toBeCloseTo(Math.min(...least), 9);
    }
  });
  it('is named where it was moved, with the widths that fit', () => {
    const { fixes, notices, wavenumber } = resolveFixes(
      steady.map((fix) => ({ ...fix, ringWidthFraction: 0.35 })),
      OPTIONS,
      null,
      [maxima(regular(5, 20))],
    );
    expect(wavenumber).toBe(5);
    const moved = Object.values(fixes[0]!.filled).filter((words) => words.includes('so that 5 vortices grow'));
    expect(moved.length).toBeGreaterThan(0);
    const { eyeVorticityRatio } = fixes[0]!;
    const { thinnest, widest } = widthsOf(eyeVorticityRatio, 5)!;
    expect(notices.find(({ code }) => code === 'ring-bounded-by-observation')!.text).toContain(
      `${thinnest}–${widest} at an eye ratio of ${eyeVorticityRatio}`,
    );
    expect(fixes[0]!.ringWidthFraction).toBeGreaterThanOrEqual(thinnest);
    expect(fixes[0]!.ringWidthFraction).toBeLessThanOrEqual(widest);
  });
  it('gives widths at an eye ratio of 0.2 that agree with the printed growth table', () => {
    // Most unstable wave at widths 0.25, 0.20: 5; at 0.30, 0.35: 4; at 0.15: 7.
    expect(widthsOf(0.2, 5)!.thinnest).toBeLessThanOrEqual(0.2);
    expect(widthsOf(0.2, 5)!.widest).toBeGreaterThanOrEqual(0.25);
    expect(widthsOf(0.2, 5)!.widest).toBeLessThan(0.3);
    expect(widthsOf(0.2, 4)!.thinnest).toBeLessThanOrEqual(0.3);
    expect(widthsOf(0.2, 2)).toBeNull();
  });
  it('is the one the greater weight of observations speaks for', () => {
    const mixed = stormOf([
      maxima(regular(4, 10), 20),
      maxima(regular(5, 20), 5),
      maxima(regular(4, 40), 20, 4 * HOUR),
    ]);
    expect(mixed.wavenumber).toBe(5);
    expect(mixed.conditioned!.observations).toBe(1);
    expect(mixed.notices.find(({ code }) => code === 'observations-set-aside')!.text).toContain('hour 3, hour 4');
  });
});

describe('an elliptical eye', () => {
  // Kuo et al. (1999), from memory: semi-axes 30 and 20 km, a turn in 144 min.
  const ellipse = (rotationPeriodS: number | null, bearing = 30): ObservedVortices => ({
    kind: 'ellipse',
    timeS: SEEN_AT,
    timeLabel: 'hour 3',
    longAxisBearingDeg: bearing,
    majorM: 30_000,
    minorM: 20_000,
    rotationPeriodS,
    uncertaintyDeg: 10,
  });

  it('has two vortices that turn in its period, whatever the ring says', () => {
    const storm = stormOf([ellipse(144 * 60)]);
    expect(storm.wavenumber).toBe(2);
    expect(storm.fixes[1]!.patternRadPerS!).toBeCloseTo((2 * Math.PI) / 8640, 12);
    expect(stormOf([ellipse(null)]).fixes[1]!.patternRadPerS).not.toBeCloseTo((2 * Math.PI) / 8640, 5);
    // Kirchhoff needs 3.03e-3 /s for those axes and that period.
    expect(storm.notices.find(({ code }) => code === 'pattern-rate-observed')!.text).toContain('3.03e-3');
  });
  it('turns by Kirchhoff’s relation: zeta / 4 for a circle, 7.2e-4 for axes 30 and 20 km at 3e-3 /s', () => {
    expect(kirchhoffRate(3e-3, 20_000, 20_000)).toBeCloseTo(3e-3 / 4, 15);
    expect(kirchhoffRate(3e-3, 30_000, 20_000)).toBeCloseTo(7.2e-4, 15);
  });
  it('is the same seen from either end of its long axis', () => {
    const one = stormOf([ellipse(null, 30)]);
    const other = stormOf([ellipse(null, 210)]);
    other.phases.forEach((phase, j) => expect(phase).toBeCloseTo(one.phases[j]!, 9));
  });
  it('bounds no ring, and says so', () => {
    const storm = stormOf([ellipse(null)]);
    expect(storm.fixes.map(({ ringWidthFraction }) => ringWidthFraction)).toEqual([0.25, 0.25, 0.25]);
    expect(storm.notices.find(({ code }) => code === 'ring-bounded-by-observation')!.text).toContain('bound neither');
  });
  it('has no effect where no ring grows', () => {
    const filled = steady.map((fix) => ({ ...fix, eyeVorticityRatio: 0.9 }));
    const storm = stormOf([ellipse(null)], filled);
    expect(storm.wavenumber).toBeNull();
    expect(storm.conditioned).toBeNull();
    expect(codesOf(storm)).toContain('observation-without-effect');
  });
});

describe('bad observations', () => {
  const refused = (seen: Partial<Record<string, unknown>>) => () =>
    stormOf([maxima(regular(4, 0)), { ...maxima(regular(4, 0)), ...seen } as ObservedVortices]);
  it.each([
    [{ timeS: 7 * HOUR }, 'time of observation 2 is 25200; it must be within the track'],
    [{ timeS: NaN }, 'time of observation 2'],
    [{ azimuthsDeg: [10] }, 'number of maxima of observation 2 is 1; it must be in 2..8'],
    [{ azimuthsDeg: regular(9, 0) }, 'number of maxima of observation 2 is 9'],
    [{ azimuthsDeg: [10, 361] }, 'azimuth of observation 2 is 361; it must be in 0..360 degrees'],
    [{ azimuthsDeg: [10, NaN] }, 'azimuth of observation 2 is NaN'],
    [{ uncertaintyDeg: 0.5 }, 'uncertainty of observation 2 is 0.5; it must be in 1..60 degrees'],
    [{ uncertaintyDeg: 61 }, 'uncertainty of observation 2 is 61'],
  ])('are refused by name: %o', (seen, words) => expect(refused(seen)).toThrow(words));
  const round = { kind: 'ellipse', longAxisBearingDeg: 10, majorM: 3e4, minorM: 2e4, rotationPeriodS: 9000 };
  it.each([
    [{ longAxisBearingDeg: -1 }, 'bearing of the long axis of observation 2 is -1'],
    [{ minorM: 4e4 }, 'short semi-axis of observation 2 is 40000'],
    [{ majorM: 6e5 }, 'long semi-axis of observation 2 is 600000'],
    [{ rotationPeriodS: 300 }, 'rotation period of observation 2 is 300; it must be in 600..36000 s'],
  ])('are refused by name, of an ellipse: %o', (seen, words) => expect(refused({ ...round, ...seen })).toThrow(words));
});
