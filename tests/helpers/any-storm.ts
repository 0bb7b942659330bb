import fc from 'fast-check';
import { scoreSites, type SiteScores } from '#engine/footprint/site-peaks.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { degrees, radians } from '#engine/units.ts';
import { between } from './arbitrary.ts';
import { batchOf, workedFixes, type TestSite } from './worked-storm.ts';

/** Seconds. */
export const HOUR = 3600;
/** Gusts of a site, plain and enhanced. */
export const COLUMNS = ['plainGust', 'enhancedMean', 'p5', 'p50', 'p90', 'p95', 'p99'] as const;

/** Scores of sites under a track with some options chosen. */
export const score = (
  fixes: readonly TrackFix[],
  sites: readonly TestSite[],
  options: Partial<ChainOptions> = {},
): SiteScores =>
  scoreSites(prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...options }, null), batchOf(sites), REFERENCE_CURVE);

/** A place over open sea. */
export const sea = (latitude: number, longitude: number): TestSite => ({
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
export function offset(
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
export const storms = fc
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
/** A place near the middle of a storm, by distance and bearing, with its ground. */
export const near = fc.record({
  metres: between(2_000, 250_000),
  bearing: between(0, 360),
  rough: between(0, 1),
  fetch: between(0, 5e4),
});
type Near = { metres: number; bearing: number; rough: number; fetch: number };
/** The site such a place stands for. */
export const siteNear = (fixes: readonly TrackFix[], { metres, bearing, rough, fetch }: Near): TestSite => {
  const { latitude, longitude } = offset(fixes[1]!.latitude, fixes[1]!.longitude, metres, bearing);
  if (rough < 0.3) return sea(latitude, longitude);
  return {
    ...sea(latitude, longitude),
    roughness: rough - 0.29,
    fetch: [0, 1, 2, 3, 4, 5, 6, 7].map((k) => (fetch * (k + 1)) / 8),
  };
};
/** Tries a law on storms and sites of all kinds. */
export const holds = (runs: number, law: (fixes: TrackFix[], site: TestSite) => void): void =>
  fc.assert(
    fc.property(storms, near, (fixes, place) => void law(fixes, siteNear(fixes, place))),
    { numRuns: runs },
  );
