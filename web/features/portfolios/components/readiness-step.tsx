import type { ReactNode } from 'react';
import { useQuery } from '@tanstack/react-query';
import { CircleCheck, Info, TriangleAlert } from 'lucide-react';
import type { Edition } from '#contract/portfolios.ts';
import { classNames } from '../../../lib/class-names.ts';
import { clock, shortDay } from '../../../lib/dates.ts';
import { exactAmount, shortMoney } from '../../../lib/money.ts';
import { count, counted, percent } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { Message } from '../../../ui/message.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { messagesQuery, useUndoFix } from '../edition-queries.ts';
import { attributeName, POOR_QUALITIES, QUALITY_NAMES } from '../field-names.ts';
import { controlVerdict, scoredRows, scoredTiv, tivSentence, tivScale, siteTiv } from '../reconciliation.ts';
import { EquationCard } from './equation-card.tsx';
import { SealCard } from './seal-card.tsx';

interface ReadinessStepProps {
  edition: Edition;
  canWrite: boolean;
  onSealed: () => void;
}

/** Is this good enough to quote on? Everything a result will rest on, then the seal. */
export function ReadinessStep({ edition, canWrite, onSealed }: ReadinessStepProps) {
  const { reconciliation, currency } = edition;
  if (!reconciliation) return null;
  const sealed = edition.state === 'sealed';
  return (
    <div
      className={classNames(
        'grid items-start gap-3.5 max-rail:pb-19 wide:items-stretch print:block',
        !sealed && 'wide:grid-cols-[minmax(0,1fr)_330px]',
      )}
    >
      <div className="grid min-w-0 content-start items-start gap-3.5 wide:grid-cols-[minmax(0,0.9fr)_minmax(0,1fr)]">
        <EquationCard
          reconciliation={reconciliation}
          currency={currency}
          className="col-span-full"
          sentence={
            <>
              {tivSentence(reconciliation, currency)}.{' '}
              <b className="text-ink">
                Scored: {counted(scoredRows(reconciliation), 'site')}, {shortMoney(scoredTiv(reconciliation), currency)}
                .
              </b>
            </>
          }
        />
        <div className="flex min-w-0 flex-col gap-3.5">
          <QualityCard edition={edition} total={scoredTiv(reconciliation)} />
          <AssumptionsCard edition={edition} total={scoredTiv(reconciliation)} />
        </div>
        <div className="flex min-w-0 flex-col gap-3.5">
          <ControlCard edition={edition} />
          <HeldCard edition={edition} />
          <CorrectionsCard edition={edition} canWrite={canWrite && !sealed} />
        </div>
      </div>
      {!sealed && <SealCard edition={edition} canWrite={canWrite} onSealed={onSealed} />}
    </div>
  );
}

interface Bar {
  name: string;
  share: number;
  sites: number;
  poor?: boolean;
}

/** Lengths are relative to the longest bar; the percentages are absolute. */
function Bars({ bars, tone }: { bars: readonly Bar[]; tone: string }) {
  const longest = Math.max(...bars.map(({ share }) => share), 1e-9);
  return (
    <ul className="flex flex-col px-4 pt-2">
      {bars.map(({ name, share, sites, poor }) => (
        <li
          key={name}
          className="grid h-6.25 grid-cols-[118px_minmax(0,1fr)_54px_44px] items-center gap-2.5 text-13 max-rail:grid-cols-[112px_minmax(0,1fr)_52px_40px]"
        >
          <span className="truncate">{name}</span>
          <span className="h-2.5 rounded-[1px] bg-well" aria-hidden>
            <span
              className={classNames('block h-full rounded-[1px]', poor ? 'bg-ceiling' : tone)}
              style={{ width: `${(100 * share) / longest}%`, minWidth: share > 0 ? 2 : 0 }}
            />
          </span>
          <b className="text-right">{percent(share)}</b>
          <span className="text-right text-ink-2" aria-label={counted(sites, 'site')}>
            {count(sites)}
          </span>
        </li>
      ))}
    </ul>
  );
}

