import { classNames } from '../../lib/class-names.ts';
import { decimal } from '../../lib/numbers.ts';
import { useUnits } from '../../lib/units.tsx';
import { linearAxis, percentOf, type Axis } from './axis.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Spread } from './range-bar.tsx';

export interface LadderRung {
  key: string;
  name: string;
  reason: string;
  operation: 'start' | 'times' | 'plus';
  amount: number;
  afterMs: number;
}

interface GustLadderProps {
  rungs: readonly LadderRung[];
  plainMs: number;
  /** Null when the mesovortex layer is off. */
  enhanced: Spread | null;
  vortices: string;
  aside: string;
  fileName: string;
}

/** Factors as printed: "× 0.857"; additions in the chosen unit: "+ 3.4". */
const stepText = (rung: LadderRung, toUnit: (speedMs: number) => number): string => {
  if (rung.operation === 'start') return '';
  if (rung.operation === 'times') return `× ${decimal(rung.amount, 3)}`;
  return `${rung.amount < 0 ? '−' : '+'} ${decimal(Math.abs(toUnit(rung.amount)), 1)}`;
};

const ROW =
  'grid grid-cols-[minmax(0,1fr)_4.5rem_minmax(8rem,14rem)_5.5rem] items-center gap-x-3 max-rail:grid-cols-[minmax(0,1fr)_4rem_5rem]';

/** Why this gust: one row a factor, a floating bar on one axis, the running value; ends in plain and vortices. */
export function GustLadder({ rungs, plainMs, enhanced, vortices, aside, fileName }: GustLadderProps) {
  const { gust, gustRange, label, toUnit } = useUnits();
  const values = [...rungs.map((rung) => rung.afterMs), plainMs, ...(enhanced ? [enhanced.p5, enhanced.p95] : [])];
  const axis = linearAxis(toUnit(Math.min(...values)), toUnit(Math.max(...values)), 4);
  const at = (speedMs: number) => axis.at(toUnit(speedMs));
  const final = enhanced ? gustRange(enhanced.p5, enhanced.p95) : gust(plainMs);
  return (
    <ChartFrame
      title="Why this gust"
      aside={`${label}, ${aside}`}
      summary={`From the gradient wind to the gust, ${label}: ${rungs
        .map((rung) => `${[rung.name, stepText(rung, toUnit)].filter(Boolean).join(' ')} gives ${gust(rung.afterMs)}`)
        .join(
          '; ',
        )}; plain gust ${gust(plainMs)}; ${enhanced ? `with eyewall vortices ${final}` : 'no vortex range: layer off'}.`}
      fileName={fileName}
      table={{
        columns: ['Step', 'Factor', `After, ${label}`],
        rows: [
          ...rungs.map((rung) => [`${rung.name}: ${rung.reason}`, stepText(rung, toUnit), gust(rung.afterMs)]),
          ['Plain gust', '', gust(plainMs)],
          [`Eyewall vortices: ${vortices}`, '', enhanced ? final : 'no vortex range: layer off'],
        ],
      }}
    >
      <div className="mt-1 text-13" aria-hidden>
        <div className={classNames(ROW, 'h-5 text-12 text-ink-2 max-rail:hidden')}>
          <span />
          <span />
          <span className="relative block h-full">
            {axis.ticks.map((tick) => (
              <span key={tick} className="absolute -translate-x-1/2" style={{ left: percentOf(axis.at(tick)) }}>
                {Math.round(tick)}
              </span>
            ))}
          </span>
          <span />
        </div>
        {rungs.map((rung, index) => (
          <div key={rung.key} className={classNames(ROW, 'min-h-10.5 border-b border-rule')}>
            <RungName name={rung.name} reason={rung.reason} />
            <span className="text-right text-ink-2">{stepText(rung, toUnit)}</span>
            <RungBar
              axis={axis}
              from={index === 0 ? null : at(rungs[index - 1]!.afterMs)}
              to={at(rung.afterMs)}
              isLast={index === rungs.length - 1}
            />
            <b className="text-right text-14">{gust(rung.afterMs)}</b>
          </div>
        ))}
        <div className={classNames(ROW, 'min-h-8 border-b border-rule bg-panel-2')}>
          <b className="pl-0.5">Plain gust</b>
          <span />
          <span className="relative block h-full min-h-8 max-rail:hidden">
            <Grid axis={axis} />
            <span
              className="absolute top-1/2 size-2.5 -translate-1/2 rounded-pill border-2 border-thread bg-sheet"
              style={{ left: percentOf(at(plainMs)) }}
            />
          </span>
          <b className="text-right text-14">{gust(plainMs)}</b>
        </div>
        <div className={classNames(ROW, 'min-h-10.5')}>
          <RungName name="Eyewall vortices" reason={vortices} />
          <span className="text-right text-ink-2">
            {enhanced && `${signed(toUnit(enhanced.p5 - plainMs))} to ${signed(toUnit(enhanced.p95 - plainMs))}`}
          </span>
          <span className="relative block h-full min-h-10.5 max-rail:hidden">
            <Grid axis={axis} />
            {enhanced && (
              <>
                <span
                  className="absolute top-1/2 h-3.5 min-w-1 -translate-y-1/2 border-x-2 border-ribbon bg-ribbon-soft"
                  style={{ left: percentOf(at(enhanced.p5)), width: percentOf(at(enhanced.p95) - at(enhanced.p5)) }}
                />
                <span
                  className="absolute top-1/2 h-4.5 w-0.75 -translate-1/2 bg-ribbon"
                  style={{ left: percentOf(at(enhanced.p50)) }}
                />
              </>
            )}
          </span>
          {enhanced ? (
            <b className="text-right text-14 whitespace-nowrap">{final}</b>
          ) : (
            <span className="text-right text-12 text-ink-2">layer off</span>
          )}
        </div>
      </div>
    </ChartFrame>
  );
}

const signed = (value: number) => (value < 0 ? decimal(value, 1) : `+${decimal(value, 1)}`);

function RungName({ name, reason }: { name: string; reason: string }) {
  return (
    <span className="min-w-0 py-1 leading-tight">
      <b className="block">{name}</b>
      <span className="block text-12 text-ink-2">{reason}</span>
    </span>
  );
}

function Grid({ axis }: { axis: Axis }) {
  return axis.ticks.map((tick) => (
    <span
      key={tick}
      className="absolute -inset-y-px border-l border-chart-grid"
      style={{ left: percentOf(axis.at(tick)) }}
    />
  ));
}

/** A rise is solid slate, a fall pale with an edge; a dot where the ladder starts. */
function RungBar({ axis, from, to, isLast }: { axis: Axis; from: number | null; to: number; isLast: boolean }) {
  return (
    <span className="relative block h-full min-h-10.5 max-rail:hidden">
      <Grid axis={axis} />
      {from === null ? (
        <span
          className="absolute top-1/2 size-2.25 -translate-1/2 rounded-pill bg-ink"
          style={{ left: percentOf(to) }}
        />
      ) : (
        <span
          className={classNames(
            'absolute top-1/2 h-3 min-w-0.5 -translate-y-1/2',
            to >= from ? 'bg-step-up' : 'border border-step-edge bg-step-down',
          )}
          style={{ left: percentOf(Math.min(from, to)), width: percentOf(Math.abs(to - from)) }}
        />
      )}
      {!isLast && (
        <span
          className="absolute top-1/2 -bottom-[calc(50%+1px)] z-1 border-l border-step-edge"
          style={{ left: percentOf(to) }}
        />
      )}
    </span>
  );
}
