import { useCallback, useMemo } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import type { Run, RunScenario } from '#contract/runs.ts';
import { useSettled } from '../../../lib/use-settled.ts';
import type { MapView } from '../../../ui/map/map-data.ts';
import { drawSitesQuery, drawsQuery, pictureQuery } from '../draw-queries.ts';
import { gustsInDraw } from '../draw-sites.ts';
import { readMapView } from '../map-view.ts';
import { pointsQuery } from '../result-queries.ts';
import { noRangeReason } from '../result-words.ts';
import { DrawPanel } from './draw-panel.tsx';
import { FootprintMap } from './footprint-map.tsx';
import { MapControls } from './map-controls.tsx';
import { SiteDrawer } from './site-drawer.tsx';
import { SummaryPanel } from './summary-panel.tsx';

interface MapTabProps {
  run: Run;
  scenario: RunScenario;
  chosenSiteNo: number | null;
  onChooseSite: (siteNo: number | null) => void;
}

/** Whoever steps quickly asks only for the draw they stop at. */
const SETTLE_MS = 250;

/** The footprint in full size: which view, which draw and which gust stand in the address. */
export function MapTab({ run, scenario, chosenSiteNo, onChooseSite }: MapTabProps) {
  const vortices = scenario.result!.gross !== null;
  const at = useMemo(() => ({ runId: run.id, runScenarioId: scenario.id }), [run.id, scenario.id]);
  const [search, setSearch] = useSearchParams();
  const { gustThresholdsMs } = run.options;
  const asked = readMapView(search, { vortices, defaultGustMs: gustThresholdsMs.at(-1)! });
  const { view, gustMs } = asked;
  const change = useCallback(
    (entries: Record<string, string | null>) =>
      setSearch(
        (before) => {
          const after = new URLSearchParams(before);
          for (const [key, value] of Object.entries(entries)) {
            if (value === null) after.delete(key);
            else after.set(key, value);
          }
          return after;
        },
        { replace: true, preventScrollReset: true },
      ),
    [setSearch],
  );
  const isDraw = view === 'draw';
  const points = useQuery(pointsQuery(at));
  const draws = useQuery({ ...drawsQuery(at), enabled: isDraw });
  const draw = asked.draw ?? draws.data?.named?.p50 ?? null;
  const settled = useSettled(draw, SETTLE_MS) ?? draw;
  const picture = useQuery({
    ...pictureQuery(at, pictureOf(view, settled, gustMs)),
    enabled: !isDraw || settled !== null,
  });
  const inDraw = useQuery({ ...drawSitesQuery(at, settled ?? 1), enabled: isDraw && settled !== null });
  const sites = points.data ?? null;
  const drawGusts = useMemo(
    () => (sites && inDraw.data && !inDraw.isPlaceholderData ? gustsInDraw(sites, inDraw.data) : null),
    [sites, inDraw.data, inDraw.isPlaceholderData],
  );
  const isBehind = isDraw && draw !== settled;
  const ranked = draws.data?.draws.find((one) => one.draw === draw) ?? null;
  const chosen = sites && chosenSiteNo !== null ? sites.siteNo.indexOf(chosenSiteNo) : -1;
  const explains = chosenSiteNo !== null && (!isDraw || search.get('why') === 'yes');

  const onView = ({
    view: next,
    draw: nextDraw,
    gustMs: nextGust,
  }: {
    view?: MapView;
    draw?: number;
    gustMs?: number;
  }) =>
    change({
      ...(next && { view: next, why: null }),
      ...(nextDraw !== undefined && { draw: String(nextDraw) }),
      ...(nextGust !== undefined && { gust: String(nextGust) }),
    });

  return (
    <div className="relative grid min-h-0 flex-1 grid-cols-[minmax(0,1fr)_auto] max-wide:flex-none max-wide:grid-cols-1 max-wide:gap-4 wide:-mx-6 wide:-mt-4 wide:-mb-4.5">
      <FootprintMap
        {...{ run, scenario, view, gustMs, sites, drawGusts, onChooseSite }}
        picture={picture.data}
        waits={picture.isFetching || isBehind || (isDraw && draws.isPending)}
        error={draws.error ?? picture.error}
        reason={vortices ? null : `Only plain: ${noRangeReason(run.options.mesovortices)}.`}
        chosenSite={chosen === -1 ? null : chosen}
        hasPanel={!explains}
        controls={
          <MapControls
            {...{ view, vortices, draw, gustMs }}
            draws={draws.data ?? null}
            thresholdsMs={gustThresholdsMs}
            onChange={onView}
          />
        }
        className="h-full min-h-110 max-wide:h-120 max-rail:h-[60vh] max-rail:min-h-80 wide:rounded-none wide:border-0"
      />
      {explains ? (
        <SiteDrawer
          run={run}
          scenario={scenario}
          siteNo={chosenSiteNo}
          onPrevious={undefined}
          onNext={undefined}
          onClose={() => (isDraw ? change({ why: null }) : onChooseSite(null))}
          className="wide:w-150"
        />
      ) : (
        <aside
          aria-label={isDraw ? 'In this draw' : 'Summary'}
          className="flex min-w-0 flex-col gap-3.5 overflow-y-auto rounded-3 border border-rule bg-sheet p-4 shadow-2 wide:absolute wide:top-15 wide:right-3 wide:z-2 wide:max-h-[calc(100%-13rem)] wide:w-90"
        >
          {isDraw && ranked ? (
            <DrawPanel
              {...{ run, scenario, sites }}
              draw={ranked}
              inDraw={inDraw.data ?? null}
              waits={inDraw.isFetching || isBehind}
              error={inDraw.error}
              onRetry={() => void inDraw.refetch()}
              chosen={chosen === -1 ? null : chosen}
              onExplain={() => change({ why: 'yes' })}
            />
          ) : (
            <SummaryPanel run={run} scenario={scenario} />
          )}
          <p className="mt-auto text-12 text-ink-2">
            Not a forecast, a warning or a guide to evacuation or re-entry. For decisions about people, follow the
            national meteorological service and local emergency management.
          </p>
        </aside>
      )}
    </div>
  );
}

const pictureOf = (view: MapView, draw: number | null, gustMs: number) =>
  view === 'draw' ? { view, draw: draw ?? 1 } : view === 'chance' ? { view, gustMs } : { view };
