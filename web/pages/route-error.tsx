import { useRevalidator, useRouteError } from 'react-router-dom';
import { paths } from '../paths.ts';
import { ButtonLink } from '../ui/button.tsx';
import { Page } from '../ui/page.tsx';
import { ProblemNotice } from '../ui/problem.tsx';
import { describeError } from './describe-error.ts';

/** What every page shows when it can't be shown: what, why, and a way on. */
export function RouteError() {
  const { title, detail, requestId, canRetry } = describeError(useRouteError());
  const revalidator = useRevalidator();
  return (
    <Page title={title} crumbs={[{ label: title }]}>
      <div className="flex max-w-160 flex-col items-start gap-4">
        <ProblemNotice
          title={title}
          detail={detail}
          requestId={requestId}
          onRetry={canRetry ? () => revalidator.revalidate() : undefined}
          className="w-full"
        />
        <ButtonLink to={paths.home()}>To Home</ButtonLink>
      </div>
    </Page>
  );
}
