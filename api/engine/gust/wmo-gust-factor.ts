import { DomainError } from '../errors.ts';

/** Exposure classes: roughly open country inland; wind off the land at a coast; off the sea; more than 20 km out at sea. */
export type WmoClass = 'in-land' | 'off-land' | 'off-sea' | 'at-sea';
/** Averaging times of the peak [s]. */
export type WmoAveraging = 3 | 60 | 120 | 180 | 600;
/** Periods in which the peak is looked for, and over which the mean is taken [s]. */
export type WmoReference = 60 | 600 | 3600;

/** Peak of 3, 60, 120, 180 and 600 s over the mean of the hour and of 10 min; 3-s peak over the mean of a minute. */
const TABLE: Record<WmoClass, { hour: readonly number[]; tenMinutes: readonly number[]; minute: readonly number[] }> = {
  'in-land': { hour: [1.75, 1.28, 1.19, 1.15, 1.08], tenMinutes: [1.66, 1.21, 1.12, 1.09, 1], minute: [1.49] },
  'off-land': { hour: [1.6, 1.22, 1.15, 1.12, 1.06], tenMinutes: [1.52, 1.16, 1.09, 1.06, 1], minute: [1.36] },
  'off-sea': { hour: [1.45, 1.17, 1.11, 1.09, 1.05], tenMinutes: [1.38, 1.11, 1.05, 1.03, 1], minute: [1.23] },
  'at-sea': { hour: [1.3, 1.11, 1.07, 1.06, 1.03], tenMinutes: [1.23, 1.05, 1.02, 1, 1], minute: [1.11] },
};
const PLACES: Record<WmoAveraging, number> = { 3: 0, 60: 1, 120: 2, 180: 3, 600: 4 };
const PERIODS = { 60: 'minute', 600: 'tenMinutes', 3600: 'hour' } as const;

/**
 * Highest short mean within a period over the mean of that period, by exposure. The mean is that of a period taken at
 * random, so factors neither chain nor apply to a highest mean: the 3-s over the 1-min factor is not the 3-s over the 10-min
 * factor divided by the 1-min over the 10-min factor, and does not belong on a highest 1-min wind.
 *
 * @param exposure  Class of exposure.
 * @param averaging Averaging time of the peak [s].
 * @param reference Period in which the peak is looked for and over which the mean is taken [s].
 * @returns Gust factor [1].
 * @throws {DomainError} when the table has no such factor: within a minute there is the one of 3 s only.
 * @source Harper, Kepert & Ginger (2010), WMO/TD-1555, table 1.1; from memory.
 */
export function wmoGustFactor(exposure: WmoClass, averaging: WmoAveraging, reference: WmoReference): number {
  const factor = TABLE[exposure][PERIODS[reference]][PLACES[averaging]];
  if (factor === undefined) throw new DomainError('averaging time', averaging, `3 s within ${reference} s`);
  return factor;
}
