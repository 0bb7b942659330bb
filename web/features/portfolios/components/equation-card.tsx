import type { Edition, Reconciliation } from '#contract/portfolios.ts';
import { CircleCheck, TriangleAlert } from 'lucide-react';
import type { ReactNode } from 'react';
import { classNames } from '../../../lib/class-names.ts';
import { ShareBar, SumRow } from '../../../ui/sum-row.tsx';
import { controlVerdict, equationOf, tivSentence, tivShares } from '../reconciliation.ts';

interface EquationCardProps {
  reconciliation: Reconciliation;
  currency: string;
  /** Given where the verdict on control totals belongs into the sum's row. */
  control?: Pick<Edition, 'control' | 'messages' | 'currency'>;
  sentence?: ReactNode;
  className?: string;
}

/** The row equation: every line of the file is in exactly one state. */
export function EquationCard({ reconciliation, currency, control, sentence, className }: EquationCardProps) {
  const { total, terms } = equationOf(reconciliation, currency);
  const verdict = control && controlVerdict(reconciliation, control);
  return (
    <section
      aria-label="Rows by state"
      className={classNames(
        'rounded-3 border border-rule bg-sheet px-4.5 pt-3.5 pb-2.5 shadow-1 max-rail:px-3.5 max-rail:pt-3 max-rail:pb-2',
        className,
      )}
    >
      <SumRow
        total={total}
        terms={terms}
        spread={!control}
        verdict={
          verdict &&
          verdict.state !== 'none' && (
            <div
              className={classNames(
                'rounded-2 px-3.5 py-2.5 text-12 wide:max-w-82',
                verdict.state === 'ties' ? 'bg-done-tint' : 'bg-caution-tint',
              )}
            >
              <p
                className={classNames(
                  'flex items-center gap-1.25 text-13 font-bold',
                  verdict.state === 'ties' ? 'text-done' : 'text-caution',
                )}
              >
                {verdict.state === 'ties' ? (
                  <CircleCheck size={15} strokeWidth={1.75} aria-hidden />
                ) : (
                  <TriangleAlert size={15} strokeWidth={1.75} aria-hidden />
                )}
                {verdict.state === 'ties' ? 'Ties with your control totals' : 'Doesn’t tie with your control totals'}
              </p>
              <p className="mt-0.5">{verdict.sentence}</p>
            </div>
          )
        }
      />
      <ShareBar shares={tivShares(reconciliation)} className="mt-2.5" />
      <p className="mt-1.25 text-12 text-ink-2">{sentence ?? tivSentence(reconciliation, currency)}</p>
    </section>
  );
}
