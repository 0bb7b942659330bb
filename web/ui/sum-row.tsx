import { Fragment, type ReactNode } from 'react';
import type { LucideIcon } from 'lucide-react';
import { classNames } from '../lib/class-names.ts';

export interface SumTerm {
  label: string;
  value: string;
  note?: ReactNode;
  icon?: LucideIcon;
  tone?: 'done' | 'info' | 'caution' | 'idle';
}

const TONES = { done: 'text-done', info: 'text-info', caution: 'text-caution', idle: 'text-idle' };

interface SumRowProps {
  total: SumTerm;
  terms: readonly SumTerm[];
  /** Sign before each term but the first; the first follows the equals sign. */
  sign?: '+' | '−';
  /** Verdict at the right end. */
  verdict?: ReactNode;
  spread?: boolean;
  className?: string;
}

/** Where things must add up they are drawn as a sum: total = term + term + term. */
export function SumRow({ total, terms, sign = '+', verdict, spread = false, className }: SumRowProps) {
  return (
    <div
      className={classNames(
        'flex items-center gap-3.5 max-wide:gap-2.5 max-rail:grid max-rail:grid-cols-2 max-rail:gap-x-3.5 max-rail:gap-y-1.5',
        spread && 'justify-between',
        className,
      )}
    >
      <Term term={total} total spread={spread} />
      {terms.map((term, index) => (
        <Fragment key={term.label}>
          <span className="text-22 text-ink-2 max-rail:sr-only">{index === 0 ? '=' : sign}</span>
          <Term term={term} spread={spread} />
        </Fragment>
      ))}
      {verdict && <div className="ml-auto min-w-0 max-rail:col-span-full max-rail:ml-0">{verdict}</div>}
    </div>
  );
}

function Term({ term, total = false, spread }: { term: SumTerm; total?: boolean; spread: boolean }) {
  const { label, value, note, icon: Icon, tone } = term;
  return (
    <div
      className={classNames(
        !spread && 'rail:min-w-23 wide:min-w-26',
        total &&
          'max-rail:col-span-full max-rail:flex max-rail:items-baseline max-rail:gap-2 max-rail:border-b max-rail:border-rule max-rail:pb-1.5',
      )}
    >
      <span
        className={classNames('flex items-center gap-1.25 text-13 font-bold whitespace-nowrap', tone && TONES[tone])}
      >
        {Icon && <Icon size={15} strokeWidth={1.75} className="flex-none" aria-hidden />}
        {label}
      </span>
      <b
        className={classNames(
          'block text-28 leading-[1.15] font-black tracking-tight max-rail:text-22',
          tone === 'caution' && 'text-caution',
        )}
      >
        {value}
      </b>
      {note && <span className="text-12 text-ink-2">{note}</span>}
    </div>
  );
}

export interface Share {
  key: string;
  share: number;
  className: string;
}

/** One bar cut into shares, with its sentence below for those who can't see it. */
export function ShareBar({ shares, className }: { shares: readonly Share[]; className?: string }) {
  return (
    <div className={classNames('flex h-2 gap-0.5', className)} aria-hidden>
      {shares
        .filter(({ share }) => share > 0)
        .map((part) => (
          <span
            key={part.key}
            className={classNames('min-w-0.75 rounded-[1px]', part.className)}
            style={{ flexGrow: part.share, flexBasis: 0 }}
          />
        ))}
    </div>
  );
}
