import { useCallback } from 'react';
import { useSuspenseQuery } from '@tanstack/react-query';
import { ClockAlert, Download, Radar } from 'lucide-react';
import { Link, useNavigate, useParams, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { exportSites, type Run, type RunScenario } from '#contract/runs.ts';
import type { Stale } from '#contract/track-age.ts';
import { addressOf } from '../api/call.ts';
import { MapTab } from '../features/results/components/map-tab.tsx';
import { Overview } from '../features/results/components/overview.tsx';
import { CANCELLERS, ProgressPanel } from '../features/results/components/progress-panel.tsx';
import { PurposeChip, RunStateChip } from '../features/results/components/run-chips.tsx';
import { RunSlipTab } from '../features/results/components/run-slip.tsx';
import { SitesTab } from '../features/results/components/sites-tab.tsx';
import { runQuery } from '../features/results/result-queries.ts';
import { isUnderWay, useRunProgress } from '../features/results/run-progress.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { day } from '../lib/dates.ts';
import { exactMoney } from '../lib/money.ts';
import { count } from '../lib/numbers.ts';
import { paths, type RunTab } from '../paths.ts';
import { queryClient } from '../query-client.ts';
import { Card } from '../ui/card.tsx';
import { Chip } from '../ui/chip.tsx';
import { Page } from '../ui/page.tsx';
import { StaleChip } from '../ui/stale-chip.tsx';
import { Tabs } from '../ui/tabs.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async ({ params }: LoaderFunctionArgs) => {
  await queryClient.ensureQueryData(runQuery(params.runId!));
  return null;
};

const TABS: readonly RunTab[] = ['overview', 'sites', 'map', 'slip'];
const isTab = (text: string | null): text is RunTab => TABS.some((tab) => tab === text);

/** The track asked for, else the first that can be read. */
const chosenScenario = (run: Run, id: string | null): RunScenario | undefined =>
  run.scenarios.find((scenario) => scenario.id === id) ??
  run.scenarios.find(({ result }) => result !== null) ??
  run.scenarios[0];

const tracksText = (run: Run): string =>
  run.scenarioNames.length <= 2 ? run.scenarioNames.join(' and ') : `${run.scenarioNames.length} tracks`;

export function Component() {
  const { runId } = useParams();
  const { data: run } = useSuspenseQuery(runQuery(runId!));
  const provisional = run.notices.filter(({ code }) => code === 'provisional').map(({ text }) => text);
  const conditioned = run.notices.filter(({ code }) => code === 'conditioned-on-observation').map(({ text }) => text);
  const liveness = useRunProgress(run.id, run.state);
  const [search, setSearch] = useSearchParams();
  const navigate = useNavigate();
  const canCancel = holdsOneOf(useSession(), CANCELLERS);
  const tab = isTab(search.get('tab')) ? (search.get('tab') as RunTab) : 'overview';
  const scenario = chosenScenario(run, search.get('scenario'));
  const hasResult = scenario !== undefined && scenario.result !== null;
  const siteParam = Number(search.get('site'));
  const chosenSiteNo = search.has('site') && Number.isInteger(siteParam) && siteParam > 0 ? siteParam : null;
  const onChooseSite = useCallback(
    (siteNo: number | null) =>
      setSearch(
        (before) => {
          const after = new URLSearchParams(before);
          if (siteNo === null) after.delete('site');
          else after.set('site', String(siteNo));
          return after;
        },
        { replace: true, preventScrollReset: true },
      ),
    [setSearch],
  );
  const to = (next: RunTab) =>
    paths.run(run.id, { tab: next === 'overview' ? undefined : next, scenario: search.get('scenario') ?? undefined });
  const unfinished = run.scenariosDone < run.scenariosTotal;
  const fills = hasResult && (tab === 'sites' || tab === 'map');

  return (
    <Page
      title={`${run.portfolioName}, ${tracksText(run)}`}
      crumbs={[{ label: 'Runs', to: paths.runs() }, { label: run.number }]}
      fixed={fills}
      sub={<Provenance run={run} />}
      actions={
        hasResult && (
          <a
            className="inline-flex h-9 items-center justify-center gap-2 rounded-2 border border-edge bg-sheet px-3.5 text-14 font-bold text-ink no-underline hover:bg-hover pointer-coarse:h-11"
            href={addressOf(exportSites, { params: { runId: run.id, runScenarioId: scenario.id } })}
            download
          >
            <Download size={16} strokeWidth={1.75} aria-hidden />
            Export CSV
          </a>
        )
      }
    >
      {run.stamped && (
        <p className="mb-3 flex flex-none items-center gap-2.5 rounded-2 bg-event-tint px-3.5 py-2 text-13 text-event">
          <ClockAlert size={16} strokeWidth={1.75} className="flex-none" aria-hidden />
          <span>
            <b>Unsigned calibration, exploratory.</b> {run.calibration.code} version {run.calibration.version} is{' '}
            {run.calibration.state}; every output of this run says so.
          </span>
        </p>
      )}
      {provisional.length > 0 && (
        <p className="mb-3 flex flex-none items-center gap-2.5 rounded-2 bg-event-tint px-3.5 py-2 text-13 text-event">
          <ClockAlert size={16} strokeWidth={1.75} className="flex-none" aria-hidden />
          <span>{provisional.join(' ')}</span>
        </p>
      )}
      {conditioned.length > 0 && (
        <p className="mb-3 flex flex-none items-center gap-2.5 rounded-2 bg-info-tint px-3.5 py-2 text-13 text-info">
          <Radar size={16} strokeWidth={1.75} className="flex-none" aria-hidden />
          <span>{conditioned.join(' ')}</span>
        </p>
      )}
      <Tabs
        label="Views of this run"
        tabs={[
          { to: to('overview'), label: 'Overview', current: tab === 'overview' },
          ...(hasResult
            ? [
                {
                  to: to('sites'),
                  label: (
                    <>
                      Sites
                      <span className="ml-1.5 text-13 font-normal text-ink-2">
                        {count(scenario.result!.sitesScored)}
                      </span>
                    </>
                  ),
                  current: tab === 'sites',
                },
                { to: to('map'), label: 'Map', current: tab === 'map' },
              ]
            : []),
          { to: to('slip'), label: 'Run slip', current: tab === 'slip' },
        ]}
      />
      {tab === 'slip' ? (
        <RunSlipTab runId={run.id} />
      ) : (
        <>
          {tab === 'overview' && (unfinished || isUnderWay(run.state)) && (
            <ProgressPanel run={run} liveness={liveness} canCancel={canCancel} />
          )}
          {run.scenarios.length > 1 && tab !== 'overview' && hasResult && (
            <ScenarioLinks run={run} chosen={scenario} tab={tab} />
          )}
          {!hasResult ? (
            <NothingYet run={run} scenario={scenario} />
          ) : tab === 'sites' ? (
            <SitesTab key={scenario.id} {...{ run, scenario, chosenSiteNo, onChooseSite }} />
          ) : tab === 'map' ? (
            <MapTab key={scenario.id} {...{ run, scenario, chosenSiteNo, onChooseSite }} />
          ) : (
            <Overview
              key={scenario.id}
              run={run}
              scenario={scenario}
              onChooseSite={(siteNo) =>
                void navigate(paths.run(run.id, { tab: 'map', scenario: scenario.id, site: String(siteNo) }))
              }
            />
          )}
        </>
      )}
    </Page>
  );
}

