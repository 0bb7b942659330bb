import { Link, useNavigate } from 'react-router-dom';
import type { Portfolio } from '#contract/portfolios.ts';
import { day, utc } from '../../../lib/dates.ts';
import { millions } from '../../../lib/money.ts';
import { count } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { EmptyRow, Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { stateChip } from '../edition-summary.ts';
import { siteRows, siteTiv } from '../reconciliation.ts';

/** Every edition, the newest first; a draft stands on top until it is sealed. */
export function EditionList({ portfolio }: { portfolio: Portfolio }) {
  const navigate = useNavigate();
  const drafts =
    portfolio.draft && !portfolio.editions.some(({ id }) => id === portfolio.draft?.id) ? [portfolio.draft] : [];
  const editions = [...drafts, ...portfolio.editions].sort((a, b) => b.number - a.number);
  return (
    <Card title="Editions" padded={false} className="overflow-hidden">
      <Table label="Editions" className="mt-1">
        <thead>
          <tr>
            <Th>Edition</Th>
            <Th>State</Th>
            <Th priority={2}>Values as at</Th>
            <Th numeric>Sites</Th>
            <Th numeric priority={2}>
              TIV, {portfolio.currency} m
            </Th>
            <Th numeric priority={2}>
              Held
            </Th>
            <Th priority={3}>Last change</Th>
          </tr>
        </thead>
        <tbody>
          {editions.length === 0 ? (
            <EmptyRow columns={7}>
              <b>No edition yet.</b> Upload a schedule to make the first one.
            </EmptyRow>
          ) : (
            editions.map((edition) => {
              const chip = stateChip(edition);
              const sum = edition.reconciliation;
              return (
                <Tr key={edition.id} onClick={() => void navigate(paths.edition(edition.id))}>
                  <Td className="h-11!">
                    <Link
                      to={paths.edition(edition.id)}
                      className="font-bold text-ink no-underline hover:underline"
                      onClick={(event) => event.stopPropagation()}
                    >
                      {edition.state === 'sealed' ? `Edition ${edition.number}` : `Draft of edition ${edition.number}`}
                    </Link>
                    {edition.id === portfolio.current?.id && <span className="ml-2 text-13 text-ink-2">current</span>}
                  </Td>
                  <Td>
                    <Chip tone={chip.tone} icon={chip.icon}>
                      {chip.text}
                    </Chip>
                  </Td>
                  <Td priority={2}>{edition.asAt ? day(edition.asAt) : '–'}</Td>
                  <Td numeric>{sum ? count(siteRows(sum)) : '–'}</Td>
                  <Td numeric priority={2}>
                    {sum ? millions(siteTiv(sum), portfolio.currency) : '–'}
                  </Td>
                  <Td
                    numeric
                    priority={2}
                    className={sum && sum.held.rows > 0 ? 'font-bold text-caution' : 'text-ink-2'}
                  >
                    {sum ? count(sum.held.rows) : '–'}
                  </Td>
                  <Td priority={3} className="text-ink-2">
                    {utc(edition.updatedAt)}
                  </Td>
                </Tr>
              );
            })
          )}
        </tbody>
      </Table>
    </Card>
  );
}
