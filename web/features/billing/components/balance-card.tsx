import type { Balance } from '#contract/billing.ts';
import { exactAmount } from '../../../lib/money.ts';
import { counted } from '../../../lib/numbers.ts';

/** free = balance − reserved, drawn as the sum it is. */
export function BalanceCard({ balance }: { balance: Balance }) {
  const { currency } = balance;
  const term = (minor: number, word: string) => (
    <span>
      <b className="block text-18">{exactAmount(minor, currency)}</b>
      <span className="text-13 text-ink-2">{word}</span>
    </span>
  );
  return (
    <section aria-label="Free to spend" className="rounded-3 border border-rule bg-sheet p-4.5 shadow-1">
      <h2 className="text-13 font-normal tracking-normal text-ink-2">Free to spend</h2>
      <p className="mt-0.5 flex items-baseline gap-2.5">
        <span className="text-18 text-ink-2">{currency}</span>
        <span className="text-44 font-black tracking-tight">{exactAmount(balance.freeMinor, currency)}</span>
      </p>
      <div className="mt-2 flex items-start gap-3.5">
        <span className="pt-0.5 text-18 text-ink-2" aria-label="equals">
          =
        </span>
        {term(balance.balanceMinor, 'balance')}
        <span className="pt-0.5 text-18 text-ink-2" aria-label="less">
          −
        </span>
        {term(balance.reservedMinor, 'reserved for runs under way')}
      </div>
    </section>
  );
}

/** What this month has cost so far. */
export function MonthCard({ balance }: { balance: Balance }) {
  const { month, currency } = balance;
  return (
    <section aria-label={month.label} className="rounded-3 border border-rule bg-sheet p-4.5 shadow-1">
      <h2 className="text-15">{month.label} so far</h2>
      <dl className="mt-2 grid grid-cols-2 divide-x divide-rule">
        <div>
          <dt className="text-13 text-ink-2">Charged, {currency}</dt>
          <dd className="text-28 font-black tracking-tight">{exactAmount(month.chargedMinor, currency)}</dd>
        </div>
        <div className="pl-4">
          <dt className="text-13 text-ink-2">Runs charged</dt>
          <dd className="text-28 font-black tracking-tight">{month.runs}</dd>
        </div>
      </dl>
      <p className="mt-2 text-13 text-ink-2">
        {month.runs === 0
          ? 'No run has been charged yet this month.'
          : `${counted(month.runs, 'run')}, by the day each was accepted. Failed tracks of ours are free.`}
      </p>
    </section>
  );
}
