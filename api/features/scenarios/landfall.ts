import type { TrackResolution } from '#contract/scenarios.ts';
import type { Variant } from '#contract/variants.ts';
import { inlandSpells, type LandIndex } from '#engine/geo/land.ts';
import { legAt, positionAt } from '#engine/track/position.ts';

/** Where the centre first crosses from sea onto land, by the land polygons; null when it never does. */
export const landfallOf = ({ fixes, path }: TrackResolution, land: LandIndex): Variant['landfall'] => {
  const timed = fixes.map((fix) => ({ ...fix, timeS: Date.parse(fix.time) / 1000 }));
  const first = inlandSpells(land, timed).find(({ enterS }) => enterS > timed[0]!.timeS);
  if (!first) return null;
  const { latitude, longitude } = positionAt(timed, first.enterS);
  const a = timed[legAt(timed, first.enterS)]!;
  const b = timed[legAt(timed, first.enterS) + 1]!;
  const share = (first.enterS - a.timeS) / (b.timeS - a.timeS);
  const nearest = path.reduce((best, place) =>
    Math.abs(place[1] - latitude) + Math.abs(cycle(place[0] - longitude)) <
    Math.abs(best[1] - latitude) + Math.abs(cycle(best[0] - longitude))
      ? place
      : best,
  );
  return {
    time: new Date(Math.round(first.enterS) * 1000).toISOString(),
    latitude,
    longitude: longitude + 360 * Math.round((nearest[0] - longitude) / 360),
    maxWindMs: a.maxWindMs + share * (b.maxWindMs - a.maxWindMs),
  };
};

/** The same difference of longitude within −180..180. */
const cycle = (difference: number) => difference - 360 * Math.round(difference / 360);
