import { Archive, CircleCheck, Hand, StickyNote } from 'lucide-react';
import type { Edition, Reconciliation } from '#contract/portfolios.ts';
import { exactAmount, minorPerUnit } from '../../lib/money.ts';
import { count, counted, decimal, percent } from '../../lib/numbers.ts';
import type { Share, SumTerm } from '../../ui/sum-row.tsx';

/** One scale for all TIV figures of an edition, so that they can be compared and added by eye. */
export const tivScale = (
  totalMinor: number,
  currency: string,
): { unit: string; text: (tivMinor: number) => string } => {
  const per = minorPerUnit(currency);
  const total = totalMinor / per;
  if (total >= 1e7) return { unit: 'm', text: (minor) => decimal(minor / per / 1e6, 1) };
  if (total >= 1e5) return { unit: 'k', text: (minor) => decimal(minor / per / 1e3, 1) };
  return { unit: '', text: (minor) => decimal(minor / per, 0) };
};

/** file rows = ready + with notes + held + set aside, each with its TIV. */
export const equationOf = (sum: Reconciliation, currency: string): { total: SumTerm; terms: SumTerm[] } => {
  const scale = tivScale(siteTiv(sum), currency);
  const tiv = (minor: number) => (minor === 0 ? 'TIV 0' : `TIV ${scale.text(minor)} ${scale.unit}`.trimEnd());
  return {
    total: { label: 'File rows', value: count(sum.fileRows), note: 'less header line' },
    terms: [
      { label: 'Ready', value: count(sum.ready.rows), note: tiv(sum.ready.tivMinor), icon: CircleCheck, tone: 'done' },
      {
        label: 'With notes',
        value: count(sum.notes.rows),
        note: tiv(sum.notes.tivMinor),
        icon: StickyNote,
        tone: 'info',
      },
      { label: 'Held', value: count(sum.held.rows), note: tiv(sum.held.tivMinor), icon: Hand, tone: 'caution' },
      { label: 'Set aside', value: count(sum.setAside.rows), note: 'repeats and totals', icon: Archive, tone: 'idle' },
    ],
  };
};

export const scoredTiv = (sum: Reconciliation): number => sum.ready.tivMinor + sum.notes.tivMinor;
export const scoredRows = (sum: Reconciliation): number => sum.ready.rows + sum.notes.rows;
/** What a control total is compared with: everything but the lines set aside. */
export const siteRows = (sum: Reconciliation): number => scoredRows(sum) + sum.held.rows;
export const siteTiv = (sum: Reconciliation): number => scoredTiv(sum) + sum.held.tivMinor;

export const tivShares = (sum: Reconciliation): Share[] => {
  // A schedule without values still shows how its rows divide.
  const size = (part: { rows: number; tivMinor: number }) => (siteTiv(sum) > 0 ? part.tivMinor : part.rows);
  return [
    { key: 'ready', share: size(sum.ready), className: 'bg-ribbon' },
    { key: 'notes', share: size(sum.notes), className: 'bg-diff-4' },
    { key: 'held', share: size(sum.held), className: 'bg-ceiling' },
  ];
};

export const tivSentence = (sum: Reconciliation, currency: string): string => {
  const all = siteTiv(sum);
  if (all === 0) return `No value read in ${currency}.`;
  const share = (minor: number) => percent(minor / all);
  return `By TIV: ${share(sum.ready.tivMinor)} ready, ${share(sum.notes.tivMinor)} with notes, ${share(sum.held.tivMinor)} held`;
};

/** The service's message that control totals don't tie. */
export const CONTROL_CODE = 'FILE-06';

export interface ControlVerdict {
  state: 'none' | 'ties' | 'differs';
  rows: { expected: number | null; read: number };
  tiv: { expected: number | null; read: number };
  sentence: string;
}

/** Expected against read. Whether they tie is the service's word: it allows for rounding in the broker's total. */
export const controlVerdict = (
  sum: Reconciliation,
  { control, messages, currency }: Pick<Edition, 'control' | 'messages' | 'currency'>,
): ControlVerdict => {
  const rows = { expected: control.expectedRows, read: siteRows(sum) };
  const tiv = { expected: control.expectedTivMinor, read: siteTiv(sum) };
  const differs = messages.some(({ code }) => code === CONTROL_CODE);
  const given = rows.expected !== null || tiv.expected !== null;
  const said = [
    rows.expected !== null && counted(rows.expected, 'site'),
    tiv.expected !== null && `${currency} ${exactAmount(tiv.expected, currency)}`,
  ].filter(Boolean);
  const seen = [
    rows.expected !== null && counted(rows.read, 'site'),
    tiv.expected !== null && `${currency} ${exactAmount(tiv.read, currency)}`,
  ].filter(Boolean);
  return {
    state: !given ? 'none' : differs ? 'differs' : 'ties',
    rows,
    tiv,
    sentence: differs
      ? `Expected ${said.join(' and ')}; read ${seen.join(' and ')}.`
      : `${said.join(' and ')} expected and read.`,
  };
};
