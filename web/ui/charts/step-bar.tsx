import { classNames } from '../../lib/class-names.ts';
import { percentOf, type Axis } from './axis.ts';

interface StepBarProps {
  axis: Axis;
  /** Null where nothing could be worked out: the zero line alone. */
  change: number | null;
  className?: string;
}

/** A signed change round zero: up solid, down pale with an edge; the number beside it carries the sign. */
export function StepBar({ axis, change, className }: StepBarProps) {
  const zero = axis.at(0);
  const end = axis.at(change ?? 0);
  return (
    <span aria-hidden className={classNames('relative block h-4', className)}>
      {end > zero && (
        <span
          className="absolute inset-y-0 bg-step-up"
          style={{ left: percentOf(zero), width: percentOf(end - zero) }}
        />
      )}
      {end < zero && (
        <span
          className="absolute inset-y-0 border-[1.5px] border-step-edge bg-step-down"
          style={{ left: percentOf(end), width: percentOf(zero - end) }}
        />
      )}
      <span className="absolute -inset-y-1.5 w-[1.5px] bg-ink-2" style={{ left: percentOf(zero) }} />
    </span>
  );
}

/** The ticks under a column of such bars. */
export function StepAxis({ axis, format }: { axis: Axis; format: (tick: number) => string }) {
  return (
    <span aria-hidden className="relative block h-5 text-12 text-ink-2">
      {axis.ticks.map((tick) => (
        <span key={tick} className="absolute top-0.5 -translate-x-1/2" style={{ left: percentOf(axis.at(tick)) }}>
          {format(tick)}
        </span>
      ))}
    </span>
  );
}
