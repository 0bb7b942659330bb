import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';

interface Fact {
  label: ReactNode;
  value: ReactNode;
  note?: ReactNode;
  tone?: 'caution';
}

/** Three to seven facts with rules between. */
export function FactStrip({ facts, className }: { facts: readonly Fact[]; className?: string }) {
  return (
    <dl className={classNames('flex flex-wrap gap-y-3', className)}>
      {facts.map(({ label, value, note, tone }, index) => (
        <div key={index} className="min-w-28 flex-1 border-l border-rule px-4 first:border-l-0 first:pl-0">
          <dt className="text-12 text-ink-2">{label}</dt>
          <dd className={classNames('text-18 font-black tracking-tight', tone === 'caution' && 'text-caution')}>
            {value}
            {note && <span className="block text-12 font-normal tracking-normal text-ink-2">{note}</span>}
          </dd>
        </div>
      ))}
    </dl>
  );
}
