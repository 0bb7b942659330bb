import type { ReactNode } from 'react';
import { classNames } from '../../../lib/class-names.ts';

interface SetupStepProps {
  number: number;
  label: string;
  title?: ReactNode;
  detail?: ReactNode;
  /** State of the choice. */
  chip?: ReactNode;
  onChange?: () => void;
  /** "Choose" while nothing is chosen. */
  isOpen?: boolean;
  changeLabel?: string;
  children?: ReactNode;
}

/** One line of truth plus Change. */
export function SetupStep(props: SetupStepProps) {
  const { number, label, title, detail, chip, onChange, isOpen = false, children } = props;
  return (
    <li
      id={`choice-${number}`}
      tabIndex={-1}
      className="flex gap-3.5 border-b border-rule px-4.5 py-3 last:border-b-0 focus-visible:-outline-offset-2 max-rail:px-3.5"
    >
      <span
        aria-hidden
        className={classNames(
          'grid size-6.5 flex-none place-items-center rounded-pill text-13 font-black',
          isOpen ? 'border-[1.5px] border-edge text-ink-2' : 'bg-action text-on-fill',
        )}
      >
        {number}
      </span>
      <div className="min-w-0 flex-1">
        <div className="flex items-center gap-3">
          <div className="min-w-0 flex-1">
            <div className="text-12 leading-tight text-ink-2">{label}</div>
            {title && <div className="text-16 leading-snug font-bold">{title}</div>}
          </div>
          {chip}
          {onChange && (
            <button
              type="button"
              className="-mr-2 flex-none rounded-1 px-2 py-1 font-bold text-link hover:bg-hover pointer-coarse:min-h-11"
              onClick={onChange}
            >
              {isOpen ? 'Choose' : 'Change'}
              <span className="sr-only"> {props.changeLabel ?? label.toLowerCase()}</span>
            </button>
          )}
        </div>
        {detail && <div className="text-13 text-ink-2">{detail}</div>}
        {children}
      </div>
    </li>
  );
}
