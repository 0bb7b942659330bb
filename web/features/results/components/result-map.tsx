import { useMemo, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import type { Run, RunScenario } from '#contract/runs.ts';
import { useUnits } from '../../../lib/units.tsx';
import type { MapView } from '../../../ui/map/map-data.ts';
import { StormMap } from '../../../ui/map/storm-map.tsx';
import { pictureQuery } from '../draw-queries.ts';
import { pointsQuery } from '../result-queries.ts';
import { mapSummary } from '../result-words.ts';
import { useMapLayers } from '../use-map-layers.ts';

interface ResultMapProps {
  run: Run;
  scenario: RunScenario;
  chosenSiteNo: number | null;
  onChooseSite: (siteNo: number) => void;
  fullSize: { to: string; isFull: boolean };
  className?: string;
}

export function ResultMap({ run, scenario, chosenSiteNo, onChooseSite, fullSize, className }: ResultMapProps) {
  const { gust, label } = useUnits();
  const result = scenario.result!;
  const vortices = result.gross !== null;
  const views: readonly MapView[] = vortices ? ['plain', 'p50', 'p90', 'difference'] : ['plain'];
  const [wished, setWished] = useState<MapView>('p50');
  const view = views.includes(wished) ? wished : 'plain';
  const at = { runId: run.id, runScenarioId: scenario.id };
  const footprint = useQuery(pictureQuery(at, { view }));
  const points = useQuery(pointsQuery(at));
  const sites = points.data ?? null;

  const { bands, track, bounds } = useMapLayers(scenario, sites, footprint.data);
  const chosen = sites && chosenSiteNo !== null ? sites.siteNo.indexOf(chosenSiteNo) : -1;
  const summary = useMemo(() => mapSummary(scenario, sites, gust, label), [scenario, sites, gust, label]);

  return (
    <StormMap
      label={`Footprint of ${scenario.name}`}
      summary={summary}
      bounds={bounds}
      track={track}
      bands={bands}
      dimmed={footprint.isPlaceholderData}
      bandsNote={
        footprint.isPending || footprint.isPlaceholderData
          ? 'Drawing the footprint …'
          : footprint.isError
            ? `The footprint wasn’t read: ${footprint.error.message}`
            : bands && bands.features.length === 0
              ? `No footprint: nowhere above ${gust(20)} ${label} near these sites.`
              : null
      }
      sites={sites}
      chosenSite={chosen === -1 ? null : chosen}
      onChooseSite={(index) => sites && onChooseSite(sites.siteNo[index]!)}
      view={view}
      views={views}
      onView={setWished}
      fullSize={fullSize}
      run={run.number}
      className={className}
    />
  );
}
