import { useEffect } from 'react';
import { useSuspenseQuery } from '@tanstack/react-query';
import { ArrowRight, Play, Printer, Undo2 } from 'lucide-react';
import { useNavigate, useParams, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { INTAKE_NOTE } from '#contract/notices.ts';
import type { Edition } from '#contract/portfolios.ts';
import { READERS, UNDERWRITERS } from '#contract/roles.ts';
import { CheckingCard } from '../features/portfolios/components/checking-card.tsx';
import { ChecksStep } from '../features/portfolios/components/checks-step.tsx';
import { ColumnsStep } from '../features/portfolios/components/columns-step.tsx';
import { ReadinessStep } from '../features/portfolios/components/readiness-step.tsx';
import { SealedEdition } from '../features/portfolios/components/sealed-edition.tsx';
import { editionQuery, messagesQuery, useUndoFix } from '../features/portfolios/edition-queries.ts';
import { intakeSteps, stepShown } from '../features/portfolios/intake-steps.ts';
import { requireOneOf, SITE_DATA_DETAIL } from '../features/session/guard.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { day, utc } from '../lib/dates.ts';
import { paths, type IntakeStep } from '../paths.ts';
import { queryClient } from '../query-client.ts';
import { Button, ButtonLink } from '../ui/button.tsx';
import { Message } from '../ui/message.tsx';
import { Page } from '../ui/page.tsx';
import { Stepper } from '../ui/stepper.tsx';
import { Tabs } from '../ui/tabs.tsx';
import { useToast } from '../ui/toast.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async ({ params }: LoaderFunctionArgs) => {
  await requireOneOf(READERS, SITE_DATA_DETAIL);
  await queryClient.ensureQueryData(editionQuery(params.editionId!));
  return null;
};

const CRUMBS: Record<IntakeStep, string> = {
  columns: 'Columns',
  checks: 'Checks',
  readiness: 'Readiness',
  sites: 'Sites',
};

export function Component() {
  const { editionId } = useParams();
  const { data: edition } = useSuspenseQuery(editionQuery(editionId!));
  const canWrite = holdsOneOf(useSession(), UNDERWRITERS);
  const [search] = useSearchParams();
  const step = stepShown(edition, search.get('step'));

  // When the checks end, their lists are new.
  useEffect(() => {
    if (edition.state === 'checked')
      void queryClient.invalidateQueries({ queryKey: messagesQuery(edition.id).queryKey });
  }, [edition.state, edition.id]);

  return edition.state === 'sealed' ? (
    <SealedPage edition={edition} step={step} canWrite={canWrite} />
  ) : (
    <DraftPage key={edition.id} edition={edition} step={step} canWrite={canWrite} />
  );
}

interface EditionViewProps {
  edition: Edition;
  step: IntakeStep;
  canWrite: boolean;
}

const crumbsOf = (edition: Edition, last: string) => [
  { label: 'Portfolios', to: paths.portfolios() },
  { label: edition.portfolioName, to: paths.portfolio(edition.portfolioId) },
  { label: last },
];

function DraftPage({ edition, step, canWrite }: EditionViewProps) {
  const navigate = useNavigate();
  const [search, setSearch] = useSearchParams();
  const checked = edition.state === 'checked';
  return (
    <Page
      title={step === 'readiness' ? `Readiness, ${edition.portfolioName}` : edition.portfolioName}
      crumbs={crumbsOf(edition, CRUMBS[step])}
      note={INTAKE_NOTE}
      fixed={step === 'checks' && checked}
      sub={
        <>
          <span>
            {edition.file.name}, uploaded <b>{utc(edition.file.uploadedAt)}</b> by {edition.file.uploadedBy}
          </span>
          <span>Draft of edition {edition.number}</span>
        </>
      }
      actions={
        <>
          {canWrite && checked && step === 'checks' && edition.fixes.length > 0 && <UndoButton edition={edition} />}
          {checked && step === 'checks' && (
            <ButtonLink to={paths.edition(edition.id, 'readiness')} trailingIcon={ArrowRight}>
              To readiness
            </ButtonLink>
          )}
          {checked && step === 'readiness' && (
            <Button icon={Printer} onClick={() => window.print()} className="max-rail:hidden" data-print="hide">
              Print sheet
            </Button>
          )}
        </>
      }
    >
      <Stepper label="Intake" steps={intakeSteps(edition, step)} />
      {edition.problem && (
        <Message tone="error" title="The last check stopped" className="mb-3.5">
          {edition.problem}
        </Message>
      )}
      {step === 'columns' && (
        <ColumnsStep
          edition={edition}
          canWrite={canWrite}
          onMapped={() => void navigate(paths.edition(edition.id, 'checks'))}
        />
      )}
      {step === 'checks' &&
        (checked ? (
          <ChecksStep
            edition={edition}
            canWrite={canWrite}
            chosen={search.get('kind')}
            onChoose={(code) =>
              setSearch(
                (before) => {
                  const after = new URLSearchParams(before);
                  after.set('step', 'checks');
                  after.set('kind', code);
                  return after;
                },
                { replace: true, preventScrollReset: true },
              )
            }
          />
        ) : (
          <CheckingCard edition={edition} />
        ))}
      {step === 'readiness' && (
        <ReadinessStep
          edition={edition}
          canWrite={canWrite}
          onSealed={() => void navigate(paths.edition(edition.id), { replace: true })}
        />
      )}
      {step === 'sites' && <SealedEdition edition={edition} />}
    </Page>
  );
}

function UndoButton({ edition }: { edition: Edition }) {
  const undo = useUndoFix(edition.id);
  const toast = useToast();
  return (
    <Button
      variant="quiet"
      icon={Undo2}
      pending={undo.isPending}
      onClick={() =>
        undo.mutate(undefined, {
          onSuccess: () => toast({ text: 'The last fix is undone; the rows are as received.' }),
          onError: (error) => toast({ text: error.message }),
        })
      }
    >
      Undo last fix
    </Button>
  );
}

function SealedPage({ edition, step, canWrite }: EditionViewProps) {
  return (
    <Page
      title={`${edition.portfolioName}, edition ${edition.number}`}
      crumbs={crumbsOf(edition, `Edition ${edition.number}`)}
      note={INTAKE_NOTE}
      fixed={step === 'sites'}
      sub={
        <>
          {edition.asAt && (
            <span>
              Values as at <b>{day(edition.asAt)}</b>
            </span>
          )}
          {edition.sealedAt && (
            <span>
              Sealed {utc(edition.sealedAt)} by {edition.sealedBy}
            </span>
          )}
          {edition.digest && (
            <span>
              digest <b>{edition.digest.slice(0, 8)}</b>
            </span>
          )}
        </>
      }
      actions={
        <>
          {step === 'readiness' && (
            <Button icon={Printer} onClick={() => window.print()} data-print="hide">
              Print sheet
            </Button>
          )}
          {canWrite && (
            <ButtonLink variant="filled" icon={Play} to={paths.newRun({ edition: edition.id })}>
              Run this edition
            </ButtonLink>
          )}
        </>
      }
    >
      <Tabs
        label="Edition"
        tabs={[
          { to: paths.edition(edition.id, 'sites'), label: 'Sites', current: step === 'sites' },
          { to: paths.edition(edition.id, 'readiness'), label: 'Readiness sheet', current: step === 'readiness' },
        ]}
      />
      {step === 'sites' ? (
        <SealedEdition edition={edition} />
      ) : (
        <ReadinessStep edition={edition} canWrite={false} onSealed={() => undefined} />
      )}
    </Page>
  );
}
