import { useInfiniteQuery } from '@tanstack/react-query';
import { Plus } from 'lucide-react';
import { UNDERWRITERS } from '#contract/roles.ts';
import { failureOf } from '../api/failure.ts';
import { RunsTable } from '../features/runs/components/runs-table.tsx';
import { runsQuery } from '../features/runs/run-queries.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { paths } from '../paths.ts';
import { Button, ButtonLink } from '../ui/button.tsx';
import { Card } from '../ui/card.tsx';
import { Page } from '../ui/page.tsx';
import { ProblemNotice } from '../ui/problem.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export function Component() {
  const runs = useInfiniteQuery(runsQuery());
  const session = useSession();
  const canRun = holdsOneOf(session, UNDERWRITERS);
  const items = runs.data?.pages.flatMap((page) => page.items) ?? [];
  const isEmpty = runs.isSuccess && items.length === 0;
  return (
    <Page
      title="Runs"
      crumbs={[{ label: 'Runs' }]}
      sub={
        items.length > 0 ? (
          <span>Newest first. One bar’s width always reads as the same relative spread.</span>
        ) : undefined
      }
      actions={
        canRun &&
        !isEmpty && (
          <ButtonLink variant="filled" icon={Plus} to={paths.newRun()}>
            New run
          </ButtonLink>
        )
      }
    >
      {runs.isError && items.length === 0 ? (
        <ProblemNotice title="The runs weren’t read" {...failureOf(runs.error)} onRetry={() => runs.refetch()} />
      ) : isEmpty ? (
        <Card>
          <div className="mx-auto flex max-w-120 flex-col items-center gap-3 py-12 text-center">
            <h2 className="text-20">No run yet</h2>
            <p className="text-ink-2">
              {canRun
                ? 'A run scores a sealed edition against one or several tracks. Its price is known before the button.'
                : 'Runs started by your colleagues will be listed here.'}
            </p>
            {canRun && (
              <ButtonLink variant="filled" icon={Plus} to={paths.newRun()}>
                New run
              </ButtonLink>
            )}
          </div>
        </Card>
      ) : (
        <>
          <RunsTable
            runs={items}
            loading={runs.isPending}
            linked={!session.roles.every((role) => role === 'admin')}
            failedMore={runs.isFetchNextPageError ? () => void runs.fetchNextPage() : undefined}
          />
          {runs.hasNextPage && (
            <Button
              className="mt-3 self-center"
              pending={runs.isFetchingNextPage}
              onClick={() => void runs.fetchNextPage()}
            >
              Show more
            </Button>
          )}
        </>
      )}
    </Page>
  );
}
