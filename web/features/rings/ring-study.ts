/** What the bench studies: the ring, what its wind means, and how the film is made. All of it travels in the address. */
export interface RingStudy {
  maxWindMs: number;
  radiusKm: number;
  /** Ring width over the radius of maximum wind. */
  width: number;
  /** Eye over average vorticity. */
  eye: number;
  hoursInland: number;
  /** Whether the wind given is the ring's mean, which vortices exceed, or already a peak. */
  windIs: 'mean' | 'peak';
  hemisphere: 'north' | 'south';
  points: (typeof POINTS)[number];
  hours: (typeof HOURS)[number];
  /** Minutes over which heating rebuilds the ring; null = left alone. */
  heatingMin: number | null;
}

interface Limits {
  least: number;
  most: number;
  step: number;
}
export const WIND_LIMITS: Limits = { least: 33, most: 75, step: 1 };
export const RADIUS_LIMITS: Limits = { least: 8, most: 60, step: 0.5 };
export const WIDTH_LIMITS: Limits = { least: 0.1, most: 0.45, step: 0.01 };
export const EYE_LIMITS: Limits = { least: 0, most: 0.6, step: 0.01 };
export const INLAND_LIMITS: Limits = { least: 0, most: 12, step: 0.5 };
export const HEATING_LIMITS: Limits = { least: 30, most: 600, step: 30 };
export const POINTS = [64, 96, 128, 256] as const;
export const HOURS = [1, 3, 6, 12, 24] as const;

export const DEFAULT_STUDY: RingStudy = {
  maxWindMs: 60,
  radiusKm: 30,
  width: 0.35,
  eye: 0.2,
  hoursInland: 0,
  windIs: 'mean',
  hemisphere: 'north',
  points: 128,
  hours: 6,
  heatingMin: null,
};

export const hold = (value: number, { least, most }: Limits): number => Math.min(most, Math.max(least, value));
export const stopsOf = ({ least, most, step }: Limits): number[] =>
  Array.from({ length: Math.round((most - least) / step) + 1 }, (_, index) =>
    Number((least + index * step).toFixed(6)),
  );

const NAMES = {
  maxWindMs: 'wind',
  radiusKm: 'radius',
  width: 'width',
  eye: 'eye',
  hoursInland: 'inland',
  windIs: 'ring-wind',
  hemisphere: 'side',
  points: 'points',
  hours: 'hours',
  heatingMin: 'heating',
} as const satisfies Record<keyof RingStudy, string>;

const numberIn = (search: URLSearchParams, name: string, limits: Limits, usual: number): number => {
  const text = search.get(name);
  const value = text === null || text === '' ? NaN : Number(text);
  return Number.isFinite(value) ? hold(value, limits) : usual;
};
const oneOf = <T extends string | number>(text: string | null, values: readonly T[], usual: T): T =>
  values.find((value) => String(value) === text) ?? usual;

/** The study an address names; what is missing or unreadable is the default, what is beyond its range is held at its end. */
export const readStudy = (search: URLSearchParams): RingStudy => ({
  maxWindMs: numberIn(search, NAMES.maxWindMs, WIND_LIMITS, DEFAULT_STUDY.maxWindMs),
  radiusKm: numberIn(search, NAMES.radiusKm, RADIUS_LIMITS, DEFAULT_STUDY.radiusKm),
  width: numberIn(search, NAMES.width, WIDTH_LIMITS, DEFAULT_STUDY.width),
  eye: numberIn(search, NAMES.eye, EYE_LIMITS, DEFAULT_STUDY.eye),
  hoursInland: numberIn(search, NAMES.hoursInland, INLAND_LIMITS, DEFAULT_STUDY.hoursInland),
  windIs: oneOf(search.get(NAMES.windIs), ['mean', 'peak'], DEFAULT_STUDY.windIs),
  hemisphere: oneOf(search.get(NAMES.hemisphere), ['north', 'south'], DEFAULT_STUDY.hemisphere),
  points: oneOf(search.get(NAMES.points), POINTS, DEFAULT_STUDY.points),
  hours: oneOf(search.get(NAMES.hours), HOURS, DEFAULT_STUDY.hours),
  heatingMin: search.has(NAMES.heatingMin) ? numberIn(search, NAMES.heatingMin, HEATING_LIMITS, 120) : null,
});

/** Puts a study into an address; the ring always, the rest where it isn't the default. */
export const writeStudy = (study: RingStudy, into: URLSearchParams): void => {
  const always: readonly (keyof RingStudy)[] = ['maxWindMs', 'radiusKm', 'width', 'eye'];
  for (const key of Object.keys(NAMES) as (keyof RingStudy)[]) {
    if (always.includes(key) || study[key] !== DEFAULT_STUDY[key]) into.set(NAMES[key], String(study[key]));
    else into.delete(NAMES[key]);
  }
};
