import type { SiteBatch } from '#engine/footprint/site-peaks.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type WindOptions } from '#engine/track/options.ts';
import { prepareStorm, type Storm } from '#engine/track/storm.ts';
import { CHUNK_SITES } from '../../compute/protocol.ts';

// The storm and sites of tests/bench/chain-brute-force.c, so that both programs do the same work.

const FIXES: readonly (readonly [number, number, number, number, number, number, number])[] = [
  [0, 22.0, 179.2, 955, 50, 40, 0],
  [6, 23.1, 179.55, 950, 52, 38, 0],
  [12, 24.3, 179.95, 948, 53, 36, 0],
  [18, 25.6, -179.6, 960, 46, 40, 2.8],
  [24, 27.0, -179.0, 978, 34, 48, 8.8],
];

/** The made-up storm of the yardstick, intensity by wind, anchored to the mean; by other relations where some are given. */
export function yardstickStorm(wind: Partial<WindOptions> = {}): Storm {
  const fixes = FIXES.map(([hour, latitude, longitude, hPa, wind, km, hoursInland]): TrackFix => ({
    timeS: 3600 * hour,
    latitude,
    longitude,
    centralPressurePa: 100 * hPa,
    ambientPressurePa: 101_000,
    maxWindMs: wind,
    windAveragingS: 60,
    radiusOfMaxWindM: 1000 * km,
    radius34KtM: null,
    radius50KtM: null,
    radius64KtM: null,
    ringWidthFraction: 0.35,
    eyeVorticityRatio: 0.2,
    hoursInland,
  }));
  return prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...wind, intensity: 'wind', anchor: 'mean' }, null);
}

/** Numbers of the yardstick's own generator, each time from its beginning. */
function yardstickNumbers(): () => number {
  let state = 12345;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

/** Sites from the yardstick's own generator, with insurance terms: 30 % at sea, the others with mixed fetch. */
export function yardstickSites(count: number, next: () => number = yardstickNumbers()): SiteBatch {
  const batch = {
    count,
    latitude: new Float64Array(count),
    longitude: new Float64Array(count),
    roughnessM: new Float64Array(count),
    fetchM: new Float64Array(8 * count),
    topographicFactor: new Float64Array(count).fill(1),
    value: new Float64Array(count).fill(1e6),
    deductible: new Float64Array(count).fill(2e4),
    limit: new Float64Array(count).fill(8e5),
  };
  for (let i = 0; i < count; i++) {
    batch.latitude[i] = 22 + 5 * next();
    const longitude = 178.4 + 2.6 * next();
    batch.longitude[i] = longitude > 180 ? longitude - 360 : longitude;
    const sea = next();
    const rough = next();
    batch.roughnessM[i] = sea < 0.3 ? NaN : 0.03 + 0.4 * rough;
    for (let k = 0; k < 8; k++) {
      const a = next();
      const b = next();
      batch.fetchM[8 * i + k] = 1e5 * a * b;
    }
  }
  return batch;
}

/** The same sites in chunks as a run takes them, one in memory at a time. */
export function* yardstickChunks(count: number): Generator<SiteBatch> {
  const next = yardstickNumbers();
  for (let done = 0; done < count; done += CHUNK_SITES) yield yardstickSites(Math.min(CHUNK_SITES, count - done), next);
}
