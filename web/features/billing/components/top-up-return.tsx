import { useEffect } from 'react';
import { useQuery, useQueryClient } from '@tanstack/react-query';
import { Loader2, Plus } from 'lucide-react';
import { failureOf } from '../../../api/failure.ts';
import { exactMoney } from '../../../lib/money.ts';
import { useNow } from '../../../lib/use-now.ts';
import { Button } from '../../../ui/button.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { balanceQuery, topUpQuery } from '../billing-queries.ts';

interface TopUpReturnProps {
  topUpId: string;
  /** The person came back without paying. */
  left: boolean;
  onTryAgain: () => void;
  onDone: () => void;
}

const PATIENCE_MS = 60_000;

/** What became of a top-up, as the provider's signed message says; the way back from its page is no proof. */
export function TopUpReturn({ topUpId, left, onTryAgain, onDone }: TopUpReturnProps) {
  const query = useQuery(topUpQuery(topUpId));
  const client = useQueryClient();
  const topUp = query.data;
  const state = topUp?.state;
  useEffect(() => {
    if (state !== 'succeeded') return;
    void client.invalidateQueries({ queryKey: balanceQuery().queryKey });
    void client.invalidateQueries({ queryKey: ['billing', 'movements'] });
  }, [client, state]);

  if (query.isError)
    return (
      <ProblemNotice
        title="The state of the top-up wasn’t read"
        {...failureOf(query.error)}
        onRetry={() => query.refetch()}
        className="mb-3.5"
      />
    );
  if (!topUp) return null;
  const amount = exactMoney(topUp.amountMinor, topUp.currency);
  const close = (
    <Button size="small" onClick={onDone}>
      Close
    </Button>
  );
  const again = (
    <div className="flex flex-wrap gap-2">
      <Button size="small" icon={Plus} onClick={onTryAgain}>
        Try another card
      </Button>
      {close}
    </div>
  );
  return (
    <div role="status" className="mb-3.5">
      {topUp.state === 'succeeded' && (
        <Message tone="done" title={`${amount} credited`} action={close}>
          The provider confirmed the payment; it is free to spend now.
        </Message>
      )}
      {topUp.state === 'declined' && (
        <Message tone="error" title={`${amount} wasn’t paid`} action={again}>
          <p>
            The provider declined it{topUp.reason ? `: ${topUp.reason}` : '.'} Nothing was credited. Runs and results
            stay readable, and the balance you have stays usable.
          </p>
        </Message>
      )}
      {topUp.state === 'abandoned' && (
        <Message tone="caution" title={`${amount} wasn’t paid`} action={again}>
          <p>{topUp.reason ?? 'The payment page was left before paying.'} Nothing was charged.</p>
        </Message>
      )}
      {topUp.state === 'pending' &&
        (left ? (
          <Message tone="caution" title="You came back without paying" action={again}>
            <p>
              Nothing was charged. If you did pay in another window, the balance moves when the provider confirms it.
            </p>
          </Message>
        ) : (
          <Pending amount={amount} since={topUp.createdAt} checkoutUrl={topUp.checkoutUrl} />
        ))}
    </div>
  );
}

function Pending({ amount, since, checkoutUrl }: { amount: string; since: string; checkoutUrl: string | null }) {
  const now = useNow(5000);
  const isLate = now.getTime() - Date.parse(since) > PATIENCE_MS;
  return (
    <Message tone="info" icon={Loader2} title={`Waiting for the provider to confirm ${amount}`}>
      <p>
        {isLate
          ? 'This takes longer than usual. You may leave this page: the balance moves by itself once the payment is confirmed. '
          : 'The balance moves as soon as its signed message arrives, usually within seconds. '}
        {isLate && checkoutUrl && (
          <a href={checkoutUrl} className="font-bold">
            Back to the payment page
          </a>
        )}
      </p>
    </Message>
  );
}
