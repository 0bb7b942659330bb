import { seededRandom } from '#engine/numerics/seeded-random.ts';

export const BOOTSTRAP = { seed: 20_261_201, resamples: 4000 };

/** Fewer observations than this get no interval: resampling them says nothing. */
export const LEAST_FOR_INTERVAL = 3;

/**
 * Draws of a two-stage bootstrap: storms with replacement, then within each drawn storm its observations with replacement.
 *
 * The same sizes give the same draws, so that two settings are compared on the same resamples.
 */
export const resamplesOf = (sizes: readonly number[]): { group: number; members: number[] }[][] => {
  const { uniform } = seededRandom(BOOTSTRAP.seed);
  const below = (count: number) => Math.floor(uniform() * count);
  return Array.from({ length: BOOTSTRAP.resamples }, () =>
    sizes.map(() => {
      const group = below(sizes.length);
      return { group, members: Array.from({ length: sizes[group]! }, () => below(sizes[group]!)) };
    }),
  );
};

/** The range that holds 95 % of the values; values that are no number are left out. */
export const centralRange = (values: readonly number[]): { low: number; high: number } => {
  const sorted = values.filter((value) => !Number.isNaN(value)).sort((a, b) => a - b);
  const at = (share: number) => sorted[Math.round(share * (sorted.length - 1))]!;
  return { low: at(0.025), high: at(0.975) };
};
