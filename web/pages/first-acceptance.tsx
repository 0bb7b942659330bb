import { redirect, useLoaderData, useNavigate, useSearchParams } from 'react-router-dom';
import type { Session } from '#contract/session.ts';
import { findSession, safeNext } from '../features/session/guard.ts';
import { AcceptanceSheet } from '../features/session/components/acceptance-sheet.tsx';
import { paths } from '../paths.ts';
import { BareLayout } from '../ui/bare-layout.tsx';

export { BareError as ErrorBoundary } from './bare-error.tsx';

export const loader = async ({ request }: { request: Request }) => {
  const next = new URL(request.url).searchParams.get('next');
  const session = await findSession();
  if (!session) return redirect(paths.signIn(next ?? undefined));
  return session.acceptanceRequired ? session : redirect(safeNext(next));
};

export function Component() {
  const session = useLoaderData<Session>();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  return (
    <BareLayout
      title="Limits of use"
      aside={
        <>
          Signed in as <b className="text-ink">{session.person.name}</b>, {session.organisation.name}
        </>
      }
      className="max-wide:place-items-start"
    >
      <AcceptanceSheet
        session={session}
        onAccepted={() => void navigate(safeNext(search.get('next')), { replace: true })}
        onSignedOut={() => void navigate(paths.signIn(), { replace: true })}
      />
    </BareLayout>
  );
}
