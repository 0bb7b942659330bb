import { classNames } from '../../lib/class-names.ts';
import { percentOf, type Axis } from './axis.ts';

/** Ends, centre: 5, 50 and 95 % over the vortex draws. */
export interface Spread {
  p5: number;
  p50: number;
  p95: number;
}

interface RangeTextInput {
  enhanced: Spread | null;
  plain: number | null;
  format: (value: number) => string;
}

/** What the two marks say, in words: the text alternative of every range bar. */
const rangeText = ({ enhanced, plain, format }: RangeTextInput): string => {
  const parts = [
    enhanced
      ? `enhanced ${format(enhanced.p5)} to ${format(enhanced.p95)}, central ${format(enhanced.p50)}`
      : 'no vortex range: layer off',
    plain !== null && `plain ${format(plain)}`,
  ];
  return parts.filter(Boolean).join('; ');
};

interface RangeBarProps extends RangeTextInput {
  axis: Axis;
  /** One row of a list, or the headline with its rows named and the axis written. */
  size?: 'row' | 'headline';
  /** The result rests on a track or calibration that has been superseded. */
  stale?: boolean;
  className?: string;
}

/** Ribbon (enhanced, 5–95 %) with a dark centre mark; plain as a thin thread with a hollow dot. */
export function RangeBar({ size = 'row', className, ...marks }: RangeBarProps) {
  const label = rangeText(marks);
  if (size === 'row')
    return (
      <div role="img" aria-label={label} className={classNames('relative h-6', className)}>
        <Ribbon {...marks} className="inset-y-0" height={12} />
        {marks.plain !== null && <PlainDot {...marks} className={marks.enhanced ? 'top-[1.125rem]' : 'top-1/2'} />}
      </div>
    );
  const { axis, enhanced, plain, format } = marks;
  return (
    <div role="img" aria-label={label} className={classNames('grid grid-cols-[4.5rem_1fr] text-13', className)}>
      <span className="self-center">Enhanced</span>
      <div className="relative h-8">
        <Ribbon {...marks} className="inset-y-0" height={20} />
        {!enhanced && (
          <span className="absolute inset-0 grid place-items-center text-12 text-ink-2">
            <span className="bg-sheet px-2">no vortex range: layer off</span>
          </span>
        )}
      </div>
      <span className="self-center text-ink-2">Plain</span>
      <div className="relative h-6">
        <BaseLine />
        {plain !== null && <PlainDot {...marks} className="top-1/2" />}
      </div>
      <div className="relative col-start-2 mx-1 h-6 border-t border-chart-grid text-12 text-ink-2">
        {axis.ticks.map((tick) => (
          <span key={tick} className="absolute top-1 -translate-x-1/2" style={{ left: percentOf(axis.at(tick)) }}>
            {format(tick)}
          </span>
        ))}
      </div>
    </div>
  );
}

const BaseLine = () => <span className="absolute inset-x-0 top-1/2 h-px bg-chart-grid" />;

function Ribbon({
  axis,
  enhanced,
  stale = false,
  height,
  className,
}: Pick<RangeBarProps, 'axis' | 'enhanced' | 'stale' | 'className'> & { height: number }) {
  return (
    <span className={classNames('absolute inset-x-0 block', className)}>
      <BaseLine />
      {enhanced && (
        <>
          <span
            className={classNames(
              'absolute top-1/2 min-w-1 -translate-y-1/2 border-x-2 border-ribbon bg-ribbon-soft',
              stale &&
                'bg-[repeating-linear-gradient(115deg,var(--ribbon-soft)_0_4px,transparent_4px_8px)] bg-transparent',
            )}
            style={{
              height,
              left: percentOf(axis.at(enhanced.p5)),
              width: percentOf(axis.at(enhanced.p95) - axis.at(enhanced.p5)),
            }}
          />
          <span
            className="absolute top-1/2 w-1 -translate-x-1/2 -translate-y-1/2 bg-ribbon"
            style={{ height: height + 4, left: percentOf(axis.at(enhanced.p50)) }}
          />
        </>
      )}
    </span>
  );
}

function PlainDot({ axis, plain, className }: Pick<RangeBarProps, 'axis' | 'plain' | 'className'>) {
  if (plain === null) return null;
  return (
    <span
      className={classNames(
        'absolute size-2 -translate-x-1/2 -translate-y-1/2 rounded-pill border-[1.5px] border-thread bg-sheet',
        className,
      )}
      style={{ left: percentOf(axis.at(plain)) }}
    />
  );
}
