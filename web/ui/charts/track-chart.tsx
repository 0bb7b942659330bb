import { utc } from '../../lib/dates.ts';
import { decimal } from '../../lib/numbers.ts';
import { useUnits } from '../../lib/units.tsx';
import { linearAxis, percentOf } from './axis.ts';
import { ChartFrame } from './chart-frame.tsx';
import { timeTicks } from './time-axis.ts';

export interface TrackChartFix {
  time: string;
  maxWindMs: number;
  radiusOfMaxWindM: number;
  overLand: boolean;
}

interface TrackChartProps {
  fixes: readonly TrackChartFix[];
  chosen: number | null;
  onChoose?: (fix: number) => void;
  fileName: string;
}

const WIDTH = 1000;
const HEIGHT = 100;

/** Stretches over land, from half-way before the first fix there to half-way after the last. */
export const landStretches = (fixes: readonly { timeMs: number; overLand: boolean }[]): [number, number][] => {
  const stretches: [number, number][] = [];
  fixes.forEach(({ timeMs, overLand }, index) => {
    if (!overLand) return;
    const before = fixes[index - 1];
    const after = fixes[index + 1];
    const from = before && !before.overLand ? (before.timeMs + timeMs) / 2 : timeMs;
    const to = after ? (after.overLand ? after.timeMs : (after.timeMs + timeMs) / 2) : timeMs;
    const last = stretches.at(-1);
    if (last && last[1] >= from) last[1] = to;
    else stretches.push([from, to]);
  });
  return stretches;
};

/** Maximum wind and its radius along the track; the one chart with two units, each named at its own side. */
export function TrackChart({ fixes, chosen, onChoose, fileName }: TrackChartProps) {
  const { gust, label, toUnit } = useUnits();
  const times = fixes.map(({ time }) => Date.parse(time));
  const from = times[0] ?? 0;
  const to = Math.max(times.at(-1) ?? 1, from + 1);
  const x = (timeMs: number) => (timeMs - from) / (to - from);
  const wind = linearAxis(0, toUnit(Math.max(...fixes.map((fix) => fix.maxWindMs))), 4);
  const radius = linearAxis(0, Math.max(...fixes.map((fix) => fix.radiusOfMaxWindM / 1000)), 4);
  const windY = (fix: TrackChartFix) => 1 - wind.at(toUnit(fix.maxWindMs));
  const line = (y: (fix: TrackChartFix) => number) =>
    `M${fixes.map((fix, index) => `${(x(times[index]!) * WIDTH).toFixed(1)} ${(y(fix) * HEIGHT).toFixed(1)}`).join('L')}`;
  const strongest = fixes.reduce((best, fix, index) => (fix.maxWindMs > fixes[best]!.maxWindMs ? index : best), 0);
  const strongestFix = fixes[strongest];
  if (!strongestFix) return null;
  return (
    <ChartFrame
      title="Wind and radius along the track"
      aside={
        <span className="flex flex-wrap gap-x-4">
          <span className="flex items-center gap-1.5">
            <span className="w-4 border-t-2 border-ribbon" /> maximum wind, {label}
          </span>
          <span className="flex items-center gap-1.5">
            <span className="w-4 border-t-2 border-dashed border-ceiling" /> radius of maximum wind, km
          </span>
        </span>
      }
      summary={`Maximum wind along ${fixes.length} fixes; strongest ${gust(strongestFix.maxWindMs)} ${label} at ${utc(strongestFix.time)}, radius ${decimal(strongestFix.radiusOfMaxWindM / 1000, 0)} km.`}
      fileName={fileName}
      table={{
        columns: ['Time, UTC', `Maximum wind, ${label}`, 'Radius, km', 'Ground'],
        rows: fixes.map((fix) => [
          utc(fix.time).replace(' UTC', ''),
          gust(fix.maxWindMs),
          decimal(fix.radiusOfMaxWindM / 1000, 0),
          fix.overLand ? 'land' : 'sea',
        ]),
      }}
    >
      <div className="mt-2.5 grid grid-cols-[2rem_1fr_2rem] text-12 text-ink-2" aria-hidden>
        <Scale ticks={wind.ticks} at={wind.at} className="right-2" />
        <div className="relative h-26">
          {landStretches(fixes.map((fix, index) => ({ timeMs: times[index]!, overLand: fix.overLand }))).map(
            ([begin, end], index) => (
              <span
                key={begin}
                className="absolute inset-y-0 bg-panel"
                style={{ left: percentOf(x(begin)), width: percentOf(x(end) - x(begin)) }}
              >
                {index === 0 && x(end) - x(begin) > 0.12 && (
                  <span className="absolute bottom-1 left-2 whitespace-nowrap">over land</span>
                )}
              </span>
            ),
          )}
          {wind.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute inset-x-0 border-t border-chart-grid"
              style={{ bottom: percentOf(wind.at(tick)) }}
            />
          ))}
          {chosen !== null && fixes[chosen] && (
            <span
              className="absolute inset-y-0 border-l border-dashed border-ceiling"
              style={{ left: percentOf(x(times[chosen]!)) }}
            />
          )}
          <svg
            className="absolute inset-0 size-full overflow-visible"
            viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
            preserveAspectRatio="none"
          >
            <path
              d={line((fix) => 1 - radius.at(fix.radiusOfMaxWindM / 1000))}
              fill="none"
              stroke="var(--ceiling)"
              strokeWidth={1.5}
              strokeDasharray="5 4"
              vectorEffect="non-scaling-stroke"
            />
            <path
              d={line(windY)}
              fill="none"
              stroke="var(--ribbon)"
              strokeWidth={2}
              vectorEffect="non-scaling-stroke"
            />
          </svg>
          {fixes.map((fix, index) => (
            <span
              key={fix.time}
              onClick={onChoose && (() => onChoose(index))}
              className={
                index === chosen
                  ? 'absolute size-3.5 -translate-1/2 rounded-pill border-[2.5px] border-ceiling bg-sheet'
                  : 'absolute size-2.25 -translate-1/2 cursor-pointer rounded-pill border-2 border-ribbon bg-sheet'
              }
              style={{ left: percentOf(x(times[index]!)), top: percentOf(windY(fix)) }}
            />
          ))}
        </div>
        <Scale ticks={radius.ticks} at={radius.at} className="left-2 text-ceiling" />
        <div className="relative col-start-2 h-5">
          {timeTicks(from, to, 9).map((tick) => (
            <span
              key={tick.timeMs}
              className="absolute top-1.5 -translate-x-1/2 whitespace-nowrap"
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

function Scale({ ticks, at, className }: { ticks: number[]; at: (value: number) => number; className: string }) {
  return (
    <div className="relative h-26">
      {ticks.map((tick) => (
        <span key={tick} className={`absolute translate-y-1/2 ${className}`} style={{ bottom: percentOf(at(tick)) }}>
          {Math.round(tick)}
        </span>
      ))}
    </div>
  );
}
