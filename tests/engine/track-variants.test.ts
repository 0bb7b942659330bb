import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { TrackChange as ContractChange } from '#contract/derivations.ts';
import { windAt } from '#engine/footprint/wind-at.ts';
import { destination, greatCircleDistance, initialBearing, unitVector, type Place } from '#engine/geo/geodesy.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { positionAt } from '#engine/track/position.ts';
import { prepareStorm, STATE, STATE_SIZE } from '#engine/track/storm.ts';
import {
  CHANGE_BOUNDS,
  changedTrack,
  ensembleChanges,
  NO_CHANGE,
  sharpestTurn,
  travelBearings,
  type TrackChange,
} from '#engine/track/variants.ts';
import { between } from '../helpers/arbitrary.ts';
import { mirroredFixes, workedFixes } from '../helpers/worked-storm.ts';

const change = (parts: Partial<TrackChange>): TrackChange => ({ ...NO_CHANGE, ...parts });

/** Signed distance to the right of the great circle from a to b, by vectors: another way than the bearings used there. */
const rightOf = (a: Place, b: Place, place: Place): number => {
  const [ax, ay, az] = unitVector(a);
  const [bx, by, bz] = unitVector(b);
  const [px, py, pz] = unitVector(place);
  const left = [ay * bz - az * by, az * bx - ax * bz, ax * by - ay * bx] as const;
  return -6_371_000 * Math.asin((left[0] * px + left[1] * py + left[2] * pz) / Math.hypot(...left));
};

/** Nearest distance to a track, from points every half percent of each leg. */
const nearest = (track: readonly TrackFix[], place: Place): number => {
  let least = Infinity;
  for (let i = 0; i + 1 < track.length; i++) {
    const { timeS } = track[i]!;
    const step = (track[i + 1]!.timeS - timeS) / 200;
    for (let k = 0; k <= 200; k++) {
      least = Math.min(least, greatCircleDistance(positionAt(track, timeS + k * step), place));
    }
  }
  return least;
};

/** A curving track with turns of at most 20 degrees a fix, anywhere, over 180 degrees and both hemispheres. */
const curving = fc
  .record({
    latitude: between(-40, 40),
    longitude: between(-180, 180),
    heading: between(0, 360),
    turns: fc.array(between(-20, 20), { minLength: 2, maxLength: 8 }),
    legKm: between(60, 250),
  })
  .map(({ latitude, longitude, heading, turns, legKm }) => {
    const places: Place[] = [{ latitude, longitude }];
    let bearing = heading;
    for (const turn of turns) {
      const last = places.at(-1)!;
      const next = destination(last, bearing, 1000 * legKm);
      bearing = initialBearing(next, last) + 180 + turn;
      places.push(next);
    }
    return places.map((place, i): TrackFix => ({ ...workedFixes[0]!, ...place, timeS: i * 21_600 }));
  });

describe('a place reached along a great circle', () => {
  it('lies the distance away in the direction asked for', () => {
    fc.assert(
      fc.property(
        between(-80, 80),
        between(-180, 180),
        between(0, 360),
        between(1, 2e6),
        (latitude, longitude, bearing, way) => {
          const from = { latitude, longitude };
          const to = destination(from, bearing, way);
          expect(greatCircleDistance(from, to)).toBeCloseTo(way, 3);
          expect(Math.cos(((initialBearing(from, to) - bearing) * Math.PI) / 180)).toBeCloseTo(1, 9);
          expect(to.longitude).toBeGreaterThan(-180);
          expect(to.longitude).toBeLessThanOrEqual(180);
        },
      ),
    );
  });

  it('is a quarter of the way round at the equator when the pole is asked for', () => {
    expect(destination({ latitude: 0, longitude: 17 }, 0, (Math.PI / 2) * 6_371_000).latitude).toBeCloseTo(90, 9);
  });
});

