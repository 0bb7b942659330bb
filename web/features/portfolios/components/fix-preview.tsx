import { useMemo, useState } from 'react';
import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { ArrowRight, Check, Info } from 'lucide-react';
import type { Edition, Fix, IntakeRow, MessageGroup } from '#contract/portfolios.ts';
import { ApiError } from '../../../api/api-error.ts';
import { count, counted } from '../../../lib/numbers.ts';
import { shortMoney } from '../../../lib/money.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { TextField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { ScrollArea } from '../../../ui/scroll-area.tsx';
import { useToast } from '../../../ui/toast.tsx';
import { SkeletonRows, Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { rowsQuery, sitePointsQuery, useApplyFix, useUndoFix } from '../edition-queries.ts';
import { FIELD_NAMES } from '../field-names.ts';
import { FIX_EFFECTS, placeAfter, trueMinus } from '../fix-preview.ts';
import { previewSites } from '../map-sites.ts';
import { PlaceMap } from './place-map.tsx';

interface FixPreviewProps {
  edition: Edition;
  group: MessageGroup;
  canWrite: boolean;
}

const MIN_REASON = 3;

/** Rows of one message as received and as they would become; the reason is asked before anything changes. */
export function FixPreview({ edition, group, canWrite }: FixPreviewProps) {
  const rows = useInfiniteQuery(rowsQuery(edition.id, { code: group.code }));
  const applyFix = useApplyFix(edition.id);
  const undo = useUndoFix(edition.id);
  const toast = useToast();
  const [reason, setReason] = useState('');
  const [asked, setAsked] = useState(false);
  /** Null: every row with this message. */
  const [picked, setPicked] = useState<ReadonlySet<number> | null>(null);
  const items = useMemo(() => rows.data?.pages.flatMap((page) => page.items) ?? [], [rows.data]);
  const size = picked ? picked.size : group.rows;
  const fix = edition.state === 'checked' ? group.fix : null;
  // What is said of the whole file is better than what is said of its first row.
  const why =
    edition.messages.find(({ code }) => code === group.code)?.text ??
    items[0]?.messages.find(({ code }) => code === group.code)?.text;

  const apply = () => {
    setAsked(true);
    if (!fix || reason.trim().length < MIN_REASON || size === 0) return;
    applyFix
      .mutateAsync({
        code: group.code,
        kind: fix.kind,
        reason: reason.trim(),
        ...(picked && { rows: [...picked] }),
      })
      .then(() =>
        // The preview may be gone by then: its message can have no rows left.
        toast({
          text: `${group.title}: ${counted(size, 'row')} changed.`,
          undo: { label: 'Undo', onUndo: () => undo.mutate(undefined) },
        }),
      )
      .catch(() => undefined);
  };
  const toggle = (row: number) => {
    const next = new Set(picked ?? []);
    if (!next.delete(row)) next.add(row);
    setPicked(next);
  };

  return (
    <Card
      padded={false}
      title={
        <>
          {group.title}
          <span className="ml-2.5 text-12 font-normal tracking-wide text-ink-2">{group.code}</span>
        </>
      }
      aside={`${counted(group.rows, 'row')}, ${shortMoney(group.tivMinor, edition.currency)}`}
      className="flex flex-col overflow-hidden wide:max-h-full"
    >
      {why && <p className="px-4 pt-1 pb-2.5 text-13 text-ink-2">{why}</p>}
      {fix && movesPlaces(fix.kind) && <FixMap editionId={edition.id} rows={items} kind={fix.kind} />}
      <ScrollArea
        label="Rows with this message"
        className="flex-1 overflow-y-auto border-t border-rule max-wide:max-h-120 wide:min-h-32"
      >
        {rows.isError ? (
          <ProblemNotice
            title="The rows weren’t read"
            detail={rows.error.message}
            requestId={rows.error instanceof ApiError ? rows.error.requestId : ''}
            onRetry={() => rows.refetch()}
            className="m-4"
          />
        ) : (
          <RowsTable
            group={group}
            items={items}
            loading={rows.isPending}
            picked={picked}
            onToggle={toggle}
            kind={fix?.kind ?? null}
          />
        )}
        {rows.hasNextPage && (
          <div className="px-4 py-2.5">
            <Button size="small" pending={rows.isFetchingNextPage} onClick={() => void rows.fetchNextPage()}>
              Show more of {count(group.rows)} rows
            </Button>
          </div>
        )}
      </ScrollArea>
      {fix && (
        <form
          noValidate
          className="border-t border-rule bg-sheet px-4 pt-2.75 pb-2.75"
          onSubmit={(event) => {
            event.preventDefault();
            apply();
          }}
          onKeyDown={(event) => {
            if (event.key === 'Enter' && event.ctrlKey) apply();
          }}
        >
          <div className="flex flex-wrap items-start gap-2">
            <TextField
              label="Reason"
              labelHidden
              placeholder="Reason, for the readiness sheet"
              className="min-w-48 flex-1"
              value={reason}
              readOnly={!canWrite}
              error={asked && reason.trim().length < MIN_REASON ? 'Say in a few words why.' : undefined}
              onChange={(event) => setReason(event.target.value)}
            />
            <Button
              aria-pressed={picked !== null}
              onClick={() => setPicked(picked ? null : new Set(items.map(({ row }) => row)))}
            >
              {picked ? 'All rows' : 'Choose rows'}
            </Button>
            <Button
              type="submit"
              variant="filled"
              icon={Check}
              pending={applyFix.isPending}
              disabledReason={!canWrite ? 'Auditors read only.' : size === 0 ? 'Choose at least one row.' : undefined}
            >
              {picked ? `${VERBS[fix.kind]} ${counted(size, 'row')}` : fix.label}
            </Button>
          </div>
          {applyFix.isError ? (
            <Message tone="error" className="mt-2">
              {applyFix.error.message}
            </Message>
          ) : (
            <p className="mt-2 flex gap-1.75 text-12 text-ink-2">
              <Info size={14} strokeWidth={1.75} className="mt-px flex-none" aria-hidden />
              {FIX_EFFECTS[fix.kind]}
            </p>
          )}
        </form>
      )}
    </Card>
  );
}

const movesPlaces = (kind: Fix) => kind === 'swap_coordinates' || kind === 'negate_longitude';

/** Where the rows would fall, among the other sites. */
function FixMap({ editionId, rows, kind }: { editionId: string; rows: readonly IntakeRow[]; kind: Fix }) {
  const points = useQuery(sitePointsQuery(editionId));
  const sites = useMemo(() => previewSites(rows, kind, points.data), [rows, kind, points.data]);
  if (!sites) return null;
  return (
    <PlaceMap
      label="Rows after the fix, among the other sites"
      sites={sites}
      describe={(index) => sites.ref[index] ?? ''}
      className="h-48 min-h-28 shrink border-t border-rule max-wide:h-60"
      legend={
        <ul className="flex gap-3.5 rounded-2 border border-rule-strong bg-sheet px-2.5 py-1 text-12">
          <li className="flex items-center gap-1.5">
            <span className="size-2.5 rotate-45 border-[1.5px] border-ink bg-sheet" /> After the fix
          </li>
          <li className="flex items-center gap-1.5">
            <span className="size-2 rounded-pill border border-ink bg-sheet" /> Other sites
          </li>
        </ul>
      }
    />
  );
}

const VERBS = { swap_coordinates: 'Swap', negate_longitude: 'Change', exclude: 'Exclude', keep_all: 'Keep' };

interface RowsTableProps {
  group: MessageGroup;
  items: readonly IntakeRow[];
  loading: boolean;
  kind: NonNullable<MessageGroup['fix']>['kind'] | null;
  picked: ReadonlySet<number> | null;
  onToggle: (row: number) => void;
}

function RowsTable({ group, items, loading, kind, picked, onToggle }: RowsTableProps) {
  const place = kind !== null && movesPlaces(kind);
  const pick = (row: IntakeRow) =>
    picked && (
      <input
        type="checkbox"
        aria-label={`Row ${row.row}`}
        checked={picked.has(row.row)}
        onChange={() => onToggle(row.row)}
        className="mr-2.5 size-4 align-[-3px] accent-(--action)"
      />
    );
  return (
    <Table label={`Rows: ${group.title}`} className="text-13 [&_td]:h-7.5 [&_td]:text-13">
      <thead>
        <tr>
          <Th>Row</Th>
          <Th>Site</Th>
          {place ? (
            <>
              <Th numeric>Lat. received</Th>
              <Th numeric>Lon. received</Th>
              <Th>
                <span className="sr-only">becomes</span>
              </Th>
              <Th numeric>Latitude</Th>
              <Th numeric>Longitude</Th>
            </>
          ) : (
            <>
              <Th>Received</Th>
              <Th>What we saw</Th>
            </>
          )}
        </tr>
      </thead>
      <tbody>
        {loading ? (
          <SkeletonRows columns={place ? 7 : 4} rows={5} />
        ) : (
          items.map((row) => {
            const after = kind && placeAfter(row, kind);
            const message = row.messages.find(({ code }) => code === group.code);
            return (
              <Tr key={row.row}>
                <Td className="whitespace-nowrap">
                  {pick(row)}
                  {count(row.row)}
                </Td>
                <Td className="whitespace-nowrap">{row.siteRef ?? '–'}</Td>
                {place ? (
                  <>
                    <Td numeric className="text-ink-2 line-through decoration-rule-strong">
                      {trueMinus(row.received.latitude ?? '')}
                    </Td>
                    <Td numeric className="text-ink-2 line-through decoration-rule-strong">
                      {trueMinus(row.received.longitude ?? '')}
                    </Td>
                    <Td className="px-0! text-ink-2">
                      <ArrowRight size={14} aria-hidden />
                    </Td>
                    <Td numeric className="font-bold">
                      {trueMinus(after?.latitude ?? '')}
                    </Td>
                    <Td numeric className="font-bold">
                      {trueMinus(after?.longitude ?? '')}
                    </Td>
                  </>
                ) : (
                  <>
                    <Td className="max-w-48 py-1">
                      <span className="block text-12 text-ink-2">
                        {message?.field ? FIELD_NAMES[message.field] : ''}
                      </span>
                      <b className="break-words">{message?.received ?? 'blank'}</b>
                    </Td>
                    <Td className="py-1 whitespace-normal">{message?.text}</Td>
                  </>
                )}
              </Tr>
            );
          })
        )}
      </tbody>
    </Table>
  );
}
