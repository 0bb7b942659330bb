import { inlandHours, inlandSpells, type InlandSpell, type LandIndex } from '../geo/land.ts';
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

/**
 * Times the centre spends over land, by the hours given at the fixes, else by the land polygons.
 *
 * @param fixes Fixes in order of time.
 * @param land  Land polygons, null when there are none to ask.
 * @returns Spells in order of time, as hoursInlandOf has them: one that ends within a leg counts as ended where it began.
 *          One that began before the track enters at its first fix.
 * @source Arrangement only.
 */
export function inlandSpellsOf(fixes: readonly TrackFix[], land: LandIndex | null): InlandSpell[] {
  const known = land ? inlandSpells(land, fixes) : [];
  if (fixes.every(({ hoursInland }) => hoursInland === null)) return known;
  const spells: { enterS: number; leaveS: number }[] = [];
  fixes.forEach((fix, i) => {
    const hours = fix.hoursInland ?? inlandHours(known, fix.timeS);
    if (!(hours > 0)) return;
    const before = spells[spells.length - 1];
    const enterS = fix.timeS - 3600 * hours;
    const isSame = before !== undefined && before.leaveS === fixes[i - 1]!.timeS && enterS <= before.leaveS;
    if (isSame) before.leaveS = fix.timeS;
    else spells.push({ enterS: Math.max(enterS, fixes[0]!.timeS), leaveS: fix.timeS });
  });
  return spells;
}
