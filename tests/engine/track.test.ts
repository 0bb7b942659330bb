import { describe, expect, it } from 'vitest';
import { DomainError } from '#engine/errors.ts';
import { betweenPlaces, greatCircleDistance, initialBearing, normalisedBearing } from '#engine/geo/geodesy.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { hoursInlandOf } from '#engine/track/inland.ts';
import { motionAt } from '#engine/track/motion.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { legAt, positionAt } from '#engine/track/position.ts';
import { resolveFixes } from '#engine/track/resolution.ts';
import { prepareStorm, STATE, STATE_SIZE } from '#engine/track/storm.ts';
import { timeGrid } from '#engine/track/time-grid.ts';
import { METRES_PER_NAUTICAL_MILE } from '#engine/units.ts';
import { coriolis, hemisphereSign } from '#engine/winds/coriolis.ts';
import { expectPrinted } from '../helpers/printed.ts';
import { workedFixes } from '../helpers/worked-storm.ts';

const place = (latitude: number, longitude: number) => ({ latitude, longitude });
const HOUR = 3600;

describe('geodesy, computed from the published formula', () => {
  it('measures distances and bearings', () => {
    expectPrinted(greatCircleDistance(place(25, -80), place(26, -79)), '149788.3');
    expectPrinted(initialBearing(place(25, -80), place(26, -79)), '41.85476');
    expectPrinted(greatCircleDistance(place(10, 179.5), place(10.5, -179.5)), '122734.6');
    expectPrinted(initialBearing(place(10, 179.5), place(10.5, -179.5)), '62.97615');
  });
  it('interpolates across the antimeridian and along a great circle', () => {
    const middle = betweenPlaces(place(10, 179.5), place(10.5, -179.5), 0.5);
    expectPrinted(middle.latitude, '10.250382');
    expectPrinted(middle.longitude, '179.999605');
    const quarter = betweenPlaces(place(40, -70), place(45, -60), 0.25);
    expectPrinted(quarter.latitude, '41.329241');
    expectPrinted(quarter.longitude, '-67.648311');
  });
  it('stays where it is between equal places', () => {
    expect(betweenPlaces(place(12, 34), place(12, 34), 0.3)).toEqual(place(12, 34));
    expect(greatCircleDistance(place(12, 34), place(12, 394))).toBeLessThan(1e-6);
  });
  it('keeps bearings in 0 to 360, the end excluded', () => {
    expect(normalisedBearing(-1e-15)).toBe(0);
    expect(normalisedBearing(725)).toBe(5);
    expect(normalisedBearing(-90)).toBe(270);
  });
  it('has the Coriolis parameter as a magnitude, and the sign apart', () => {
    expectPrinted(coriolis(20), '4.988100e-5');
    expectPrinted(coriolis(-15), '3.774676e-5');
    expect([hemisphereSign(20), hemisphereSign(0), hemisphereSign(-0.1)]).toEqual([1, 1, -1]);
  });
});

describe('the worked storm between fixes, computed from the published formula', () => {
  it('moves along great circles', () => {
    const at = positionAt(workedFixes, 3 * HOUR);
    expectPrinted(at.latitude, '22.550095');
    expectPrinted(at.longitude, '179.374302');
    const motion = motionAt(workedFixes, 3 * HOUR);
    expectPrinted(motion.speed, '5.902122');
    expectPrinted(motion.heading, '16.363792');
  });
  it('takes the motion over the hour around a fix, one-sided at the first', () => {
    expectPrinted(motionAt(workedFixes, 12 * HOUR).speed, '6.736453');
    expectPrinted(motionAt(workedFixes, 12 * HOUR).heading, '17.183874');
    expectPrinted(motionAt(workedFixes, 0).speed, '5.902122');
    expectPrinted(motionAt(workedFixes, 0).heading, '16.308877');
  });
  it('counts a fix to the leg that starts there, the last one to the leg that ends there', () => {
    expect([0, 5.9, 6, 12, 24].map((hour) => legAt(workedFixes, hour * HOUR))).toEqual([0, 0, 1, 2, 3]);
  });
  it('interpolates pressure and radius linearly', () => {
    const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
    const k = Array.from({ length: storm.stateCount }, (_, i) => i).find(
      (i) => storm.states[i * STATE_SIZE + STATE.timeS] === 3 * HOUR,
    )!;
    expect(storm.states[k * STATE_SIZE + STATE.rMax]).toBeCloseTo(39_000, 6);
  });
});

