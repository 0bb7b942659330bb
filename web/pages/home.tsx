import { useQuery } from '@tanstack/react-query';
import { Plus, Route, Upload, Wallet } from 'lucide-react';
import { ADMINS, READERS, TRACK_WRITERS, UNDERWRITERS } from '#contract/roles.ts';
import type { Session } from '#contract/session.ts';
import { MoneyCard, MoneyStrip } from '../features/home/components/money-card.tsx';
import { RecentRunsCard } from '../features/home/components/recent-runs-card.tsx';
import { ScenariosCard } from '../features/home/components/scenarios-card.tsx';
import { WaitingCard } from '../features/home/components/waiting-card.tsx';
import {
  homeBalanceQuery,
  recentPortfoliosQuery,
  recentRunsQuery,
  recentScenariosQuery,
} from '../features/home/home-queries.ts';
import { waitingItems } from '../features/home/waiting.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { clock, day, longDay } from '../lib/dates.ts';
import { countInWords } from '../lib/numbers.ts';
import { useNow } from '../lib/use-now.ts';
import { paths } from '../paths.ts';
import { ButtonLink } from '../ui/button.tsx';
import { Page } from '../ui/page.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

const CRUMBS = [{ label: 'Home' }];
const firstName = (session: Session) => session.person.name.split(' ')[0] ?? session.person.name;

/** What a person sees first is decided by what they do here. */
export function Component() {
  const session = useSession();
  if (!holdsOneOf(session, READERS)) return <AdminHome session={session} />;
  return <WorkHome session={session} />;
}

function WorkHome({ session }: { session: Session }) {
  const now = useNow(60_000);
  const runs = useQuery(recentRunsQuery());
  const portfolios = useQuery(recentPortfoliosQuery());
  const scenarios = useQuery(recentScenariosQuery());
  const balance = useQuery(homeBalanceQuery());
  const canWrite = holdsOneOf(session, UNDERWRITERS);
  const modeler = session.roles.includes('modeler');
  const runItems = runs.data?.items ?? [];
  const waiting = canWrite ? waitingItems(portfolios.data?.items ?? [], runs.data ? runItems : null, now) : [];
  const working = runItems.filter((run) => run.state === 'waiting' || run.state === 'working').length;
  const lastFinished = runItems.map((run) => run.finishedAt).find((at) => at !== null);

  // Nothing is said of what waits before it is known.
  const isReading = portfolios.isPending || runs.isPending;
  const title =
    !canWrite || isReading
      ? `Good to see you, ${firstName(session)}`
      : waiting.length === 0
        ? `Nothing waits for you, ${firstName(session)}`
        : `${countInWords(waiting.length)} ${waiting.length === 1 ? 'thing waits' : 'things wait'} for you, ${firstName(session)}`;
  const runsSentence =
    working === 0
      ? lastFinished && `The last run finished ${day(lastFinished)} ${clock(lastFinished)} UTC.`
      : `${countInWords(working)} ${working === 1 ? 'run is' : 'runs are'} working; nothing needs you there.`;

  return (
    <Page
      title="Home"
      heading={title}
      crumbs={CRUMBS}
      sub={
        <span>
          {longDay(now)}. {runsSentence}
        </span>
      }
      actions={
        canWrite && (
          <>
            {modeler ? (
              <ButtonLink to={paths.newScenario()} icon={Route}>
                New scenario
              </ButtonLink>
            ) : (
              <ButtonLink to={paths.uploadSchedule()} icon={Upload}>
                Upload a schedule
              </ButtonLink>
            )}
            <ButtonLink to={paths.newRun()} icon={Plus}>
              New run
            </ButtonLink>
          </>
        )
      }
    >
      <div className="grid items-start gap-4 wide:grid-cols-[minmax(0,1fr)_356px]">
        <div className="flex min-w-0 flex-col gap-4">
          {canWrite && (
            <WaitingCard
              items={waiting}
              loading={isReading}
              quiet={
                portfolios.data?.items.length === 0
                  ? 'Start by uploading a schedule of locations; you will be led through columns, checks and the seal.'
                  : 'Drafts to finish, held rows and fresh results will stand here.'
              }
            />
          )}
          <RecentRunsCard
            runs={runItems}
            loading={runs.isPending}
            error={runs.error}
            onRetry={() => runs.refetch()}
            now={now}
            withResults
          />
        </div>
        <div className="flex min-w-0 flex-col gap-4">
          <ScenariosCard
            scenarios={scenarios.data?.items ?? []}
            loading={scenarios.isPending}
            error={scenarios.error}
            onRetry={() => scenarios.refetch()}
            canWrite={holdsOneOf(session, TRACK_WRITERS)}
          />
          <MoneyCard balance={balance.data} error={balance.error} onRetry={() => balance.refetch()} />
        </div>
      </div>
    </Page>
  );
}

function AdminHome({ session }: { session: Session }) {
  const now = useNow(60_000);
  const runs = useQuery(recentRunsQuery());
  const balance = useQuery(homeBalanceQuery());
  return (
    <Page
      title="Home"
      heading={`Good to see you, ${firstName(session)}`}
      crumbs={CRUMBS}
      sub={<span>{longDay(now)}. Runs and money; account admins see no site data.</span>}
      actions={
        holdsOneOf(session, ADMINS) && (
          <ButtonLink variant="filled" icon={Wallet} to={paths.billing()}>
            Top up
          </ButtonLink>
        )
      }
    >
      <MoneyStrip balance={balance.data} error={balance.error} onRetry={() => balance.refetch()} />
      <RecentRunsCard
        runs={runs.data?.items ?? []}
        loading={runs.isPending}
        error={runs.error}
        onRetry={() => runs.refetch()}
        now={now}
        withResults={false}
      />
    </Page>
  );
}
