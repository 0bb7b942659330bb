import { lazy, Suspense, useState, type ReactNode } from 'react';
import { classNames } from '../../../lib/class-names.ts';
import { useTheme } from '../../../lib/theme.ts';
import { CanvasBoundary } from '../../../ui/map/storm-map.tsx';
import type { MapSites } from '../../../ui/map/map-data.ts';
import { hasWebGl } from '../../../ui/map/webgl.ts';
import { boundsOfSites } from '../map-sites.ts';

const MapCanvas = lazy(async () => ({ default: (await import('../../../ui/map/map-canvas.tsx')).MapCanvas }));

interface PlaceMapProps {
  /** What the map shows, in words. */
  label: string;
  sites: MapSites;
  describe: (index: number) => string;
  chosen?: number | null;
  onChoose?: (index: number) => void;
  legend: ReactNode;
  className?: string;
}

/** Places without any wind; a table beside it always holds the same rows. */
export function PlaceMap({ label, sites, describe, chosen = null, onChoose, legend, className }: PlaceMapProps) {
  const [theme] = useTheme();
  const [failure, setFailure] = useState<string | null>(() => (hasWebGl() ? null : 'this browser offers no WebGL'));
  const bounds = boundsOfSites(sites);
  if (!bounds) return null;
  return (
    <section aria-label={label} className={classNames('relative isolate overflow-hidden bg-map-sea', className)}>
      {failure === null ? (
        <CanvasBoundary onFail={() => setFailure('the map couldn’t be loaded')}>
          <Suspense fallback={null}>
            <MapCanvas
              key={theme}
              label={`${label}. Arrow keys pan, plus and minus zoom.`}
              bounds={bounds}
              sites={sites}
              chosenSite={chosen}
              onChooseSite={onChoose}
              describeSite={describe}
              onFail={setFailure}
            />
          </Suspense>
          <div className="pointer-events-none absolute bottom-2.5 left-2.5 z-2">{legend}</div>
        </CanvasBoundary>
      ) : (
        <p role="status" className="m-3 rounded-2 bg-caution-tint px-3 py-2 text-13">
          No map, because {failure}. The table holds the same rows.
        </p>
      )}
    </section>
  );
}
