import { useId, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';

interface CardProps {
  title?: ReactNode;
  /** Right of the title, in small Slate: a definition, a total, a link. */
  aside?: ReactNode;
  children: ReactNode;
  className?: string;
  /** Padding of the body; tables bring their own. */
  padded?: boolean;
}

/** Sheet on Page. No card inside a card: divide with rules. */
export function Card({ title, aside, children, className, padded = true }: CardProps) {
  const titleId = useId();
  return (
    <section
      aria-labelledby={title ? titleId : undefined}
      className={classNames('min-w-0 rounded-3 border border-rule bg-sheet shadow-1', className)}
    >
      {title && (
        <header className="flex flex-wrap items-baseline gap-x-2.5 gap-y-0.5 px-4 pt-3">
          <h2 id={titleId} className="text-15">
            {title}
          </h2>
          {aside && <div className="ml-auto text-13 text-ink-2">{aside}</div>}
        </header>
      )}
      {padded ? <div className={title ? 'px-4 pt-2.5 pb-4' : 'p-4'}>{children}</div> : children}
    </section>
  );
}
