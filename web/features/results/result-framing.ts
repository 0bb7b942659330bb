import type { RunScenario } from '#contract/runs.ts';
import { boundsOf, longitudeNear, padBounds, type Bounds, type LonLat } from '../../ui/map/geography.ts';
import type { MapSites } from '../../ui/map/map-data.ts';

const WORLD: Bounds = [-100, 0, -40, 45];

/** Where the sites are, else where the wind is, else the track. */
export const framing = (scenario: RunScenario, sites: MapSites | null, bbox: Bounds | null): Bounds => {
  const reference = scenario.path[Math.floor(scenario.path.length / 2)]?.[0] ?? 0;
  const points: LonLat[] = sites
    ? sites.longitude.map((longitude, index) => [longitudeNear(longitude, reference), sites.latitude[index]!])
    : [];
  const around = boundsOf(points);
  if (around) return padBounds(around, 0.12, 0.35);
  return bbox ?? boundsOf(scenario.path) ?? WORLD;
};