/** Run, edition and as-at date, calibration and its signature: in the head of every result. */
function Provenance({ run }: { run: Run }) {
  const { calibration } = run;
  const partial = run.scenariosDone < run.scenariosTotal;
  const oldest = run.scenarios.reduce<Stale | null>(
    (found, { stale }) => (stale && stale.ageHours > (found?.ageHours ?? 0) ? stale : found),
    null,
  );
  return (
    <>
      <RunStateChip state={run.state} />
      <PurposeChip purpose={run.purpose} />
      {oldest && <StaleChip stale={oldest} what="Stale track" />}
      {partial && run.scenariosDone > 0 && (
        <Chip tone="caution">
          Partial: {run.scenariosDone} of {run.scenariosTotal}
        </Chip>
      )}
      <span>
        Run <b>{run.number}</b>
      </span>
      <span>
        Edition {run.editionNumber}
        {run.asAt && (
          <>
            , as at <b>{day(run.asAt)}</b>
          </>
        )}
      </span>
      <span>
        {calibration.code} v{calibration.version},{' '}
        {calibration.signedBy ? `signed by ${calibration.signedBy}` : calibration.state}
      </span>
      <span>
        {run.chargedMinor === null
          ? `reserved ${exactMoney(run.quotedMinor, run.priceCurrency)}`
          : `charged ${exactMoney(run.chargedMinor, run.priceCurrency)}`}
      </span>
    </>
  );
}

function ScenarioLinks({ run, chosen, tab }: { run: Run; chosen: RunScenario; tab: RunTab }) {
  return (
    <nav aria-label="Tracks of this run" className="mb-3 flex flex-none flex-wrap gap-2">
      {run.scenarios
        .filter(({ result }) => result !== null)
        .map((scenario) => (
          <Link
            key={scenario.id}
            to={paths.run(run.id, { tab, scenario: scenario.id })}
            aria-current={scenario.id === chosen.id ? 'true' : undefined}
            className={`rounded-2 border px-3 py-1 text-13 no-underline ${
              scenario.id === chosen.id
                ? 'border-ink bg-ink font-bold text-(--page)'
                : 'border-edge bg-sheet text-ink hover:bg-hover'
            }`}
          >
            {scenario.name}
          </Link>
        ))}
    </nav>
  );
}

function NothingYet({ run, scenario }: { run: Run; scenario: RunScenario | undefined }) {
  const text = isUnderWay(run.state)
    ? 'Results stand here as soon as the first track is stored.'
    : run.state === 'cancelled'
      ? 'This run was cancelled before any track finished. Nothing was charged for it.'
      : `This track has no result. ${scenario?.error ?? 'It failed on our side and is free.'}`;
  return (
    <Card>
      <p className="py-4 text-ink-2">{text}</p>
    </Card>
  );
}
