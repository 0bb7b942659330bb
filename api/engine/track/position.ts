import { betweenPlaces, type Place } from '../geo/geodesy.ts';

/** A place of the centre at a time [s] on any clock. */
export type TimedPlace = Place & { readonly timeS: number };

/**
 * Number of the leg that holds a time; a time equal to a fix belongs to the leg that starts there.
 *
 * @param fixes At least two places at strictly increasing times [s].
 * @param timeS Time [s]; outside the track the first or last leg.
 * @returns Index of the fix at the start of the leg.
 * @source Convention of this chain.
 */
export function legAt(fixes: readonly TimedPlace[], timeS: number): number {
  let low = 0;
  let high = fixes.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (fixes[middle]!.timeS <= timeS) low = middle;
    else high = middle;
  }
  return low;
}

/**
 * Place of the centre at a time, on the great circle between the fixes.
 *
 * @param fixes At least two places at strictly increasing times [s].
 * @param timeS Time [s], between the first and the last fix.
 * @returns The place [deg].
 * @source Spherical linear interpolation at constant speed within a leg.
 */
export function positionAt(fixes: readonly TimedPlace[], timeS: number): Place {
  const i = legAt(fixes, timeS);
  const a = fixes[i]!;
  const b = fixes[i + 1]!;
  return betweenPlaces(a, b, (timeS - a.timeS) / (b.timeS - a.timeS));
}
