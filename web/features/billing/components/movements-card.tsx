import { useInfiniteQuery } from '@tanstack/react-query';
import type { Movement } from '#contract/billing.ts';
import { failureOf } from '../../../api/failure.ts';
import { classNames } from '../../../lib/class-names.ts';
import { clock, shortDay } from '../../../lib/dates.ts';
import { exactAmount } from '../../../lib/money.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { movementsQuery } from '../billing-queries.ts';

const signed = ({ amountMinor, currency }: Movement): string =>
  amountMinor > 0 ? `+${exactAmount(amountMinor, currency)}` : exactAmount(amountMinor, currency);

/** How the free balance moved, newest first; the signs add up to what is free. */
export function MovementsCard({ currency }: { currency: string }) {
  const movements = useInfiniteQuery(movementsQuery());
  const rows = movements.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <Card title="Movements" aside={`effect on free, ${currency}`} padded={false} className="overflow-hidden">
      {movements.isError && rows.length === 0 ? (
        <ProblemNotice
          title="The movements weren’t read"
          {...failureOf(movements.error)}
          onRetry={() => movements.refetch()}
          className="m-3"
        />
      ) : movements.isPending ? (
        <div className="flex flex-col gap-4 p-4" aria-hidden>
          {Array.from({ length: 5 }, (_, index) => (
            <Skeleton key={index} width={`${80 - index * 7}%`} />
          ))}
        </div>
      ) : rows.length === 0 ? (
        <p className="px-4 py-6 text-ink-2">Nothing has moved yet. The first top-up will stand here.</p>
      ) : (
        <ul className="mt-2">
          {rows.map((movement) => (
            <li key={movement.id} className="flex items-baseline gap-3 border-t border-rule px-4 py-2">
              <span className="w-12 flex-none text-13 text-ink-2" title={clock(movement.at)}>
                {shortDay(movement.at)}
              </span>
              <span className="min-w-0 flex-1 leading-snug">
                {movement.text}
                {movement.by && <span className="block text-12 text-ink-2">{movement.by}</span>}
              </span>
              <b className={classNames('whitespace-nowrap', movement.amountMinor > 0 && 'text-done')}>
                {signed(movement)}
              </b>
            </li>
          ))}
        </ul>
      )}
      {movements.hasNextPage && (
        <div className="border-t border-rule p-2 text-center">
          <Button
            size="small"
            variant="quiet"
            pending={movements.isFetchingNextPage}
            onClick={() => void movements.fetchNextPage()}
          >
            Show earlier movements
          </Button>
        </div>
      )}
    </Card>
  );
}
