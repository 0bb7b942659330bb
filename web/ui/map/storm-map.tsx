import { Component, lazy, Suspense, useState, type ReactNode } from 'react';
import { Maximize2, Minimize2, Table2, Map as MapIcon } from 'lucide-react';
import { Link } from 'react-router-dom';
import { classNames } from '../../lib/class-names.ts';
import { useTheme } from '../../lib/theme.ts';
import { useUnits } from '../../lib/units.tsx';
import { Segmented } from '../segmented.tsx';
import type { Bounds } from './geography.ts';
import type { MapCanvasProps, MapPadding } from './map-canvas.tsx';
import type { MapBands, MapSites, MapTrack, MapView } from './map-data.ts';
import { MapLegend, SiteShapes } from './map-legend.tsx';
import { SiteTwin, type TwinColumn } from './site-twin.tsx';
import { hasWebGl } from './webgl.ts';

// The engine is as large as the rest of the client together; nobody waits for it before there is a map to draw.
const MapCanvas = lazy(async () => ({ default: (await import('./map-canvas.tsx')).MapCanvas }));

const VIEW_LABELS: Record<MapView, string> = {
  plain: 'Plain',
  p50: 'Enhanced',
  p90: '90 %',
  p99: '99 %',
  difference: 'Difference',
  draw: 'One draw',
  chance: 'Chance',
};

interface StormMapProps {
  /** What the map shows, in words. */
  label: string;
  /** Said above the table twin and read with the map. */
  summary: string;
  bounds: Bounds;
  track: MapTrack;
  bands: MapBands | null;
  /** Why there are no bands, or that they are on their way. */
  bandsNote?: string | null;
  sites: MapSites | null;
  chosenSite: number | null;
  onChooseSite?: (index: number) => void;
  view: MapView;
  /** A switch of a few views; whoever needs more than that brings controls. */
  views?: readonly MapView[];
  onView?: (view: MapView) => void;
  controls?: ReactNode;
  /** Said on the frame of the picture itself. */
  frameNote?: ReactNode;
  /** The bands are of the view shown before. */
  dimmed?: boolean;
  /** Room the framed area leaves to what floats over the map [px]. */
  padding?: MapPadding;
  chanceMs?: number | undefined;
  twinColumn?: TwinColumn | undefined;
  /** Where the same map fills the page, or leads back. */
  fullSize?: { to: string; isFull: boolean };
  run?: string;
  className?: string;
}

