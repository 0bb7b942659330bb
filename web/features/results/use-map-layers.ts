import { useMemo } from 'react';
import type { Footprint, RunScenario } from '#contract/runs.ts';
import type { MapBands, MapSites } from '../../ui/map/map-data.ts';
import { framing } from './result-framing.ts';

/** What a map of a track's result draws, and the frame it opens with. */
export function useMapLayers(scenario: RunScenario, sites: MapSites | null, picture: Footprint | undefined) {
  const bands = useMemo<MapBands | null>(
    () =>
      picture
        ? {
            view: picture.view,
            levels: picture.levels,
            features: picture.bands.features,
            bbox: picture.bbox,
            computed: picture.computed?.bounds ?? null,
          }
        : null,
    [picture],
  );
  const track = useMemo(() => ({ path: scenario.path, times: scenario.pathTimes }), [scenario]);
  // The frame is set by the sites; another view of the same storm doesn't move it.
  const around = sites && sites.siteNo.length > 0 ? null : (picture?.bbox ?? null);
  const bounds = useMemo(() => framing(scenario, sites, around), [scenario, sites, around]);
  return { bands, track, bounds };
}
