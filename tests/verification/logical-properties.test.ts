import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { secondsAtLeast } from '#engine/footprint/durations.ts';
import { siteExposure, windAt, type WindSteps } from '#engine/footprint/wind-at.ts';
import { betweenPlaces } from '#engine/geo/geodesy.ts';
import { buildLandIndex } from '#engine/geo/land.ts';
import { peakFactor } from '#engine/gust/gust-factor.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { heightRatio } from '#engine/terrain/roughness.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, WIND_CHOICE_NAMES, WIND_CHOICES, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { between } from '../helpers/arbitrary.ts';
import { COLUMNS, holds, HOUR, near, offset, score, sea, siteNear, storms } from '../helpers/any-storm.ts';
import { batchOf, mirroredFixes, mirroredSite, workedFixes, workedSites } from '../helpers/worked-storm.ts';

// Relations a wind model has to keep whatever its numbers: after the logical-relationship and wind-field requirements of
// regulators such as the Florida Commission on Hurricane Loss Projection Methodology, paraphrased from memory, some added.
// Numbered as in the list the product works to; 17 to 20 and 22 are about money and stand with the losses. 21 and 23 are
// tried on harder tracks in tests/engine/redundant-fix.test.ts.

type Steady = { speed: number; south?: boolean; latitude?: number; maxWindMs?: number | null; radius?: number };

/** A storm that keeps its strength and heads for the pole, over the sea. */
const steady = ({ speed, south = false, latitude = 20, maxWindMs = 50, radius = 40_000 }: Steady): TrackFix[] =>
  [0, 12, 24].map((hour) => ({
    ...workedFixes[0]!,
    ...offset(south ? -latitude : latitude, 150, speed * hour * HOUR, south ? 180 : 0),
    timeS: hour * HOUR,
    maxWindMs,
    radiusOfMaxWindM: radius,
  }));
/** The reported maximum is the ring's own, so that it can be held while something else changes. */
const BY_WIND: Partial<ChainOptions> = { intensity: 'wind', anchor: 'mean', mesovortices: false };

const prepared = (fixes: readonly TrackFix[], options: Partial<ChainOptions> = BY_WIND): Storm =>
  prepareStorm(fixes, { ...DEFAULT_OPTIONS, innerTimeStepS: 300, ...options }, null);
const stateAt = (storm: Storm, hour: number): number => {
  for (let k = 0; k < storm.stateCount; k++) if (storm.states[k * STATE_SIZE + STATE.timeS] === hour * HOUR) return k;
  throw new Error(`no state at ${hour} h`);
};
const placeFrom = (storm: Storm, hour: number, metres: number, bearing: number) => {
  const at = stateAt(storm, hour) * STATE_SIZE;
  return offset(storm.states[at + STATE.latitude]!, storm.states[at + STATE.longitude]!, metres, bearing);
};
/** Wind over open sea halfway through, at a distance and bearing from the centre. */
const seaWind = (storm: Storm, metres: number, bearing: number): WindSteps => {
  const place = { ...placeFrom(storm, 12, metres, bearing), roughnessM: null, fetchM: [], topographicFactor: 1 };
  return windAt(storm, stateAt(storm, 12), place);
};
const AZIMUTHS = Array.from({ length: 36 }, (_, i) => 10 * i);
const around = (storm: Storm, metres: number): number[] =>
  AZIMUTHS.map((bearing) => seaWind(storm, metres, bearing).seaWindMs);
const gap = (winds: readonly number[]) => Math.max(...winds) - Math.min(...winds);

describe('1. a storm that stands still blows alike all around: nothing else sets a direction', () => {
  const still = [0, 12, 24].map((hour) => ({ ...steady({ speed: 0 })[0]!, timeS: hour * HOUR }));
  it.each(WIND_CHOICES.asymmetry)('%s', (asymmetry) => {
    expect(gap(around(prepared(still, { ...BY_WIND, asymmetry }), 60_000))).toBeLessThan(1e-6);
  });
});

