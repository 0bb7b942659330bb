import { useId, useMemo, type KeyboardEvent, type PointerEvent } from 'react';
import type { StabilityMap } from '#contract/rings.ts';
import { decimal } from '../../../lib/numbers.ts';
import { percentOf } from '../../../ui/charts/axis.ts';
import { ChartFrame } from '../../../ui/charts/chart-frame.tsx';
import { EYE_LIMITS, hold, WIDTH_LIMITS } from '../ring-study.ts';
import { stabilityShapes } from '../stability-shapes.ts';

interface StabilityPictureProps {
  map: StabilityMap;
  width: number;
  eye: number;
  onPick: (ring: { width: number; eye: number }) => void;
}

const SHADES = ['--vort-1', '--vort-2', '--vort-3', '--vort-4', '--vort-4', '--vort-5', '--vort-5', '--vort-6'];
/** Lightened, so that names can be read on them. */
const OPACITY = [1, 0.75, 0.7, 0.65, 0.8, 0.75, 0.9, 0.85];
const X_TICKS = [0.45, 0.35, 0.25, 0.15];
const Y_TICKS = [0, 0.2, 0.4, 0.6];
const BIG = 10;

const nearest = (values: readonly number[], wanted: number): number =>
  values.reduce(
    (best, value, index) => (Math.abs(value - wanted) < Math.abs(values[best]! - wanted) ? index : best),
    0,
  );
const round = (value: number) => Math.round(value * 100) / 100;

