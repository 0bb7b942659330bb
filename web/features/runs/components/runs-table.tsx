import { Ban, CircleCheck, CircleDashed, ClockAlert, Loader, OctagonAlert, type LucideIcon } from 'lucide-react';
import { Link, useNavigate } from 'react-router-dom';
import type { RunState, RunSummary } from '#contract/runs.ts';
import { clock, shortDay } from '../../../lib/dates.ts';
import { exactAmount, minorPerUnit, moneyRange, moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { logAxis, percentOf, type Axis } from '../../../ui/charts/axis.ts';
import { RangeBar } from '../../../ui/charts/range-bar.tsx';
import { Chip, type Tone } from '../../../ui/chip.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';
import { SkeletonRows, Table, TableBanner, Td, Th, Tr } from '../../../ui/table.tsx';
import { purposeLabel } from '../run-setup.ts';

interface RunsTableProps {
  runs: readonly RunSummary[];
  loading: boolean;
  /** Account admins see what ran and what it cost, but open no results. */
  linked: boolean;
  failedMore?: (() => void) | undefined;
}

const STATES: Record<RunState, { tone: Tone; word: string; icon: LucideIcon }> = {
  waiting: { tone: 'idle', word: 'Waiting', icon: CircleDashed },
  working: { tone: 'info', word: 'Working', icon: Loader },
  complete: { tone: 'done', word: 'Complete', icon: CircleCheck },
  failed: { tone: 'error', word: 'Failed, ours', icon: OctagonAlert },
  cancelled: { tone: 'idle', word: 'Cancelled', icon: Ban },
};

/** A log axis over whole decades of currency units, wide enough for every run listed in that currency. */
const axisFor = (runs: readonly RunSummary[], currency: string) => {
  const per = minorPerUnit(currency);
  const values = runs
    .filter((run) => run.currency === currency)
    .flatMap((run) => [run.gross?.p5, run.gross?.p95, run.grossPlainMinor])
    .filter((value) => value !== null && value !== undefined && value > 0) as number[];
  return values.length === 0 ? null : logAxis(Math.max(per, Math.min(...values)), Math.max(...values));
};

export function RunsTable({ runs, loading, linked, failedMore }: RunsTableProps) {
  const navigate = useNavigate();
  const axes = new Map([...new Set(runs.map(({ currency }) => currency))].map((code) => [code, axisFor(runs, code)]));
  // One currency, one axis: its decades can be written in the header.
  const onlyAxis = axes.size === 1 ? [...axes.entries()][0]! : null;
  return (
    <Card padded={false} className="overflow-hidden">
      {failedMore && <TableBanner onRetry={failedMore}>The next runs didn’t load.</TableBanner>}
      <Table label="Runs">
        <thead>
          <tr>
            <Th>Run</Th>
            <Th>Account and tracks</Th>
            <Th priority={3}>Purpose</Th>
            <Th priority={3} className="w-52 min-w-52">
              Gross, log axis
              {onlyAxis?.[1] && <Decades currency={onlyAxis[0]} axis={onlyAxis[1]} />}
            </Th>
            <Th numeric priority={2}>
              Gross, 5–95 %
            </Th>
            <Th numeric priority={2}>
              Charged
            </Th>
            <Th priority={2}>State</Th>
            <Th priority={3}>Accepted, UTC</Th>
          </tr>
        </thead>
        <tbody>
          {loading ? (
            <SkeletonRows columns={8} />
          ) : (
            runs.map((run) => (
              <Tr key={run.id} onClick={linked ? () => void navigate(paths.run(run.id)) : undefined}>
                <Td className="h-13! whitespace-nowrap">
                  {linked ? (
                    <Link
                      to={paths.run(run.id)}
                      className="font-bold text-ink no-underline hover:underline"
                      onClick={(event) => event.stopPropagation()}
                    >
                      {run.number}
                    </Link>
                  ) : (
                    <b>{run.number}</b>
                  )}
                  <span className="block md:hidden">
                    <StateCell run={run} />
                  </span>
                </Td>
                <Td className="max-w-72 py-1.5 leading-snug max-md:max-w-none">
                  <span className="block truncate max-md:whitespace-normal">
                    {run.portfolioName}, edition {run.editionNumber}
                  </span>
                  <span className="block truncate text-12 text-ink-2 max-md:whitespace-normal">
                    {run.scenarioNames.join(', ')}
                  </span>
                  <span className="block md:hidden">
                    <GrossCell run={run} />
                  </span>
                  {run.stamped && (
                    <Chip tone="event" icon={ClockAlert} className="mt-0.5">
                      Unsigned calibration
                    </Chip>
                  )}
                </Td>
                <Td priority={3} className="text-13 whitespace-nowrap">
                  {purposeLabel(run.purpose)}
                </Td>
                <Td priority={3}>
                  <Bar run={run} axis={axes.get(run.currency) ?? null} />
                </Td>
                <Td numeric priority={2} className="text-13 leading-snug rail:text-14">
                  <GrossCell run={run} />
                </Td>
                <Td numeric priority={2} className="whitespace-nowrap">
                  {run.chargedMinor === null ? (
                    <span className="text-13 text-ink-2">
                      {exactAmount(run.quotedMinor, run.priceCurrency)} reserved
                    </span>
                  ) : (
                    exactAmount(run.chargedMinor, run.priceCurrency)
                  )}
                </Td>
                <Td priority={2}>
                  <StateCell run={run} />
                </Td>
                <Td priority={3} className="text-13 whitespace-nowrap">
                  {shortDay(run.acceptedAt)} {clock(run.acceptedAt)}
                  <span className="block text-12 text-ink-2">{run.acceptedBy}</span>
                </Td>
              </Tr>
            ))
          )}
        </tbody>
      </Table>
    </Card>
  );
}

const SHORT: Record<string, string> = { thousand: 'k', million: 'm', billion: 'bn' };

function Decades({ currency, axis }: { currency: string; axis: Axis }) {
  return (
    <span className="relative mt-0.5 block h-3.5">
      {axis.ticks.map((tick, index) => {
        const { amount, scale } = moneyRangeParts(tick, tick, currency);
        const end = index === 0 ? '' : index === axis.ticks.length - 1 ? '-translate-x-full' : '-translate-x-1/2';
        return (
          <span key={tick} className={`absolute leading-none ${end}`} style={{ left: percentOf(axis.at(tick)) }}>
            {amount.replace(/\.0+$/, '')} {SHORT[scale] ?? scale}
          </span>
        );
      })}
    </span>
  );
}

function GrossCell({ run }: { run: RunSummary }) {
  const { gross, grossPlainMinor, currency } = run;
  if (gross) return <b className="whitespace-nowrap">{moneyRange(gross.p5, gross.p95, currency)}</b>;
  if (grossPlainMinor !== null)
    return (
      <>
        plain {shortMoney(grossPlainMinor, currency)}
        <span className="block text-12 text-ink-2">no vortex range</span>
      </>
    );
  return <span className="text-ink-2">{run.state === 'cancelled' || run.state === 'failed' ? 'none' : 'not yet'}</span>;
}

function Bar({ run, axis }: { run: RunSummary; axis: ReturnType<typeof axisFor> }) {
  const { gross, grossPlainMinor, currency } = run;
  if (!axis || (gross === null && grossPlainMinor === null)) return <span className="block h-px bg-chart-grid" />;
  return (
    <RangeBar axis={axis} enhanced={gross} plain={grossPlainMinor} format={(minor) => shortMoney(minor, currency)} />
  );
}

function StateCell({ run }: { run: RunSummary }) {
  const { tone, word, icon } = STATES[run.state];
  const underWay = run.state === 'waiting' || run.state === 'working';
  return (
    <>
      <Chip tone={tone} icon={icon}>
        {word}
        {underWay && ` ${run.scenariosDone} of ${run.scenariosTotal}`}
      </Chip>
      {underWay && (
        <ProgressBar
          label={`${run.number}: tracks finished`}
          done={run.scenariosDone}
          total={run.scenariosTotal}
          className="mt-1 w-28"
        />
      )}
    </>
  );
}
