import { useEffect, useRef, type KeyboardEvent, type ReactNode } from 'react';
import { useVirtualizer } from '@tanstack/react-virtual';
import { ArrowDown, ArrowUp } from 'lucide-react';
import type { SiteResult } from '#contract/runs.ts';
import { classNames } from '../../../lib/class-names.ts';
import { moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { count, percent, range } from '../../../lib/numbers.ts';
import { useNarrow } from '../../../lib/use-narrow.ts';
import { useUnits } from '../../../lib/units.tsx';
import { gustToken } from '../../../ui/charts/gust-scale.ts';
import { TableBanner } from '../../../ui/table.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import type { SitesFilter } from '../result-queries.ts';

type Sort = SitesFilter['sort'];

interface SitesTableProps {
  total: number;
  rowAt: (index: number) => SiteResult | undefined;
  onRange: (range: [from: number, to: number]) => void;
  filter: SitesFilter;
  onSort: (sort: Sort, direction: 'asc' | 'desc') => void;
  currency: string;
  vortices: boolean;
  chosenSiteNo: number | null;
  onChoose: (site: SiteResult, index: number) => void;
  /** Beside an open drawer only the leading columns stay. */
  slim: boolean;
  loading: boolean;
  failedPage: (() => void) | undefined;
}

const ROW_PX = 46;
const OVERSCAN = 12;

interface Column {
  key: string;
  sort: Sort | null;
  label: string;
  numeric: boolean;
  /** 1 always; 2 not beside the drawer on a phone; 3 only on a wide page without the drawer. */
  priority: 1 | 2 | 3;
  cell: (site: SiteResult, index: number) => ReactNode;
}

/** All sites of a track, sorted and filtered on the server, drawn only where they are seen. */
export function SitesTable(props: SitesTableProps) {
  const { total, rowAt, onRange, filter, onSort, chosenSiteNo, onChoose, slim, loading, failedPage } = props;
  const frame = useRef<HTMLDivElement>(null);
  const narrow = useNarrow();
  const columns = useColumns({ ...props, slim: slim || narrow }).filter(({ priority }) => !slim || priority < 3);
  const rows = useVirtualizer({
    count: loading ? 0 : total,
    getScrollElement: () => frame.current,
    estimateSize: () => ROW_PX,
    overscan: OVERSCAN,
    initialRect: { width: 800, height: 600 },
  });
  const items = rows.getVirtualItems();
  const from = items[0]?.index ?? 0;
  const to = items.at(-1)?.index ?? 0;
  useEffect(() => onRange([from, to]), [onRange, from, to]);
  const above = items[0]?.start ?? 0;
  const below = rows.getTotalSize() - (items.at(-1)?.end ?? 0);

  const moveBetweenRows = (event: KeyboardEvent) => {
    if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return;
    const at = Number((event.target as HTMLElement).closest('[data-index]')?.getAttribute('data-index') ?? NaN);
    const next = at + (event.key === 'ArrowDown' ? 1 : -1);
    const site = rowAt(next);
    if (Number.isNaN(at) || !site) return;
    event.preventDefault();
    rows.scrollToIndex(next);
    frame.current?.querySelector<HTMLElement>(`[data-index="${next}"] button`)?.focus();
    // With a drawer open, the arrows move it along.
    if (chosenSiteNo !== null) onChoose(site, next);
  };

  return (
    <section
      aria-label="Sites"
      className="flex min-h-0 min-w-0 flex-1 flex-col overflow-hidden rounded-3 border border-rule bg-sheet shadow-1"
    >
      {failedPage && <TableBanner onRetry={failedPage}>Some rows didn’t load.</TableBanner>}
      <div ref={frame} className="min-h-80 flex-1 overflow-auto" onKeyDown={moveBetweenRows}>
        <table className="w-full border-collapse text-14" aria-label="Site results" aria-rowcount={total + 1}>
          <thead className="sticky top-0 z-2 bg-sheet shadow-[inset_0_-1px_var(--rule-strong)]">
            <tr aria-rowindex={1}>
              {columns.map((column) => (
                <SortHead key={column.key} column={column} filter={filter} onSort={onSort} />
              ))}
            </tr>
          </thead>
          <tbody>
            {loading &&
              Array.from({ length: 8 }, (_, row) => (
                <tr key={row} aria-hidden style={{ height: ROW_PX }} className="border-b border-rule">
                  {columns.map((column) => (
                    <td key={column.key} className={cellLook(column)}>
                      <Skeleton width="60%" className={column.numeric ? 'ml-auto' : ''} />
                    </td>
                  ))}
                </tr>
              ))}
            {above > 0 && <tr aria-hidden style={{ height: above }} />}
            {items.map(({ index }) => {
              const site = rowAt(index);
              const isChosen = site !== undefined && site.siteNo === chosenSiteNo;
              return (
                <tr
                  key={index}
                  data-index={index}
                  aria-rowindex={index + 2}
                  aria-selected={isChosen}
                  style={{ height: ROW_PX }}
                  onClick={site && (() => onChoose(site, index))}
                  className={classNames(
                    'border-b border-rule',
                    isChosen
                      ? 'bg-selected shadow-[inset_3px_0_var(--action)]'
                      : site && 'cursor-pointer hover:bg-hover',
                  )}
                >
                  {columns.map((column) => (
                    <td key={column.key} className={cellLook(column)}>
                      {site ? (
                        column.cell(site, index)
                      ) : (
                        <Skeleton width="50%" className={column.numeric ? 'ml-auto' : ''} />
                      )}
                    </td>
                  ))}
                </tr>
              );
            })}
            {below > 0 && <tr aria-hidden style={{ height: below }} />}
          </tbody>
        </table>
      </div>
    </section>
  );
}

const HIDES: Record<Column['priority'], string> = { 1: '', 2: 'max-md:hidden', 3: 'max-wide:hidden' };
const cellLook = ({ numeric, priority }: Column) =>
  classNames(
    'px-2 leading-tight first:pl-4 last:pr-4 max-rail:px-1.5 max-rail:first:pl-3 max-rail:last:pr-3',
    numeric ? 'text-right whitespace-nowrap' : 'text-left',
    HIDES[priority],
  );

function SortHead({ column, filter, onSort }: { column: Column } & Pick<SitesTableProps, 'filter' | 'onSort'>) {
  const isSorted = column.sort !== null && column.sort === filter.sort;
  const Arrow = filter.direction === 'asc' ? ArrowUp : ArrowDown;
  return (
    <th
      scope="col"
      aria-sort={isSorted ? (filter.direction === 'asc' ? 'ascending' : 'descending') : undefined}
      className={classNames(cellLook(column), 'py-1 text-12 font-normal text-ink-2')}
    >
      {column.sort === null ? (
        column.label
      ) : (
        <button
          type="button"
          className={classNames(
            '-mx-1.5 inline-flex items-center gap-1 rounded-1 px-1.5 py-1 whitespace-nowrap hover:bg-hover hover:text-ink pointer-coarse:min-h-11',
            isSorted && 'font-bold text-ink',
          )}
          onClick={() =>
            onSort(
              column.sort!,
              isSorted ? (filter.direction === 'desc' ? 'asc' : 'desc') : column.sort === 'ref' ? 'asc' : 'desc',
            )
          }
        >
          {column.label}
          {isSorted && <Arrow size={13} strokeWidth={2} aria-hidden />}
        </button>
      )}
    </th>
  );
}

function useColumns({ currency, vortices, onChoose, slim }: SitesTableProps): Column[] {
  const { gust, gustRange, label } = useUnits();
  const scored = (site: SiteResult, text: () => ReactNode) => {
    if (site.reach === 'scored') return text();
    return <span className="text-12 text-ink-2">{site.reach === 'out_of_reach' ? 'out of reach' : 'below floor'}</span>;
  };
  return [
    {
      key: 'site',
      sort: 'ref',
      label: 'Site',
      numeric: false,
      priority: 1,
      cell: (site, index) => (
        <>
          <button
            type="button"
            className="font-bold text-ink hover:underline"
            onClick={(event) => {
              event.stopPropagation();
              onChoose(site, index);
            }}
          >
            {site.siteRef}
          </button>
          <span
            className={classNames(
              'block truncate text-12 text-ink-2',
              slim ? 'max-w-38 max-rail:max-w-25' : 'max-w-72',
            )}
          >
            {[site.label, site.town].filter(Boolean).join(', ')}
          </span>
        </>
      ),
    },
    {
      key: 'state',
      sort: null,
      label: 'State',
      numeric: false,
      priority: 3,
      cell: (site) => (
        <span className="text-13">
          {site.state === 'notes' ? 'With notes' : 'Ready'}
          {site.assumed.length > 0 && (
            <span className="block max-w-44 truncate text-12 text-caution">we assumed {site.assumed.join(', ')}</span>
          )}
        </span>
      ),
    },
    {
      key: 'tiv',
      sort: 'tiv',
      label: `TIV, ${currency}`,
      numeric: true,
      priority: 3,
      cell: (site) => shortMoney(site.tivMinor, currency).replace(`${currency} `, ''),
    },
    {
      key: 'plain',
      sort: 'plain',
      label: `Plain, ${label}`,
      numeric: true,
      priority: vortices ? 2 : 1,
      cell: (site) =>
        scored(site, () => {
          const token = gustToken(site.plainMs ?? 0);
          return (
            <span className="inline-flex items-center gap-2">
              {token && (
                <span
                  aria-hidden
                  className="size-3 border border-(--p-ink)/40"
                  style={{ background: `var(${token})` }}
                />
              )}
              {site.plainMs === null ? '' : gust(site.plainMs)}
            </span>
          );
        }),
    },
    ...(vortices
      ? [
          {
            key: 'enhanced',
            sort: 'p50' as const,
            label: slim ? `5–95 %, ${label}` : `Enhanced 5–95 %, ${label}`,
            numeric: true,
            priority: 1 as const,
            cell: (site: SiteResult) =>
              scored(site, () =>
                site.p5Ms !== null && site.p95Ms !== null ? gustRange(site.p5Ms, site.p95Ms) : 'no range',
              ),
          },
        ]
      : []),
    {
      key: 'damage',
      sort: 'damage',
      label: vortices ? 'Damage ratio, 5–95 %' : 'Damage ratio, plain',
      numeric: true,
      priority: 3,
      cell: (site) =>
        scored(site, () =>
          vortices && site.damageP5 !== null && site.damageP95 !== null
            ? range(percent(site.damageP5).replace(/\s?%/, ''), percent(site.damageP95))
            : percent(site.damagePlain ?? 0),
        ),
    },
    {
      key: 'groundUp',
      sort: 'groundUp',
      label: `Ground-up ${vortices ? 'mean' : 'plain'}, ${currency}`,
      numeric: true,
      priority: 3,
      cell: (site) =>
        scored(site, () =>
          shortMoney((vortices ? site.groundUpMeanMinor : site.groundUpPlainMinor) ?? 0, currency).replace(
            `${currency} `,
            '',
          ),
        ),
    },
    {
      key: 'gross',
      sort: 'gross',
      label: `Gross${vortices ? ' 5–95 %' : ', plain'}, ${currency}`,
      numeric: true,
      priority: 1,
      cell: (site) => scored(site, () => <GrossCell site={site} currency={currency} />),
    },
  ];
}

function GrossCell({ site, currency }: { site: SiteResult; currency: string }) {
  if (site.grossP5Minor !== null && site.grossP95Minor !== null) {
    const { amount, scale } = moneyRangeParts(site.grossP5Minor, site.grossP95Minor, currency);
    return (
      <>
        {amount} {scale && <span className="text-12 text-ink-2">{SHORT[scale] ?? scale}</span>}
      </>
    );
  }
  return (
    <>
      {shortMoney(site.grossPlainMinor ?? 0, currency).replace(`${currency} `, '')}
      <span className="block text-12 text-ink-2">no vortex range</span>
    </>
  );
}

const SHORT: Record<string, string> = { thousand: 'k', million: 'm', billion: 'bn' };

/** "1,204 sites" for the line above the table. */
export const siteCount = (total: number): string => `${count(total)} ${total === 1 ? 'site' : 'sites'}`;
