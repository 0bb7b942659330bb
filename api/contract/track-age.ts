import { z } from 'zod';
import { Instant } from './common.ts';

const HOUR_MS = 3_600_000;
const DAYS_FROM_H = 72;

/** An advisory older than the service's limit: when it is from, and how old it is. */
export const Stale = z.object({ asOf: Instant, ageHours: z.number() });
export type Stale = z.infer<typeof Stale>;

/** Age of an advisory at a moment [h]; one from the future has none. */
export const trackAgeHours = (asOf: string, at: Date): number =>
  Math.max(0, (at.getTime() - Date.parse(asOf)) / HOUR_MS);

/** Stale when the advisory was older than the limit at that moment; a track that is no advisory never is. */
export const staleness = (asOf: string | null, at: Date, afterHours: number): Stale | null => {
  if (asOf === null) return null;
  const ageHours = trackAgeHours(asOf, at);
  return ageHours > afterHours ? { asOf, ageHours } : null;
};

/** "8 h" or, from three days on, "4 days": whole ones, never rounded up. */
export const ageWords = (hours: number): string =>
  hours < DAYS_FROM_H ? `${Math.floor(hours)} h` : `${Math.floor(hours / 24)} days`;

/** "as of …, 8 h old when run, stale": what a run says of an advisory, whenever it is read. */
export const ageWhenRunWords = (asOf: string, acceptedAt: Date, afterHours: number): string => {
  const age = `as of ${asOf}, ${ageWords(trackAgeHours(asOf, acceptedAt))} old when run`;
  return staleness(asOf, acceptedAt, afterHours) === null ? age : `${age}, stale`;
};
