import { Link, useNavigate } from 'react-router-dom';
import type { Portfolio } from '#contract/portfolios.ts';
import { day } from '../../../lib/dates.ts';
import { millions } from '../../../lib/money.ts';
import { count } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { ShareBar } from '../../../ui/sum-row.tsx';
import { SkeletonRows, Table, TableBanner, Td, Th, Tr } from '../../../ui/table.tsx';
import { stateChip } from '../edition-summary.ts';
import { siteRows, siteTiv, tivSentence, tivShares } from '../reconciliation.ts';

interface PortfolioTableProps {
  portfolios: readonly Portfolio[];
  loading: boolean;
  more?: { pending: boolean; onMore: () => void } | undefined;
  failedMore: boolean;
}

/** Which edition is current and fit to run, and what is in work. */
export function PortfolioTable({ portfolios, loading, more, failedMore }: PortfolioTableProps) {
  const navigate = useNavigate();
  return (
    <Card padded={false} className="overflow-hidden">
      {failedMore && more && <TableBanner onRetry={more.onMore}>The next portfolios didn’t load.</TableBanner>}
      <Table label="Portfolios">
        <thead>
          <tr>
            <Th>Account</Th>
            <Th priority={2}>Current edition</Th>
            <Th numeric>Sites</Th>
            <Th numeric priority={2}>
              TIV, million
            </Th>
            <Th priority={3} className="w-52">
              Ready, notes, held by TIV
            </Th>
            <Th numeric>Held</Th>
            <Th priority={2}>In work</Th>
          </tr>
        </thead>
        <tbody>
          {loading ? (
            <SkeletonRows columns={7} />
          ) : (
            portfolios.map((portfolio) => {
              const { current, draft } = portfolio;
              const sum = current?.reconciliation ?? null;
              const chip = draft && stateChip(draft);
              return (
                <Tr key={portfolio.id} onClick={() => void navigate(paths.portfolio(portfolio.id))}>
                  <Td className="h-13!">
                    <Link
                      to={paths.portfolio(portfolio.id)}
                      className="font-bold text-ink no-underline hover:underline"
                      onClick={(event) => event.stopPropagation()}
                    >
                      {portfolio.name}
                    </Link>
                    <span className="flex flex-wrap items-center gap-x-2 gap-y-1 pb-1 text-12 text-ink-2 md:hidden">
                      {current ? `Edition ${current.number}` : 'No sealed edition'}
                      {chip && (
                        <Chip tone={chip.tone} icon={chip.icon}>
                          {chip.text}
                        </Chip>
                      )}
                    </span>
                  </Td>
                  <Td priority={2} className="whitespace-nowrap">
                    {current ? (
                      <>
                        Edition {current.number}
                        <span className="block text-12 text-ink-2">{current.asAt && `as at ${day(current.asAt)}`}</span>
                      </>
                    ) : (
                      <span className="text-ink-2">none sealed</span>
                    )}
                  </Td>
                  <Td numeric>{sum ? count(siteRows(sum)) : '–'}</Td>
                  <Td numeric priority={2} className="whitespace-nowrap">
                    {sum ? (
                      <>
                        <span className="text-12 text-ink-2">{portfolio.currency}</span>{' '}
                        {millions(siteTiv(sum), portfolio.currency)}
                      </>
                    ) : (
                      '–'
                    )}
                  </Td>
                  <Td priority={3}>
                    {sum && (
                      <>
                        <ShareBar shares={tivShares(sum)} />
                        <span className="sr-only">{tivSentence(sum, portfolio.currency)}</span>
                      </>
                    )}
                  </Td>
                  <Td numeric className={sum && sum.held.rows > 0 ? 'font-bold text-caution' : 'text-ink-2'}>
                    {sum ? count(sum.held.rows) : '–'}
                  </Td>
                  <Td priority={2} className="whitespace-nowrap">
                    {draft && chip ? (
                      <Link
                        to={paths.edition(draft.id)}
                        className="no-underline"
                        onClick={(event) => event.stopPropagation()}
                        aria-label={`Draft of edition ${draft.number}: ${chip.text}`}
                      >
                        <Chip tone={chip.tone} icon={chip.icon}>
                          {chip.text}
                        </Chip>
                      </Link>
                    ) : (
                      <span className="text-ink-2">–</span>
                    )}
                  </Td>
                </Tr>
              );
            })
          )}
        </tbody>
      </Table>
      {more && (
        <div className="border-t border-rule px-4 py-3">
          <Button size="small" pending={more.pending} onClick={more.onMore}>
            Show more portfolios
          </Button>
        </div>
      )}
    </Card>
  );
}
