import { useInfiniteQuery } from '@tanstack/react-query';
import { Archive, CircleCheck, Hand, StickyNote } from 'lucide-react';
import type { Edition, RowState } from '#contract/portfolios.ts';
import { ApiError } from '../../../api/api-error.ts';
import { exactAmount } from '../../../lib/money.ts';
import { count, decimal } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { Chip, type Tone } from '../../../ui/chip.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { ScrollArea } from '../../../ui/scroll-area.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { EmptyRow, SkeletonRows, Table, TableBanner, Td, Th, Tr } from '../../../ui/table.tsx';
import { rowsQuery } from '../edition-queries.ts';
import { STATE_NAMES } from '../field-names.ts';

export type Filter = 'all' | RowState;
const FILTERS: readonly Filter[] = ['all', 'ready', 'notes', 'held', 'set_aside'];

interface SitesPanelProps {
  edition: Edition;
  filter: Filter;
  onFilter: (filter: Filter) => void;
  /** The site shown on the map, too. */
  chosenRef: string | null;
  onChoose: (ref: string | null) => void;
}

export const isFilter = (text: string | null): text is Filter => FILTERS.some((filter) => filter === text);

const STATE_CHIPS: Record<RowState, { tone: Tone; icon: typeof Hand }> = {
  ready: { tone: 'done', icon: CircleCheck },
  notes: { tone: 'info', icon: StickyNote },
  held: { tone: 'caution', icon: Hand },
  set_aside: { tone: 'idle', icon: Archive },
};

/** Every line of the file with its state: the table twin of the map. */
export function SitesPanel({ edition, filter, onFilter, chosenRef, onChoose }: SitesPanelProps) {
  const rows = useInfiniteQuery(rowsQuery(edition.id, { state: filter === 'all' ? undefined : filter }));
  const items = rows.data?.pages.flatMap((page) => page.items) ?? [];
  const sum = edition.reconciliation;
  const counts: Record<Filter, number> = {
    all: sum?.fileRows ?? 0,
    ready: sum?.ready.rows ?? 0,
    notes: sum?.notes.rows ?? 0,
    held: sum?.held.rows ?? 0,
    set_aside: sum?.setAside.rows ?? 0,
  };
  return (
    <Card padded={false} className="flex flex-col wide:min-h-0">
      <div className="flex flex-wrap items-center gap-2.5 border-b border-rule px-4 py-2.5">
        <h2 className="text-15">Rows of the file</h2>
        <div className="ml-auto max-w-full overflow-x-auto">
          <Segmented
            label="Rows shown"
            value={filter}
            onChange={onFilter}
            options={FILTERS.map((value) => ({
              value,
              label: `${value === 'all' ? 'All' : STATE_NAMES[value]} ${count(counts[value])}`,
            }))}
          />
        </div>
      </div>
      {rows.isError && items.length === 0 ? (
        <ProblemNotice
          title="The rows weren’t read"
          detail={rows.error.message}
          requestId={rows.error instanceof ApiError ? rows.error.requestId : ''}
          onRetry={() => rows.refetch()}
          className="m-4"
        />
      ) : (
        <ScrollArea label="Rows of the file" className="flex-1 wide:min-h-0 wide:overflow-y-auto">
          {rows.isFetchNextPageError && (
            <TableBanner onRetry={() => void rows.fetchNextPage()}>The next rows didn’t load.</TableBanner>
          )}
          <Table label="Rows of the file">
            <thead>
              <tr>
                <Th numeric>Row</Th>
                <Th>Site</Th>
                <Th>State</Th>
                <Th numeric>TIV, {edition.currency}</Th>
                <Th numeric priority={2}>
                  Latitude
                </Th>
                <Th numeric priority={2}>
                  Longitude
                </Th>
              </tr>
            </thead>
            <tbody>
              {rows.isPending ? (
                <SkeletonRows columns={6} />
              ) : items.length === 0 ? (
                <EmptyRow columns={6}>
                  <b>No row is {filter === 'all' ? 'in this file' : STATE_NAMES[filter].toLowerCase()}.</b>{' '}
                  {filter !== 'all' && (
                    <button type="button" className="font-bold text-link underline" onClick={() => onFilter('all')}>
                      Show all rows
                    </button>
                  )}
                </EmptyRow>
              ) : (
                items.map((row) => (
                  <Tr
                    key={row.row}
                    selected={row.siteRef !== null && row.siteRef === chosenRef}
                    onClick={() => onChoose(row.siteRef)}
                  >
                    <Td numeric className="h-11! text-ink-2">
                      {count(row.row)}
                    </Td>
                    <Td className="max-w-64 leading-tight">
                      {row.siteRef === null ? (
                        '–'
                      ) : (
                        <button type="button" className="font-bold" aria-pressed={row.siteRef === chosenRef}>
                          {row.siteRef}
                        </button>
                      )}
                      {row.messages[0] && (
                        <span
                          className="block truncate text-12 text-ink-2"
                          title={row.messages.map(({ text }) => text).join(' ')}
                        >
                          {row.messages[0].text}
                        </span>
                      )}
                    </Td>
                    <Td>
                      <Chip tone={STATE_CHIPS[row.state].tone} icon={STATE_CHIPS[row.state].icon}>
                        {STATE_NAMES[row.state]}
                      </Chip>
                    </Td>
                    <Td numeric>{exactAmount(row.tivMinor, edition.currency)}</Td>
                    <Td numeric priority={2}>
                      {row.latitude === null ? '–' : decimal(row.latitude, 4)}
                    </Td>
                    <Td numeric priority={2}>
                      {row.longitude === null ? '–' : decimal(row.longitude, 4)}
                    </Td>
                  </Tr>
                ))
              )}
            </tbody>
          </Table>
          {rows.hasNextPage && (
            <div className="px-4 py-3">
              <Button size="small" pending={rows.isFetchingNextPage} onClick={() => void rows.fetchNextPage()}>
                Show the next rows
              </Button>
            </div>
          )}
        </ScrollArea>
      )}
    </Card>
  );
}
