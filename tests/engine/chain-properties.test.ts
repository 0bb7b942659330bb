import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  scoreSites,
  SITE_BELOW_FLOOR,
  SITE_OUT_OF_REACH,
  SITE_SCORED,
  type SiteScores,
} from '#engine/footprint/site-peaks.ts';
import { gustLadder, siteSeries, staysInEye } from '#engine/footprint/site-series.ts';
import { followPassage, makePassage } from '#engine/footprint/passage.ts';
import { secondsAtLeast } from '#engine/footprint/durations.ts';
import { siteExposure } from '#engine/footprint/wind-at.ts';
import { betweenPlaces, greatCircleDistance } from '#engine/geo/geodesy.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm, STATE, STATE_SIZE } from '#engine/track/storm.ts';
import { degrees, radians } from '#engine/units.ts';
import { between } from '../helpers/arbitrary.ts';
import {
  batchOf,
  mirroredFixes,
  mirroredSite,
  workedFixes,
  workedSites,
  type TestSite,
} from '../helpers/worked-storm.ts';

const HOUR = 3600;
const COLUMNS = ['plainGust', 'enhancedMean', 'p5', 'p50', 'p90', 'p95', 'p99'] as const;

const score = (
  fixes: readonly TrackFix[],
  sites: readonly TestSite[],
  options: Partial<ChainOptions> = {},
): SiteScores =>
  scoreSites(prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...options }, null), batchOf(sites), REFERENCE_CURVE);

const sea = (latitude: number, longitude: number): TestSite => ({
  latitude,
  longitude,
  roughness: null,
  fetch: new Array<number>(8).fill(0),
  hill: 1,
  value: 1e6,
  deductible: 0,
  limit: Infinity,
});

/** A place at a distance and bearing from another. */
function offset(
  latitude: number,
  longitude: number,
  metres: number,
  bearing: number,
): { latitude: number; longitude: number } {
  const d = metres / 6_371_000;
  const phi = radians(latitude);
  const sinPhi = Math.sin(phi) * Math.cos(d) + Math.cos(phi) * Math.sin(d) * Math.cos(radians(bearing));
  const east = Math.atan2(
    Math.sin(radians(bearing)) * Math.sin(d) * Math.cos(phi),
    Math.cos(d) - Math.sin(phi) * sinPhi,
  );
  return { latitude: degrees(Math.asin(sinPhi)), longitude: longitude + degrees(east) };
}

// Storms that move one to sixteen metres a second somewhere at sea, north or south, perhaps across the antimeridian.
const storms = fc
  .record({
    latitude: between(8, 38),
    longitude: between(-180, 180),
    heading: between(0, 360),
    speed: between(1, 16),
    pressure: between(90_500, 99_000),
    radius: between(12_000, 70_000),
    south: fc.boolean(),
  })
  .map(({ latitude, longitude, heading, speed, pressure, radius, south }) =>
    [0, 6, 12].map((hour): TrackFix => {
      const start = south ? -latitude : latitude;
      const at = offset(start, longitude, speed * hour * HOUR, south ? 180 - heading : heading);
      return {
        ...workedFixes[0]!,
        ...at,
        timeS: hour * HOUR,
        centralPressurePa: pressure + 50 * hour,
        maxWindMs: null,
        radiusOfMaxWindM: radius,
        hoursInland: 0,
      };
    }),
  );
const near = fc.record({
  metres: between(2_000, 250_000),
  bearing: between(0, 360),
  rough: between(0, 1),
  fetch: between(0, 5e4),
});
type Near = { metres: number; bearing: number; rough: number; fetch: number };
const siteNear = (fixes: readonly TrackFix[], { metres, bearing, rough, fetch }: Near): TestSite => {
  const { latitude, longitude } = offset(fixes[1]!.latitude, fixes[1]!.longitude, metres, bearing);
  if (rough < 0.3) return sea(latitude, longitude);
  return {
    ...sea(latitude, longitude),
    roughness: rough - 0.29,
    fetch: [0, 1, 2, 3, 4, 5, 6, 7].map((k) => (fetch * (k + 1)) / 8),
  };
};
const holds = (runs: number, law: (fixes: TrackFix[], site: TestSite) => void): void =>
  fc.assert(
    fc.property(storms, near, (fixes, place) => void law(fixes, siteNear(fixes, place))),
    { numRuns: runs },
  );

