import { lazy, Suspense, useMemo, useState } from 'react';
import type { VariantsReply } from '#contract/variants.ts';
import { counted } from '../../../lib/numbers.ts';
import { useTheme } from '../../../lib/theme.ts';
import { boundsOf, padBounds, type Bounds } from '../../../ui/map/geography.ts';
import { CanvasBoundary } from '../../../ui/map/storm-map.tsx';
import { hasWebGl } from '../../../ui/map/webgl.ts';

const MapCanvas = lazy(async () => ({ default: (await import('../../../ui/map/map-canvas.tsx')).MapCanvas }));

const OPEN_OCEAN: Bounds = [-100, 5, -50, 40];

/** The track as saved and its variants as thin lines beside it. */
export function VariantsMap({ reply }: { reply: VariantsReply }) {
  const [theme] = useTheme();
  const [failure, setFailure] = useState<string | null>(() => (hasWebGl() ? null : 'this browser offers no WebGL'));
  const { base, variants } = reply;
  const track = useMemo(() => ({ path: base.path, times: [] }), [base.path]);
  const paths = useMemo(() => variants.map(({ path }) => path), [variants]);
  // A new way of changing the track may leave the view; the map starts again where everything is in it.
  const around = boundsOf([base.path, ...paths].flat());
  const bounds = around ? padBounds(around, 0.1, 0.7) : OPEN_OCEAN;
  const label = `Map of ${base.name} and ${counted(variants.length, 'variant')} of it`;
  return (
    <section
      aria-label={label}
      className="relative isolate h-105 overflow-hidden rounded-3 border border-rule bg-map-sea max-rail:h-75"
    >
      {failure === null ? (
        <CanvasBoundary onFail={() => setFailure('the map couldn’t be loaded')}>
          <Suspense fallback={null}>
            <MapCanvas
              key={`${theme} ${bounds.map((degrees) => degrees.toFixed(0)).join(' ')}`}
              label={`${label}. Arrow keys pan, plus and minus zoom; the table of landfalls says the same in numbers.`}
              bounds={bounds}
              track={track}
              variants={paths}
              onFail={setFailure}
            />
          </Suspense>
        </CanvasBoundary>
      ) : (
        <p className="grid h-full place-items-center px-6 text-center text-13 text-ink-2">
          The map isn’t shown because {failure}. The table of landfalls says where the variants go.
        </p>
      )}
      {failure === null && (
        <ul className="pointer-events-none absolute bottom-3 left-3 z-2 flex flex-wrap gap-x-3.5 gap-y-1 rounded-2 border border-rule bg-sheet px-3 py-1.5 text-12 shadow-2">
          <li className="flex items-center gap-1.5">
            <span className="w-4 border-t-2 border-ink" /> As saved
          </li>
          <li className="flex items-center gap-1.5">
            <span className="w-4 border-t-[1.5px] border-dashed border-ink" /> {counted(variants.length, 'variant')}
          </li>
        </ul>
      )}
    </section>
  );
}
