import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { TrackResolution, type Fix, type Track } from '#contract/scenarios.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { greatCircleDistance } from '#engine/geo/geodesy.ts';
import { landIndex } from '../../api/compute/land.ts';
import { readTrackText } from '../../api/features/scenarios/reading/read-track.ts';
import { resolveTrack } from '../../api/features/scenarios/resolve-track.ts';
import { trackDigest } from '../../api/features/scenarios/track-digest.ts';

let land: LandIndex;
beforeAll(() => {
  land = landIndex();
});

const fixAt = (hour: number, latitude: number, longitude: number, over: Partial<Fix> = {}): Fix => ({
  time: new Date(Date.UTC(2030, 8, 1, hour)).toISOString(),
  latitude,
  longitude,
  centralPressureHpa: null,
  ambientPressureHpa: null,
  maxWindMs: null,
  radiusOfMaxWindM: null,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
  ...over,
});
const trackOf = (fixes: Fix[], windAveragingS: Track['declarations']['windAveragingS'] = 60): Track => ({
  fixes,
  declarations: { windAveragingS, source: 'Made up for a test', asOf: null },
});
const resolved = (track: Track, intensity: 'pressure' | 'wind' = 'pressure') =>
  TrackResolution.parse(resolveTrack(track, intensity, false, land).resolution);

describe('the pinned four-fix track of the method reference, computed from the published formula', () => {
  const even = (metres: number): Fix['radius64KtM'] => [metres, metres, metres, metres];
  const track = trackOf([
    fixAt(0, 28, -85, { centralPressureHpa: 930, maxWindMs: 66.9, radius64KtM: even(60_000) }),
    fixAt(3, 28.6, -85.3, { centralPressureHpa: 928, maxWindMs: 69.5 }),
    fixAt(6, 29.3, -85.6, { centralPressureHpa: 925, maxWindMs: 72, radius64KtM: even(64_000) }),
    fixAt(12, 31, -85.2, { centralPressureHpa: 955, maxWindMs: 46 }),
  ]);
  it('uses the maximum the pressure implies and prints the reported one beside it', () => {
    const { fixes, maxima } = resolved(track);
    [57.564932, 58.47574, 59.883774, 49.195816].forEach((ms, i) => expect(fixes[i]!.maxWindMs).toBeCloseTo(ms, 5));
    [15_050.668, 15_206.193, 15_361.718, 15_361.718].forEach((m, i) =>
      expect(fixes[i]!.radiusOfMaxWindM).toBeCloseTo(m, 2),
    );
    expect(maxima).toMatchObject({ fix: 2, reportedMs: 72, used: 'pressure' });
    expect(maxima.pressureImpliedMs).toBeCloseTo(59.883774, 5);
    expect(fixes.map(({ filled }) => filled.radiusOfMaxWindM !== undefined)).toEqual([true, true, true, true]);
  });
  it('uses the reported wind on request, with the radius that goes with it', () => {
    const { fixes, maxima } = resolved(track, 'wind');
    [17_335.561, 18_007.184, 18_678.806, 18_678.806].forEach((m, i) =>
      expect(fixes[i]!.radiusOfMaxWindM).toBeCloseTo(m, 2),
    );
    expect(maxima).toMatchObject({ fix: 2, reportedMs: 72, used: 'wind' });
  });
  it('notes where wind and pressure don’t belong together', () =>
    expect(resolved(track).findings).toContainEqual(
      expect.objectContaining({ code: 'TRACK-10', severity: 'note', text: expect.stringContaining('m/s reported') }),
    ));
});

it('brings a 10-min wind to 1 min, and honours a track given by wind alone', () => {
  // METHODS: 45 m/s over 10 min at 16 S is 47.25 m/s over 1 min.
  const { fixes, hemisphere } = resolved(
    trackOf([fixAt(0, -16, 150, { maxWindMs: 45 }), fixAt(6, -17, 149, { maxWindMs: 45 })], 600),
  );
  expect(fixes[0]).toMatchObject({ reportedMaxWindMs: 47.25, maxWindMs: 47.25, intensitySource: 'wind' });
  expect(fixes[0]!.centralPressureHpa).toBeCloseTo(965.58288, 4);
  expect(hemisphere).toBe('south');
});