describe('a changed track', () => {
  it('that isn’t changed equals the one given, bit for bit', () => {
    expect(changedTrack(workedFixes, NO_CHANGE)).toStrictEqual(workedFixes);
  });

  it('keeps everything a change doesn’t name, bit for bit', () => {
    const faster = changedTrack(workedFixes, change({ speedFactor: 1.25 }));
    faster.forEach((fix, i) => {
      const was = workedFixes[i]!;
      expect(fix).toStrictEqual({ ...was, timeS: fix.timeS, hoursInland: was.hoursInland! / 1.25 });
    });
    const wider = changedTrack(workedFixes, change({ radiusFactor: 1.3 }));
    expect(wider.map((fix, i) => ({ ...fix, radiusOfMaxWindM: workedFixes[i]!.radiusOfMaxWindM }))).toStrictEqual(
      workedFixes,
    );
  });

  it.each([40, -40, 100])('%d km to the right is that far at every fix, and within 1 km along the path', (offsetKm) => {
    const moved = changedTrack(workedFixes, change({ offsetKm }));
    moved.forEach((fix, i) =>
      expect(greatCircleDistance(fix, workedFixes[i]!)).toBeCloseTo(1000 * Math.abs(offsetKm), 3),
    );
    for (let timeS = 0; timeS <= 86_400; timeS += 1800) {
      const away = nearest(workedFixes, positionAt(moved, timeS)) / 1000;
      expect(Math.abs(away - Math.abs(offsetKm))).toBeLessThan(1);
    }
  });

  it('40 km to the right stays 40 ± 1 km from any path with turns up to 20°, and to its right, everywhere', () => {
    fc.assert(
      fc.property(curving, fc.constantFrom(40, -40), (fixes, offsetKm) => {
        const moved = changedTrack(fixes, change({ offsetKm }));
        moved.forEach((fix, i) => {
          expect(greatCircleDistance(fix, fixes[i]!)).toBeCloseTo(40_000, 3);
          const [a, b] = i === 0 ? [fixes[0]!, fixes[1]!] : [fixes[i - 1]!, fixes[i]!];
          expect(Math.sign(rightOf(a, b, fix))).toBe(Math.sign(offsetKm));
        });
        for (let timeS = 0; timeS < fixes.at(-1)!.timeS; timeS += 3600) {
          expect(Math.abs(nearest(fixes, positionAt(moved, timeS)) / 1000 - 40)).toBeLessThan(1);
        }
      }),
      { numRuns: 15 },
    );
  });

  it('has legs offset × cos(half the turn) away where it turns sharply, as said', () => {
    const corner = [
      [0, 0],
      [2, 0],
      [2, 2],
    ].map(([latitude, longitude], i) => ({
      ...workedFixes[0]!,
      latitude: latitude!,
      longitude: longitude!,
      timeS: i * 86_400,
    }));
    const { fix, turnDeg } = sharpestTurn(corner);
    expect(fix).toBe(1);
    expect(turnDeg).toBeCloseTo(90, 1);
    const moved = changedTrack(corner, change({ offsetKm: 40 }));
    expect(greatCircleDistance(moved[1]!, corner[1]!)).toBeCloseTo(40_000, 3);
    expect(rightOf(corner[0]!, corner[1]!, moved[1]!) / 1000).toBeCloseTo(40 * Math.cos(Math.PI / 4), 1);
  });

  it('lies to the right of the motion in the south too, and across 180°', () => {
    const south = mirroredFixes(workedFixes);
    for (const fixes of [workedFixes, south]) {
      const moved = changedTrack(fixes, change({ offsetKm: 40 }));
      moved.slice(1).forEach((fix, i) => expect(rightOf(fixes[i]!, fixes[i + 1]!, fix) / 1000).toBeCloseTo(40, 0));
      expect(moved.every(({ longitude }) => Math.abs(longitude) <= 180)).toBe(true);
    }
    // Northward along 180°: to the right is east, where longitudes begin again at −180.
    const along = [10, 11, 12].map((latitude, i) => ({
      ...workedFixes[0]!,
      latitude,
      longitude: 180,
      timeS: i * 21_600,
    }));
    expect(changedTrack(along, change({ offsetKm: 40 })).every(({ longitude }) => longitude < -179)).toBe(true);
    expect(changedTrack(along, change({ offsetKm: -40 })).every(({ longitude }) => longitude > 179)).toBe(true);
  });

  it('is moved alike wherever on the globe its longitudes begin', () => {
    fc.assert(
      fc.property(between(-360, 360), (shift) => {
        const shifted = workedFixes.map((fix) => ({ ...fix, longitude: fix.longitude + shift }));
        const parts = change({ offsetKm: 60, headingDeg: 12 });
        const here = changedTrack(workedFixes, parts);
        changedTrack(shifted, parts).forEach((fix, i) => {
          const back = { ...fix, longitude: fix.longitude - shift };
          expect(greatCircleDistance(back, here[i]!)).toBeLessThan(0.01);
        });
      }),
    );
  });

  it('keeps its lengths when turned, and turns about its first fix, clockwise', () => {
    const turned = changedTrack(workedFixes, change({ headingDeg: 15 }));
    expect(turned[0]).toMatchObject({ latitude: 22, longitude: 179.2 });
    for (let i = 1; i < turned.length; i++) {
      expect(greatCircleDistance(turned[i - 1]!, turned[i]!)).toBeCloseTo(
        greatCircleDistance(workedFixes[i - 1]!, workedFixes[i]!),
        3,
      );
      expect(initialBearing(turned[0]!, turned[i]!) - initialBearing(workedFixes[0]!, workedFixes[i]!)).toBeCloseTo(
        15,
        6,
      );
    }
  });

  it('takes the nearest moving legs where the centre stands, and lets a track that never moves be', () => {
    const stand = (places: [number, number][]) =>
      travelBearings(places.map(([latitude, longitude]) => ({ latitude, longitude })));
    expect(
      stand([
        [0, 0],
        [0, 1],
        [0, 1],
        [0, 2],
      ]),
    ).toEqual([90, 90, 90, 90]);
    expect(
      stand([
        [5, 5],
        [5, 5],
      ]),
    ).toEqual([0, 0]);
    // There and back: the leg that departs decides.
    expect(
      stand([
        [0, 0],
        [1, 0],
        [0, 0],
      ])[1],
    ).toBeCloseTo(180, 9);
  });

  it('moves wind and pressure together, in the units given, and fills nothing', () => {
    const fixes: TrackFix[] = workedFixes.map((fix, i) => ({
      ...fix,
      windAveragingS: 600,
      ambientPressurePa: i === 0 ? null : 101_200,
      maxWindMs: i === 1 ? null : fix.maxWindMs,
      centralPressurePa: i === 2 ? null : fix.centralPressurePa,
    }));
    const k = 1.1;
    changedTrack(fixes, change({ windFactor: k })).forEach((fix, i) => {
      const was = fixes[i]!;
      expect(fix.windAveragingS).toBe(600);
      expect(fix.ambientPressurePa).toBe(was.ambientPressurePa);
      if (was.maxWindMs === null) expect(fix.maxWindMs).toBeNull();
      else expect(fix.maxWindMs! / was.maxWindMs).toBeCloseTo(k, 12);
      const outside = was.ambientPressurePa ?? 101_000;
      if (was.centralPressurePa === null) expect(fix.centralPressurePa).toBeNull();
      else {
        expect((outside - fix.centralPressurePa!) / (outside - was.centralPressurePa)).toBeCloseTo(k ** 2, 12);
      }
    });
  });

  it('leaves a pressure at or above the one outside alone', () => {
    const flat = workedFixes.map((fix) => ({ ...fix, centralPressurePa: 101_000 }));
    expect(changedTrack(flat, change({ windFactor: 1.2 })).every((fix) => fix.centralPressurePa === 101_000)).toBe(
      true,
    );
  });

  it('goes faster and wider by the factors', () => {
    const fixes = workedFixes.map((fix): TrackFix => ({
      ...fix,
      timeS: fix.timeS + 5000,
      radius34KtM: [200e3, 180e3, 0, 150e3],
      radius64KtM: [60e3, 50e3, 40e3, 55e3],
    }));
    const changed = changedTrack(fixes, change({ speedFactor: 2, radiusFactor: 1.5 }));
    expect(changed.map(({ timeS }) => timeS)).toEqual([0, 3, 6, 9, 12].map((hour) => 5000 + hour * 3600));
    expect(changed[0]).toMatchObject({
      radiusOfMaxWindM: 60_000,
      radius34KtM: [300e3, 270e3, 0, 225e3],
      radius50KtM: null,
      radius64KtM: [90e3, 75e3, 60e3, 82.5e3],
    });
    expect(changed[4]!.hoursInland).toBeCloseTo(4.4, 12);
  });

  it('asks the land polygons again once its path has moved', () => {
    for (const parts of [{ offsetKm: 5 }, { headingDeg: 1 }]) {
      expect(changedTrack(workedFixes, change(parts)).every(({ hoursInland }) => hoursInland === null)).toBe(true);
    }
  });

  it('refuses what is out of its bounds, by name', () => {
    expect(() => changedTrack(workedFixes, change({ windFactor: 1.6 }))).toThrow(/windFactor/);
    expect(() => changedTrack(workedFixes, change({ offsetKm: NaN }))).toThrow(/offsetKm/);
    expect(() => changedTrack(workedFixes.slice(0, 1), NO_CHANGE)).toThrow(/number of fixes/);
  });

  it('has the bounds that the API declares', () => {
    for (const [part, bounds] of Object.entries(CHANGE_BOUNDS)) {
      for (const bound of bounds) expect(ContractChange.safeParse({ [part]: bound }).success).toBe(true);
      expect(ContractChange.safeParse({ [part]: bounds[0] - 0.01 }).success).toBe(false);
      expect(ContractChange.safeParse({ [part]: bounds[1] + 0.01 }).success).toBe(false);
    }
    expect(ContractChange.parse({})).toEqual(NO_CHANGE);
  });
});

