import { useState } from 'react';
import { useSuspenseQuery } from '@tanstack/react-query';
import { Play, Upload } from 'lucide-react';
import { useNavigate, useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { INTAKE_NOTE } from '#contract/notices.ts';
import { READERS, UNDERWRITERS } from '#contract/roles.ts';
import { EditionList } from '../features/portfolios/components/edition-list.tsx';
import { EquationCard } from '../features/portfolios/components/equation-card.tsx';
import { UploadDialog } from '../features/portfolios/components/upload-dialog.tsx';
import { portfolioQuery } from '../features/portfolios/portfolio-queries.ts';
import { requireOneOf, SITE_DATA_DETAIL } from '../features/session/guard.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { day } from '../lib/dates.ts';
import { paths } from '../paths.ts';
import { queryClient } from '../query-client.ts';
import { Button, ButtonLink } from '../ui/button.tsx';
import { Page } from '../ui/page.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async ({ params }: LoaderFunctionArgs) => {
  await requireOneOf(READERS, SITE_DATA_DETAIL);
  await queryClient.ensureQueryData(portfolioQuery(params.portfolioId!));
  return null;
};

export function Component() {
  const { portfolioId } = useParams();
  const { data: portfolio } = useSuspenseQuery(portfolioQuery(portfolioId!));
  const canWrite = holdsOneOf(useSession(), UNDERWRITERS);
  const navigate = useNavigate();
  const [uploading, setUploading] = useState(false);
  const { current } = portfolio;
  return (
    <Page
      title={portfolio.name}
      crumbs={[{ label: 'Portfolios', to: paths.portfolios() }, { label: portfolio.name }]}
      note={INTAKE_NOTE}
      sub={
        <>
          <span>
            {current ? (
              <>
                Current: <b>edition {current.number}</b>
                {current.asAt && `, values as at ${day(current.asAt)}`}
              </>
            ) : (
              'No sealed edition yet'
            )}
          </span>
          <span>{portfolio.currency}</span>
          <span>since {day(portfolio.createdAt)}</span>
        </>
      }
      actions={
        canWrite && (
          <>
            <Button icon={Upload} variant={current ? 'outlined' : 'filled'} onClick={() => setUploading(true)}>
              Upload a new edition
            </Button>
            {current && (
              <ButtonLink variant="filled" icon={Play} to={paths.newRun({ edition: current.id })}>
                Run edition {current.number}
              </ButtonLink>
            )}
          </>
        )
      }
    >
      {current?.reconciliation && (
        <EquationCard reconciliation={current.reconciliation} currency={portfolio.currency} className="mb-4" />
      )}
      <EditionList portfolio={portfolio} />
      {uploading && (
        <UploadDialog
          open
          portfolio={portfolio}
          onClose={() => setUploading(false)}
          onUploaded={(edition) => void navigate(paths.edition(edition.id, 'columns'))}
        />
      )}
    </Page>
  );
}
