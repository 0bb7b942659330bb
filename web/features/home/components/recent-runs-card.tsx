import { Link, useNavigate } from 'react-router-dom';
import type { RunSummary } from '#contract/runs.ts';
import { ApiError } from '../../../api/api-error.ts';
import { clockOrDay } from '../../../lib/dates.ts';
import { exactAmount, moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';
import { EmptyRow, SkeletonRows, Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { percentOf, type Axis } from '../../../ui/charts/axis.ts';
import { RangeBar } from '../../../ui/charts/range-bar.tsx';
import { decadeLabel, grossAxis } from '../gross-axis.ts';
import { RunStateChip } from './run-state-chip.tsx';

const SHOWN = 8;

interface RecentRunsCardProps {
  runs: readonly RunSummary[];
  loading: boolean;
  error: Error | null;
  onRetry: () => Promise<unknown>;
  now: Date;
  /** Account admins see runs and what they cost, no results. */
  withResults: boolean;
}

export function RecentRunsCard({ runs, loading, error, onRetry, now, withResults }: RecentRunsCardProps) {
  const navigate = useNavigate();
  const shown = runs.slice(0, SHOWN);
  const axis = withResults ? grossAxis(shown) : null;
  const columns = withResults ? 6 : 5;
  return (
    <Card
      title="Recent runs"
      aside={
        runs.length > 0 && (
          <Link to={paths.runs()} className="font-bold no-underline hover:underline">
            All runs
          </Link>
        )
      }
      padded={false}
      className="overflow-hidden"
    >
      {error && runs.length === 0 ? (
        <ProblemNotice
          title="The runs weren’t read"
          detail={error.message}
          requestId={error instanceof ApiError ? error.requestId : ''}
          onRetry={onRetry}
          className="m-4"
        />
      ) : (
        <Table label="Recent runs" className="mt-0.5">
          <thead>
            <tr>
              <Th priority={2}>Run</Th>
              <Th>Account</Th>
              {withResults ? (
                <>
                  <Th priority={2} className="w-[29%]">
                    {axis ? (
                      <AxisLabels axis={axis} currency={shown[0]?.currency ?? 'USD'} />
                    ) : (
                      <span className="sr-only">Range</span>
                    )}
                  </Th>
                  <Th numeric>Gross, 5–95 %</Th>
                </>
              ) : (
                <>
                  <Th numeric>Quoted</Th>
                  <Th numeric priority={2}>
                    Charged
                  </Th>
                </>
              )}
              <Th>State</Th>
              <Th priority={2}>Started</Th>
            </tr>
          </thead>
          <tbody>
            {loading ? (
              <SkeletonRows columns={columns} />
            ) : shown.length === 0 ? (
              <EmptyRow columns={columns}>
                <b>No run yet.</b>{' '}
                {withResults ? (
                  <>
                    Seal an edition and choose a track, then{' '}
                    <Link to={paths.newRun()} className="font-bold">
                      ask for a quote
                    </Link>
                    . A quote is free.
                  </>
                ) : (
                  'Runs stand here once an underwriter has accepted a quote.'
                )}
              </EmptyRow>
            ) : (
              shown.map((run) => (
                <Tr key={run.id} onClick={withResults ? () => void navigate(paths.run(run.id)) : undefined}>
                  <Td priority={2} className="h-11.5! whitespace-nowrap">
                    {withResults ? (
                      <Link
                        to={paths.run(run.id)}
                        className="no-underline hover:underline"
                        onClick={(event) => event.stopPropagation()}
                      >
                        {run.number}
                      </Link>
                    ) : (
                      run.number
                    )}
                  </Td>
                  <Td className="h-11.5! max-w-56 leading-tight max-md:pl-4">
                    <b className="block truncate">{run.portfolioName}</b>
                    <span className="block truncate text-12 text-ink-2">
                      {run.scenarioNames.length > 1
                        ? `${run.scenarioNames[0]} and ${run.scenarioNames.length - 1} more`
                        : run.scenarioNames[0]}
                    </span>
                  </Td>
                  {withResults ? (
                    <>
                      <Td priority={2}>
                        <RunRange run={run} axis={axis} />
                      </Td>
                      <Td numeric className="font-bold whitespace-nowrap max-rail:text-13">
                        <GrossText run={run} />
                      </Td>
                    </>
                  ) : (
                    <>
                      <Td numeric className="whitespace-nowrap">
                        {run.priceCurrency} {exactAmount(run.quotedMinor, run.priceCurrency)}
                      </Td>
                      <Td numeric priority={2}>
                        {run.chargedMinor === null ? '–' : exactAmount(run.chargedMinor, run.priceCurrency)}
                      </Td>
                    </>
                  )}
                  <Td>
                    <RunStateChip run={run} />
                  </Td>
                  <Td priority={2} className="whitespace-nowrap text-ink-2">
                    {clockOrDay(run.acceptedAt, now)}
                  </Td>
                </Tr>
              ))
            )}
          </tbody>
        </Table>
      )}
      {axis && (
        <p className="border-t border-rule px-4 py-2 text-12 text-ink-2">
          5–95 % over 264 vortex draws, plain as a dot. Tracks of a run are alternatives: the one with the largest loss
          is shown.
        </p>
      )}
    </Card>
  );
}

function GrossText({ run }: { run: RunSummary }) {
  if (run.gross) {
    const { amount, scale } = moneyRangeParts(run.gross.p5, run.gross.p95, run.currency);
    return (
      <>
        {amount} <span className="font-normal text-ink-2">{scale === '' ? run.currency : SHORT_SCALES[scale]}</span>
      </>
    );
  }
  if (run.state === 'complete' && run.grossPlainMinor !== null)
    return <span className="font-normal text-ink-2">no vortex range</span>;
  return (
    <span className="font-normal text-ink-2">
      {run.state === 'complete' ? 'none' : run.state === 'cancelled' || run.state === 'failed' ? 'none' : 'not yet'}
    </span>
  );
}

const SHORT_SCALES: Record<string, string> = { thousand: 'k', million: 'm', billion: 'bn' };

function AxisLabels({ axis, currency }: { axis: Axis; currency: string }) {
  return (
    <span className="flex justify-between" aria-label="Gross on a log axis">
      {axis.ticks.map((tick) => (
        <span key={tick} className="flex w-0 justify-center first:justify-start last:justify-end">
          {decadeLabel(tick, currency)}
        </span>
      ))}
    </span>
  );
}

/** Ribbon and dot on the shared log axis; progress while there is no result. */
function RunRange({ run, axis }: { run: RunSummary; axis: Axis | null }) {
  if (run.state === 'waiting' || run.state === 'working')
    return <ProgressBar label={`Run ${run.number}`} done={run.scenariosDone} total={run.scenariosTotal} />;
  if (!axis || (!run.gross && run.grossPlainMinor === null)) return null;
  return (
    <span className="relative block">
      {axis.ticks.map((tick) => (
        <span
          key={tick}
          className="absolute inset-y-0 w-px bg-rule-strong"
          style={{ left: percentOf(axis.at(tick)) }}
        />
      ))}
      <RangeBar
        axis={axis}
        enhanced={run.gross}
        plain={run.grossPlainMinor}
        format={(minor) => shortMoney(minor, run.currency)}
      />
    </span>
  );
}