it('draws a track across 180 degrees as one line of half-hour steps', () => {
  const read = readTrackText({
    format: 'auto',
    text: readFileSync(new URL('../../seeds/demo-files/meridane-as-tracked.csv', import.meta.url), 'utf8'),
  })!;
  const { path } = resolved(trackOf(read.fixes));
  expect(path).toHaveLength(48 * 2 + 1);
  const place = ([longitude, latitude]: [number, number]) => ({ latitude, longitude });
  path.slice(1).forEach((point, i) => {
    expect(Math.abs(point[0] - path[i]![0])).toBeLessThan(0.5);
    expect(greatCircleDistance(place(path[i]!), place(point))).toBeLessThan(30_000);
  });
  expect(path[0]![0]).toBeCloseTo(176.4, 9);
  expect(path.at(-1)![0]).toBeCloseTo(360 - 176.1, 9);
});

it('mirrors a storm to the other hemisphere without changing a speed', () => {
  const fixes = [
    fixAt(0, 20, -150, { centralPressureHpa: 950, maxWindMs: 50 }),
    fixAt(6, 21, -151, { centralPressureHpa: 945 }),
  ];
  const north = resolved(trackOf(fixes)).fixes;
  const south = resolved(trackOf(fixes.map((fix) => ({ ...fix, latitude: -fix.latitude })))).fixes;
  south.forEach((fix, i) => {
    expect(fix.maxWindMs).toBeCloseTo(north[i]!.maxWindMs, 9);
    expect(fix.speedMs).toBeCloseTo(north[i]!.speedMs, 9);
    expect(fix.headingDeg).toBeCloseTo((180 - north[i]!.headingDeg + 360) % 360, 9);
  });
});

it('counts hours inland and says which fixes are over land', () => {
  // Straight north onto the Florida panhandle along 86 W: the coast lies near 30.4 N.
  const { fixes, findings } = resolved(
    trackOf([29, 30, 31, 32].map((latitude, i) => fixAt(6 * i, latitude, -86, { centralPressureHpa: 960 }))),
  );
  expect(fixes.map(({ overLand }) => overLand)).toEqual([false, false, true, true]);
  expect(fixes[2]!.hoursInland).toBeGreaterThan(2);
  expect(fixes[2]!.hoursInland).toBeLessThan(5);
  expect(fixes[3]!.hoursInland).toBeCloseTo(fixes[2]!.hoursInland + 6, 6);
  expect(findings.map(({ code }) => code)).toContain('TRACK-13');
});

it('suspects another unit when winds are twice what the pressures imply', () => {
  const inKnots = trackOf(
    [0, 6, 12].map((hour) => fixAt(hour, 20 + hour / 10, -70, { centralPressureHpa: 950, maxWindMs: 96 })),
  );
  expect(resolved(inKnots).findings.map(({ code }) => code)).toContain('TRACK-06');
});

it('resolves nothing while a finding refuses the track, and still says everything found', () => {
  const { fixes, findings, path } = resolved(trackOf([fixAt(0, 20, -70)]));
  expect(fixes).toEqual([]);
  expect(path).toEqual([]);
  expect(findings.map(({ code }) => code)).toEqual(['TRACK-01', 'TRACK-09']);
});

describe('the digest of a track', () => {
  const track = trackOf([fixAt(0, 20, -70, { maxWindMs: 40 }), fixAt(6, 21, -71, { maxWindMs: 42 })]);
  it('is the same for the same track, however its fields are ordered', () => {
    const shuffled = { declarations: track.declarations, fixes: track.fixes.map((fix) => ({ ...fix })) };
    expect(trackDigest(JSON.parse(JSON.stringify(shuffled)) as Track)).toBe(trackDigest(track));
  });
  it('changes with any value that moves a result', () => {
    const change = (over: Partial<Fix>) =>
      trackDigest({ ...track, fixes: [track.fixes[0]!, { ...track.fixes[1]!, ...over }] });
    const digests = new Set([
      trackDigest(track),
      change({ latitude: 21.01 }),
      change({ maxWindMs: 43 }),
      change({ centralPressureHpa: 960 }),
      change({ radius64KtM: [1, 0, 0, 0] }),
      change({ hoursInland: 0 }),
      trackDigest({ ...track, declarations: { ...track.declarations, windAveragingS: 600 } }),
    ]);
    expect(digests.size).toBe(7);
  });
});
