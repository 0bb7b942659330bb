import { useState } from 'react';
import { Clock, History, RotateCcw } from 'lucide-react';
import type { Quote } from '#contract/runs.ts';
import { classNames } from '../../../lib/class-names.ts';
import { day, utc } from '../../../lib/dates.ts';
import { exactAmount, exactMoney } from '../../../lib/money.ts';
import { count } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Button, ButtonLink } from '../../../ui/button.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { Message } from '../../../ui/message.tsx';
import { QuoteReceipt } from './quote-receipt.tsx';

export type QuoteStanding = 'open' | 'changed' | 'expired' | 'accepted';

/** Whether the quote still is the price of what stands on the page. */
export const standingOf = (quote: Quote, isSame: boolean, now: Date): QuoteStanding => {
  if (quote.state === 'accepted') return 'accepted';
  if (quote.state === 'expired' || Date.parse(quote.validUntil) <= now.getTime()) return 'expired';
  return isSame ? 'open' : 'changed';
};

interface QuoteCardProps {
  quote: Quote | null;
  standing: QuoteStanding | null;
  /** What is still open, when no quote can be asked for. */
  openChoice: string | null;
  quoting: boolean;
  accepting: boolean;
  quoteError: string | null;
  acceptError: string | null;
  onQuote: () => void;
  onAccept: () => void;
}

/** The price before the button: a receipt, never exceeded. */
export function QuoteCard(props: QuoteCardProps) {
  const { quote, standing, openChoice, quoting, quoteError, onQuote } = props;
  const [shows, setShows] = useState(false);
  const isOpen = standing === 'open';
  return (
    <section
      aria-label="Quote"
      className={classNames(
        'flex flex-col rounded-3 border border-rule-strong bg-sheet shadow-2 max-wide:order-first',
        'wide:sticky wide:top-0 wide:self-start',
      )}
    >
      {quote?.identicalRunId && isOpen && <IdenticalRun runId={quote.identicalRunId} />}
      {!quote ? (
        <div className="flex flex-1 flex-col gap-3 p-5">
          <h2 className="text-15">Quote</h2>
          <p className="text-ink-2">
            {openChoice
              ? 'The price stands here once the six choices are made.'
              : 'The price is worked out from the sites within reach of each track. Asking is free.'}
          </p>
          {quoteError && <Message tone="error">{quoteError}</Message>}
          <Button
            variant="filled"
            size="large"
            className="mt-auto w-full"
            pending={quoting}
            disabledReason={openChoice ?? undefined}
            onClick={onQuote}
          >
            Quote this run
          </Button>
        </div>
      ) : (
        <>
          <div className="p-5 pb-0">
            <div className="flex items-center gap-2">
              <h2 className="text-15">Quote {quote.number}</h2>
              <span className="ml-auto">
                {standing === 'open' && (
                  <Chip tone="idle" icon={Clock}>
                    until {day(quote.validUntil)} {utc(quote.validUntil).slice(-9)}
                  </Chip>
                )}
                {standing === 'changed' && <Chip tone="caution">choices changed</Chip>}
                {standing === 'expired' && (
                  <Chip tone="caution" icon={Clock}>
                    expired
                  </Chip>
                )}
                {standing === 'accepted' && <Chip tone="done">accepted</Chip>}
              </span>
            </div>
            <p
              className={classNames(
                'mt-1 flex items-baseline gap-2',
                !isOpen && 'line-through decoration-2 opacity-70',
              )}
            >
              <span className="text-18 text-ink-2">{quote.currency}</span>
              <span className="text-52 font-black tracking-tight max-rail:text-44">
                {exactAmount(quote.grossMinor, quote.currency)}
              </span>
              <b className="text-16">at most</b>
            </p>
          </div>
          <div className={classNames(!isOpen && 'opacity-70')}>
            <button
              type="button"
              className="px-5 py-2 text-13 font-bold text-link wide:hidden"
              aria-expanded={shows}
              onClick={() => setShows(!shows)}
            >
              {shows ? 'Hide how it adds up' : 'Show how it adds up'}
            </button>
            <div className={classNames(!shows && 'max-wide:hidden')}>
              <QuoteReceipt quote={quote} />
            </div>
          </div>
          <Decision {...props} quote={quote} standing={standing!} />
        </>
      )}
    </section>
  );
}

