import { useRouteError } from 'react-router-dom';
import { BareLayout } from '../ui/bare-layout.tsx';
import { ProblemNotice } from '../ui/problem.tsx';
import { describeError } from './describe-error.ts';

/** When not even the frame can be drawn, for example because the service is down. */
export function BareError() {
  const { title, detail, requestId } = describeError(useRouteError());
  return (
    <BareLayout title={title}>
      <ProblemNotice
        title={title}
        detail={detail}
        requestId={requestId}
        onRetry={() => window.location.reload()}
        className="w-120"
      />
    </BareLayout>
  );
}