function Foot({ children }: { children: ReactNode }) {
  return (
    <p className="flex gap-2 px-4 pt-2 pb-3 text-12 text-ink-2">
      <Info size={14} strokeWidth={1.75} className="mt-px flex-none" aria-hidden />
      <span>{children}</span>
    </p>
  );
}

const shareOf = (tivMinor: number, total: number) => (total === 0 ? 0 : tivMinor / total);

function QualityCard({ edition, total }: { edition: Edition; total: number }) {
  const poor = edition.quality.filter(({ quality }) => POOR_QUALITIES.includes(quality));
  const poorSites = poor.reduce((sum, { sites }) => sum + sites, 0);
  return (
    <Card title="Location quality" aside="share of scored TIV" padded={false}>
      <Bars
        tone="bg-ribbon"
        bars={edition.quality.map(({ quality, sites, tivMinor }) => ({
          name: QUALITY_NAMES[quality],
          share: shareOf(tivMinor, total),
          sites,
          poor: POOR_QUALITIES.includes(quality),
        }))}
      />
      <Foot>
        {poorSites === 0 ? (
          'Every scored site is at street level or better.'
        ) : (
          <>
            <b className="text-ink">{counted(poorSites, 'site')}</b> {poorSites === 1 ? 'is' : 'are'} known only to
            postcode, town or region, or not at all. The gust can be quite another 3 km away.
          </>
        )}
      </Foot>
    </Card>
  );
}

function AssumptionsCard({ edition, total }: { edition: Edition; total: number }) {
  if (edition.assumptions.length === 0)
    return (
      <Card title="Rests on assumptions">
        <p className="text-13">Nothing was assumed: every attribute was given.</p>
      </Card>
    );
  return (
    <Card
      title="Rests on assumptions"
      aside={
        <>
          <b className="text-ink">{percent(shareOf(edition.assumedTivMinor, total))}</b> of scored TIV
        </>
      }
      padded={false}
    >
      <Bars
        tone="bg-diff-4"
        bars={edition.assumptions.map(({ attribute, sites, tivMinor }) => ({
          name: attributeName(attribute),
          share: shareOf(tivMinor, total),
          sites,
        }))}
      />
      <Foot>A site can count in several rows, so they don’t add up.</Foot>
    </Card>
  );
}

function ControlCard({ edition }: { edition: Edition }) {
  const { reconciliation, currency } = edition;
  if (!reconciliation) return null;
  const verdict = controlVerdict(reconciliation, edition);
  if (verdict.state === 'none')
    return (
      <Card title="Control totals">
        <p className="text-13 text-ink-2">
          None were given. We read <b className="text-ink">{counted(verdict.rows.read, 'site')}</b> and{' '}
          <b className="text-ink">
            {currency} {exactAmount(verdict.tiv.read, currency)}
          </b>
          .
        </p>
      </Card>
    );
  const lines = [
    { name: 'Sites', ...verdict.rows, text: (value: number) => count(value) },
    { name: `TIV, ${currency}`, ...verdict.tiv, text: (value: number) => exactAmount(value, currency) },
  ].filter(({ expected }) => expected !== null);
  return (
    <Card
      title="Control totals"
      aside={
        verdict.state === 'ties' ? (
          <Chip tone="done">All tie</Chip>
        ) : (
          <Chip tone="caution" icon={TriangleAlert}>
            Differ
          </Chip>
        )
      }
      padded={false}
    >
      <Table label="Control totals" className="mt-1">
        <thead>
          <tr>
            <Th>
              <span className="sr-only">Total</span>
            </Th>
            <Th numeric priority={2}>
              You expected
            </Th>
            <Th numeric>We read</Th>
            <Th numeric>Difference</Th>
          </tr>
        </thead>
        <tbody>
          {lines.map(({ name, expected, read, text }) => (
            <Tr key={name}>
              <Td className="h-8! whitespace-nowrap">{name}</Td>
              <Td numeric priority={2} className="h-8!">
                {text(expected ?? 0)}
              </Td>
              <Td numeric className="h-8!">
                {text(read)}
              </Td>
              <Td numeric className={classNames('h-8! font-bold', expected !== read && 'text-caution')}>
                {text(read - (expected ?? 0))}
              </Td>
            </Tr>
          ))}
        </tbody>
      </Table>
    </Card>
  );
}

