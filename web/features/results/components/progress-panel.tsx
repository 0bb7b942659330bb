import { useState } from 'react';
import { Ban, CircleCheck, CircleDashed, Loader, OctagonAlert, WifiOff, Wind, type LucideIcon } from 'lucide-react';
import { Link } from 'react-router-dom';
import { UNDERWRITERS } from '#contract/roles.ts';
import type { Run, RunScenario } from '#contract/runs.ts';
import { failureOf } from '../../../api/failure.ts';
import { classNames } from '../../../lib/class-names.ts';
import { clock } from '../../../lib/dates.ts';
import { exactMoney, moneyRange, shortMoney } from '../../../lib/money.ts';
import { count } from '../../../lib/numbers.ts';
import { useNow } from '../../../lib/use-now.ts';
import { paths } from '../../../paths.ts';
import { Button } from '../../../ui/button.tsx';
import { Dialog } from '../../../ui/dialog.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';
import { useCancelRun } from '../result-queries.ts';
import { isUnderWay, type Liveness } from '../run-progress.ts';

export const CANCELLERS = UNDERWRITERS;

const STATES: Record<RunScenario['state'], { word: string; icon: LucideIcon; colour: string }> = {
  waiting: { word: 'Waiting', icon: CircleDashed, colour: 'text-idle' },
  building: { word: 'Building wind', icon: Wind, colour: 'text-info' },
  scoring: { word: 'Scoring sites', icon: Loader, colour: 'text-info' },
  stored: { word: 'Stored', icon: CircleCheck, colour: 'text-done' },
  failed: { word: 'Failed, ours', icon: OctagonAlert, colour: 'text-error' },
  cancelled: { word: 'Cancelled', icon: Ban, colour: 'text-idle' },
};

interface ProgressPanelProps {
  run: Run;
  liveness: Liveness;
  canCancel: boolean;
}

/** How far, and what can already be read; what it costs against the quote. */
export function ProgressPanel({ run, liveness, canCancel }: ProgressPanelProps) {
  const underWay = isUnderWay(run.state);
  return (
    <div className="mb-4 grid grid-cols-[minmax(0,1fr)_356px] gap-4 max-wide:grid-cols-1">
      <section
        aria-label="Progress by track"
        className="overflow-hidden rounded-3 border border-rule bg-sheet shadow-1"
      >
        <header className="flex flex-wrap items-baseline gap-x-3 px-4.5 pt-3 pb-2">
          <h2 className="text-15">
            {run.scenariosDone} of {run.scenariosTotal} tracks finished
          </h2>
          {underWay && !liveness.live && (
            <p role="status" className="ml-auto flex items-center gap-1.5 text-13 text-caution">
              <WifiOff size={15} strokeWidth={1.75} aria-hidden />
              Reconnecting; last heard {liveness.lastHeard ? `${clock(liveness.lastHeard)} UTC` : 'not yet'}. Asking
              every few seconds meanwhile.
            </p>
          )}
        </header>
        <ul>
          {run.scenarios.map((scenario) => (
            <ScenarioRow key={scenario.id} run={run} scenario={scenario} />
          ))}
        </ul>
      </section>
      <Costs run={run} canCancel={canCancel && underWay} />
    </div>
  );
}

function ScenarioRow({ run, scenario }: { run: Run; scenario: RunScenario }) {
  const { word, icon: Icon, colour } = STATES[scenario.state];
  const { result } = scenario;
  return (
    <li className="border-t border-rule px-4.5 py-2.5">
      <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
        <Icon size={16} strokeWidth={1.75} className={classNames('flex-none', colour)} aria-hidden />
        <b className="min-w-0 truncate">
          {scenario.name}, version {scenario.version}
        </b>
        <span className={classNames('text-13', colour)}>{word}</span>
        <span className="ml-auto text-13 text-ink-2">
          <Pace scenario={scenario} />
        </span>
        {result && (
          <Link to={paths.run(run.id, { scenario: scenario.id })} className="text-13 font-bold">
            {result.gross
              ? moneyRange(result.gross.p5, result.gross.p95, run.currency)
              : `plain ${shortMoney(result.grossPlainMinor, run.currency)}, no vortex range`}
          </Link>
        )}
      </div>
      {(scenario.state === 'building' || scenario.state === 'scoring' || scenario.state === 'waiting') && (
        <ProgressBar
          label={`${scenario.name}: sites scored`}
          done={scenario.sitesDone}
          total={
            scenario.state === 'scoring'
              ? scenario.sitesTotal
              : scenario.state === 'waiting'
                ? Math.max(1, scenario.sitesTotal)
                : null
          }
          className="mt-2"
        />
      )}
      {scenario.restarts > 0 && (
        <p className="mt-1 text-12 text-ink-2">
          Restarted{scenario.startedAt ? ` at ${clock(scenario.startedAt)} UTC` : ''}; finished tracks kept.
        </p>
      )}
      {scenario.error && (
        <p className="mt-1 text-13 text-error">{scenario.error} This track is free; the others go on.</p>
      )}
    </li>
  );
}

