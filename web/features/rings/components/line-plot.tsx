import { percentOf, type Axis } from '../../../ui/charts/axis.ts';

export interface PlotLine {
  name: string;
  x: readonly number[];
  y: readonly number[];
  stroke: string;
  dash?: string;
}

interface LinePlotProps {
  x: Axis;
  y: Axis;
  lines: readonly PlotLine[];
  /** Between two lines with the same places along. */
  band?: readonly [PlotLine, PlotLine];
  xText: (value: number) => string;
  yText: (value: number) => string;
  /** Where the present frame or radius stands. */
  cursor?: number;
  dashedAt?: number;
  xName: string;
  className: string;
}

const WIDTH = 1000;
const HEIGHT = 100;
const round = (value: number) => Math.round(value * 10) / 10;

/** Lines over one axis each way, with a cursor. */
export function LinePlot({ x, y, lines, band, xText, yText, cursor, dashedAt, xName, className }: LinePlotProps) {
  const points = ({ x: along, y: values }: PlotLine) =>
    along.map((at, index) => `${round(x.at(at) * WIDTH)} ${round((1 - y.at(values[index]!)) * HEIGHT)}`);
  return (
    <div aria-hidden className="mt-1.5">
      <ul className="mb-2 flex flex-wrap gap-x-3.5 gap-y-0.5 text-12 text-ink-2">
        {lines.map(({ name, stroke, dash }) => (
          <li key={name} className="flex items-center gap-1.5">
            <svg width={18} height={4}>
              <path d="M0 2H18" stroke={stroke} strokeWidth={2} strokeDasharray={dash} />
            </svg>
            {name}
          </li>
        ))}
      </ul>
      <div className="grid grid-cols-[2.25rem_minmax(0,1fr)] text-12 text-ink-2">
        <div className={`relative ${className}`}>
          {y.ticks.map((tick) => (
            <span key={tick} className="absolute right-2 translate-y-1/2" style={{ bottom: percentOf(y.at(tick)) }}>
              {yText(tick)}
            </span>
          ))}
        </div>
        <div className={`relative ${className}`}>
          {y.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute inset-x-0 border-t border-chart-grid"
              style={{ bottom: percentOf(y.at(tick)) }}
            />
          ))}
          {dashedAt !== undefined && (
            <span
              className="absolute inset-y-0 border-l border-dashed border-ceiling"
              style={{ left: percentOf(x.at(dashedAt)) }}
            />
          )}
          <svg
            className="absolute inset-0 size-full overflow-visible"
            viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
            preserveAspectRatio="none"
          >
            {band && band[0].x.length > 1 && (
              <path
                d={`M${[...points(band[0]), ...points(band[1]).reverse()].join('L')}Z`}
                fill="var(--ribbon-soft)"
                opacity={0.6}
              />
            )}
            {lines.map((line) => (
              <path
                key={line.name}
                d={`M${points(line).join('L')}`}
                fill="none"
                stroke={line.stroke}
                strokeWidth={2}
                strokeDasharray={line.dash}
                strokeLinejoin="round"
                vectorEffect="non-scaling-stroke"
              />
            ))}
          </svg>
          {cursor !== undefined && (
            <span
              className="absolute inset-y-0 border-l-[1.5px] border-ink"
              style={{ left: percentOf(x.at(cursor)) }}
            />
          )}
        </div>
        <div className="relative col-start-2 h-5">
          {x.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute top-1 -translate-x-1/2 whitespace-nowrap"
              style={{ left: percentOf(x.at(tick)) }}
            >
              {xText(tick)}
            </span>
          ))}
        </div>
        <span className="col-start-2 text-right">{xName}</span>
      </div>
    </div>
  );
}
