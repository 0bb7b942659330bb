import { Link, useNavigate } from 'react-router-dom';
import type { RunSummary } from '#contract/runs.ts';
import { ApiError } from '../../../api/api-error.ts';
import { clockOrDay } from '../../../lib/dates.ts';
import { exactAmount, moneyRange, moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';
import { EmptyRow, SkeletonRows, Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { decadeLabel, logScaleFor, type LogScale } from '../log-scale.ts';
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
  const scale = withResults ? logScaleFor(shown) : null;
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
                    {scale ? <AxisLabels scale={scale} /> : <span className="sr-only">Range</span>}
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
                  <Td priority={2} className="h-11.5 whitespace-nowrap">
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
                  <Td className="h-11.5 max-w-56 leading-tight max-md:pl-4">
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
                        <RunRange run={run} scale={scale} />
                      </Td>
                      <Td numeric className="font-bold whitespace-nowrap max-rail:text-13">
                        <GrossText run={run} />
                      </Td>
                    </>
                  ) : (
                    <>
                      <Td numeric className="whitespace-nowrap">
                        {run.currency} {exactAmount(run.quotedMinor, run.currency)}
                      </Td>
                      <Td numeric priority={2}>
                        {run.chargedMinor === null ? '–' : exactAmount(run.chargedMinor, run.currency)}
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

function AxisLabels({ scale }: { scale: LogScale }) {
  const decades = Array.from({ length: scale.to - scale.from + 1 }, (_, index) => scale.from + index);
  return (
    <span className="flex justify-between" aria-label="Gross on a log axis">
      {decades.map((power) => (
        <span key={power} className="flex w-0 justify-center first:justify-start last:justify-end">
          {decadeLabel(power)}
        </span>
      ))}
    </span>
  );
}

/** Ribbon and thread on the shared log axis; progress while there is no result. */
function RunRange({ run, scale }: { run: RunSummary; scale: LogScale | null }) {
  if (run.state === 'waiting' || run.state === 'working')
    return <ProgressBar label={`Run ${run.number}`} done={run.scenariosDone} total={run.scenariosTotal} />;
  if (!scale || (!run.gross && run.grossPlainMinor === null)) return null;
  const at = (minor: number) => `${100 * scale.at(minor)}%`;
  const { gross, grossPlainMinor } = run;
  return (
    <span
      className="relative block h-8.5"
      role="img"
      aria-label={[
        gross &&
          `enhanced ${moneyRange(gross.p5, gross.p95, run.currency)}, central ${shortMoney(gross.p50, run.currency)}`,
        grossPlainMinor !== null && `plain ${shortMoney(grossPlainMinor, run.currency)}`,
      ]
        .filter(Boolean)
        .join('; ')}
    >
      {Array.from({ length: scale.to - scale.from + 1 }, (_, index) => (
        <span
          key={index}
          className="absolute inset-y-1.5 w-px bg-rule-strong"
          style={{ left: `${(100 * index) / (scale.to - scale.from)}%` }}
        />
      ))}
      {gross && (
        <>
          <span
            className="absolute top-[calc(50%-7px)] h-2.5 min-w-1 border-x-2 border-ribbon bg-ribbon-soft"
            style={{ left: at(gross.p5), right: `${100 - 100 * scale.at(gross.p95)}%` }}
          />
          <span
            className="absolute top-[calc(50%-10px)] h-4 w-0.75 -translate-x-1/2 bg-ribbon"
            style={{ left: at(gross.p50) }}
          />
        </>
      )}
      {grossPlainMinor !== null && grossPlainMinor > 0 && (
        <span
          className="absolute top-[calc(50%+5px)] size-1.75 -translate-x-1/2 rounded-pill border-[1.5px] border-thread bg-sheet"
          style={{ left: at(grossPlainMinor) }}
        />
      )}
    </span>
  );
}
