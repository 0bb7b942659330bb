import { useState } from 'react';
import { useSuspenseQuery } from '@tanstack/react-query';
import { Plus } from 'lucide-react';
import { useSearchParams } from 'react-router-dom';
import { ADMINS, READERS } from '#contract/roles.ts';
import { balanceQuery } from '../features/billing/billing-queries.ts';
import { BalanceCard, MonthCard } from '../features/billing/components/balance-card.tsx';
import { ChargesCard } from '../features/billing/components/charges-card.tsx';
import { MovementsCard } from '../features/billing/components/movements-card.tsx';
import { TopUpDialog } from '../features/billing/components/top-up-dialog.tsx';
import { TopUpReturn } from '../features/billing/components/top-up-return.tsx';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { classNames } from '../lib/class-names.ts';
import { queryClient } from '../query-client.ts';
import { Button } from '../ui/button.tsx';
import { Page } from '../ui/page.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async () => {
  await queryClient.ensureQueryData(balanceQuery());
  return null;
};

const NOTE =
  'The price is known before the button and is never exceeded. Unused reservations are released when a run closes.';

/** The provider’s page is another site: the browser goes there, not the router. */
const leaveFor = (url: string) => location.assign(url);

export function Component() {
  const { data: balance } = useSuspenseQuery(balanceQuery());
  const session = useSession();
  const [search, setSearch] = useSearchParams();
  const [toppingUp, setToppingUp] = useState(false);
  const isAdmin = holdsOneOf(session, ADMINS);
  const seesAll = isAdmin || holdsOneOf(session, ['auditor']);
  const topUpId = search.get('topUp');
  const forgetTopUp = () =>
    setSearch(
      (before) => {
        const after = new URLSearchParams(before);
        after.delete('topUp');
        after.delete('left');
        return after;
      },
      { replace: true },
    );
  return (
    <Page
      title="Billing"
      crumbs={[{ label: 'Billing' }]}
      note={NOTE}
      sub={
        <span>
          {session.organisation.name}, prepaid in {balance.currency}
        </span>
      }
      actions={
        isAdmin && (
          <Button variant="filled" icon={Plus} onClick={() => setToppingUp(true)}>
            Top up
          </Button>
        )
      }
    >
      {isAdmin && topUpId && (
        <TopUpReturn
          topUpId={topUpId}
          left={search.has('left')}
          onTryAgain={() => {
            forgetTopUp();
            setToppingUp(true);
          }}
          onDone={forgetTopUp}
        />
      )}
      <div
        className={classNames(
          'grid items-start gap-4 max-wide:grid-cols-1',
          seesAll && 'grid-cols-[minmax(0,1fr)_400px]',
        )}
      >
        <div className="flex min-w-0 flex-col gap-4">
          <div className="grid grid-cols-2 gap-4 max-md:grid-cols-1">
            <BalanceCard balance={balance} />
            <MonthCard balance={balance} />
          </div>
          <ChargesCard currency={balance.currency} own={!seesAll} linked={holdsOneOf(session, READERS)} />
        </div>
        {seesAll && <MovementsCard currency={balance.currency} />}
      </div>
      {toppingUp && <TopUpDialog currency={balance.currency} onClose={() => setToppingUp(false)} onLeave={leaveFor} />}
    </Page>
  );
}
