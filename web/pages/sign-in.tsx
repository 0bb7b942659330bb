import { ArrowRight } from 'lucide-react';
import { redirect, useNavigate, useSearchParams } from 'react-router-dom';
import { findSession, safeNext } from '../features/session/guard.ts';
import { SignInForm } from '../features/session/components/sign-in-form.tsx';
import { paths } from '../paths.ts';
import { BareLayout } from '../ui/bare-layout.tsx';
import { UtcClock } from '../ui/frame/utc-clock.tsx';
import { Message } from '../ui/message.tsx';

export { BareError as ErrorBoundary } from './bare-error.tsx';

export const loader = async ({ request }: { request: Request }) => {
  const next = safeNext(new URL(request.url).searchParams.get('next'));
  return (await findSession()) ? redirect(next) : null;
};

export function Component() {
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const wished = search.get('next');
  return (
    <BareLayout title="Sign in" aside={<UtcClock />}>
      <div className="w-105 max-rail:w-full">
        <SignInForm
          onSignedIn={(session) =>
            void navigate(session.acceptanceRequired ? paths.accept(wished ?? undefined) : safeNext(wished), {
              replace: true,
            })
          }
        />
        {wished && (
          <Message tone="info" icon={ArrowRight} className="mt-3.5">
            Sign in to go on to <b className="break-all">{safeNext(wished)}</b>.
          </Message>
        )}
        <p className="mt-3.5 text-center text-13 text-ink-2">No account? Your organisation’s admin invites people.</p>
      </div>
    </BareLayout>
  );
}
