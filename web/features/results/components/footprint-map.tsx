import { useMemo, type ReactNode } from 'react';
import type { Footprint, Run, RunScenario } from '#contract/runs.ts';
import { useNarrow, useWide } from '../../../lib/use-narrow.ts';
import { useUnits } from '../../../lib/units.tsx';
import { paths } from '../../../paths.ts';
import type { MapSites, MapView } from '../../../ui/map/map-data.ts';
import { StormMap } from '../../../ui/map/storm-map.tsx';
import { chanceWords } from '../draw-sites.ts';
import { mapSummary } from '../result-words.ts';
import { useMapLayers } from '../use-map-layers.ts';

interface FootprintMapProps {
  run: Run;
  scenario: RunScenario;
  view: MapView;
  gustMs: number;
  picture: Footprint | undefined;
  /** Another picture is on its way. */
  waits: boolean;
  error: Error | null;
  /** Said where there is nothing to wait for. */
  reason: string | null;
  sites: MapSites | null;
  /** Gust of each site in the draw shown. */
  drawGusts: readonly (number | null)[] | null;
  chosenSite: number | null;
  onChooseSite: (siteNo: number) => void;
  controls: ReactNode;
  /** Whether a panel floats over the right edge. */
  hasPanel: boolean;
  className?: string;
}

const WAITING: Record<MapView, string> = {
  plain: 'Drawing the footprint …',
  p50: 'Drawing the footprint …',
  p90: 'Drawing the footprint …',
  p99: 'Working out 99 % over the draws …',
  difference: 'Drawing the difference …',
  draw: 'Working out this draw …',
  chance: 'Counting the draws above this gust …',
};

/** Room for the panel, the controls and the legend, so that none of them covers the sites. */
const WIDE = { top: 64, right: 400, bottom: 110, left: 24 };
const WITHOUT_PANEL = { ...WIDE, right: 24 };
const BESIDE = { top: 104, right: 16, bottom: 124, left: 16 };
const NARROW = { top: 108, right: 12, bottom: 160, left: 12 };

/** The footprint in full size, whichever view of it is chosen. */
export function FootprintMap(props: FootprintMapProps) {
  const { run, scenario, view, gustMs, picture, waits, error, reason, sites, drawGusts, chosenSite, onChooseSite } =
    props;
  const { gust, label } = useUnits();
  const narrow = useNarrow();
  const wide = useWide();
  const { bands, track, bounds } = useMapLayers(scenario, sites, picture);
  const summary = useMemo(() => mapSummary(scenario, sites, gust, label), [scenario, sites, gust, label]);
  const note = error
    ? `This picture wasn’t read: ${error.message}`
    : (reason ??
      (waits
        ? WAITING[view]
        : bands && bands.features.length === 0
          ? view === 'chance'
            ? `Less than 5 % everywhere: hardly any draw reaches ${gust(gustMs)} ${label}.`
            : `No footprint: nowhere above ${gust(20)} ${label} near these sites.`
          : null));
  const shown = picture?.view ?? view;
  return (
    <StormMap
      label={`Footprint of ${scenario.name}`}
      summary={summary}
      bounds={bounds}
      padding={narrow ? NARROW : !wide ? BESIDE : props.hasPanel ? WIDE : WITHOUT_PANEL}
      track={track}
      bands={bands}
      bandsNote={note}
      dimmed={waits || error !== null}
      sites={sites}
      chosenSite={chosenSite}
      onChooseSite={(index) => sites && onChooseSite(sites.siteNo[index]!)}
      view={view}
      controls={props.controls}
      frameNote={shown === 'draw' && <DrawNote />}
      chanceMs={picture?.gustMs ?? gustMs}
      twinColumn={
        view === 'draw' && drawGusts
          ? {
              title: `This draw, ${label}`,
              text: (index) => (drawGusts[index] == null ? 'not scored' : gust(drawGusts[index])),
            }
          : view === 'chance' && sites
            ? {
                title: `Chance of ${gust(gustMs)} ${label}`,
                text: (index) => chanceWords(sites, index, gustMs),
              }
            : undefined
      }
      fullSize={{ to: paths.run(run.id, { scenario: scenario.id }), isFull: true }}
      run={run.number}
      className={props.className}
    />
  );
}

function DrawNote() {
  return (
    <p className="max-w-104 rounded-2 border border-l-3 border-rule border-l-event bg-sheet px-3.5 py-2 text-13 leading-snug shadow-2 max-rail:px-2.5 max-rail:py-1.5 max-rail:text-12">
      <b>One of 264 draws.</b> The streaks show how uneven the wind can be, not where it will be. Other draws differ;
      none is likelier for one street.
    </p>
  );
}
