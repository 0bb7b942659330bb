import { count, decimal } from '../../lib/numbers.ts';
import { useUnits } from '../../lib/units.tsx';
import { countAxis, percentOf } from './axis.ts';
import { ChartFrame } from './chart-frame.tsx';
import { GUST_EDGES_MS, GUST_STEP_MS, GUST_TICKS_MS } from './gust-scale.ts';

interface GustHistogramProps {
  /** Sites per 5 m/s bin from 20 to 85 and above. */
  enhanced: readonly number[];
  plain: readonly number[];
  thresholdsMs?: readonly number[];
  /** Is the enhanced count there at all? */
  vortices: boolean;
  /** What the bars are, where they aren’t the enhanced median. */
  bars?: string;
  fileName: string;
}

const BINS = GUST_EDGES_MS.length;
const LOW = GUST_EDGES_MS[0];
const SPAN = BINS * GUST_STEP_MS;
const shareOf = (speedMs: number) => (speedMs - LOW) / SPAN;

/** Bins as a person reads them, in the chosen unit: "50–55", the last one "85+". */
export const binLabels = (gust: (speedMs: number) => string): string[] =>
  GUST_EDGES_MS.map((edge, index) =>
    index === BINS - 1 ? `${gust(edge)}+` : `${gust(edge)}–${gust(edge + GUST_STEP_MS)}`,
  );

/** Outline of the plain counts, one flat step a bin, in a field of BINS × 100. */
export const stepOutline = (counts: readonly number[], top: number): string =>
  counts.map((sites, bin) => `${bin === 0 ? 'M' : 'L'}${bin} ${100 - (100 * sites) / top}H${bin + 1}`).join('');

export function GustHistogram({
  enhanced,
  plain,
  thresholdsMs = [],
  vortices,
  bars: barsAre = 'enhanced median',
  fileName,
}: GustHistogramProps) {
  const { gust, label, toUnit } = useUnits();
  const bars = vortices ? enhanced : plain;
  const axis = countAxis(Math.max(...enhanced, ...plain), 3);
  const labels = binLabels(gust);
  const total = bars.reduce((sum, sites) => sum + sites, 0);
  const fullest = bars.indexOf(Math.max(...bars));
  const summary =
    total === 0
      ? `No site reaches ${gust(LOW)} ${label}.`
      : `${count(total)} sites by peak gust; most, ${count(bars[fullest]!)}, at ${labels[fullest]} ${label}.`;
  return (
    <ChartFrame
      title="Sites by peak gust"
      aside={vortices ? `${label}; bars ${barsAre}, outline plain` : `${label}; plain, no vortex range: layer off`}
      summary={summary}
      fileName={fileName}
      table={{
        columns: [`Gust, ${label}`, ...(vortices ? [barsAre.charAt(0).toUpperCase() + barsAre.slice(1)] : []), 'Plain'],
        rows: labels.map((bin, index) => [bin, ...(vortices ? [count(enhanced[index]!)] : []), count(plain[index]!)]),
      }}
    >
      <div className="mt-2 grid grid-cols-[2.5rem_1fr]" aria-hidden>
        <div className="relative h-32 text-12 text-ink-2">
          {axis.ticks.map((tick) => (
            <span key={tick} className="absolute right-2 translate-y-1/2" style={{ bottom: percentOf(axis.at(tick)) }}>
              {count(tick)}
            </span>
          ))}
        </div>
        <div className="relative h-32 border-b border-edge">
          {axis.ticks.slice(1).map((tick) => (
            <span
              key={tick}
              className="absolute inset-x-0 border-t border-chart-grid"
              style={{ bottom: percentOf(axis.at(tick)) }}
            />
          ))}
          {bars.map((sites, bin) => (
            <span
              key={bin}
              className="absolute bottom-0 border-x border-sheet"
              style={{
                left: percentOf(bin / BINS),
                width: percentOf(1 / BINS),
                height: percentOf(axis.at(sites)),
                background: `var(--gust-${GUST_EDGES_MS[bin]})`,
                boxShadow: sites > 0 ? 'inset 0 0 0 1px rgb(20 38 46 / .22)' : undefined,
              }}
            />
          ))}
          {vortices && (
            <svg
              className="absolute inset-0 size-full overflow-visible"
              viewBox={`0 0 ${BINS} 100`}
              preserveAspectRatio="none"
            >
              <path
                d={stepOutline(plain, axis.high)}
                fill="none"
                stroke="var(--thread)"
                strokeWidth={1.5}
                vectorEffect="non-scaling-stroke"
              />
            </svg>
          )}
          {thresholdsMs.map((threshold) => (
            <span
              key={threshold}
              className="absolute -top-1 bottom-0 border-l border-dashed border-ceiling"
              style={{ left: percentOf(shareOf(threshold)) }}
            />
          ))}
        </div>
        <div className="relative col-start-2 h-5 text-12 text-ink-2">
          {GUST_TICKS_MS.map((tick) => (
            <span key={tick} className="absolute top-1 -translate-x-1/2" style={{ left: percentOf(shareOf(tick)) }}>
              {decimal(toUnit(tick), 0)}
            </span>
          ))}
        </div>
      </div>
    </ChartFrame>
  );
}