/** Footprint, track and sites, with its legend, its view switch and its table twin. */
export function StormMap(props: StormMapProps) {
  const { label, summary, bounds, track, bands, bandsNote, sites, chosenSite, onChooseSite, view, views } = props;
  const { gust, gustRange, label: unitLabel } = useUnits();
  const [theme] = useTheme();
  const [failure, setFailure] = useState<string | null>(() => (hasWebGl() ? null : 'this browser offers no WebGL'));
  const [asTable, setAsTable] = useState(false);
  const [inView, setInView] = useState<Bounds | null>(null);
  const showTable = asTable || failure !== null;
  const shown = bands?.view ?? view;

  const describeSite = (index: number): string => {
    const low = sites?.p5Ms[index];
    const high = sites?.p95Ms[index];
    const plain = sites?.plainMs[index];
    const name = sites?.ref[index] ?? '';
    if (low !== null && low !== undefined && high !== null && high !== undefined)
      return `${name}: ${gustRange(low, high)} ${unitLabel}`;
    return plain === null || plain === undefined
      ? `${name}: not scored`
      : `${name}: plain ${gust(plain)} ${unitLabel}, no vortex range`;
  };
  const canvas: MapCanvasProps = {
    label: `${label}. ${summary} Arrow keys pan, plus and minus zoom, n and p walk the sites, t shows the table.`,
    bounds,
    track,
    bands,
    dimmed: props.dimmed ?? false,
    ...(props.padding && { padding: props.padding }),
    sites,
    chosenSite,
    onChooseSite,
    describeSite,
    onView: setInView,
    onFail: setFailure,
  };

  return (
    <section
      aria-label={label}
      className={classNames(
        'relative isolate overflow-hidden rounded-3 border border-rule bg-map-sea',
        props.className,
      )}
      onKeyDown={(event) => {
        if (event.key === 't' && !event.ctrlKey && !event.metaKey && !event.altKey && failure === null)
          setAsTable(!asTable);
      }}
    >
      {!showTable && (
        <CanvasBoundary onFail={() => setFailure('the map couldn’t be loaded')}>
          <Suspense fallback={null}>
            <MapCanvas key={theme} {...canvas} />
          </Suspense>
        </CanvasBoundary>
      )}
      {showTable && sites && (
        <SiteTwin
          {...{ sites, track, chosenSite, onChooseSite }}
          view={failure === null ? inView : null}
          shown={props.twinColumn}
        />
      )}
      <p className="sr-only">{summary}</p>
      <div className="pointer-events-none absolute inset-x-3 top-3 z-2 flex items-start gap-2 [&>*]:pointer-events-auto">
        {views && props.onView && (
          <Segmented
            label="Map shows"
            value={view}
            options={views.map((value) => ({ value, label: VIEW_LABELS[value] }))}
            onChange={props.onView}
            className="shadow-2"
          />
        )}
        {props.controls}
        <div className="ml-auto flex gap-2">
          {failure === null && (
            <Tool
              icon={showTable ? MapIcon : Table2}
              label={showTable ? 'Map (t)' : 'Table of what is in view (t)'}
              onClick={() => setAsTable(!asTable)}
            />
          )}
          {props.fullSize && (
            <Link
              to={props.fullSize.to}
              className={TOOL}
              title={props.fullSize.isFull ? 'Back to the overview' : 'Full size'}
              aria-label={props.fullSize.isFull ? 'Back to the overview' : 'Map in full size'}
            >
              {props.fullSize.isFull ? <Minimize2 size={17} aria-hidden /> : <Maximize2 size={17} aria-hidden />}
            </Link>
          )}
        </div>
      </div>
      {failure !== null && (
        <p role="status" className="absolute inset-x-3 bottom-3 z-2 rounded-2 bg-caution-tint px-3 py-2 text-13">
          Shown as a table because {failure}.
        </p>
      )}
      {!showTable && (
        <div className="pointer-events-none absolute inset-x-3 bottom-3 z-2 flex items-end justify-between gap-2 max-rail:flex-col max-rail:items-end [&>*]:pointer-events-auto">
          <div className="flex min-w-0 flex-col items-start gap-2 max-rail:self-stretch">
            {bandsNote && (
              <p role="status" className="rounded-2 border border-rule bg-sheet px-3 py-1.5 text-12 shadow-2">
                {bandsNote}
              </p>
            )}
            {props.frameNote}
            {sites && <SiteShapes held={sites.state.includes('held')} className="max-rail:hidden" />}
          </div>
          <MapLegend
            // The legend is that of the picture, also while another is on its way.
            view={shown}
            levels={bands?.levels ?? []}
            uncertain={shown !== 'plain'}
            run={props.run}
            chanceMs={props.chanceMs}
          />
        </div>
      )}
    </section>
  );
}

const TOOL =
  'grid size-9 place-items-center rounded-2 border border-rule-strong bg-sheet text-ink shadow-2 hover:bg-hover pointer-coarse:size-11';

function Tool({ icon: Icon, label, onClick }: { icon: typeof Table2; label: string; onClick: () => void }) {
  return (
    <button type="button" className={TOOL} aria-label={label} title={label} onClick={onClick}>
      <Icon size={17} strokeWidth={1.75} aria-hidden />
    </button>
  );
}

/** A map that can't be loaded must not take the page with it. */
export class CanvasBoundary extends Component<{ onFail: () => void; children: ReactNode }, { failed: boolean }> {
  override state = { failed: false };
  static getDerivedStateFromError() {
    return { failed: true };
  }
  override componentDidCatch() {
    this.props.onFail();
  }
  override render() {
    return this.state.failed ? null : this.props.children;
  }
}
