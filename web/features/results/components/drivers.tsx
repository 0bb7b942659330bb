import { useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { Scale } from 'lucide-react';
import type { Drivers as Reply } from '#contract/drivers.ts';
import type { SpreadRow } from '#contract/studies.ts';
import { failureOf } from '../../../api/failure.ts';
import { columnScale } from '../../../lib/money.ts';
import { decimalsFor, signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import type { Axis } from '../../../ui/charts/axis.ts';
import { signedAxis } from '../../../ui/charts/signed-axis.ts';
import { StepBar } from '../../../ui/charts/step-bar.tsx';
import { Button } from '../../../ui/button.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { dominantWords, driverRanges, type Change, type DriverRange } from '../driver-ranges.ts';
import { driversQuery, type ResultAddress } from '../result-queries.ts';

interface DriversProps {
  at: ResultAddress;
  /** One site instead of the event. */
  siteNo?: number;
}

/** What the eyewall ring’s settings do to this result, each changed alone; worked out when asked for. */
export function Drivers({ at, siteNo }: DriversProps) {
  const [asked, setAsked] = useState(false);
  const query = useQuery(driversQuery(at, siteNo ?? null, asked));
  const reply = query.data;
  const result = siteNo === undefined ? 'the event’s loss and the strongest gust' : 'this site’s gust and loss';
  return (
    <>
      <p className="text-13 text-ink-2">
        Ring width, eye ratio, anchor, amplitude regime and the vortices themselves, each changed alone: how far each
        moves the centre of {result}.
      </p>
      <div aria-live="polite" aria-busy={query.isFetching}>
        {query.isFetching ? (
          <>
            <p className="mt-2.5 text-13">Working it out: some seconds, half a minute when the service is busy.</p>
            <div className="mt-2 flex flex-col gap-2.5" aria-hidden>
              <Skeleton className="h-10" />
              <Skeleton className="h-10" />
              <Skeleton className="h-10" />
            </div>
          </>
        ) : query.isError ? (
          <ProblemNotice
            title="This wasn’t worked out"
            {...failureOf(query.error)}
            onRetry={() => query.refetch()}
            className="mt-2.5"
          />
        ) : (
          reply && <Ranges reply={reply} />
        )}
      </div>
      {!asked && !reply && (
        <p className="mt-2.5 flex flex-wrap items-center gap-x-3 gap-y-1.5 text-13 text-ink-2">
          <Button size="small" icon={Scale} onClick={() => setAsked(true)}>
            Work it out
          </Button>
          Exploratory and free; some seconds.
        </p>
      )}
      <p className="mt-3 border-t border-rule pt-2.5 text-12 leading-snug text-ink-2">
        <b className="text-ink">Not covered:</b> tornado-scale vortices and jets in the boundary layer. No wind record
        validates what the vortices add; take it as uncertain by a factor of 2 either way.
      </p>
    </>
  );
}

/** Settings whose default rests on judgement. */
const JUDGED = ['ringWidth', 'eyeRatio', 'regime'];

function Ranges({ reply }: { reply: Reply }) {
  const { label, toUnit } = useUnits();
  const { currency, rows, sites, base } = reply;
  const ranges = driverRanges(rows);
  const acting = ranges.filter(({ reason }) => reason === null);
  const idle = ranges.filter(({ reason }) => reason !== null);
  const largest = Math.max(1, ...rows.map(({ grossChangeMinor }) => Math.abs(grossChangeMinor ?? 0)));
  const scale = currency === null || base.grossMinor === null ? null : columnScale(largest, currency);
  const gustOf = ({ gustMs }: DriverRange): Change | null => gustMs && [toUnit(gustMs[0]), toUnit(gustMs[1])];
  const grossOf = ({ grossMinor }: DriverRange): Change | null =>
    grossMinor && scale && [grossMinor[0] / scale.minor, grossMinor[1] / scale.minor];
  // Each bar as a share of the largest change of its kind, so that all of them have one zero.
  const sharesOf = (changes: readonly (Change | null)[]): (Change | null)[] => {
    const most = Math.max(1e-9, ...changes.flatMap((change) => change?.map(Math.abs) ?? []));
    return changes.map((change) => change && [change[0] / most, change[1] / most]);
  };
  const gustShares = sharesOf(acting.map(gustOf));
  const grossShares = sharesOf(acting.map(grossOf));
  const axis = signedAxis([...gustShares, ...grossShares].flatMap((share) => share ?? []));
  const decimals = decimalsFor(scale === null ? 0 : largest / scale.minor);
  const dominant = dominantWords(ranges);
  return (
    <>
      {dominant && <p className="mt-2.5 text-14 font-bold">{dominant}</p>}
      <ul aria-label="What each setting of the ring does" className="mt-1">
        {acting.map((range, i) => (
          <li key={range.choice} className="border-b border-rule py-2.5 last:border-b-0">
            <Heading range={range} />
            <div className="mt-1.5 grid grid-cols-[6.5rem_minmax(0,1fr)_6.75rem] items-center gap-x-2.5 gap-y-1 text-13">
              <Line name={`Gust, ${label}`} change={gustOf(range)} share={gustShares[i]!} axis={axis} decimals={1} />
              {scale && (
                <Line
                  name={`Gross, ${scale.header}`}
                  change={grossOf(range)}
                  share={grossShares[i]!}
                  axis={axis}
                  decimals={decimals}
                />
              )}
            </div>
          </li>
        ))}
        {idle.map((range) => (
          <li key={range.choice} className="border-b border-rule py-2 last:border-b-0">
            <Heading range={range} />
            <p className="mt-0.5 text-12 text-ink-2">{range.reason}</p>
          </li>
        ))}
      </ul>
      <p className="mt-1 text-12 leading-snug text-ink-2">
        {sites.rule} Changes of the median over 264 draws, one setting at a time; they don’t add up. Stored nowhere: a
        file rests on a run.
        {reply.notices
          .filter(({ code }) => code === 'other-engine')
          .map(({ text }) => ` ${text}`)
          .join('')}
      </p>
    </>
  );
}

function Heading({ range: { choice, title, inUse, tried } }: { range: DriverRange }) {
  return (
    <div className="flex flex-wrap items-baseline gap-x-2 gap-y-0.5 text-14">
      <b>{title}</b>
      {JUDGED.includes(choice) && <Chip tone="caution">judged, not measured</Chip>}
      <span className="basis-full text-12 text-ink-2">
        in use: {inUse}; tried: {tried.map((row) => `${row.to.title} (${effectOf(row)})`).join(', ')}
      </span>
    </div>
  );
}

/** Which way one value moves the result: the loss, or the gust where the loss stays. */
const effectOf = ({ grossChangeMinor, peakGustChangeMs }: SpreadRow): string => {
  const change = grossChangeMinor || peakGustChangeMs;
  if (change === null) return 'not computed';
  return change > 0 ? 'raises it' : change < 0 ? 'lowers it' : 'no change';
};

interface LineProps {
  name: string;
  change: Change | null;
  /** The same for the bar, as a share of the largest. */
  share: Change | null;
  axis: Axis;
  decimals: number;
}

function Line({ name, change, share, axis, decimals }: LineProps) {
  return (
    <>
      <span className="text-12 text-ink-2">{name}</span>
      <span className="grid *:col-start-1 *:row-start-1">
        <StepBar axis={axis} change={share && Math.min(0, share[0])} />
        <StepBar axis={axis} change={share && Math.max(0, share[1])} />
      </span>
      <b className="text-right whitespace-nowrap">{change === null ? '–' : changeText(change, decimals)}</b>
    </>
  );
}

const changeText = ([low, high]: Change, decimals: number): string => {
  const [from, to] = [signed(low, decimals), signed(high, decimals)];
  return from === to ? from : `${from} to ${to}`;
};
