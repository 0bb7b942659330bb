import type { SiteBatch } from '#engine/footprint/site-peaks.ts';
import type { TrackFix } from '#engine/track/fixes.ts';

/** The made-up storm of the method reference: it crosses the antimeridian and a coast along 25 N. */
export const workedFixes: TrackFix[] = [
  [0, 22.0, 179.2, 955, 50, 40, 0],
  [6, 23.1, 179.55, 950, 52, 38, 0],
  [12, 24.3, 179.95, 948, 53, 36, 0],
  [18, 25.6, -179.6, 960, 46, 40, 2.8],
  [24, 27.0, -179.0, 978, 34, 48, 8.8],
].map(([hour, latitude, longitude, pressure, wind, radius, inland]) => ({
  timeS: hour! * 3600,
  latitude: latitude!,
  longitude: longitude!,
  centralPressurePa: pressure! * 100,
  ambientPressurePa: 101_000,
  maxWindMs: wind!,
  windAveragingS: 60,
  radiusOfMaxWindM: radius! * 1000,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: 0.35,
  eyeVorticityRatio: 0.2,
  hoursInland: inland!,
}));

const FAR = 1e5;
const coast = [FAR, FAR, FAR, 7863, 5560, 7863, FAR, FAR];
const inland = new Array<number>(8).fill(FAR);

/** A site with its terms; roughness null = at sea. */
export type TestSite = {
  latitude: number;
  longitude: number;
  roughness: number | null;
  fetch: number[];
  hill: number;
  value: number;
  deductible: number;
  limit: number;
};

const house = { value: 1e6, deductible: 2e4, limit: 8e5 };

/** S1 to S5 of the method reference. */
export const workedSites: TestSite[] = [
  { latitude: 24.3, longitude: -179.7, roughness: null, fetch: new Array<number>(8).fill(0), hill: 1, ...house },
  { latitude: 25.05, longitude: -179.45, roughness: 0.03, fetch: coast, hill: 1, ...house },
  { latitude: 25.05, longitude: 179.79, roughness: 0.03, fetch: coast, hill: 1, ...house },
  {
    latitude: 26.2,
    longitude: -179.1,
    roughness: 0.3,
    fetch: inland,
    hill: 1.1926127375,
    value: 2e6,
    deductible: 5e4,
    limit: 1e6,
  },
  { latitude: 26.5, longitude: 179.7, roughness: 0.1, fetch: inland, hill: 1, value: 5e5, deductible: 1e4, limit: 4e5 },
];

/** Sites as the kernel takes them. */
export function batchOf(sites: readonly TestSite[]): SiteBatch {
  const column = (pick: (site: TestSite) => number): Float64Array => Float64Array.from(sites, pick);
  return {
    count: sites.length,
    latitude: column((s) => s.latitude),
    longitude: column((s) => s.longitude),
    roughnessM: column((s) => s.roughness ?? NaN),
    fetchM: Float64Array.from(sites.flatMap((s) => s.fetch)),
    topographicFactor: column((s) => s.hill),
    value: column((s) => s.value),
    deductible: column((s) => s.deductible),
    limit: column((s) => s.limit),
  };
}

/** The same place and storm on the other side of the equator: northern and southern sectors change places. */
export const mirroredFixes = (fixes: readonly TrackFix[]): TrackFix[] =>
  fixes.map((fix) => ({ ...fix, latitude: -fix.latitude }));
export const mirroredSite = (site: TestSite): TestSite => ({
  ...site,
  latitude: -site.latitude,
  fetch: site.fetch.map((_, k) => site.fetch[(12 - k) % 8]!),
});
