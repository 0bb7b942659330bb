import { lazy, Suspense, useMemo, useState } from 'react';
import type { TrackResolution } from '#contract/scenarios.ts';
import { clock, shortDay } from '../../../lib/dates.ts';
import { useTheme } from '../../../lib/theme.ts';
import { boundsOf, longitudeNear, padBounds, type Bounds, type LonLat } from '../../../ui/map/geography.ts';
import type { MapFix } from '../../../ui/map/map-features.ts';
import { CanvasBoundary } from '../../../ui/map/storm-map.tsx';
import { hasWebGl } from '../../../ui/map/webgl.ts';
import type { DraftFix } from '../track-draft.ts';

const MapCanvas = lazy(async () => ({ default: (await import('../../../ui/map/map-canvas.tsx')).MapCanvas }));

interface TrackMapProps {
  fixes: readonly DraftFix[];
  resolution: TrackResolution | null;
  chosen: number;
  onChoose: (fix: number) => void;
  /** Left out when the track can't be changed. */
  onMove: ((fix: number, to: LonLat) => void) | undefined;
}

const OPEN_OCEAN: Bounds = [-100, 5, -50, 40];

/** Longitudes that run on past ±180 from fix to fix. */
const placed = (fixes: readonly DraftFix[]): (MapFix & { index: number })[] => {
  let before: number | null = null;
  return fixes.flatMap(({ time, latitude, longitude }, index) => {
    if (latitude === null || longitude === null) return [];
    before = longitudeNear(longitude, before ?? longitude);
    const label = time === null ? '' : `${shortDay(time)} ${clock(time)}`;
    return [{ index, longitude: before, latitude, label }];
  });
};

/** The track as it stands, its fixes to choose or drag, and the radius of maximum wind at the chosen one. */
export function TrackMap({ fixes, resolution, chosen, onChoose, onMove }: TrackMapProps) {
  const [theme] = useTheme();
  const [failure, setFailure] = useState<string | null>(() => (hasWebGl() ? null : 'this browser offers no WebGL'));
  const points = useMemo(() => placed(fixes), [fixes]);
  const line = useMemo<LonLat[]>(
    () =>
      resolution && resolution.path.length > 1
        ? resolution.path
        : points.map((point) => [point.longitude, point.latitude]),
    [resolution, points],
  );
  const track = useMemo(() => ({ path: line, times: [] }), [line]);
  const around = boundsOf(line.length > 0 ? line : points.map((point) => [point.longitude, point.latitude]));
  // The view follows the track only when it starts or grows, not with every move of a fix.
  const [firstView, setFirstView] = useState<{ bounds: Bounds; fixes: number } | null>(null);
  if (around && (firstView === null || firstView.fixes !== fixes.length))
    setFirstView({ bounds: padBounds(around, 0.12, 1), fixes: fixes.length });
  const shownChosen = points.findIndex((point) => point.index === chosen);

  return (
    <section
      aria-label="Map of the track"
      className="relative isolate h-full min-h-75 overflow-hidden rounded-3 border border-rule bg-map-sea"
    >
      {failure === null ? (
        <CanvasBoundary onFail={() => setFailure('the map couldn’t be loaded')}>
          <Suspense fallback={null}>
            <MapCanvas
              key={theme}
              label="Map of the track. Arrow keys pan, plus and minus zoom; the table beside it moves the fixes."
              bounds={firstView?.bounds ?? OPEN_OCEAN}
              track={track}
              fixes={points}
              chosenFix={shownChosen === -1 ? null : shownChosen}
              onChooseFix={(index) => onChoose(points[index]!.index)}
              onMoveFix={onMove && ((index, to) => onMove(points[index]!.index, to))}
              ringM={resolution?.fixes[chosen]?.radiusOfMaxWindM ?? null}
              onFail={setFailure}
            />
          </Suspense>
        </CanvasBoundary>
      ) : (
        <p className="grid h-full place-items-center px-6 text-center text-13 text-ink-2">
          The map isn’t shown because {failure}. The table holds the whole track.
        </p>
      )}
      {failure === null && (
        <ul className="pointer-events-none absolute bottom-3 left-3 z-2 flex flex-wrap gap-x-3.5 gap-y-1 rounded-2 border border-rule bg-sheet px-3 py-1.5 text-12 shadow-2">
          <li className="flex items-center gap-1.5">
            <span className="w-4 border-t-2 border-ink" /> This track
          </li>
          <li className="flex items-center gap-1.5">
            <span className="size-3 rounded-pill border-[1.5px] border-dashed border-caution" /> Radius at the chosen
            fix
          </li>
          {onMove && <li className="text-ink-2 max-rail:hidden">Drag a fix to move it</li>}
        </ul>
      )}
    </section>
  );
}
