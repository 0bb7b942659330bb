import { inlandHours, inlandSpells, type LandIndex } from '../geo/land.ts';
import type { TrackFix } from './fixes.ts';
import { legAt } from './position.ts';

/** Hours since the centre last crossed from sea onto land, as a function of time [s]. */
export type HoursInland = (timeS: number) => number;

/**
 * Hours inland along a track: from the values given at its fixes, else from the land polygons, else none.
 *
 * @param fixes Fixes in order of time.
 * @param land  Land polygons, null when there are none to ask.
 * @returns A function of time, continuous except where the centre leaves the land.
 * @source Between given values: the clock runs back from the end of a leg that ends over land, and fades linearly in one
 *         that ends over water.
 */
export function hoursInlandOf(fixes: readonly TrackFix[], land: LandIndex | null): HoursInland {
  const spells = land ? inlandSpells(land, fixes) : [];
  if (fixes.every(({ hoursInland }) => hoursInland === null)) return (timeS) => inlandHours(spells, timeS);
  const hours = fixes.map((fix) => fix.hoursInland ?? inlandHours(spells, fix.timeS));
  return (timeS) => {
    const i = legAt(fixes, timeS);
    const from = fixes[i]!.timeS;
    const to = fixes[i + 1]!.timeS;
    const end = hours[i + 1]!;
    if (end > 0) return Math.max(0, end - (to - timeS) / 3600);
    return hours[i]! * (1 - (timeS - from) / (to - from));
  };
}
