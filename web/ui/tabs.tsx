import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { classNames } from '../lib/class-names.ts';

interface Tab {
  to: string;
  label: ReactNode;
  current: boolean;
}

/** Views of one thing, each with its own address. */
export function Tabs({ label, tabs }: { label: string; tabs: readonly Tab[] }) {
  return (
    <nav
      aria-label={label}
      className="-mx-6 mb-4 flex flex-none gap-6 overflow-x-auto border-b border-rule px-6 max-rail:-mx-3.5 max-rail:mb-3 max-rail:gap-4.5 max-rail:px-3.5"
    >
      {tabs.map((tab) => (
        <Link
          key={tab.to}
          to={tab.to}
          aria-current={tab.current ? 'page' : undefined}
          preventScrollReset
          className={classNames(
            '-mb-px flex items-center border-b-2 pb-2.25 font-bold whitespace-nowrap no-underline pointer-coarse:min-h-11',
            tab.current ? 'border-ink text-ink' : 'border-transparent text-ink-2 hover:text-ink',
          )}
        >
          {tab.label}
        </Link>
      ))}
    </nav>
  );
}