describe('2. the faster it moves, the further the two sides differ: the motion is what parts them', () => {
  it.each(WIND_CHOICES.asymmetry.filter((asymmetry) => asymmetry !== 'none'))('%s', (asymmetry) => {
    const gaps = [0.5, 2, 5, 10, 15].map((speed) =>
      gap(around(prepared(steady({ speed }), { ...BY_WIND, asymmetry }), 40_000)),
    );
    gaps.forEach((one, i) => expect(one).toBeGreaterThanOrEqual(gaps[i - 1] ?? 0));
  });
  it('by as much as the share of the motion that is added, to each side', () => {
    // Closed form: 0.55 of the speed is added on one side and taken on the other.
    expect(gap(around(prepared(steady({ speed: 5 })), 40_000))).toBeCloseTo(2 * 0.55 * 5, 1);
  });
});

describe('3. the strong side is right of the motion in the north, left in the south: spin and motion add there', () => {
  it.each(WIND_CHOICES.asymmetry.filter((asymmetry) => asymmetry !== 'none'))('%s', (asymmetry) => {
    // East is right of a storm that heads north, and left of one that heads south.
    for (const south of [false, true]) {
      const winds = around(prepared(steady({ speed: 6, south }), { ...BY_WIND, asymmetry }), 40_000);
      expect(Math.abs(10 * winds.indexOf(Math.max(...winds)) - 90)).toBeLessThanOrEqual(90);
      expect(winds[9]!).toBeGreaterThan(winds[27]!);
    }
  });
});

it('4. mirroring at the equator keeps every speed and turns direction D into 180 - D: physics has no preferred half', () =>
  holds(40, (fixes, site) => {
    const here = score(fixes, [site]);
    const there = score(mirroredFixes(fixes), [mirroredSite(site)]);
    for (const column of COLUMNS) expect(Math.abs(there[column][0]! - here[column][0]!)).toBeLessThan(1e-9);
    const turn = (180 - here.plainDirection[0]! - there.plainDirection[0]! + 720) % 360;
    if (there.plainTimeS[0] === here.plainTimeS[0]) expect(Math.min(turn, 360 - turn)).toBeLessThan(1e-6);
  }));

it('5. shifting all longitudes changes nothing, across 180 degrees too: where counting begins is arbitrary', () =>
  fc.assert(
    fc.property(storms, near, between(-360, 360), (fixes, place, shift) => {
      const site = siteNear(fixes, place);
      const move = <T extends { longitude: number }>(at: T): T => ({ ...at, longitude: at.longitude + shift });
      const here = score(fixes, [site]);
      const there = score(fixes.map(move), [move(site)]);
      for (const column of COLUMNS) expect(Math.abs(there[column][0]! - here[column][0]!)).toBeLessThan(1e-8);
    }),
    { numRuns: 40 },
  ));

it('6. the largest open-sea wind is the resolved maximum over 1.05: the field holds what the track says', () => {
  const storm = prepared(steady({ speed: 6 }));
  let largest = 0;
  for (let metres = 30_000; metres <= 46_000; metres += 1000) largest = Math.max(largest, ...around(storm, metres));
  // Coriolis lifts the peak a little above its value at the radius of maximum wind.
  expect(largest).toBeGreaterThan((50 / 1.05) * 0.999);
  expect(largest).toBeLessThan((50 / 1.05) * 1.0005);
});

it('7. rougher ground and longer fetch never raise the mean, rougher ground never the gust up to 0.5 m: drag slows', () =>
  fc.assert(
    fc.property(storms, near, between(0.003, 0.5), between(1, 3), (fixes, place, z0, more) => {
      const site = { ...siteNear(fixes, place), fetch: new Array<number>(8).fill(place.fetch) };
      const ofSite = (roughness: number, factor: number) =>
        score(fixes, [{ ...site, roughness, fetch: site.fetch.map((metres) => metres * factor) }], {
          mesovortices: false,
        });
      const base = ofSite(z0, 1);
      const rougher = ofSite(Math.min(z0 * more, 0.5), 1);
      expect(rougher.plainGust[0]!).toBeLessThanOrEqual(base.plainGust[0]! + 1e-9);
      expect(rougher.plainMean[0]!).toBeLessThanOrEqual(base.plainMean[0]! + 1e-9);
      expect(ofSite(z0, more).plainMean[0]!).toBeLessThanOrEqual(base.plainMean[0]! + 1e-9);
    }),
    { numRuns: 30 },
  ));