/** Where rings break up, and into how many: width from thick to thin, eye ratio upwards; click or arrows choose a ring. */
export function StabilityPicture({ map, width, eye, onPick }: StabilityPictureProps) {
  const readoutId = useId();
  const shapes = useMemo(() => stabilityShapes(map), [map]);
  const { columns, rows } = shapes;
  const share = (value: number, { least, most }: { least: number; most: number }) => (value - least) / (most - least);
  const x = 1 - share(width, WIDTH_LIMITS);
  const y = 1 - share(eye, EYE_LIMITS);
  const [row, column] = [nearest(map.eyeRatio, eye), nearest(map.widthFraction, width)];
  const m = map.wavenumber[row]?.[column] ?? null;
  const growth = map.growth[row]?.[column] ?? 0;
  const readout = `Width ${decimal(width, 2)}, eye ratio ${decimal(eye, 2)}: ${
    m === null ? 'stable, no vortices' : `${m} vortices, growth ${decimal(growth, 2)} of the average vorticity`
  }`;
  const pick = (nextWidth: number, nextEye: number) =>
    onPick({ width: round(hold(nextWidth, WIDTH_LIMITS)), eye: round(hold(nextEye, EYE_LIMITS)) });
  const onKeyDown = (event: KeyboardEvent) => {
    const size = event.shiftKey ? BIG : 1;
    // To the right rings are thinner.
    const steps: Record<string, readonly [number, number]> = {
      ArrowLeft: [WIDTH_LIMITS.step, 0],
      ArrowRight: [-WIDTH_LIMITS.step, 0],
      ArrowUp: [0, EYE_LIMITS.step],
      ArrowDown: [0, -EYE_LIMITS.step],
    };
    const step = steps[event.key];
    if (!step || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    pick(width + size * step[0], eye + size * step[1]);
  };
  const follow = (event: PointerEvent) => {
    const box = event.currentTarget.getBoundingClientRect();
    const across = (event.clientX - box.left) / Math.max(1, box.width);
    const down = (event.clientY - box.top) / Math.max(1, box.height);
    pick(
      WIDTH_LIMITS.most - across * (WIDTH_LIMITS.most - WIDTH_LIMITS.least),
      EYE_LIMITS.most - down * (EYE_LIMITS.most - EYE_LIMITS.least),
    );
  };
  return (
    <div className="rounded-3 border border-rule bg-sheet px-4 pt-3 pb-3 shadow-1">
      <ChartFrame
        title="Where rings break up"
        aside="darker grows faster"
        summary={readout}
        interactive
        fileName="ring-stability-map"
        table={{
          columns: ['Ring width', 'Eye ratio', 'Vortices', 'Growth, of average vorticity', 'Amplitude'],
          rows: map.eyeRatio.flatMap((eyeRatio, j) =>
            map.widthFraction.map((widthFraction, i) => [
              decimal(widthFraction, 2),
              decimal(eyeRatio, 2),
              map.wavenumber[j]![i] === null ? 'stable' : String(map.wavenumber[j]![i]),
              decimal(map.growth[j]![i]!, 4),
              decimal(map.amplitude[j]![i]!, 4),
            ]),
          ),
        }}
      >
        <div className="mt-2 grid grid-cols-[2.25rem_minmax(0,1fr)] text-12 text-ink-2">
          <div className="relative h-58" aria-hidden>
            {Y_TICKS.map((tick) => (
              <span
                key={tick}
                className="absolute right-2 translate-y-1/2"
                style={{ bottom: percentOf(share(tick, EYE_LIMITS)) }}
              >
                {decimal(tick, 1)}
              </span>
            ))}
          </div>
          <div
            role="application"
            aria-roledescription="stability map"
            aria-label="Ring on the stability map. Left and right change the ring width, up and down the eye ratio, with Shift ten times as far."
            aria-describedby={readoutId}
            tabIndex={0}
            onKeyDown={onKeyDown}
            onPointerDown={(event) => {
              event.currentTarget.setPointerCapture(event.pointerId);
              follow(event);
            }}
            onPointerMove={(event) => {
              if (event.currentTarget.hasPointerCapture(event.pointerId)) follow(event);
            }}
            className="relative h-58 cursor-crosshair touch-pan-y bg-[#F7F5F0] text-[#14262E]"
          >
            <svg
              aria-hidden
              className="absolute inset-0 size-full"
              viewBox={`0.5 0.5 ${columns - 1} ${rows - 1}`}
              preserveAspectRatio="none"
            >
              {shapes.bands.map(({ growth: edge, path }, k) => (
                <path key={edge} d={path} fill={`var(${SHADES[k]})`} fillOpacity={OPACITY[k]} />
              ))}
              {shapes.regions.map(({ m: wave, path }) => (
                <path
                  key={wave ?? 'stable'}
                  d={path}
                  fill="none"
                  stroke="#14262E"
                  strokeWidth={wave === null ? 1.5 : 0.6}
                  vectorEffect="non-scaling-stroke"
                />
              ))}
            </svg>
            {shapes.regions.map(
              ({ m: wave, at }) =>
                at && (
                  <span
                    key={wave ?? 'stable'}
                    aria-hidden
                    className="pointer-events-none absolute -translate-1/2 rounded-1 bg-[#F7F5F0]/75 px-1 text-12 leading-tight font-bold whitespace-nowrap"
                    style={{
                      left: percentOf(Math.min(0.94, Math.max(0.06, at.x))),
                      top: percentOf(Math.min(0.94, Math.max(0.06, at.y))),
                    }}
                  >
                    {wave === null ? 'stable' : `m ${wave}`}
                  </span>
                ),
            )}
            <span
              aria-hidden
              className="absolute inset-y-0 border-l border-dashed border-[#8A5A12]"
              style={{ left: percentOf(x) }}
            />
            <span
              aria-hidden
              className="absolute inset-x-0 border-t border-dashed border-[#8A5A12]"
              style={{ top: percentOf(y) }}
            />
            <span
              aria-hidden
              className="absolute size-3.5 -translate-1/2 rounded-pill border-[2.5px] border-[#8A5A12] bg-[#FFFDFA]"
              style={{ left: percentOf(x), top: percentOf(y) }}
            />
          </div>
          <div className="relative col-start-2 h-5" aria-hidden>
            {X_TICKS.map((tick) => (
              <span
                key={tick}
                className="absolute top-1 -translate-x-1/2 first:translate-x-0"
                style={{ left: percentOf(1 - share(tick, WIDTH_LIMITS)) }}
              >
                {decimal(tick, 2)}
              </span>
            ))}
          </div>
          <span className="col-start-2" aria-hidden>
            Ring width, from thick to thin; upward: eye ratio
          </span>
          <p id={readoutId} aria-live="polite" className="col-start-2 mt-1 text-13 text-ink">
            {readout}
          </p>
        </div>
      </ChartFrame>
    </div>
  );
}
