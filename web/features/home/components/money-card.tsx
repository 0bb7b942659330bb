import { Link } from 'react-router-dom';
import type { Balance } from '#contract/billing.ts';
import { ApiError } from '../../../api/api-error.ts';
import { exactAmount, exactMoney } from '../../../lib/money.ts';
import { counted } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { SumRow } from '../../../ui/sum-row.tsx';

interface MoneyCardProps {
  balance: Balance | undefined;
  error: Error | null;
  onRetry: () => Promise<unknown>;
  className?: string;
}

/** What may still be spent, and what this month took. */
export function MoneyCard({ balance, error, onRetry, className }: MoneyCardProps) {
  return (
    <Card
      title="Free balance"
      aside={
        <Link to={paths.billing()} className="font-bold no-underline hover:underline">
          Billing
        </Link>
      }
      className={className}
    >
      {error && !balance ? (
        <ProblemNotice
          title="The balance wasn’t read"
          detail={error.message}
          requestId={error instanceof ApiError ? error.requestId : ''}
          onRetry={onRetry}
        />
      ) : !balance ? (
        <div className="flex flex-col gap-3 py-2" role="status" aria-label="Reading the balance">
          <Skeleton width="55%" className="h-6!" />
          <Skeleton width="80%" />
        </div>
      ) : (
        <>
          <p className="text-28 font-black tracking-tight">{exactMoney(balance.freeMinor, balance.currency)}</p>
          <p className="mt-0.5 text-13 text-ink-2">
            {exactAmount(balance.balanceMinor, balance.currency)} balance −{' '}
            {exactAmount(balance.reservedMinor, balance.currency)} reserved
          </p>
          <dl className="mt-3 border-t border-rule pt-2 text-13">
            <div className="flex h-8 items-center justify-between">
              <dt className="text-ink-2">Spent in {balance.month.label}</dt>
              <dd className="font-bold">{exactAmount(balance.month.chargedMinor, balance.currency)}</dd>
            </div>
            <div className="flex h-8 items-center justify-between">
              <dt className="text-ink-2">Charged runs</dt>
              <dd className="font-bold">{counted(balance.month.runs, 'run')}</dd>
            </div>
          </dl>
        </>
      )}
    </Card>
  );
}

/** The same as a sum across the page, for whom money is the question. */
export function MoneyStrip({ balance, error, onRetry }: Omit<MoneyCardProps, 'className'>) {
  return (
    <Card className="mb-4">
      {error && !balance ? (
        <ProblemNotice
          title="The balance wasn’t read"
          detail={error.message}
          requestId={error instanceof ApiError ? error.requestId : ''}
          onRetry={onRetry}
        />
      ) : !balance ? (
        <Skeleton width="60%" className="my-4 h-6!" />
      ) : (
        <SumRow
          sign="−"
          total={{ label: 'Free', value: exactMoney(balance.freeMinor, balance.currency), note: 'for new runs' }}
          terms={[
            {
              label: 'Balance',
              value: exactAmount(balance.balanceMinor, balance.currency),
              note: 'paid in, less charges',
            },
            {
              label: 'Reserved',
              value: exactAmount(balance.reservedMinor, balance.currency),
              note: 'for accepted quotes',
              ...(balance.reservedMinor > 0 && { tone: 'info' as const }),
            },
          ]}
          verdict={
            <dl className="rounded-2 bg-well px-3.5 py-2.5 text-13">
              <div className="flex justify-between gap-6">
                <dt className="text-ink-2">Spent in {balance.month.label}</dt>
                <dd className="font-bold">{exactAmount(balance.month.chargedMinor, balance.currency)}</dd>
              </div>
              <div className="mt-1 flex justify-between gap-6">
                <dt className="text-ink-2">Charged runs</dt>
                <dd className="font-bold">{balance.month.runs}</dd>
              </div>
            </dl>
          }
        />
      )}
    </Card>
  );
}