describe('8. rougher ground is gustier: turbulence comes from the ground', () => {
  it.each(WIND_CHOICES.turbulence)('turbulence after %s', (turbulence) => {
    const storm = prepared(steady({ speed: 6 }), { ...BY_WIND, turbulence });
    const steps = [0.003, 0.01, 0.03, 0.1, 0.3, 1].map((roughnessM) => {
      const site = { ...placeFrom(storm, 12, 60_000, 90), roughnessM, fetchM: new Array<number>(8).fill(1e5) };
      return windAt(storm, stateAt(storm, 12), { ...site, topographicFactor: 1 });
    });
    steps.slice(1).forEach((step, i) => {
      expect(step.turbulence).toBeGreaterThanOrEqual(steps[i]!.turbulence);
      expect(step.gustFactor).toBeGreaterThanOrEqual(steps[i]!.gustFactor);
    });
  });
});

it('9. the gust is at least the 1-min wind, that at least the 10-min wind: a shorter peak is a higher one', () => {
  const storm = prepared(steady({ speed: 6 }));
  for (const roughnessM of [null, 0.003, 0.03, 0.3, 1])
    for (const metres of [5_000, 40_000, 150_000, 400_000]) {
      const site = { ...placeFrom(storm, 12, metres, 45), roughnessM, fetchM: new Array<number>(8).fill(2e4) };
      const { gustMs, meanMs, turbulence } = windAt(storm, stateAt(storm, 12), { ...site, topographicFactor: 1 });
      const oneMinuteMs = meanMs * (1 + peakFactor(60, 600) * turbulence);
      expect(gustMs).toBeGreaterThanOrEqual(oneMinuteMs);
      expect(oneMinuteMs).toBeGreaterThanOrEqual(meanMs);
    }
});

it('10. a deeper storm never blows weaker outside its eye, wind left to follow: the pressure drives the wind', () => {
  const deep = (pressure: number) => {
    const fixes = steady({ speed: 5, maxWindMs: null }).map((fix) => ({ ...fix, centralPressurePa: pressure }));
    const storm = prepared(fixes, { mesovortices: false });
    const sites = [40, 60, 100, 200].map((km) => {
      const { latitude, longitude } = placeFrom(storm, 12, km * 1000, 90);
      return sea(latitude, longitude);
    });
    return score(fixes, sites, { mesovortices: false }).plainGust;
  };
  let before = deep(98_000);
  for (const pressure of [96_000, 94_000, 92_000]) {
    const now = deep(pressure);
    now.forEach((gust, i) => expect(gust).toBeGreaterThanOrEqual(before[i]!));
    before = now;
  }
});

describe('11. a higher maximum never lowers the wind about the ring: it is the ring’s own wind', () => {
  const winds = [40, 45, 50, 55, 60, 65];
  const pressed = winds.map((maxWindMs) => prepared(steady({ speed: 5, maxWindMs })));
  it('from 0.8 of the radius to rm exp(1/B), pressure held', () => {
    pressed.slice(1).forEach((stronger, i) => {
      const weaker = pressed[i]!;
      const reach = 40_000 * Math.exp(1 / Math.max(stronger.fixes[1]!.shapeB, weaker.fixes[1]!.shapeB));
      for (let metres = 32_000; metres <= reach; metres += 2000)
        for (const bearing of [0, 90, 180, 270]) {
          const gain = seaWind(stronger, metres, bearing).seaWindMs - seaWind(weaker, metres, bearing).seaWindMs;
          expect(gain).toBeGreaterThanOrEqual(-1e-9);
        }
    });
  });
  it('nor out to five radii when the pressure is left to follow; with it held, the wind far out falls', () => {
    const free = winds.map((maxWindMs) =>
      prepared(steady({ speed: 5, maxWindMs }).map((fix) => ({ ...fix, centralPressurePa: null }))),
    );
    const at = (storm: Storm, radii: number) => seaWind(storm, radii * 40_000, 90).seaWindMs;
    free.slice(1).forEach((stronger, i) => {
      for (const radii of [1, 1.5, 2, 3, 4, 5]) expect(at(stronger, radii)).toBeGreaterThan(at(free[i]!, radii));
    });
    // Why a stress test of intensity moves pressure and wind together.
    expect(at(pressed[3]!, 4)).toBeLessThan(at(pressed[2]!, 4));
  });
});