describe('time grid', () => {
  it('has outer times from the first fix, the last fix, and inner times strictly between', () => {
    const { timeS, outer } = timeGrid(0, 700, 300, 60);
    expect([...outer].map((k) => timeS[k])).toEqual([0, 300, 600, 700]);
    expect([...timeS]).toEqual([0, 60, 120, 180, 240, 300, 360, 420, 480, 540, 600, 660, 700]);
  });
  it('has no inner times when the inner step is not smaller', () => {
    expect([...timeGrid(0, 600, 300, 300).timeS]).toEqual([0, 300, 600]);
  });
  it('refuses a grid that would not end', () => {
    expect(() => timeGrid(0, 1e9, 300, 5)).toThrow(DomainError);
  });
  it('takes 20-s inner steps where the pattern turns fast', () => {
    const small = workedFixes.map((fix) => ({
      ...fix,
      radiusOfMaxWindM: 12_000,
      maxWindMs: 75,
      centralPressurePa: 90_500,
    }));
    const storm = prepareStorm(small, DEFAULT_OPTIONS, null);
    expect(storm.wavenumber! * Math.max(...storm.fixes.map((fix) => fix.patternRadPerS!))).toBeGreaterThan(0.008);
    expect(storm.states[STATE_SIZE + STATE.timeS]).toBe(20);
  });
});

const fix = (given: Partial<TrackFix>): TrackFix => ({
  timeS: 0,
  latitude: 20,
  longitude: 130,
  centralPressurePa: null,
  ambientPressurePa: null,
  maxWindMs: null,
  windAveragingS: 60,
  radiusOfMaxWindM: null,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
  ...given,
});

