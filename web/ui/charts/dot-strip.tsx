import { classNames } from '../../lib/class-names.ts';
import { percentOf, type Axis } from './axis.ts';

interface DotStripProps {
  title: string;
  /** Of the values, in words. */
  range: string;
  axis: Pick<Axis, 'at'>;
  ticks: readonly { at: number; label: string }[];
  values: readonly number[];
  /** The track they are variants of; a longer mark. */
  central: number | null;
}

/** One number of each variant as a dot on a line; where many fall together the dots darken. */
export function DotStrip({ title, range, axis, ticks, values, central }: DotStripProps) {
  return (
    <div className="grid grid-cols-[9.5rem_minmax(0,1fr)] items-center gap-x-4 py-1.5 max-md:grid-cols-1">
      <div className="text-13">
        <b className="block">{title}</b>
        <span className="text-ink-2">{range}</span>
      </div>
      <div className="mx-3 pt-2" aria-hidden>
        <div className="relative h-5">
          <span className="absolute inset-x-0 top-1/2 border-t border-rule-strong" />
          {central !== null && (
            <span
              className="absolute inset-y-0 w-0.75 -translate-x-1/2 rounded-pill bg-ink"
              style={{ left: percentOf(axis.at(central)) }}
            />
          )}
          {values.map((value, index) => (
            <span
              key={index}
              className="absolute top-1/2 size-2.75 -translate-1/2 rounded-pill border-[1.5px] border-sheet bg-ribbon opacity-75"
              style={{ left: percentOf(axis.at(value)) }}
            />
          ))}
        </div>
        <div className="relative h-5 text-12 text-ink-2">
          {ticks.map(({ at, label }, index) => (
            <span
              key={label}
              className={classNames(
                'absolute -translate-x-1/2 whitespace-nowrap',
                index % 2 === 1 && ticks.length > 4 && 'max-md:hidden',
              )}
              style={{ left: percentOf(axis.at(at)) }}
            >
              {label}
            </span>
          ))}
        </div>
      </div>
    </div>
  );
}
