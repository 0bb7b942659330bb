import type { ReactNode } from 'react';
import { CircleCheck, Hand, History, TriangleAlert, type LucideIcon } from 'lucide-react';
import { Link } from 'react-router-dom';
import type { Calibration, CurveSet } from '#contract/models.ts';
import type { Quote } from '#contract/runs.ts';
import { classNames } from '../../../lib/class-names.ts';
import { shortMoney } from '../../../lib/money.ts';
import { counted, percent } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import type { EditionChoice } from '../run-setup.ts';

interface BeforeAcceptingProps {
  edition: EditionChoice;
  quote: Quote | null;
  calibration: Calibration | null;
  curveSet: CurveSet | null;
}

/** What a careful colleague would point out before the button. */
export function BeforeAccepting({ edition, quote, calibration, curveSet }: BeforeAcceptingProps) {
  const signed = calibration?.state === 'signed';
  return (
    <Card title="Before you accept">
      <ul className="grid grid-cols-2 gap-x-6 gap-y-3 text-13 max-rail:grid-cols-1">
        {curveSet && (
          <Point icon={CircleCheck} tone="done">
            <b>Curves and hazard fit.</b> {curveSet.curve.name} expects 3-s gusts at 10 m, as this run gives them;
            fitted on {curveSet.curve.fittedOn} gusts.
          </Point>
        )}
        <Point icon={Hand} tone={edition.held > 0 ? 'caution' : 'done'}>
          <b>{edition.held > 0 ? `${counted(edition.held, 'site')} stay unscored.` : 'No site is held.'}</b>{' '}
          {edition.held > 0 && `${shortMoney(edition.heldTivMinor, edition.currency)}, carried on every result. `}
          {edition.held > 0 && (
            <Link to={paths.edition(edition.editionId, 'sites')} className="font-bold">
              See them
            </Link>
          )}
        </Point>
        {quote && (
          <Point icon={TriangleAlert} tone={quote.assumedTivShare > 0 ? 'caution' : 'done'}>
            <b>{percent(quote.assumedTivShare)} of TIV rests on assumptions.</b>{' '}
            {quote.assumedTivShare > 0 && 'The readiness sheet lists them.'}
          </Point>
        )}
        {quote && (
          <Point icon={History} tone="done">
            {quote.identicalRunId ? (
              <b>An identical run exists; open it free, above the quote.</b>
            ) : (
              <>
                <b>No identical run exists.</b> If it did, we’d offer it free.
              </>
            )}
          </Point>
        )}
        {calibration && !signed && (
          <Point icon={TriangleAlert} tone="caution">
            <b>{calibration.code} isn’t signed.</b> Every output of this run is stamped “Unsigned calibration,
            exploratory”.
          </Point>
        )}
        {quote?.warnings.map((warning) => (
          <Point key={warning.text} icon={TriangleAlert} tone="caution">
            {warning.text}
          </Point>
        ))}
      </ul>
    </Card>
  );
}

function Point({ icon: Icon, tone, children }: { icon: LucideIcon; tone: 'done' | 'caution'; children: ReactNode }) {
  return (
    <li className="flex gap-2.5 leading-snug">
      <Icon
        size={17}
        strokeWidth={1.75}
        className={classNames('mt-px flex-none', tone === 'done' ? 'text-done' : 'text-caution')}
        aria-hidden
      />
      <span>{children}</span>
    </li>
  );
}