describe('resolving a fix, computed from the published formula', () => {
  it('fills wind and radius from a pressure', () => {
    const { fixes } = resolveFixes(
      [
        fix({ centralPressurePa: 95_000 }),
        fix({ timeS: 6 * HOUR, latitude: 21, longitude: 129, centralPressurePa: 95_000 }),
      ],
      DEFAULT_OPTIONS,
    );
    expectPrinted(fixes[0]!.radiusOfMaxWindM, '31897.384');
    expectPrinted(fixes[0]!.maxWindMs, '49.547753');
    expect(fixes[0]!.intensitySource).toBe('pressure');
    expect(Object.keys(fixes[0]!.filled).sort()).toEqual([
      'ambientPressureHpa',
      'eyeVorticityRatio',
      'hoursInland',
      'maxWindMs',
      'radiusOfMaxWindM',
      'ringWidthFraction',
    ]);
  });
  it('fills pressure and radius from a 10-min wind in the south', () => {
    const south = { latitude: -16, longitude: 150, maxWindMs: 45, windAveragingS: 600 } as const;
    const { fixes } = resolveFixes(
      [fix(south), fix({ ...south, timeS: 6 * HOUR, latitude: -17, longitude: 149 })],
      DEFAULT_OPTIONS,
    );
    expect(fixes[0]!.maxWindMs).toBeCloseTo(47.25, 12);
    expect(fixes[0]!.intensitySource).toBe('wind');
    expectPrinted(fixes[0]!.centralPressurePa / 100, '965.58288');
    expectPrinted(fixes[0]!.radiusOfMaxWindM, '30879.30');
    expect(fixes[0]!.filled.centralPressureHpa).toContain('Courtney & Knaff');
  });
  const four = [
    fix({
      latitude: 28,
      longitude: -85,
      centralPressurePa: 93_000,
      maxWindMs: 66.9,
      radius64KtM: [60e3, 60e3, 60e3, 60e3],
    }),
    fix({ timeS: 3 * HOUR, latitude: 28.6, longitude: -85.3, centralPressurePa: 92_800, maxWindMs: 69.5 }),
    // A quadrant without hurricane-force wind does not count.
    fix({
      timeS: 6 * HOUR,
      latitude: 29.3,
      longitude: -85.6,
      centralPressurePa: 92_500,
      maxWindMs: 72,
      radius64KtM: [64e3, 64e3, 0, 64e3],
    }),
    fix({ timeS: 12 * HOUR, latitude: 31, longitude: -85.2, centralPressurePa: 95_500, maxWindMs: 46 }),
  ];
  it('takes the radius from 64-kt radii, then from fixes within 6 h', () => {
    const byPressure = resolveFixes(four, DEFAULT_OPTIONS).fixes;
    ['15050.668', '15206.193', '15361.718', '15361.718'].forEach((r, i) =>
      expectPrinted(byPressure[i]!.radiusOfMaxWindM, r),
    );
    ['57.564932', '58.475740', '59.883774', '49.195816'].forEach((v, i) => expectPrinted(byPressure[i]!.maxWindMs, v));
    ['6.749622', '7.220341', '7.993101', '8.930730'].forEach((c, i) => expectPrinted(byPressure[i]!.translationMs, c));
    const byWind = resolveFixes(four, { ...DEFAULT_OPTIONS, intensity: 'wind' }).fixes;
    ['17335.561', '18007.184', '18678.806', '18678.806'].forEach((r, i) =>
      expectPrinted(byWind[i]!.radiusOfMaxWindM, r),
    );
    expect(byWind.map(({ maxWindMs }) => maxWindMs)).toEqual([66.9, 69.5, 72, 46]);
  });
  it('shows both maxima and warns when they differ widely', () => {
    const { fixes, notices } = resolveFixes(
      workedFixes.map((given) => ({ ...given, maxWindMs: 75 })),
      DEFAULT_OPTIONS,
    );
    expect(notices.filter(({ code }) => code === 'wind-and-pressure-differ')).toHaveLength(5);
    expect(fixes[0]!.reportedMaxWindMs).toBe(75);
    expect(fixes[0]!.maxWindMs).toBe(fixes[0]!.pressureImpliedMaxWindMs);
  });
  it('honours the wind and says so when B would leave its range', () => {
    const { fixes, notices } = resolveFixes(
      workedFixes.map((given) => ({ ...given, maxWindMs: 80 })),
      { ...DEFAULT_OPTIONS, intensity: 'wind', anchor: 'mean' },
    );
    expect(fixes[0]!.shapeB).toBe(2.5);
    expect(fixes[0]!.flags[0]).toContain('B clamped to 2.5');
    expect(notices.some(({ code }) => code === 'b-clamped')).toBe(true);
  });
  it.each([
    [120, 1.05 / 1.02],
    [180, 1.05],
    [600, 1.05],
  ] as const)('turns a %i-s wind into a 1-min wind', (windAveragingS, factor) => {
    const { fixes } = resolveFixes(
      workedFixes.map((given) => ({ ...given, windAveragingS })),
      DEFAULT_OPTIONS,
    );
    expect(fixes[0]!.reportedMaxWindMs).toBeCloseTo(50 * factor, 12);
  });
  it('refuses what it cannot use, naming the fix', () => {
    const refused = (fixes: TrackFix[]) => () => resolveFixes(fixes, DEFAULT_OPTIONS);
    expect(refused([workedFixes[0]!])).toThrow('number of fixes');
    expect(refused([workedFixes[0]!, workedFixes[0]!])).toThrow('time of fix 2');
    expect(refused([workedFixes[0]!, fix({ timeS: HOUR })])).toThrow('intensity of fix 2');
    expect(refused([workedFixes[0]!, { ...workedFixes[1]!, latitude: NaN }])).toThrow('latitude of fix 2');
    expect(refused([workedFixes[0]!, { ...workedFixes[1]!, windAveragingS: 90 as 60 }])).toThrow(
      'averaging period of fix 2',
    );
    expect(() => resolveFixes(workedFixes, { ...DEFAULT_OPTIONS, timeStepS: 0 })).toThrow('timeStepS');
  });
  it('measures a nautical mile as 1852 m', () => expect(METRES_PER_NAUTICAL_MILE).toBe(1852));
});

describe('hours inland from the fixes', () => {
  const hours = hoursInlandOf(workedFixes, null);
  it('runs back from the end of a leg that ends over land', () => {
    expect(hours(18 * HOUR)).toBeCloseTo(2.8, 12);
    expect(hours(16 * HOUR)).toBeCloseTo(0.8, 12);
    expect(hours(15 * HOUR)).toBe(0);
    expect(hours(24 * HOUR)).toBeCloseTo(8.8, 12);
  });
  it('fades linearly in a leg that ends over water', () => {
    const back = hoursInlandOf(
      workedFixes.map((given, i) => ({ ...given, hoursInland: [0, 4, 0, 0, 0][i]! })),
      null,
    );
    expect(back(9 * HOUR)).toBeCloseTo(2, 12);
    expect(back(12 * HOUR)).toBe(0);
  });
});
