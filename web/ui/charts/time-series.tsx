import { clock, utc } from '../../lib/dates.ts';
import { useUnits } from '../../lib/units.tsx';
import { linearAxis, percentOf } from './axis.ts';
import { ChartFrame } from './chart-frame.tsx';
import { compass } from './compass.ts';
import { timeTicks } from './time-axis.ts';

export interface GustSeries {
  time: readonly string[];
  plain: readonly number[];
  p5: readonly number[];
  p50: readonly number[];
  p95: readonly number[];
  directionDeg: readonly number[];
}

interface TimeSeriesProps {
  series: GustSeries;
  /** Peak of the whole storm; null range when the layer is off. */
  peak: { timeMs: number; plainMs: number; range: { low: number; high: number } | null; directionDeg: number | null };
  fileName: string;
}

const WIDTH = 1000;
const HEIGHT = 100;
const ARROWS = 7;

/** Plain line, enhanced band, dotted drop at the peak, wind arrows along the foot. */
export function TimeSeries({ series, peak, fileName }: TimeSeriesProps) {
  const { gust, gustRange, label, toUnit } = useUnits();
  const times = series.time.map((instant) => Date.parse(instant));
  const from = times[0] ?? peak.timeMs;
  const to = times.at(-1) ?? peak.timeMs + 1;
  const x = (timeMs: number) => (timeMs - from) / Math.max(1, to - from);
  const lowest = Math.min(...series.plain, ...series.p5);
  const highest = Math.max(...series.plain, ...series.p95);
  const axis = linearAxis(toUnit(lowest), toUnit(highest), 4);
  const y = (speedMs: number) => 1 - axis.at(toUnit(speedMs));
  const point = (values: readonly number[]) => (timeMs: number, index: number) =>
    `${round(x(timeMs) * WIDTH)} ${round(y(values[index]!) * HEIGHT)}`;
  const plainPath = `M${times.map(point(series.plain)).join('L')}`;
  const bandPath = `M${times.map(point(series.p95)).join('L')}L${times.map(point(series.p5)).reverse().join('L')}Z`;
  const arrows = times.length > 0 ? spreadIndices(times.length, ARROWS) : [];
  const peakText = `${peak.range ? gustRange(peak.range.low, peak.range.high) : gust(peak.plainMs)} at ${clock(new Date(peak.timeMs))}${peak.directionDeg === null ? '' : `, from ${compass(peak.directionDeg)}`}`;
  const rightHalf = x(peak.timeMs) > 0.55;
  return (
    <ChartFrame
      title="Gust through the storm"
      aside={`${label}; line plain${peak.range ? ', band 5–95 % enhanced' : ', no vortex range: layer off'}, arrows wind direction`}
      summary={`Gust from ${utc(new Date(from))} to ${utc(new Date(to))}: peak ${peakText}; plain peak ${gust(peak.plainMs)} ${label}.`}
      fileName={fileName}
      table={{
        columns: ['Time, UTC', `Plain, ${label}`, `5 %, ${label}`, `Median, ${label}`, `95 %, ${label}`, 'Wind from'],
        rows: series.time.map((instant, index) => [
          utc(instant).replace(' UTC', ''),
          gust(series.plain[index]!),
          gust(series.p5[index]!),
          gust(series.p50[index]!),
          gust(series.p95[index]!),
          compass(series.directionDeg[index]!),
        ]),
      }}
    >
      <div className="mt-6 grid grid-cols-[2.25rem_1fr]" aria-hidden>
        <div className="relative h-34 text-12 text-ink-2">
          {axis.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute right-2.5 translate-y-1/2"
              style={{ bottom: percentOf(axis.at(tick)) }}
            >
              {Math.round(tick)}
            </span>
          ))}
        </div>
        <div className="relative h-34">
          {axis.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute inset-x-0 border-t border-chart-grid"
              style={{ bottom: percentOf(axis.at(tick)) }}
            />
          ))}
          <svg
            className="absolute inset-0 size-full overflow-visible"
            viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
            preserveAspectRatio="none"
          >
            <path d={bandPath} fill="var(--ribbon-soft)" />
            <path
              d={plainPath}
              fill="none"
              stroke="var(--thread)"
              strokeWidth={1.75}
              strokeLinejoin="round"
              vectorEffect="non-scaling-stroke"
            />
          </svg>
          <span
            className="absolute bottom-0 border-l border-dotted border-ink"
            style={{ left: percentOf(x(peak.timeMs)), top: percentOf(y(peak.plainMs)) }}
          />
          <span
            className="absolute size-2.25 -translate-1/2 rounded-pill border-[1.5px] border-thread bg-sheet"
            style={{ left: percentOf(x(peak.timeMs)), top: percentOf(y(peak.plainMs)) }}
          />
          <span
            className="absolute -top-5.5 text-12 font-bold whitespace-nowrap"
            style={rightHalf ? { right: percentOf(1 - x(peak.timeMs)) } : { left: percentOf(x(peak.timeMs)) }}
          >
            {peakText}
          </span>
          {arrows.map((index) => (
            <svg
              key={index}
              viewBox="-8 -8 16 16"
              className="absolute bottom-2 size-4 -translate-x-1/2"
              style={{ left: percentOf(x(times[index]!)) }}
            >
              <path
                // The arrow flies with the wind: from its source to the opposite side.
                transform={`rotate(${series.directionDeg[index]! + 180})`}
                d="M0 7V-6M-3.2 -2.6L0 -6L3.2 -2.6"
                fill="none"
                stroke="var(--thread)"
                strokeWidth={1.4}
                strokeLinecap="round"
              />
            </svg>
          ))}
        </div>
        <div className="relative col-start-2 h-5 text-12 text-ink-2">
          {timeTicks(from, to).map((tick) => (
            <span
              key={tick.timeMs}
              className="absolute top-1 -translate-x-1/2 whitespace-nowrap"
              style={{ left: percentOf(x(tick.timeMs)) }}
            >
              {tick.label}
            </span>
          ))}
        </div>
      </div>
    </ChartFrame>
  );
}

const round = (value: number) => Math.round(value * 10) / 10;
/** Indices spread evenly inside a list, away from its ends. */
const spreadIndices = (length: number, wanted: number) =>
  Array.from({ length: Math.min(wanted, length) }, (_, index) =>
    Math.floor(((index + 0.5) * length) / Math.min(wanted, length)),
  );
