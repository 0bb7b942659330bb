import type { ReactNode } from 'react';
import type { Quote } from '#contract/runs.ts';
import { classNames } from '../../../lib/class-names.ts';
import { exactAmount } from '../../../lib/money.ts';
import { count } from '../../../lib/numbers.ts';

/** How the price adds up, line by line. */
export function QuoteReceipt({ quote }: { quote: Quote }) {
  const { currency } = quote;
  return (
    <dl className="mt-2">
      <Line term="Sites to score" value={count(quote.readySites)} />
      <Line term="Scenarios, vortex draws included" value={`× ${count(quote.scenarios)}`} />
      <Line term="Site–scenarios" value={count(quote.siteScenarios)} rule />
      <Line term="Out of reach, not charged" value={`− ${count(quote.outOfReach)}`} quiet />
      <Line term="Charged units" value={count(quote.units)} rule strong />
      <Line
        term={`Unit price, tariff ${quote.tariffVersion}`}
        value={quote.unitPrice.replace(/(\.\d*?)0+$/, '$1')}
        quiet
      />
      {quote.minimumApplied && (
        <Line term="Minimum a run, applied" value={exactAmount(quote.minimumMinor, currency)} quiet />
      )}
      <Line term="Net" value={exactAmount(quote.netMinor, currency)} rule />
      <Line term={quote.taxLabel} value={exactAmount(quote.taxMinor, currency)} quiet />
      <Line term={`Total, ${currency}`} value={exactAmount(quote.grossMinor, currency)} strong large />
    </dl>
  );
}

interface LineProps {
  term: ReactNode;
  value: string;
  rule?: boolean;
  strong?: boolean;
  quiet?: boolean;
  large?: boolean;
}

function Line({ term, value, rule = false, strong = false, quiet = false, large = false }: LineProps) {
  return (
    <div
      className={classNames(
        'flex items-baseline justify-between gap-3 px-5',
        large ? 'mt-1 border-t-2 border-ink py-2 text-16' : 'py-1.25',
        rule && 'border-t border-rule',
        strong && 'font-bold',
      )}
    >
      <dt className={quiet ? 'text-ink-2' : undefined}>{term}</dt>
      <dd>{value}</dd>
    </div>
  );
}