it('12. a larger radius at a fixed maximum never lowers the wind outside it: the same wind reaches further', () => {
  const sizes = [20_000, 30_000, 40_000, 55_000, 70_000].map((radius) => ({
    radius,
    storm: prepared(steady({ speed: 5, radius })),
  }));
  sizes.slice(1).forEach(({ radius, storm }, i) => {
    for (let metres = radius; metres <= 8 * radius; metres += radius / 4)
      for (const bearing of [0, 90, 180, 270]) {
        const before = seaWind(sizes[i]!.storm, metres, bearing).seaWindMs;
        expect(seaWind(storm, metres, bearing).seaWindMs).toBeGreaterThanOrEqual(before - 1e-9);
      }
  });
});

describe('13. over land the maximum weakens hour by hour and never exceeds landfall: the sea no longer feeds it', () => {
  /** The coast lies along a parallel two degrees poleward of the first fix; all beyond is land. */
  const inlandMaxima = (latitude: number, decay: ChainOptions['decay']): number[] => {
    const fixes = Array.from({ length: 9 }, (_, i): TrackFix => ({
      ...workedFixes[0]!,
      ...offset(latitude, 150, 6 * 6 * i * HOUR, 0),
      timeS: 6 * i * HOUR,
      maxWindMs: 50,
      hoursInland: null,
    }));
    const coast = latitude + 2.01;
    const land = buildLandIndex([
      Float64Array.from([130, coast, 170, coast, 170, coast + 25, 130, coast + 25, 130, coast]),
    ]);
    const storm = prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...BY_WIND, decay }, land);
    const inland = storm.fixes.filter(({ hoursInland }) => hoursInland > 0);
    expect(inland.length).toBeGreaterThan(4);
    return [storm.fixes[0]!.maxWindMs, ...inland.map(({ maxWindMs }) => maxWindMs)];
  };
  it.each(WIND_CHOICES.decay.filter((decay) => decay !== 'as-given'))('%s', (decay) => {
    const maxima = inlandMaxima(26, decay);
    maxima.slice(1).forEach((wind, i) => expect(wind).toBeLessThanOrEqual(maxima[i]!));
    expect(maxima.at(-1)!).toBeLessThan(0.9 * maxima[0]!);
  });
  it('and faster at a northern coast, with the constants of 2001', () => {
    const south = inlandMaxima(28, 'kaplan-demaria');
    const north = inlandMaxima(41, 'kaplan-demaria');
    expect(north[2]! / north[0]!).toBeLessThan(south[2]! / south[0]!);
  });
});

it('14. the wind veers right of the track and backs left of it, north and south alike: the vortex passes by', () => {
  const turning = (south: boolean, bearing: number) => {
    const storm = prepared(steady({ speed: 6, south }));
    const place = { ...placeFrom(storm, 12, 60_000, bearing), roughnessM: null, fetchM: [], topographicFactor: 1 };
    const [from, to] = [9, 15].map((hour) => windAt(storm, stateAt(storm, hour), place).directionDeg);
    return ((to! - from! + 540) % 360) - 180;
  };
  // The strong side so veers in the north, where it is the right, and backs in the south, where it is the left: the
  // seaman's rule for the dangerous semicircle.
  expect(turning(false, 90)).toBeGreaterThan(0);
  expect(turning(false, 270)).toBeLessThan(0);
  expect(turning(true, 270)).toBeGreaterThan(0);
  expect(turning(true, 90)).toBeLessThan(0);
});

it('15. time above a threshold falls with the threshold and is 0 above the peak: it is the same series', () =>
  holds(40, (fixes, site) => {
    const storm = prepareStorm(fixes, DEFAULT_OPTIONS, null);
    const place = { ...site, roughnessM: site.roughness, fetchM: site.fetch, topographicFactor: site.hill };
    const passage = makePassage(storm);
    const count = followPassage(storm, site.latitude, site.longitude, siteExposure(place), passage);
    const lengths = [10, 15, 20, 25, 33, 45].map((threshold) => secondsAtLeast(passage, count, threshold));
    lengths.forEach((length, k) => expect(length).toBeLessThanOrEqual(lengths[k - 1] ?? 12 * HOUR));
    const peak = Math.max(...passage.gust.subarray(0, count));
    expect(secondsAtLeast(passage, count, peak + 1e-9)).toBe(0);
  }));

