import { scoreSites, type SiteBatch, type SiteScores } from '#engine/footprint/site-peaks.ts';
import { fetchBySector, type LandIndex } from '#engine/geo/land.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import type { Observation } from './observations.ts';

/** What the ground does at an observation's place. */
export type Ground = { roughnessLengthM: number | null; fetchM: readonly number[] };
export type Modelled = { plainMs: number; p5Ms: number; p50Ms: number; p95Ms: number; meanMs: number };

/** What the comparison rests on. */
export type Hindcast = {
  observations: readonly Observation[];
  tracks: ReadonlyMap<string, TrackFix[]>;
  land: LandIndex;
};

/** Ground as the roles have it: roughness from the exposure, fetch from the land polygons. */
export const groundOf = (land: LandIndex, { latitude, longitude, roughnessLengthM }: Observation): Ground => ({
  roughnessLengthM,
  fetchM:
    roughnessLengthM === null
      ? new Array<number>(SECTOR_COUNT).fill(0)
      : [...fetchBySector(land, latitude, longitude, new Float64Array(SECTOR_COUNT))],
});

/**
 * Gusts at the places of one storm's observations: the peak, or for an observation with a time of comparison the highest
 * gust up to that time.
 */
export const modelledGusts = (
  fixes: readonly TrackFix[],
  observations: readonly Observation[],
  ground: readonly Ground[],
  land: LandIndex,
  options: Partial<ChainOptions>,
): Modelled[] => {
  const storm = prepareStorm(fixes, { ...DEFAULT_OPTIONS, ...options }, land);
  const whole = scoreSites(storm, batchOf(observations, ground), REFERENCE_CURVE);
  return observations.map((observation, i) => {
    if (observation.compareUntilUtc === null) return modelledAt(whole, i);
    const until = upTo(storm, Date.parse(observation.compareUntilUtc) / 1000);
    return modelledAt(scoreSites(until, batchOf([observation], [ground[i]!]), REFERENCE_CURVE), 0);
  });
};

/** Gusts at every observation's place under one set of options. */
export const modelledEverywhere = (
  { observations, tracks, land }: Hindcast,
  ground: ReadonlyMap<string, Ground>,
  options: Partial<ChainOptions>,
): Map<string, Modelled> => {
  const found = new Map<string, Modelled>();
  for (const [stormId, fixes] of tracks) {
    const here = observations.filter((one) => one.stormId === stormId);
    const places = here.map(({ id }) => ground.get(id)!);
    modelledGusts(fixes, here, places, land, options).forEach((gusts, i) => found.set(here[i]!.id, gusts));
  }
  return found;
};

/** The storm without what comes after a time; nothing before it changes. */
const upTo = (storm: Storm, timeS: number): Storm => {
  let stateCount = storm.stateCount;
  while (stateCount > 0 && storm.states[(stateCount - 1) * STATE_SIZE + STATE.timeS]! > timeS) stateCount--;
  return {
    ...storm,
    stateCount,
    states: storm.states.subarray(0, stateCount * STATE_SIZE),
    outer: storm.outer.filter((k) => k < stateCount),
  };
};

const batchOf = (observations: readonly Observation[], ground: readonly Ground[]): SiteBatch => {
  const { length } = observations;
  const constant = (value: number) => new Float64Array(length).fill(value);
  const fetchM = new Float64Array(length * SECTOR_COUNT);
  ground.forEach((place, i) => fetchM.set(place.fetchM, i * SECTOR_COUNT));
  return {
    count: length,
    latitude: Float64Array.from(observations, ({ latitude }) => latitude),
    longitude: Float64Array.from(observations, ({ longitude }) => longitude),
    roughnessM: Float64Array.from(ground, ({ roughnessLengthM }) => roughnessLengthM ?? NaN),
    fetchM,
    topographicFactor: constant(1),
    value: constant(NaN),
    deductible: constant(0),
    limit: constant(Infinity),
  };
};

const modelledAt = (scores: SiteScores, i: number): Modelled => ({
  plainMs: scores.plainGust[i]!,
  p5Ms: scores.p5[i]!,
  p50Ms: scores.p50[i]!,
  p95Ms: scores.p95[i]!,
  meanMs: scores.plainMean[i]!,
});
