import { Eye } from 'lucide-react';
import { Link } from 'react-router-dom';
import { Chip } from '../chip.tsx';
import { useFrame } from './frame-context.ts';
import { UnitSwitch } from './unit-switch.tsx';
import { UtcClock } from './utc-clock.tsx';

export interface Crumb {
  label: string;
  /** Left out on the last one: it is here. */
  to?: string;
}

export function TopBar({ crumbs }: { crumbs: readonly Crumb[] }) {
  const { readOnlyChip } = useFrame();
  return (
    <header
      data-print="hide"
      className="flex items-center gap-4 border-b border-rule bg-page px-6 max-rail:gap-2 max-rail:px-3.5"
    >
      <nav aria-label="Where you are" className="min-w-0">
        <ol className="flex min-w-0 items-center gap-2 text-13 whitespace-nowrap">
          {crumbs.map(({ label, to }, index) =>
            to ? (
              <li key={index} className="flex min-w-0 items-center gap-2 max-rail:hidden">
                <Link to={to} className="truncate text-ink-2 no-underline hover:text-ink hover:underline">
                  {label}
                </Link>
                <span aria-hidden className="text-rule-strong">
                  /
                </span>
              </li>
            ) : (
              <li
                key={index}
                aria-current="page"
                className="min-w-0 truncate font-bold max-rail:text-16 max-rail:font-black max-rail:tracking-tight"
              >
                {label}
              </li>
            ),
          )}
        </ol>
      </nav>
      <div className="ml-auto flex flex-none items-center gap-3.5">
        {readOnlyChip && (
          <Chip tone="info" icon={Eye}>
            {readOnlyChip}
          </Chip>
        )}
        <UnitSwitch className="max-rail:hidden" />
        <UtcClock className="text-13 whitespace-nowrap text-ink-2 max-wide:hidden" />
      </div>
    </header>
  );
}