/**
 * More wind never lowers the open-sea wind from the ring out to five radii of maximum wind, when the pressure moves along (METHODS: with
 * the pressure held the profile gets more peaked, and loses out there what it gains at the ring).
 */
describe('a stronger track', () => {
  const options: [string, Partial<ChainOptions>][] = [
    ['run by its pressure', { intensity: 'pressure' }],
    ['run by its wind', { intensity: 'wind' }],
  ];
  const seaWinds = (fixes: readonly TrackFix[], chosen: Partial<ChainOptions>): number[] => {
    const storm = prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...chosen, mesovortices: false }, null);
    const k = Math.floor(storm.stateCount / 2);
    const state = (offset: number) => storm.states[k * STATE_SIZE + offset]!;
    const centre = { latitude: state(STATE.latitude), longitude: state(STATE.longitude) };
    return [0.8, 1, 1.5, 2, 3, 4, 5].flatMap((share) =>
      [0, 60, 120, 180, 240, 300].map((azimuth) => {
        const place = destination(centre, azimuth, share * state(STATE.rMax));
        const site = { ...place, roughnessM: null, fetchM: new Array<number>(8).fill(0), topographicFactor: 1 };
        return windAt(storm, k, site).seaWindMs;
      }),
    );
  };
  const windOnly = workedFixes.map((fix) => ({ ...fix, centralPressurePa: null }));
  const pressureOnly = workedFixes.map((fix) => ({ ...fix, maxWindMs: null }));

  it.each(options)('never blows weaker from 0.8 to 5 radii, %s', (_, chosen) => {
    for (const fixes of [workedFixes, windOnly, pressureOnly]) {
      const before = seaWinds(fixes, chosen);
      for (const windFactor of [1.05, 1.2]) {
        const after = seaWinds(changedTrack(fixes, change({ windFactor })), chosen);
        after.forEach((wind, i) => expect(wind, `${windFactor} at place ${i}`).toBeGreaterThan(before[i]!));
      }
    }
  });

  it('would blow weaker out there if the pressure were held: the reason why they move together', () => {
    const before = seaWinds(workedFixes, { intensity: 'wind' });
    const held = workedFixes.map((fix) => ({ ...fix, maxWindMs: fix.maxWindMs! * 1.1 }));
    const after = seaWinds(held, { intensity: 'wind' });
    expect(Math.min(...after.slice(-6).map((wind, i) => wind - before.slice(-6)[i]!))).toBeLessThan(0);
  });
});

