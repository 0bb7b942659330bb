import { Link } from 'react-router-dom';
import { useInfiniteQuery } from '@tanstack/react-query';
import type { Charge } from '#contract/billing.ts';
import { failureOf } from '../../../api/failure.ts';
import { clock, shortDay } from '../../../lib/dates.ts';
import { exactAmount } from '../../../lib/money.ts';
import { paths } from '../../../paths.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { Chip, type Tone } from '../../../ui/chip.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { EmptyRow, SkeletonRows, Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { chargesQuery } from '../billing-queries.ts';

const STATES: Record<Charge['state'], { tone: Tone; word: string }> = {
  reserved: { tone: 'info', word: 'Working, reserved' },
  charged: { tone: 'done', word: 'Charged' },
  released: { tone: 'idle', word: 'Released, nothing charged' },
};

/** What each run was quoted, charged and released. */
export function ChargesCard({ currency, own, linked }: { currency: string; own: boolean; linked: boolean }) {
  const charges = useInfiniteQuery(chargesQuery());
  const rows = charges.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <Card title={own ? 'Charges of your runs' : 'Charges'} aside={currency} padded={false} className="overflow-hidden">
      {charges.isError && rows.length === 0 ? (
        <ProblemNotice
          title="The charges weren’t read"
          {...failureOf(charges.error)}
          onRetry={() => charges.refetch()}
          className="m-3"
        />
      ) : (
        <Table label="Charges" className="mt-1">
          <thead>
            <tr>
              <Th priority={2}>UTC</Th>
              <Th>Run</Th>
              <Th priority={3}>Account</Th>
              <Th priority={2}>Person</Th>
              <Th numeric priority={2}>
                Quoted
              </Th>
              <Th numeric>Charged</Th>
              <Th numeric priority={2}>
                Released
              </Th>
              <Th>State</Th>
            </tr>
          </thead>
          <tbody>
            {charges.isPending && <SkeletonRows columns={8} rows={5} />}
            {charges.isSuccess && rows.length === 0 && (
              <EmptyRow columns={8}>No run is listed yet. A charge stands here once its run completes.</EmptyRow>
            )}
            {rows.map((charge) => (
              <Tr key={charge.runId}>
                <Td priority={2} className="text-13 whitespace-nowrap">
                  {shortDay(charge.acceptedAt)} {clock(charge.acceptedAt)}
                </Td>
                <Td className="whitespace-nowrap">
                  {linked ? (
                    <Link to={paths.run(charge.runId)} className="no-underline hover:underline">
                      {charge.runNumber}
                    </Link>
                  ) : (
                    charge.runNumber
                  )}
                </Td>
                <Td priority={3} className="max-w-48 py-1 leading-snug">
                  <span className="block truncate">{charge.portfolioName}</span>
                  {charge.costCentre && <span className="block truncate text-12 text-ink-2">{charge.costCentre}</span>}
                </Td>
                <Td priority={2} className="max-w-40 truncate">
                  {charge.acceptedBy}
                </Td>
                <Td numeric priority={2}>
                  {exactAmount(charge.quotedMinor, charge.currency)}
                </Td>
                <Td numeric className="font-bold">
                  {charge.chargedMinor === null ? 'not yet' : exactAmount(charge.chargedMinor, charge.currency)}
                </Td>
                <Td numeric priority={2}>
                  {charge.releasedMinor === null ? '' : exactAmount(charge.releasedMinor, charge.currency)}
                </Td>
                <Td>
                  <Chip tone={STATES[charge.state].tone}>{STATES[charge.state].word}</Chip>
                </Td>
              </Tr>
            ))}
          </tbody>
        </Table>
      )}
      {charges.hasNextPage && (
        <div className="border-t border-rule p-2 text-center">
          <Button
            size="small"
            variant="quiet"
            pending={charges.isFetchingNextPage}
            onClick={() => void charges.fetchNextPage()}
          >
            Show earlier charges
          </Button>
        </div>
      )}
    </Card>
  );
}
