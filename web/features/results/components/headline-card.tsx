import { useState } from 'react';
import { Gauge, Info, Waves } from 'lucide-react';
import type { LossRange } from '#contract/common.ts';
import type { Run, RunScenario } from '#contract/runs.ts';
import { minorPerUnit, moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { counted, decimal, decimalsFor } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis } from '../../../ui/charts/axis.ts';
import { RangeBar } from '../../../ui/charts/range-bar.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { noRangeReason } from '../result-words.ts';

type Measure = 'groundUp' | 'gross';
const MEASURES = [
  { value: 'groundUp', label: 'Ground-up' },
  { value: 'gross', label: 'Gross' },
] as const;

interface HeadlineCardProps {
  run: Run;
  scenario: RunScenario;
}

/** The loss of one track: range first and largest, the centre in a sentence. */
export function HeadlineCard({ run, scenario }: HeadlineCardProps) {
  const [measure, setMeasure] = useState<Measure>('gross');
  const result = scenario.result!;
  const { currency } = run;
  const enhanced = measure === 'gross' ? result.gross : result.groundUp;
  const plain = measure === 'gross' ? result.grossPlainMinor : result.groundUpPlainMinor;
  const axis = linearAxis(0, Math.max(plain, enhanced?.p95 ?? 0, 1), 5);
  const scale = moneyRangeParts(axis.low, axis.high, currency);
  const label = measure === 'gross' ? 'Gross loss' : 'Ground-up loss';
  const isZero = plain === 0 && (enhanced === null || enhanced.p95 === 0);
  return (
    <section aria-label={`${label}, ${scenario.name}`} className="rounded-3 border border-rule bg-sheet shadow-1">
      <div className="px-4.5 pt-3.5 pb-2">
        <div className="flex flex-wrap items-center gap-x-3 gap-y-2">
          <h2 className="text-15">
            {label}, {scenario.name}
          </h2>
          <Segmented
            label="Loss"
            value={measure}
            options={MEASURES}
            onChange={setMeasure}
            className="ml-auto max-rail:ml-0"
          />
        </div>
        {isZero ? (
          <Zero largestMs={result.peakGustMs.plain} />
        ) : (
          <>
            {enhanced ? (
              <Range low={enhanced.p5} high={enhanced.p95} currency={currency} />
            ) : (
              <p className="mt-2.5 flex flex-wrap items-baseline gap-x-2.5">
                <span className="text-18 text-ink-2">plain {currency}</span>
                <span className="text-40 font-black tracking-tight">
                  {moneyRangeParts(plain, plain, currency).amount}
                </span>
                <b className="text-20">{moneyRangeParts(plain, plain, currency).scale}</b>
                <span className="basis-full text-14 font-bold">{noRangeReason(run.options.mesovortices)}</span>
              </p>
            )}
            {enhanced && (
              <p className="mt-1.5">
                <b>Central {shortMoney(enhanced.p50, currency).replace(`${currency} `, '')}.</b>{' '}
                <span className="text-ink-2">
                  5–95 % over 264 vortex draws; mean {shortMoney(enhanced.mean, currency).replace(`${currency} `, '')}.
                </span>
              </p>
            )}
            <RangeBar
              size="headline"
              axis={axis}
              enhanced={enhanced}
              plain={plain}
              stale={scenario.stale !== null}
              format={(minor) => moneyRangeParts(minor, axis.high, currency).amount.split('–')[0]!}
              className="mt-3"
            />
            <p className="text-right text-12 text-ink-2">
              {currency} {scale.scale}
            </p>
          </>
        )}
      </div>
      <ul className="grid grid-cols-2 gap-x-4 border-t border-rule px-4.5 py-3 text-13 leading-snug max-rail:grid-cols-1 max-rail:gap-y-2.5">
        <li className="flex gap-2.5">
          <Waves size={17} strokeWidth={1.75} className="mt-px flex-none text-verdigris" aria-hidden />
          {enhanced ? (
            <span>
              <b>{vorticesAdd(enhanced, plain, currency)}</b> at the centre. Plain is one run without them: no vortex
              range.
            </span>
          ) : (
            <span>
              <b>Plain only:</b> {noRangeReason(run.options.mesovortices)}.
            </span>
          )}
        </li>
        <li>
          <MaximaLine scenario={scenario} />
        </li>
      </ul>
      {result.engineNotices.length > 0 && (
        <details className="border-t border-rule text-13">
          <summary className="px-4.5 py-2.5 text-ink-2">
            <b className="text-ink">{counted(result.engineNotices.length, 'note')}</b> on how this track was taken
          </summary>
          <ul className="px-4.5 pb-3 text-ink-2">
            {result.engineNotices.map((notice) => (
              <li key={notice.text} className="flex gap-2.5 py-0.75 leading-snug">
                <Info size={15} strokeWidth={1.75} className="mt-px flex-none" aria-hidden />
                {notice.text}
              </li>
            ))}
          </ul>
        </details>
      )}
    </section>
  );
}

const UNITS_OF: Record<string, number> = { billion: 1e9, million: 1e6, thousand: 1e3 };
/** "Vortices add 19.4 (10.6–54.6) million": what the range is over plain. */
const vorticesAdd = (enhanced: LossRange, plain: number, currency: string) => {
  const [low, centre, high] = [enhanced.p5 - plain, enhanced.p50 - plain, enhanced.p95 - plain];
  const { amount, scale } = moneyRangeParts(low, high, currency);
  const per = UNITS_OF[scale] ?? 1;
  const value = centre / minorPerUnit(currency) / per;
  const text = decimal(value, scale === '' ? 0 : decimalsFor(value));
  return `Vortices add ${[text, `(${amount})`, scale].filter(Boolean).join(' ')}`;
};

function Range({ low, high, currency }: { low: number; high: number; currency: string }) {
  const { amount, scale } = moneyRangeParts(low, high, currency);
  return (
    <p className="mt-2 flex flex-wrap items-baseline gap-x-2.5 max-rail:gap-x-2">
      <span className="text-20 text-ink-2 max-rail:text-16">{currency}</span>
      <span className="text-52 font-black tracking-tight max-rail:text-40">{amount}</span>
      <b className="text-22 max-rail:text-18">{scale}</b>
    </p>
  );
}

function Zero({ largestMs }: { largestMs: number }) {
  const { gust, label } = useUnits();
  return (
    <div className="py-3">
      <p className="text-28 font-black tracking-tight">No loss from this track</p>
      <p className="mt-1 text-ink-2">
        The strongest plain gust at any site is {gust(largestMs)} {label}. A zero-loss record stands on the run slip.
      </p>
    </div>
  );
}

/** Both maxima of the strongest fix, and the one used. */
export function MaximaLine({ scenario }: { scenario: RunScenario }) {
  const { gust, label } = useUnits();
  const { reportedMs, pressureImpliedMs, used } = scenario.result!.maxima;
  const reported = reportedMs === null ? 'no wind was reported' : `reported wind ${gust(reportedMs)}`;
  const implied = pressureImpliedMs === null ? 'no pressure was given' : `pressure gives ${gust(pressureImpliedMs)}`;
  return (
    <span className="flex gap-2.5">
      <Gauge size={17} strokeWidth={1.75} className="mt-px flex-none text-ink-2" aria-hidden />
      <span>
        <b>Intensity from {used}.</b> Strongest fix, {label}: {used === 'pressure' ? implied : reported};{' '}
        {used === 'pressure' ? reported : implied}.
      </span>
    </span>
  );
}
