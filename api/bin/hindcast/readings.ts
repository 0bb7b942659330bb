import { FETCH_LIMIT } from '#engine/geo/land.ts';
import type { Pair } from './measures.ts';
import { modelledEverywhere, type Ground, type Hindcast } from './modelled.ts';
import type { Observation } from './observations.ts';

type Reading = {
  title: string;
  observed?: (observation: Observation) => number;
  ground?: (ground: Ground) => Ground;
  /** Fixes as the track would read without something it gives. */
  without?: 'radius-of-max-wind' | 'all-widths';
};

const OPEN_COUNTRY = 0.03;
const ifLand = (ground: Ground, change: Partial<Ground>): Ground =>
  ground.roughnessLengthM === null ? ground : { ...ground, ...change };

/** Other ways of reading the same data, each changed alone. */
const READINGS: readonly Reading[] = [
  { title: 'As published: gusts at 10 m over 3 s, roughness by exposure, fetch from the land polygons' },
  { title: 'Gusts as reported, height and averaging left alone', observed: ({ gustMs }) => gustMs! },
  {
    title: 'Land all round, no sea upwind anywhere on land',
    ground: (ground) => ifLand(ground, { fetchM: ground.fetchM.map(() => FETCH_LIMIT) }),
  },
  {
    title: 'Open country at every place on land',
    ground: (ground) => ifLand(ground, { roughnessLengthM: OPEN_COUNTRY }),
  },
  { title: 'Every place as if over open sea', ground: (ground) => ({ ...ground, roughnessLengthM: null }) },
  { title: 'Radii of maximum wind in the track not used, 64-kt radii used', without: 'radius-of-max-wind' },
  { title: 'Neither used: every width from pressure and latitude', without: 'all-widths' },
];

/** Observed and modelled plain peaks under each reading, with the default settings. */
export const readingsOf = (
  hindcast: Hindcast,
  ground: ReadonlyMap<string, Ground>,
): { title: string; pairs: Pair[] }[] =>
  READINGS.map(({ title, observed, ground: read, without }) => {
    const tracks = new Map(
      [...hindcast.tracks].map(([id, fixes]) => [
        id,
        fixes.map((fix) => ({
          ...fix,
          radiusOfMaxWindM: without ? null : fix.radiusOfMaxWindM,
          radius64KtM: without === 'all-widths' ? null : fix.radius64KtM,
        })),
      ]),
    );
    const observations = hindcast.observations.filter(({ role }) => role === 'P');
    const places = new Map([...ground].map(([id, place]) => [id, read ? read(place) : place]));
    const gusts = modelledEverywhere({ ...hindcast, observations, tracks }, places, { mesovortices: false });
    return {
      title,
      pairs: observations.map((one) => ({
        storm: one.storm,
        observedMs: observed ? observed(one) : one.standardisedMs!,
        modelledMs: gusts.get(one.id)!.plainMs,
      })),
    };
  });