describe('an ensemble', () => {
  const spread = { offsetKm: 40, headingDeg: 5, windLog: 0.08, speedLog: 0.15, radiusLog: 0.2 };

  it('is the same for the same seed, bit for bit, and another for another', () => {
    expect(ensembleChanges(7, 10, spread)).toStrictEqual(ensembleChanges(7, 10, spread));
    expect(ensembleChanges(7, 10, spread)).not.toEqual(ensembleChanges(8, 10, spread));
  });

  it('keeps its first members when more are asked for', () => {
    expect(ensembleChanges(7, 20, spread).slice(0, 5)).toStrictEqual(ensembleChanges(7, 5, spread));
  });

  it('doesn’t change one part for the spread of another, nor a part without spread', () => {
    const alone = ensembleChanges(7, 10, { ...spread, offsetKm: 0, windLog: 0 });
    ensembleChanges(7, 10, spread).forEach((full, i) =>
      expect(alone[i]).toStrictEqual({ ...full, offsetKm: 0, windFactor: 1 }),
    );
  });

  it('mirrors every second member', () => {
    const members = ensembleChanges(11, 20, spread);
    for (let i = 0; i < 20; i += 2) {
      expect(members[i]!.offsetKm + members[i + 1]!.offsetKm).toBeCloseTo(0, 9);
      expect(members[i]!.windFactor * members[i + 1]!.windFactor).toBeCloseTo(1, 2);
    }
  });

  it('spreads as declared, over many seeds', () => {
    const offsets = Array.from({ length: 500 }, (_, seed) => ensembleChanges(seed, 20, spread)).flatMap((members) =>
      members.map(({ offsetKm, windFactor }) => [offsetKm, Math.log(windFactor)] as const),
    );
    const deviation = (part: 0 | 1) =>
      Math.sqrt(offsets.reduce((sum, one) => sum + one[part] ** 2, 0) / offsets.length);
    // 5,000 independent normals: the standard error of a standard deviation is 1 % of it.
    expect(Math.abs(deviation(0) / spread.offsetKm - 1)).toBeLessThan(0.04);
    expect(Math.abs(deviation(1) / spread.windLog - 1)).toBeLessThan(0.04);
  });

  it('stays within the bounds of a change whatever the spread', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 2 ** 31 - 1 }), (seed) => {
        const wide = { offsetKm: 200, headingDeg: 30, windLog: 0.3, speedLog: 0.5, radiusLog: 0.6 };
        for (const member of ensembleChanges(seed, 20, wide))
          expect(ContractChange.safeParse(member).success).toBe(true);
      }),
    );
  });

  it('refuses a spread that is no spread, and a seed that is none', () => {
    expect(() => ensembleChanges(1, 2, { ...spread, windLog: -0.1 })).toThrow(/windLog/);
    expect(() => ensembleChanges(1.5, 2, spread)).toThrow(/seed/);
  });
});
