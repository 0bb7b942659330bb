import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { StandingNote } from './frame/standing-note.tsx';
import { Mark } from './mark.tsx';

interface BareLayoutProps {
  title: string;
  /** Right end of the head: the clock, or who is signed in. */
  aside?: ReactNode;
  children: ReactNode;
  className?: string;
}

/** For the few pages outside the frame: mark, content in the middle, standing note. */
export function BareLayout({ title, aside, children, className }: BareLayoutProps) {
  return (
    <div className="grid h-dvh grid-cols-[minmax(0,1fr)] grid-rows-[4rem_minmax(0,1fr)_auto] max-rail:grid-rows-[3.25rem_minmax(0,1fr)_auto] print:block print:h-auto">
      <title>{`${title} · Gustloom`}</title>
      <header className="flex items-center gap-4 border-b border-rule px-8 max-rail:px-4">
        <span className="flex items-center gap-2.5 text-20 font-black tracking-tight">
          <Mark />
          Gustloom
        </span>
        <div className="ml-auto text-13 text-ink-2 max-rail:hidden">{aside}</div>
      </header>
      <main
        className={classNames(
          'grid grid-cols-[minmax(0,1fr)] place-items-center overflow-y-auto p-6 max-rail:place-items-start max-rail:p-3.5 [&>*]:max-w-full',
          className,
        )}
      >
        {children}
      </main>
      <StandingNote className="px-8" />
    </div>
  );
}
