import { useQuery } from '@tanstack/react-query';
import { Download } from 'lucide-react';
import type { SourceClass, Validation } from '#contract/validation.ts';
import { failureOf } from '../api/failure.ts';
import { DataLimits } from '../features/validation/components/data-limits.tsx';
import { ErrorHeadline } from '../features/validation/components/error-headline.tsx';
import { ErrorTable } from '../features/validation/components/error-table.tsx';
import { GroupTable } from '../features/validation/components/group-table.tsx';
import { GustScatter } from '../features/validation/components/gust-scatter.tsx';
import { ReadingsTable } from '../features/validation/components/readings-table.tsx';
import { StationTable } from '../features/validation/components/station-table.tsx';
import { VALIDATION_NOTE, validationCsv } from '../features/validation/validation-file.ts';
import { validationQuery } from '../features/validation/validation-queries.ts';
import { SOURCE_WORDS } from '../features/validation/validation-words.ts';
import { Button } from '../ui/button.tsx';
import { Card } from '../ui/card.tsx';
import { saveText } from '../ui/charts/chart-frame.tsx';
import { Page } from '../ui/page.tsx';
import { ProblemNotice } from '../ui/problem.tsx';
import { Skeleton } from '../ui/skeleton.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

const save = (validation: Validation) =>
  saveText('validation-stations.csv', validationCsv(validation), 'text/csv;charset=utf-8');

export function Component() {
  const { data, isPending, error, refetch } = useQuery(validationQuery());
  return (
    <Page
      title="Validation"
      crumbs={[{ label: 'Validation' }]}
      note={VALIDATION_NOTE}
      sub={<span>Gusts of past storms against observed ones, by this engine with nothing fitted to them</span>}
      actions={
        data && (
          <Button icon={Download} onClick={() => save(data)} data-print="hide">
            Download stations
          </Button>
        )
      }
    >
      {isPending ? (
        <Waiting />
      ) : data ? (
        <Comparison validation={data} />
      ) : (
        <ProblemNotice title="The comparison wasn’t read" {...failureOf(error)} onRetry={() => refetch()} />
      )}
    </Page>
  );
}

function Comparison({ validation }: { validation: Validation }) {
  return (
    <div className="flex flex-col gap-4">
      <ErrorHeadline validation={validation} />
      <div className="grid grid-cols-[minmax(0,1fr)_minmax(0,1fr)] items-start gap-4 max-wide:grid-cols-1">
        <Card>
          <GustScatter validation={validation} />
        </Card>
        <DataLimits validation={validation} />
      </div>
      <ErrorTable validation={validation} />
      <div className="grid grid-cols-[minmax(0,1fr)_minmax(0,1fr)] items-start gap-4 max-wide:grid-cols-1">
        <GroupTable validation={validation} title="By storm" group="storm" nameHeader="Storm" name={(name) => name} />
        <div className="flex min-w-0 flex-col gap-4">
          <GroupTable
            validation={validation}
            title="By source"
            group="source-class"
            nameHeader="Source"
            name={(key) => SOURCE_WORDS[key as SourceClass]}
          />
          <ReadingsTable validation={validation} />
        </div>
      </div>
      <StationTable validation={validation} />
    </div>
  );
}

function Waiting() {
  return (
    <div role="status" aria-label="Reading the comparison" className="flex flex-col gap-4">
      {[2, 6, 8].map((lines) => (
        <Card key={lines}>
          {Array.from({ length: lines }, (_, line) => (
            <Skeleton key={line} width={line % 2 ? '55%' : '80%'} className="my-3" />
          ))}
        </Card>
      ))}
    </div>
  );
}
