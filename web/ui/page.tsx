import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { StandingNote } from './frame/standing-note.tsx';
import { TopBar, type Crumb } from './frame/top-bar.tsx';

interface PageProps {
  title: string;
  /** Drawn instead of the title where it needs more than text. */
  heading?: ReactNode;
  crumbs: readonly Crumb[];
  sub?: ReactNode;
  actions?: ReactNode;
  /** Text of the standing note when the page needs its own. */
  note?: string;
  children: ReactNode;
  className?: string;
  /** The page fills the window and its parts scroll on their own, from 1100 up. */
  fixed?: boolean;
}

/** Top bar, main and standing note of one page, inside the frame's grid. */
export function Page({ title, heading, crumbs, sub, actions, note, children, className, fixed = false }: PageProps) {
  return (
    <>
      <title>{`${title} · Gustloom`}</title>
      <TopBar crumbs={crumbs} />
      <main
        id="content"
        tabIndex={-1}
        className={classNames(
          'relative flex min-h-0 min-w-0 flex-col overflow-y-auto px-6 py-4.5 outline-none max-rail:p-3.5',
          fixed && 'wide:overflow-hidden',
          className,
        )}
      >
        <div className="mb-3.5 flex flex-none flex-wrap items-start gap-x-4 gap-y-2.5">
          <div className="min-w-0 flex-1 basis-72">
            <h1 className="text-24 max-rail:text-22">{heading ?? title}</h1>
            {sub && (
              <div className="mt-1 flex flex-wrap items-center gap-x-3.5 gap-y-1 text-13 text-ink-2 [&_b]:text-ink">
                {sub}
              </div>
            )}
          </div>
          {actions && (
            <div className="flex flex-wrap items-start gap-2 max-rail:w-full max-rail:[&>*]:flex-1">{actions}</div>
          )}
        </div>
        {children}
      </main>
      <StandingNote text={note} />
    </>
  );
}
