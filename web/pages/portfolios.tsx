import { useInfiniteQuery } from '@tanstack/react-query';
import { Upload } from 'lucide-react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { READERS, UNDERWRITERS } from '#contract/roles.ts';
import { ApiError } from '../api/api-error.ts';
import { PortfolioTable } from '../features/portfolios/components/portfolio-table.tsx';
import { UploadDialog } from '../features/portfolios/components/upload-dialog.tsx';
import { portfoliosQuery } from '../features/portfolios/portfolio-queries.ts';
import { requireOneOf, SITE_DATA_DETAIL } from '../features/session/guard.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { counted } from '../lib/numbers.ts';
import { paths } from '../paths.ts';
import { Button } from '../ui/button.tsx';
import { Card } from '../ui/card.tsx';
import { Page } from '../ui/page.tsx';
import { ProblemNotice } from '../ui/problem.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async () => {
  await requireOneOf(READERS, SITE_DATA_DETAIL);
  return null;
};

export function Component() {
  const portfolios = useInfiniteQuery(portfoliosQuery());
  const canWrite = holdsOneOf(useSession(), UNDERWRITERS);
  const navigate = useNavigate();
  const [search, setSearch] = useSearchParams();
  const uploading = canWrite && search.has('upload');
  const items = portfolios.data?.pages.flatMap((page) => page.items) ?? [];
  const setUploading = (open: boolean) =>
    setSearch(
      (before) => {
        const after = new URLSearchParams(before);
        if (open) after.set('upload', 'new');
        else after.delete('upload');
        return after;
      },
      { replace: true },
    );

  return (
    <Page
      title="Portfolios"
      crumbs={[{ label: 'Portfolios' }]}
      sub={
        portfolios.isSuccess && items.length > 0 ? (
          <span>
            {counted(items.length, 'portfolio')}
            {portfolios.hasNextPage && ' and more'}. A run uses the sealed edition, never a draft.
          </span>
        ) : undefined
      }
      actions={
        canWrite && (
          <Button variant="filled" icon={Upload} onClick={() => setUploading(true)}>
            Upload a schedule
          </Button>
        )
      }
    >
      {portfolios.isError && items.length === 0 ? (
        <ProblemNotice
          title="The portfolios weren’t read"
          detail={portfolios.error.message}
          requestId={portfolios.error instanceof ApiError ? portfolios.error.requestId : ''}
          onRetry={() => portfolios.refetch()}
        />
      ) : portfolios.isSuccess && items.length === 0 ? (
        <Card>
          <div className="mx-auto flex max-w-120 flex-col items-center gap-3 py-12 text-center">
            <h2 className="text-20">No portfolio yet</h2>
            <p className="text-ink-2">
              Upload a schedule of locations as text. You say which column is which, see what can’t be scored, and seal
              an edition to run.
            </p>
            {canWrite && (
              <Button icon={Upload} onClick={() => setUploading(true)}>
                Choose a schedule
              </Button>
            )}
          </div>
        </Card>
      ) : (
        <PortfolioTable
          portfolios={items}
          loading={portfolios.isPending}
          more={
            portfolios.hasNextPage
              ? { pending: portfolios.isFetchingNextPage, onMore: () => void portfolios.fetchNextPage() }
              : undefined
          }
          failedMore={portfolios.isFetchNextPageError}
        />
      )}
      {uploading && (
        <UploadDialog
          open
          onClose={() => setUploading(false)}
          onUploaded={(edition) => void navigate(paths.edition(edition.id, 'columns'))}
        />
      )}
    </Page>
  );
}
