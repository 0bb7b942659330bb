import { useRef, type KeyboardEvent, type PointerEvent } from 'react';
import { classNames } from '../lib/class-names.ts';

interface SliderProps {
  label: string;
  /** Where it can stand, rising. */
  stops: readonly number[];
  /** Stops of their own weight: Page Up and Page Down go from one to the next. */
  marks?: readonly number[];
  value: number;
  valueText: (value: number) => string;
  onChange: (value: number) => void;
  /** What is written below, where. */
  ticks: readonly { at: number; label: string }[];
  className?: string;
}

const nearest = (stops: readonly number[], wanted: number): number =>
  stops.reduce((best, stop) => (Math.abs(stop - wanted) < Math.abs(best - wanted) ? stop : best), stops[0] ?? wanted);

/** A slider over stops that needn’t be evenly spaced, drawn to scale. */
export function Slider({ label, stops, marks = [], value, valueText, onChange, ticks, className }: SliderProps) {
  const rail = useRef<HTMLDivElement>(null);
  const low = stops[0] ?? 0;
  const high = stops.at(-1) ?? 1;
  const share = (at: number) => `${(100 * (at - low)) / Math.max(high - low, 1e-9)}%`;
  const to = (next: number | undefined) => {
    if (next !== undefined && next !== value) onChange(next);
  };
  const step = (list: readonly number[], direction: 1 | -1) =>
    direction === 1 ? list.find((stop) => stop > value) : list.findLast((stop) => stop < value);
  const onKeyDown = (event: KeyboardEvent) => {
    const jumps = marks.length > 0 ? marks : stops.filter((_, index) => index % 10 === 0);
    const near = event.shiftKey ? jumps : stops;
    const next = {
      ArrowRight: () => step(near, 1),
      ArrowUp: () => step(near, 1),
      ArrowLeft: () => step(near, -1),
      ArrowDown: () => step(near, -1),
      PageUp: () => step(jumps, 1),
      PageDown: () => step(jumps, -1),
      Home: () => low,
      End: () => high,
    }[event.key];
    if (!next || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    to(next());
  };
  const follow = (event: PointerEvent) => {
    const box = rail.current!.getBoundingClientRect();
    to(nearest(stops, low + ((event.clientX - box.left) / Math.max(1, box.width)) * (high - low)));
  };
  return (
    <div className={classNames('px-2', className)}>
      <div
        ref={rail}
        role="slider"
        tabIndex={0}
        aria-label={label}
        aria-valuemin={low}
        aria-valuemax={high}
        aria-valuenow={value}
        aria-valuetext={valueText(value)}
        onKeyDown={onKeyDown}
        onPointerDown={(event) => {
          event.currentTarget.setPointerCapture(event.pointerId);
          follow(event);
        }}
        onPointerMove={(event) => {
          if (event.currentTarget.hasPointerCapture(event.pointerId)) follow(event);
        }}
        className="relative h-8 cursor-pointer touch-none rounded-1 outline-offset-4 pointer-coarse:h-11"
      >
        <span className="absolute inset-x-0 top-1/2 h-1 -translate-y-1/2 rounded-pill bg-chart-grid" />
        <span
          className="absolute top-1/2 left-0 h-1 -translate-y-1/2 rounded-pill bg-action"
          style={{ width: share(value) }}
        />
        {marks.map((mark) => (
          <span
            key={mark}
            className="absolute top-1/2 size-2.25 -translate-1/2 rounded-pill border-2 border-ribbon bg-sheet"
            style={{ left: share(mark) }}
          />
        ))}
        <span
          className="absolute top-1/2 size-5 -translate-1/2 rounded-pill border-[2.5px] border-action bg-sheet shadow-2"
          style={{ left: share(value) }}
        />
      </div>
      {ticks.length > 0 && (
        <div aria-hidden className="relative h-4.5 text-12 text-ink-2">
          {ticks.map((tick) => (
            <span
              key={tick.at}
              className="absolute -translate-x-1/2 whitespace-nowrap"
              style={{ left: share(tick.at) }}
            >
              {tick.label}
            </span>
          ))}
        </div>
      )}
    </div>
  );
}