describe('whatever the storm and site', () => {
  it('mirroring at the equator changes no speed, and turns direction D into 180 - D', () =>
    holds(40, (fixes, site) => {
      const here = score(fixes, [site]);
      const there = score(mirroredFixes(fixes), [mirroredSite(site)]);
      for (const column of COLUMNS) expect(Math.abs(there[column][0]! - here[column][0]!)).toBeLessThan(1e-9);
      const turn = (180 - here.plainDirection[0]! - there.plainDirection[0]! + 720) % 360;
      if (there.plainTimeS[0] === here.plainTimeS[0]) expect(Math.min(turn, 360 - turn)).toBeLessThan(1e-6);
    }));
  it('shifting all longitudes changes nothing, across 180 degrees too', () =>
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
  it('keeps percentiles in order, the mean over draws not below plain, and damage between 0 and 1', () =>
    holds(60, (fixes, site) => {
      const scores = score(fixes, [site]);
      const [p5, p50, p90, p95, p99] = (['p5', 'p50', 'p90', 'p95', 'p99'] as const).map(
        (column) => scores[column][0]!,
      );
      expect(p5! <= p50! && p50! <= p90! && p90! <= p95! && p95! <= p99!).toBe(true);
      expect(scores.enhancedMean[0]!).toBeGreaterThanOrEqual(scores.plainGust[0]! * (1 - 1e-12));
      expect(scores.plainMean[0]!).toBeLessThanOrEqual(scores.plainGust[0]!);
      expect(scores.damageMean[0]! >= 0 && scores.damageMean[0]! <= 1).toBe(true);
      expect(scores.grossMean[0]!).toBeLessThanOrEqual(scores.groundUpMean[0]! + 1e-6);
    }));
  it('has durations that fall with the threshold and are 0 above the peak', () =>
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
  it('a redundant fix on the path changes the gust by less than 0.2 %', () =>
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
  it('rougher ground and longer fetch never raise the 10-min mean; rougher ground never the gust up to 0.5 m', () =>
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
  it('a finer step never lowers the peak, and changes it by less than 0.2 %', () =>
    holds(25, (fixes, site) => {
      const coarse = score(fixes, [site], { mesovortices: false }).plainGust[0]!;
      const fine = score(fixes, [site], { mesovortices: false, timeStepS: 60, innerTimeStepS: 20 }).plainGust[0]!;
      expect(fine).toBeGreaterThanOrEqual(coarse - 1e-12);
      expect(fine / coarse - 1).toBeLessThan(0.002);
    }));
});

describe('many sites', () => {
  const sites = Array.from({ length: 30 }, (_, i) => ({
    ...workedSites[i % 5]!,
    latitude: 22 + 0.17 * i,
    longitude: 179 + 0.05 * i,
    value: 1e5 + 1234.567 * i,
  }));
  const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
  const all = scoreSites(storm, batchOf(sites), REFERENCE_CURVE);

  it('score the same alone, in any order and in any chunks, to the last bit', () => {
    const backwards = scoreSites(storm, batchOf([...sites].reverse()), REFERENCE_CURVE);
    expect(backwards.p95.slice().reverse()).toEqual(all.p95);
    expect(backwards.eventGross).toEqual(all.eventGross);
    const summed = new Float64Array(264);
    for (let from = 0; from < sites.length; from += 7) {
      const chunk = scoreSites(storm, batchOf(sites.slice(from, from + 7)), REFERENCE_CURVE);
      expect(chunk.grossMean).toEqual(all.grossMean.slice(from, from + 7));
      chunk.eventGross.forEach((value, d) => (summed[d]! += value));
    }
    expect(summed).toEqual(all.eventGross);
  });
  it('are counted above a gust, and give the strongest gust, draw by draw', () => {
    const levels = [45, 55];
    const counted = scoreSites(storm, batchOf(sites), REFERENCE_CURVE, {}, levels);
    // Alone, a site's strongest gust in a draw is its gust in that draw.
    const draws = sites.map((site) => scoreSites(storm, batchOf([site]), REFERENCE_CURVE).eventPeak);
    for (let d = 0; d < 264; d++) {
      const gusts = draws.map((peaks) => peaks[d]!);
      expect(counted.eventPeak[d]).toBe(Math.max(...gusts));
      levels.forEach((level, k) =>
        expect(counted.eventAbove[k * 264 + d]).toBe(gusts.filter((gust) => gust >= level).length),
      );
    }
    expect(new Set(counted.eventAbove.subarray(264)).size).toBeGreaterThan(1);
  });
  it('are the same after the storm has been sent to another thread', () => {
    expect(scoreSites(structuredClone(storm), batchOf(sites), REFERENCE_CURVE)).toEqual(all);
  });
  it('are not changed by the same options said again', () => {
    const again = prepareStorm(workedFixes, { ...DEFAULT_OPTIONS, intensity: 'pressure', anchor: 'auto' }, null);
    expect(scoreSites(again, batchOf(sites), REFERENCE_CURVE)).toEqual(all);
  });
  it('can be stopped between sites, and tell how far they are', () => {
    const many = batchOf(Array.from({ length: 200 }, (_, i) => sites[i % 30]!));
    const told: number[] = [];
    const stopped = scoreSites(storm, many, REFERENCE_CURVE, {
      shouldStop: () => told.length >= 2,
      onProgress: (done) => void told.push(done),
    });
    expect(told).toEqual([64, 128]);
    expect(stopped.plainGust[127]).not.toBeNaN();
    expect(stopped.plainGust[128]).toBeNaN();
  });
  it('that no vortex reaches keep the plain gust bit for bit in every draw', () => {
    const far = scoreSites(storm, batchOf([workedSites[4]!]), REFERENCE_CURVE);
    for (const column of COLUMNS) expect(far[column][0]).toBe(far.plainGust[0]);
  });
  it('are plain throughout when the layer is off', () => {
    const off = score(workedFixes, workedSites, { mesovortices: false });
    for (const column of COLUMNS) expect(off[column]).toEqual(off.plainGust);
    expect(off.grossMean).toEqual(off.grossPlain);
  });
  it('without value have damage and no loss', () => {
    const bare = scoreSites(storm, batchOf([{ ...workedSites[0]!, value: NaN }]), REFERENCE_CURVE);
    const full = scoreSites(storm, batchOf([workedSites[0]!]), REFERENCE_CURVE);
    expect(bare.damageMean[0]).toBeCloseTo(full.damageMean[0]!, 12);
    expect(bare.grossMean[0]).toBeNaN();
    expect(bare.eventGross.every((value) => value === 0)).toBe(true);
    const worthless = scoreSites(storm, batchOf([{ ...workedSites[0]!, value: 0 }]), REFERENCE_CURVE);
    expect(worthless.damageMean[0]).toBeCloseTo(full.damageMean[0]!, 12);
    expect(worthless.grossMean[0]).toBe(0);
  });
  it('have loss percentiles that belong to the draws of the gust percentiles', () => {
    const i = 5;
    expect(all.grossP5[i]!).toBeLessThanOrEqual(all.grossP50[i]!);
    expect(all.grossP50[i]!).toBeLessThanOrEqual(all.grossP95[i]!);
    expect(all.damageP5[i]!).toBeLessThanOrEqual(all.damageMean[i]!);
    expect(all.damageMean[i]!).toBeLessThanOrEqual(all.damageP95[i]!);
  });
});

describe('a steady storm over the sea', () => {
  const moving = (speed: number, south = false): TrackFix[] =>
    [0, 12, 24].map((hour) => ({
      ...workedFixes[0]!,
      ...offset(south ? -20 : 20, 150, speed * hour * HOUR, 0),
      timeS: hour * HOUR,
      maxWindMs: 50,
      radiusOfMaxWindM: 40_000,
    }));
  const options: Partial<ChainOptions> = { intensity: 'wind', anchor: 'mean', mesovortices: false };
  const middle = (fixes: readonly TrackFix[]) => {
    const storm = prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...options, innerTimeStepS: 300 }, null);
    for (let k = 0; k < storm.stateCount; k++) {
      const at = k * STATE_SIZE;
      if (storm.states[at + STATE.timeS] === 12 * HOUR) {
        return {
          storm,
          k,
          latitude: storm.states[at + STATE.latitude]!,
          longitude: storm.states[at + STATE.longitude]!,
        };
      }
    }
    throw new Error('no middle state');
  };
  const seaWindAround = (fixes: readonly TrackFix[], metres: number): number[] => {
    const { storm, latitude, longitude } = middle(fixes);
    return Array.from({ length: 36 }, (_, i) => {
      const at = offset(latitude, longitude, metres, 10 * i);
      const passage = makePassage(storm);
      const site = { ...at, roughnessM: null, fetchM: [], topographicFactor: 1 };
      followPassage(storm, at.latitude, at.longitude, siteExposure(site), passage);
      const k = 144;
      return Math.hypot(passage.seaU[k]!, passage.seaV[k]!);
    });
  };

  it('that stands still blows alike all around', () => {
    const still = [0, 12, 24].map((hour) => ({ ...moving(0)[0]!, timeS: hour * HOUR }));
    const winds = seaWindAround(still, 60_000);
    expect(Math.max(...winds) - Math.min(...winds)).toBeLessThan(1e-8);
  });
  it('blows hardest on the right of its motion in the north, on the left in the south', () => {
    for (const [south, strong] of [
      [false, 90],
      [true, 270],
    ] as const) {
      const winds = seaWindAround(moving(6, south), 40_000);
      const best = 10 * winds.indexOf(Math.max(...winds));
      expect(Math.abs(best - strong)).toBeLessThanOrEqual(60);
      expect(winds[strong / 10]!).toBeGreaterThan(winds[((strong + 180) % 360) / 10]!);
    }
  });
  it('has the resolved maximum over 1.05 as its largest open-sea wind', () => {
    let largest = 0;
    for (let metres = 30_000; metres <= 46_000; metres += 1000)
      largest = Math.max(largest, ...seaWindAround(moving(6), metres));
    // Coriolis lifts the peak a little above its value at the radius of maximum wind.
    expect(largest).toBeGreaterThan((50 / 1.05) * 0.999);
    expect(largest).toBeLessThan((50 / 1.05) * 1.0005);
  });
  it('parts strong and weak side further the faster it moves', () => {
    const gaps = [0.5, 2, 5, 10, 15].map((speed) => {
      const winds = seaWindAround(moving(speed), 40_000);
      return Math.max(...winds) - Math.min(...winds);
    });
    gaps.forEach((gap, i) => expect(gap).toBeGreaterThanOrEqual(gaps[i - 1] ?? 0));
  });
  it('veers at a site right of its track in the north and backs on the left', () => {
    const turning = (bearing: number) => {
      const fixes = moving(6);
      const { storm, latitude, longitude } = middle(fixes);
      const at = offset(latitude, longitude, 60_000, bearing);
      const { timeS, directionDeg } = siteSeries(storm, { ...at, roughnessM: null, fetchM: [], topographicFactor: 1 });
      const from = directionDeg[timeS.indexOf(9 * HOUR)]!;
      const to = directionDeg[timeS.indexOf(15 * HOUR)]!;
      return ((to - from + 540) % 360) - 180;
    };
    expect(turning(90)).toBeGreaterThan(0);
    expect(turning(270)).toBeLessThan(0);
  });
  it('that is deeper never blows weaker outside its eye, wind left to follow', () => {
    const deep = (pressure: number) =>
      score(
        moving(5).map((fix) => ({ ...fix, maxWindMs: null, centralPressurePa: pressure })),
        [40, 60, 100, 200].map((km) => {
          const { latitude, longitude } = middle(moving(5));
          const at = offset(latitude, longitude, km * 1000, 90);
          return sea(at.latitude, at.longitude);
        }),
        { mesovortices: false },
      ).plainGust;
    let before = deep(98_000);
    for (const pressure of [96_000, 94_000, 92_000]) {
      const now = deep(pressure);
      now.forEach((gust, i) => expect(gust).toBeGreaterThanOrEqual(before[i]!));
      before = now;
    }
  });
});

describe('guards', () => {
  const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
  const scored = (site: Partial<TestSite>) => () =>
    scoreSites(storm, batchOf([workedSites[0]!, { ...workedSites[1]!, ...site }]), REFERENCE_CURVE);

  it('refuse a site by its number instead of clipping', () => {
    expect(scored({ latitude: NaN })).toThrow('latitude of site 1');
    expect(scored({ longitude: Infinity })).toThrow('longitude of site 1');
    expect(scored({ roughness: 12 })).toThrow('roughness length of site 1');
    expect(scored({ hill: NaN })).toThrow('topographic factor of site 1');
    expect(scored({ fetch: [1, 2, 3, -4, 5, 6, 7, 8] })).toThrow('fetch 4 of site 1');
    expect(scored({ value: -1 })).toThrow('value');
    // A hill that would lift the gust beyond anything ever measured.
    expect(scored({ hill: 2.9 })).toThrow(/plain gust of site 1 is 1\d\d\.\d+; it must be in 0..120 m\/s/);
  });
  it('leave a site beyond 1000 km out, and mark one below 20 m/s', () => {
    const far = offset(22, 179.2, 1_001_000, 180);
    const within = offset(22, 179.2, 999_000, 180);
    const scores = scoreSites(
      storm,
      batchOf([sea(far.latitude, far.longitude), sea(within.latitude, within.longitude), workedSites[0]!]),
      REFERENCE_CURVE,
    );
    expect([...scores.reach]).toEqual([SITE_OUT_OF_REACH, SITE_BELOW_FLOOR, SITE_SCORED]);
    expect(scores.plainGust[0]).toBeNaN();
    expect(scores.plainGust[1]).toBeLessThan(20);
  });
  it('stay finite at the very centre, where only the motion blows', () => {
    const centre = scoreSites(storm, batchOf([sea(24.3, 179.95)]), REFERENCE_CURVE);
    expect(Number.isFinite(centre.p99[0])).toBe(true);
    const at12 = siteSeries(storm, {
      latitude: 24.3,
      longitude: 179.95,
      roughnessM: null,
      fetchM: [],
      topographicFactor: 1,
    });
    const i = at12.timeS.indexOf(12 * HOUR);
    expect(at12.plain[i]!).toBeLessThan(6);
  });
});

describe('why this gust', () => {
  const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, null);
  const s2 = workedSites[1]!;
  const site = {
    latitude: s2.latitude,
    longitude: s2.longitude,
    roughnessM: s2.roughness,
    fetchM: s2.fetch,
    topographicFactor: 1,
  };
  const ladder = gustLadder(storm, site);

  it('leads from the gradient wind to the plain gust without a gap', () => {
    let wind = NaN;
    for (const { times, plus, resultMs } of ladder.steps.slice(0, 7)) {
      const next =
        times === null && plus === null
          ? Number.isNaN(wind)
            ? resultMs[0]!
            : wind
          : wind * (times ?? 1) + (plus?.[0] ?? 0);
      expect(resultMs[0]!).toBeCloseTo(next, 10);
      wind = resultMs[0]!;
    }
    const scores = scoreSites(storm, batchOf([s2]), REFERENCE_CURVE);
    expect(wind).toBeCloseTo(scores.plainGust[0]!, 8);
    expect(ladder.steps[7]!.resultMs[0]).toBeCloseTo(scores.p5[0]!, 10);
    expect(ladder.steps[7]!.resultMs[1]).toBeCloseTo(scores.p95[0]!, 10);
  });
  it('knows a site that never leaves the inner eye', () => {
    const still = [0, 12].map((hour) => ({ ...workedFixes[0]!, timeS: hour * HOUR }));
    const standing = prepareStorm(still, DEFAULT_OPTIONS, null);
    expect(staysInEye(standing, offset(22, 179.2, 15_000, 40))).toBe(true);
    expect(staysInEye(standing, offset(22, 179.2, 25_000, 40))).toBe(false);
    expect(staysInEye(storm, { latitude: 24.3, longitude: 179.95 })).toBe(false);
  });
  it('measures the fetch between the sectors the wind comes from', () => {
    expect(ladder.upwindFetchM!).toBeGreaterThan(5560);
    expect(ladder.upwindFetchM!).toBeLessThan(7863);
  });
});

it('places test sites at the distance asked for', () => {
  expect(greatCircleDistance({ latitude: 20, longitude: 150 }, offset(20, 150, 60_000, 77))).toBeCloseTo(60_000, 4);
});
