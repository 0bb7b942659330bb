import type { SpreadReply } from '#contract/studies.ts';
import { columnScale, moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis, percentOf, tickDecimals } from '../../../ui/charts/axis.ts';
import { RangeBar } from '../../../ui/charts/range-bar.tsx';
import { departuresOf } from '../chain-settings.ts';

const LABEL = 'block text-12 text-ink-2';
const NOTE = 'block text-12 text-ink-2';

/** What stands before any switch is tried: gross and peak gust, range first. */
export function SpreadHeadline({ reply, stale }: { reply: SpreadReply; stale: boolean }) {
  const { gust, gustRange, label } = useUnits();
  const { base, currency, settings } = reply;
  const changed = departuresOf(settings).length;
  const on = settings.mesovortices;
  const peak = base.peakGustMs;
  return (
    <section
      aria-label="Where every change starts"
      className="@container rounded-3 border border-rule bg-sheet shadow-1"
    >
      <div className="grid items-center @2xl:grid-cols-[minmax(0,21rem)_minmax(0,1fr)_12.5rem]">
        <div className="px-4 pt-2.5 pb-2.75">
          <span className={LABEL}>
            Gross with {changed === 0 ? 'every default' : `${changed} of the settings changed`}
          </span>
          <Gross base={base} currency={currency} on={on} />
        </div>
        {base.grossMinor && currency ? (
          <GrossBar gross={base.grossMinor} currency={currency} on={on} stale={stale} />
        ) : (
          <span />
        )}
        <div className="border-rule px-4 pt-2.5 pb-2.75 @max-2xl:border-t @2xl:border-l">
          <span className={LABEL}>Peak 3-s gust, strongest site</span>
          <b className="block text-22 font-black tracking-tight whitespace-nowrap">
            {on ? gustRange(peak.p5, peak.p95) : `plain ${gust(peak.plain)}`} {label}
          </b>
          <span className={NOTE}>
            {on ? `central ${gust(peak.p50)}, ` : ''}
            {base.strongestSite}
          </span>
        </div>
      </div>
    </section>
  );
}

function Gross({ base, currency, on }: { base: SpreadReply['base']; currency: string | null; on: boolean }) {
  const gross = base.grossMinor;
  if (!gross || !currency) return <b className="block text-18">no loss asked: sites without values</b>;
  if (gross.plain === 0 && gross.p95 === 0) return <b className="block text-22 font-black">No loss at these sites</b>;
  const [low, high] = on ? [gross.p5, gross.p95] : [gross.plain, gross.plain];
  const { amount, scale } = moneyRangeParts(low, high, currency);
  return (
    <>
      <b className="block text-28 font-black tracking-tight">
        {[on ? '' : 'plain', currency, amount, scale].filter(Boolean).join(' ')}
      </b>
      <span className={NOTE}>
        {on
          ? `central ${shortMoney(gross.p50, currency).replace(`${currency} `, '')}, 5–95 % over 264 vortex draws`
          : 'no vortex range: layer off'}
      </span>
    </>
  );
}

interface GrossBarProps {
  gross: NonNullable<SpreadReply['base']['grossMinor']>;
  currency: string;
  on: boolean;
  stale: boolean;
}

function GrossBar({ gross, currency, on, stale }: GrossBarProps) {
  const axis = linearAxis(0, Math.max(gross.p95, gross.plain, 1), 4);
  const { minor } = columnScale(axis.high, currency);
  const text = (tick: number) => decimal(tick / minor, tickDecimals(axis, minor));
  return (
    <div className="px-6 py-2 @max-2xl:pt-0">
      <RangeBar
        axis={axis}
        enhanced={on ? gross : null}
        plain={gross.plain}
        format={(value) => shortMoney(value, currency)}
        stale={stale}
      />
      <span aria-hidden className="relative block h-4.5 border-t border-rule text-12 text-ink-2">
        {axis.ticks.map((tick) => (
          <span key={tick} className="absolute top-0.5 -translate-x-1/2" style={{ left: percentOf(axis.at(tick)) }}>
            {text(tick)}
          </span>
        ))}
      </span>
    </div>
  );
}