/** Sites done, and how many a second. */
function Pace({ scenario }: { scenario: RunScenario }) {
  const now = useNow(1000);
  if (scenario.state !== 'scoring' || !scenario.startedAt)
    return scenario.state === 'stored' ? `${count(scenario.sitesTotal)} sites` : null;
  const seconds = Math.max(1, (now.getTime() - Date.parse(scenario.startedAt)) / 1000);
  return `${count(scenario.sitesDone)} of ${count(scenario.sitesTotal)} sites, ${count(Math.round(scenario.sitesDone / seconds))} a second`;
}

function Costs({ run, canCancel }: { run: Run; canCancel: boolean }) {
  const [asking, setAsking] = useState(false);
  const cancel = useCancelRun(run.id);
  const { priceCurrency: currency, quotedMinor, chargedMinor } = run;
  const nothingDone = run.scenariosDone === 0;
  return (
    <section aria-label="Cost" className="flex flex-col rounded-3 border border-rule bg-sheet p-4.5 shadow-1">
      <h2 className="text-15">{chargedMinor === null ? 'Reserved' : 'Charged'}</h2>
      <p className="mt-1 text-28 font-black tracking-tight">
        {exactMoney(chargedMinor ?? quotedMinor, currency)}
        {chargedMinor === null && <span className="text-14 font-normal tracking-normal text-ink-2"> at most</span>}
      </p>
      <p className="mt-1 text-13 text-ink-2">
        {chargedMinor === null
          ? 'You pay for what completes, never more than the quote. A track that fails on our side is free.'
          : `Quoted ${exactMoney(quotedMinor, currency)}; ${exactMoney(quotedMinor - chargedMinor, currency)} released.`}
      </p>
      {canCancel && (
        <Button icon={Ban} className="mt-3 self-start" onClick={() => setAsking(true)}>
          Cancel this run
        </Button>
      )}
      {cancel.isError && <ProblemNotice title="Not cancelled" {...failureOf(cancel.error)} className="mt-3" />}
      <Dialog
        open={asking}
        onClose={() => setAsking(false)}
        title={`Cancel ${run.number}?`}
        actions={
          <>
            <Button onClick={() => setAsking(false)}>Let it go on</Button>
            <Button
              variant="filled"
              pending={cancel.isPending}
              onClick={() => cancel.mutate(undefined, { onSettled: () => setAsking(false) })}
            >
              Cancel,{' '}
              {nothingDone ? `charge ${exactMoney(0, currency)}` : `keep ${run.scenariosDone} of ${run.scenariosTotal}`}
            </Button>
          </>
        }
      >
        {nothingDone ? (
          <p>
            No track has finished, so cancelling charges <b>{exactMoney(0, currency)}</b> and releases the{' '}
            {exactMoney(quotedMinor, currency)} reserved.
          </p>
        ) : (
          <>
            <p>
              {run.scenariosDone} of {run.scenariosTotal} tracks are finished. They are kept, stay readable and are
              charged by their sites in reach, with the run’s minimum: never more than{' '}
              {exactMoney(quotedMinor, currency)}. The rest is released.
            </p>
            <Message tone="info" className="mt-3">
              A track that finishes while you decide counts as finished.
            </Message>
          </>
        )}
      </Dialog>
    </section>
  );
}