function IdenticalRun({ runId }: { runId: string }) {
  return (
    <div className="flex items-start gap-2.5 rounded-t-3 bg-done-tint px-5 py-3 text-13">
      <History size={17} strokeWidth={1.75} className="mt-px flex-none text-done" aria-hidden />
      <div>
        <p>
          <b>This very run exists.</b> The same sites and terms, tracks, calibration, options and engine: its digits
          would be the same. Opening it is free.
        </p>
        <ButtonLink size="small" to={paths.run(runId)} className="mt-2">
          Open it, free
        </ButtonLink>
      </div>
    </div>
  );
}

/** Accept, or why not and what to do instead. */
function Decision(props: QuoteCardProps & { quote: Quote; standing: QuoteStanding }) {
  const { quote, standing, quoting, accepting, openChoice, acceptError, quoteError, onQuote, onAccept } = props;
  const { currency, grossMinor, freeBalanceMinor } = quote;
  const after = freeBalanceMinor - grossMinor;
  const short = after < 0;
  return (
    <div className="mt-auto flex flex-col gap-3 border-t border-dashed border-rule-strong p-5 pt-3.5">
      <dl className="text-13" aria-label="Balance">
        <Line term="Free now" value={exactAmount(freeBalanceMinor, currency)} />
        <Line term="Reserved by this run" value={`− ${exactAmount(grossMinor, currency)}`} />
        <Line term="Free after acceptance" value={exactAmount(after, currency)} caution={short} result />
      </dl>
      {acceptError && <Message tone="error">{acceptError}</Message>}
      {quoteError && <Message tone="error">{quoteError}</Message>}
      {standing === 'open' ? (
        <>
          <Button
            id="accept-quote"
            variant="filled"
            size="large"
            className="w-full justify-between max-rail:hidden"
            pending={accepting}
            disabledReason={
              short
                ? `The free balance is ${exactMoney(-after, currency)} short. An account admin can top it up on Billing.`
                : undefined
            }
            onClick={onAccept}
          >
            <span>Accept and run</span> <span>{exactMoney(grossMinor, currency)}</span>
          </Button>
          <p className="text-12 text-ink-2">
            Reserved from the prepaid balance. You pay for what completes, never more than this; the rest is released.
          </p>
        </>
      ) : standing === 'accepted' ? (
        <p className="text-13 text-ink-2">This quote was accepted. Its run is on the list of runs.</p>
      ) : (
        <>
          <Button
            variant="filled"
            size="large"
            icon={RotateCcw}
            className="w-full"
            pending={quoting}
            disabledReason={openChoice ?? undefined}
            onClick={onQuote}
          >
            Quote again
          </Button>
          <p className="text-12 text-ink-2">
            {standing === 'expired'
              ? `This quote was valid until ${utc(quote.validUntil)}. A new one costs nothing.`
              : 'A quote is pinned to its choices, and some have changed since. A new one costs nothing.'}
          </p>
        </>
      )}
    </div>
  );
}

interface LineProps {
  term: string;
  value: string;
  caution?: boolean;
  /** Below the rule, what the lines above come to. */
  result?: boolean;
}

function Line({ term, value, caution = false, result = false }: LineProps) {
  return (
    <div
      className={classNames(
        'flex justify-between gap-3',
        result ? 'mt-1 border-t border-rule pt-1.5 pb-0.5 font-bold' : 'py-0.5',
        caution && 'text-caution',
      )}
    >
      <dt>{term}</dt>
      <dd>{value}</dd>
    </div>
  );
}

/** "1,932 × 3" in one breath, for the sticky bar of a phone. */
export const quoteInShort = (quote: Quote): string =>
  `${count(quote.units)} site–scenarios, ${exactMoney(quote.grossMinor, quote.currency)} at most`;