function HeldCard({ edition }: { edition: Edition }) {
  const { data } = useQuery(messagesQuery(edition.id));
  const { reconciliation, currency } = edition;
  const held = (data?.groups ?? []).filter(({ severity }) => severity === 'hold');
  if (!reconciliation) return null;
  const scale = tivScale(siteTiv(reconciliation), currency);
  if (reconciliation.held.rows === 0)
    return (
      <Card title="Held, goes forward unscored">
        <p className="flex items-center gap-1.75 text-13">
          <CircleCheck size={16} strokeWidth={1.75} className="text-done" aria-hidden />
          None: every site can be scored.
        </p>
      </Card>
    );
  return (
    <Card
      title="Held, goes forward unscored"
      aside={`${counted(reconciliation.held.rows, 'row')}, ${shortMoney(reconciliation.held.tivMinor, currency)}`}
      padded={false}
    >
      <Table label="Held rows by kind" className="mt-2 border-t border-rule">
        <tbody>
          {held.map((group) => (
            <Tr key={group.code}>
              <Td className="h-8.25! text-13 leading-tight">{group.title}</Td>
              <Td priority={2} className="h-8.25! text-12 text-ink-2">
                {group.code}
              </Td>
              <Td numeric className="h-8.25! text-13 font-bold">
                {count(group.rows)}
              </Td>
              <Td numeric className="h-8.25! text-13 whitespace-nowrap">
                {scale.text(group.tivMinor)} {scale.unit}
              </Td>
            </Tr>
          ))}
        </tbody>
      </Table>
      {edition.heldReason && (
        <p className="border-t border-rule px-4 py-2 text-13">
          <span className="text-ink-2">Reason at sealing:</span> {edition.heldReason}
        </p>
      )}
    </Card>
  );
}

const CORRECTION_NAMES = {
  swap_coordinates: 'Swapped latitude and longitude',
  negate_longitude: 'Put back a minus sign on longitude',
  exclude: 'Excluded',
  keep_all: 'Kept repeats as sites of their own',
};

function CorrectionsCard({ edition, canWrite }: { edition: Edition; canWrite: boolean }) {
  const undo = useUndoFix(edition.id);
  if (edition.fixes.length === 0)
    return (
      <Card title="Corrections in this draft">
        <p className="text-13 text-ink-2">None. Every value is as received.</p>
      </Card>
    );
  const last = edition.fixes.at(-1)?.id;
  return (
    <Card
      title={edition.state === 'sealed' ? 'Corrections' : 'Corrections in this draft'}
      aside={canWrite ? 'the last can be undone until sealing' : undefined}
      padded={false}
    >
      <ul className="mt-1.5 px-4 pb-2 text-13">
        {edition.fixes.map((fix) => (
          <li
            key={fix.id}
            className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-3 border-t border-rule py-1.75 first:border-t-0"
          >
            <span>
              {CORRECTION_NAMES[fix.kind]} <span className="text-12 text-ink-2">{fix.code}</span>
            </span>
            <span className="text-right whitespace-nowrap text-ink-2">{counted(fix.rows, 'row')}</span>
            <span className="text-12 text-ink-2">
              “{fix.reason}” {fix.by}, {shortDay(fix.at)} {clock(fix.at)} UTC
            </span>
            {canWrite && fix.id === last && (
              <Button
                size="small"
                variant="quiet"
                className="-mr-2"
                pending={undo.isPending}
                onClick={() => undo.mutate(undefined)}
              >
                Undo
              </Button>
            )}
          </li>
        ))}
      </ul>
      {undo.isError && (
        <Message tone="error" className="m-3 mt-0">
          {undo.error.message}
        </Message>
      )}
    </Card>
  );
}