it('16. the damage ratio is 0 to 1, never falls with the gust, and is 0 below the threshold: more wind, more damage', () => {
  const hills = Array.from({ length: 25 }, (_, i) => 0.5 + 0.05 * i);
  const { plainGust, damagePlain } = score(
    workedFixes,
    hills.map((hill) => ({ ...workedSites[1]!, hill })),
  );
  hills.forEach((_, i) => {
    expect(damagePlain[i]!).toBeGreaterThanOrEqual(damagePlain[i - 1] ?? 0);
    expect(damagePlain[i]!).toBeLessThanOrEqual(1);
    if (plainGust[i]! < REFERENCE_CURVE.thresholdMs) expect(damagePlain[i]).toBe(0);
  });
  expect(plainGust[0]!).toBeLessThan(REFERENCE_CURVE.thresholdMs);
  expect(damagePlain[24]!).toBeGreaterThan(0);
});

it('21. a redundant fix on the path changes the gust by less than 0.2 %: it says nothing new', () =>
  holds(40, (fixes, site) => {
    const [a, b] = [fixes[0]!, fixes[1]!];
    const middle: TrackFix = {
      ...a,
      ...betweenPlaces(a, b, 0.5),
      timeS: (a.timeS + b.timeS) / 2,
      centralPressurePa: (a.centralPressurePa! + b.centralPressurePa!) / 2,
    };
    const plain = score(fixes, [site]).plainGust[0]!;
    const more = score([a, middle, ...fixes.slice(1)], [site]).plainGust[0]!;
    expect(Math.abs(more / plain - 1)).toBeLessThan(0.002);
  }));

it('23. a finer step never lowers the peak, and changes it by less than 0.2 %: it only looks more often', () =>
  holds(25, (fixes, site) => {
    const coarse = score(fixes, [site], { mesovortices: false }).plainGust[0]!;
    const fine = score(fixes, [site], { mesovortices: false, timeStepS: 60, innerTimeStepS: 20 }).plainGust[0]!;
    expect(fine).toBeGreaterThanOrEqual(coarse - 1e-12);
    expect(fine / coarse - 1).toBeLessThan(0.002);
  }));

it('24. a higher anemometer over the same ground reads more: the ground slows the air from below', () => {
  for (const roughness of [0.003, 0.03, 0.3]) {
    // The 10-min mean at a height that goes with the same mean at 10 m.
    const readings = [3, 6, 10, 20, 40, 80].map((metres) => 30 / heightRatio(roughness, metres));
    readings.slice(1).forEach((reading, i) => expect(reading).toBeGreaterThan(readings[i]!));
    expect(readings[2]).toBeCloseTo(30, 12);
  }
});

describe('25. a choice switched back leaves nothing behind, and a run is what its saved inputs give', () => {
  const gusts = (options: Partial<ChainOptions>) => {
    const scores = score(workedFixes, workedSites, { ...options, innerTimeStepS: 300 });
    return COLUMNS.flatMap((column) => [...scores[column]]);
  };
  const before = gusts({});
  it.each(WIND_CHOICE_NAMES)('%s', (name) => {
    for (const value of WIND_CHOICES[name].slice(1)) gusts({ [name]: value });
    expect(gusts({ [name]: WIND_CHOICES[name][0] })).toEqual(before);
  });
  it('to the last bit, when inputs and options are read back from text', () => {
    const copy = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T;
    const storm = prepareStorm(copy(workedFixes), copy(DEFAULT_OPTIONS), null);
    const again = scoreSites(storm, batchOf(copy(workedSites)), REFERENCE_CURVE);
    const first = score(workedFixes, workedSites);
    for (const column of COLUMNS) expect(again[column]).toEqual(first[column]);
    expect(again.eventGross).toEqual(first.eventGross);
  });
});
