import { describe, expect, it } from 'vitest';
import { scoreSites, SITE_BELOW_FLOOR, SITE_OUT_OF_REACH, SITE_SCORED } from '#engine/footprint/site-peaks.ts';
import { gustLadder, siteSeries, staysInEye } from '#engine/footprint/site-series.ts';
import { greatCircleDistance } from '#engine/geo/geodesy.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { COLUMNS, holds, HOUR, offset, score, sea } from '../helpers/any-storm.ts';
import { batchOf, workedFixes, workedSites, type TestSite } from '../helpers/worked-storm.ts';

describe('whatever the storm and site', () => {
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
