import type { RunScenario, ScenarioResult } from '#contract/runs.ts';
import { count, range } from '../../lib/numbers.ts';
import { placeByTrack } from '../../ui/map/geography.ts';
import type { MapSites } from '../../ui/map/map-data.ts';

/** Why there is no vortex range, in words. */
export const noRangeReason = (mesovortices: boolean): string =>
  mesovortices ? 'no vortex range: vortices never act on this track' : 'no vortex range: layer off';

type Above = ScenarioResult['above'][number];

/** "388–541 sites", plain alone without the layer. */
export const sitesAboveText = (above: Above, vortices: boolean): string =>
  vortices ? range(count(above.p5), count(above.p95)) : count(above.plain);

/** One sentence about the map: how many sites above the higher threshold, and the nearest of them to the track. */
export const mapSummary = (
  scenario: RunScenario,
  sites: MapSites | null,
  gust: (speedMs: number) => string,
  unit: string,
): string => {
  const { result } = scenario;
  const above = result?.above.at(-1);
  if (!result || !above) return `Track of ${scenario.name}.`;
  const vortices = result.gross !== null;
  const numbers = vortices
    ? `${count(above.p50)} (${range(count(above.p5), count(above.p95))}) sites`
    : `${count(above.plain)} sites`;
  const nearest = sites ? nearestAbove(scenario, sites, above.gustMs) : null;
  return `${numbers} above ${gust(above.gustMs)} ${unit}${
    nearest ? `, nearest ${Math.round(nearest.distanceKm)} km ${nearest.side} of the track` : ''
  }.`;
};

const nearestAbove = (scenario: RunScenario, sites: MapSites, gustMs: number) => {
  let nearest: ReturnType<typeof placeByTrack> = null;
  for (let index = 0; index < sites.siteNo.length; index += 1) {
    const speed = sites.p95Ms[index] ?? sites.plainMs[index];
    if (speed === null || speed === undefined || speed < gustMs) continue;
    const place = placeByTrack(scenario.path, [sites.longitude[index]!, sites.latitude[index]!]);
    if (place && (nearest === null || place.distanceKm < nearest.distanceKm)) nearest = place;
  }
  return nearest;
};
