import { useInfiniteQuery } from '@tanstack/react-query';
import { Plus } from 'lucide-react';
import { READERS, TRACK_WRITERS, UNDERWRITERS } from '#contract/roles.ts';
import { failureOf } from '../api/failure.ts';
import { ScenarioTable } from '../features/scenarios/components/scenario-table.tsx';
import { scenariosQuery } from '../features/scenarios/scenario-queries.ts';
import { requireOneOf, SITE_DATA_DETAIL } from '../features/session/guard.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { counted } from '../lib/numbers.ts';
import { paths } from '../paths.ts';
import { Button, ButtonLink } from '../ui/button.tsx';
import { Card } from '../ui/card.tsx';
import { Page } from '../ui/page.tsx';
import { ProblemNotice } from '../ui/problem.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async () => {
  await requireOneOf(READERS, SITE_DATA_DETAIL);
  return null;
};

export function Component() {
  const scenarios = useInfiniteQuery(scenariosQuery());
  const session = useSession();
  const canWrite = holdsOneOf(session, TRACK_WRITERS);
  const items = scenarios.data?.pages.flatMap((page) => page.items) ?? [];
  const isEmpty = scenarios.isSuccess && items.length === 0;
  return (
    <Page
      title="Scenarios"
      crumbs={[{ label: 'Scenarios' }]}
      sub={
        items.length > 0 ? (
          <span>
            {counted(items.length, 'track')}
            {scenarios.hasNextPage && ' and more'}. Each track is one scenario, priced as one.
          </span>
        ) : undefined
      }
      actions={
        canWrite &&
        !isEmpty && (
          <ButtonLink variant="filled" icon={Plus} to={paths.newScenario()}>
            New scenario
          </ButtonLink>
        )
      }
    >
      {scenarios.isError && items.length === 0 ? (
        <ProblemNotice
          title="The scenarios weren’t read"
          {...failureOf(scenarios.error)}
          onRetry={() => scenarios.refetch()}
        />
      ) : isEmpty ? (
        <Card>
          <div className="mx-auto flex max-w-120 flex-col items-center gap-3 py-12 text-center">
            <h2 className="text-20">No scenario yet</h2>
            <p className="text-ink-2">
              Bring in a best track, or type one fix by fix. You declare how its winds were averaged and see everything
              the service fills in before it is saved.
            </p>
            {canWrite && (
              <ButtonLink variant="filled" icon={Plus} to={paths.newScenario()}>
                New scenario
              </ButtonLink>
            )}
          </div>
        </Card>
      ) : (
        <>
          <ScenarioTable
            scenarios={items}
            loading={scenarios.isPending}
            canRun={holdsOneOf(session, UNDERWRITERS)}
            failedMore={scenarios.isFetchNextPageError ? () => void scenarios.fetchNextPage() : undefined}
          />
          {scenarios.hasNextPage && (
            <Button
              className="mt-3 self-center"
              pending={scenarios.isFetchingNextPage}
              onClick={() => void scenarios.fetchNextPage()}
            >
              Show more
            </Button>
          )}
        </>
      )}
    </Page>
  );
}
