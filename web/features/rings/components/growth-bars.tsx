import type { RingReply } from '#contract/rings.ts';
import { classNames } from '../../../lib/class-names.ts';
import { decimal } from '../../../lib/numbers.ts';
import { linearAxis, percentOf } from '../../../ui/charts/axis.ts';
import { ChartFrame } from '../../../ui/charts/chart-frame.tsx';

const PER_HOUR = 3600;

/** Growth of each wave: the smooth ring as bars, which is used, and the sharp formula as marks beside it. */
export function GrowthBars({ ring }: { ring: RingReply }) {
  const sharp = new Map(ring.sharpModes.map(({ m, growthPerS }) => [m, growthPerS * PER_HOUR]));
  const modes = ring.modes.map(({ m, growthPerS }) => ({ m, smooth: growthPerS * PER_HOUR, sharp: sharp.get(m) ?? 0 }));
  const most = Math.max(0.5, ...modes.flatMap((mode) => [mode.smooth, mode.sharp]));
  const axis = linearAxis(0, most, 4);
  const growing = modes.filter(({ smooth }) => smooth > 0);
  return (
    <div className="rounded-3 border border-rule bg-sheet px-4 pt-3 pb-3 shadow-1">
      <ChartFrame
        title="Growth by wavenumber"
        aside="per hour"
        summary={
          growing.length === 0
            ? 'No wave grows faster than 0.02 of the average vorticity.'
            : `Growth per hour: ${growing.map(({ m, smooth }) => `wave ${m} ${decimal(smooth, 2)}`).join(', ')}; the other waves don’t grow.`
        }
        fileName="ring-growth"
        table={{
          columns: ['Wavenumber', 'Smooth ring, per hour', 'Sharp ring, per hour'],
          rows: modes.map((mode) => [String(mode.m), decimal(mode.smooth, 3), decimal(mode.sharp, 3)]),
        }}
      >
        <div aria-hidden className="mt-2 grid grid-cols-[2.25rem_minmax(0,1fr)] text-12 text-ink-2">
          <div className="relative h-30">
            {axis.ticks.map((tick) => (
              <span
                key={tick}
                className="absolute right-2 translate-y-1/2"
                style={{ bottom: percentOf(axis.at(tick)) }}
              >
                {decimal(tick, 1)}
              </span>
            ))}
          </div>
          <div className="relative grid h-30 grid-cols-10">
            {axis.ticks.map((tick) => (
              <span
                key={tick}
                className="absolute inset-x-0 border-t border-chart-grid"
                style={{ bottom: percentOf(axis.at(tick)) }}
              />
            ))}
            {modes.map((mode) => (
              <div key={mode.m} className="relative">
                <span
                  className={classNames(
                    'absolute inset-x-[14%] bottom-0',
                    mode.smooth === 0
                      ? 'h-0.5 bg-rule-strong'
                      : mode.m === ring.wavenumber
                        ? 'bg-action'
                        : 'bg-verdigris/60',
                  )}
                  style={mode.smooth === 0 ? undefined : { height: percentOf(axis.at(mode.smooth)) }}
                />
                {mode.sharp > 0 && (
                  <span
                    className="absolute inset-x-[4%] h-0.5 bg-ceiling"
                    style={{ bottom: percentOf(axis.at(mode.sharp)) }}
                  />
                )}
              </div>
            ))}
          </div>
          <div className="col-start-2 grid grid-cols-10 pt-1 text-center">
            {modes.map(({ m }) => (
              <span key={m} className={m === ring.wavenumber ? 'font-bold text-ink' : undefined}>
                {m}
              </span>
            ))}
          </div>
          <p className="col-start-2 mt-1.5 flex flex-wrap gap-x-4">
            <span className="flex items-center gap-1.5">
              <span className="size-2.5 bg-action" /> smooth ring, used
            </span>
            <span className="flex items-center gap-1.5">
              <span className="h-0.5 w-4 bg-ceiling" /> sharp ring, for check
            </span>
          </p>
        </div>
      </ChartFrame>
    </div>
  );
}
