import { Check, TriangleAlert } from 'lucide-react';
import { Link } from 'react-router-dom';
import { classNames } from '../lib/class-names.ts';

export interface Step {
  label: string;
  /** The step's outcome in one line, or what it waits for. */
  outcome: string;
  state: 'done' | 'current' | 'later';
  /** Where a reachable step leads. */
  to?: string;
  /** Something there needs a decision. */
  alert?: boolean;
}

/** Steps with their outcomes; on a phone the numbers alone, the present one named in the page head. */
export function Stepper({ label, steps }: { label: string; steps: readonly Step[] }) {
  return (
    <ol
      aria-label={label}
      className="mb-3.5 grid flex-none gap-1.5 max-rail:mb-2.5 max-rail:gap-0.75"
      style={{ gridTemplateColumns: `repeat(${steps.length}, minmax(0, 1fr))` }}
    >
      {steps.map((step, index) => (
        <li
          key={step.label}
          aria-current={step.state === 'current' ? 'step' : undefined}
          className={classNames(
            'border-t-3',
            step.state === 'done' ? 'border-action' : step.state === 'current' ? 'border-ink' : 'border-rule-strong',
          )}
        >
          <StepBody step={step} number={index + 1} />
        </li>
      ))}
    </ol>
  );
}

function StepBody({ step, number }: { step: Step; number: number }) {
  const { label, outcome, state, to, alert = false } = step;
  const body = (
    <>
      <span
        className={classNames(
          'grid size-6 flex-none place-items-center rounded-pill border-[1.5px] text-12 font-black',
          state === 'done' && 'border-action bg-action text-on-fill',
          state === 'current' && 'border-ink bg-ink text-(--page)',
          state === 'later' && 'border-edge text-ink-2',
        )}
      >
        {state === 'done' ? (
          <Check size={14} strokeWidth={2.5} aria-label="Done" />
        ) : alert ? (
          <TriangleAlert size={13} aria-label="Needs a decision" />
        ) : (
          number
        )}
      </span>
      <span className="min-w-0 max-rail:sr-only">
        <span
          className={classNames(
            'block leading-[1.15]',
            state !== 'later' && 'font-bold',
            state === 'later' && 'text-ink-2',
          )}
        >
          {label}
        </span>
        <span className="block truncate text-12 text-ink-2">{outcome}</span>
      </span>
    </>
  );
  const look = 'flex items-center gap-2.5 pt-2.5 text-ink no-underline max-rail:justify-center max-rail:pt-2';
  return to && state !== 'current' ? (
    <Link to={to} className={classNames(look, 'rounded-b-2 hover:bg-hover')}>
      {body}
    </Link>
  ) : (
    <span className={look}>{body}</span>
  );
}
