import { Menu, MenuButton, MenuItem, MenuItems } from '@headlessui/react';
import { Loader, LogOut, Moon, Sun } from 'lucide-react';
import { Link, useLocation } from 'react-router-dom';
import { classNames } from '../../lib/class-names.ts';
import { useTheme } from '../../lib/theme.ts';
import { Mark } from '../mark.tsx';
import { isCurrent, type NavigationItem } from './navigation.ts';

export interface WorkingRun {
  id: string;
  number: string;
  done: number;
  total: number;
  to: string;
}

interface RailProps {
  organisation: { name: string; initials: string };
  person: { name: string; role: string };
  groups: readonly (readonly NavigationItem[])[];
  working: readonly WorkingRun[];
  onSignOut: () => void;
}

const MAX_LISTED_RUNS = 3;
const initialsOf = (name: string) =>
  name
    .split(/\s+/)
    .map((word) => word.charAt(0))
    .slice(0, 2)
    .join('')
    .toUpperCase();

/** Ink in both themes: 208 px with words, icons alone below 1100, absent below 700. */
export function Rail({ organisation, person, groups, working, onSignOut }: RailProps) {
  const { pathname } = useLocation();
  return (
    <nav
      aria-label="Main"
      data-print="hide"
      className="row-span-full flex flex-col bg-rail px-3 pt-3.5 pb-3 text-rail-text max-wide:px-2 max-rail:hidden"
    >
      <Link
        to="/"
        className="flex items-center gap-2.5 px-1.5 pb-3.5 text-[1.1875rem] font-black tracking-tight text-rail-text no-underline max-wide:justify-center"
        aria-label="Gustloom, home"
      >
        <Mark onInk />
        <span className="max-wide:hidden">Gustloom</span>
      </Link>
      <div className="flex items-center gap-2.5 rounded-2 bg-rail-2 px-2 py-1.75 leading-tight max-wide:justify-center max-wide:p-1.5">
        <span className="grid size-7 flex-none place-items-center rounded-[4px] bg-[#E9E4DA] text-12 font-black text-[#14262E]">
          {organisation.initials}
        </span>
        <span className="min-w-0 max-wide:sr-only">
          <b className="block truncate text-13">{organisation.name}</b>
          <span className="text-12 text-rail-text-2">Organisation</span>
        </span>
      </div>
      {groups
        .filter((items) => items.length > 0)
        .map((items, index) => (
          <ul
            key={index}
            className={classNames('mt-3.5 flex flex-col', index > 0 && 'border-t border-rail-rule pt-3.5')}
          >
            {items.map((item) => (
              <li key={item.to}>
                <RailLink item={item} current={isCurrent(item, pathname)} />
              </li>
            ))}
          </ul>
        ))}
      <div className="mt-auto flex flex-col gap-2.5">
        {working.length > 0 && <WorkingRuns runs={working} />}
        <PersonMenu person={person} onSignOut={onSignOut} />
      </div>
    </nav>
  );
}

function RailLink({ item, current }: { item: NavigationItem; current: boolean }) {
  const Icon = item.icon;
  return (
    <Link
      to={item.to}
      aria-current={current ? 'page' : undefined}
      title={item.label}
      className={classNames(
        'relative flex h-9 items-center gap-2.75 rounded-2 px-2.25 text-14 no-underline focus-visible:outline-rail-mark max-wide:justify-center pointer-coarse:h-11',
        current
          ? 'bg-rail-2 font-bold text-rail-text before:absolute before:inset-y-1.75 before:-left-3 before:w-0.75 before:rounded-r-[2px] before:bg-rail-mark max-wide:before:-left-2'
          : 'text-rail-text-2 hover:bg-rail-2 hover:text-rail-text',
      )}
    >
      <Icon size={18} strokeWidth={1.75} className={classNames('flex-none', current && 'text-rail-mark')} aria-hidden />
      <span className="max-wide:sr-only">{item.label}</span>
      {item.badge !== undefined && item.badge > 0 && (
        <span className="ml-auto grid h-4.75 min-w-4.75 place-items-center rounded-pill bg-rail-mark px-1 text-12 font-bold text-[#14262E] max-wide:absolute max-wide:-top-0.5 max-wide:right-0 max-wide:h-4 max-wide:min-w-4">
          {item.badge}
          <span className="sr-only"> waiting</span>
        </span>
      )}
    </Link>
  );
}

function WorkingRuns({ runs }: { runs: readonly WorkingRun[] }) {
  const more = runs.length - MAX_LISTED_RUNS;
  return (
    <section aria-label="Runs working" className="rounded-2 bg-rail-2 p-2.5 text-12 max-wide:hidden">
      <h2 className="mb-1.5 flex items-center gap-1.75 text-13 font-bold tracking-normal">
        <Loader size={14} className="text-rail-mark" aria-hidden />
        {runs.length === 1 ? '1 run working' : `${runs.length} runs working`}
      </h2>
      <ul className="flex flex-col gap-1.5">
        {runs.slice(0, MAX_LISTED_RUNS).map((run) => (
          <li key={run.id}>
            <Link
              to={run.to}
              className="grid grid-cols-[1fr_auto] gap-x-1.5 gap-y-0.75 rounded-1 text-rail-text-2 no-underline hover:text-rail-text focus-visible:outline-rail-mark"
            >
              <span>{run.number}</span>
              <span>
                {run.done} of {run.total}
              </span>
              <span className="col-span-full h-0.75 rounded-[2px] bg-[#38505A]">
                <span
                  className="block h-full rounded-[2px] bg-rail-mark"
                  style={{ width: `${(100 * run.done) / Math.max(1, run.total)}%` }}
                />
              </span>
            </Link>
          </li>
        ))}
      </ul>
      {more > 0 && <p className="mt-1.5 text-rail-text-2">and {more} more</p>}
    </section>
  );
}

function PersonMenu({ person, onSignOut }: Pick<RailProps, 'person' | 'onSignOut'>) {
  const [theme, setTheme] = useTheme();
  const item =
    'flex h-9 w-full items-center gap-2.5 rounded-1 px-2.5 text-14 text-ink data-focus:bg-hover pointer-coarse:h-11';
  return (
    <Menu>
      <MenuButton className="flex w-full items-center gap-2.5 rounded-2 px-2 py-1.75 text-left leading-tight hover:bg-rail-2 focus-visible:outline-rail-mark data-open:bg-rail-2 max-wide:justify-center max-wide:px-1">
        <span
          className="grid size-7 flex-none place-items-center rounded-pill bg-[#1F5C66] text-12 font-black text-[#FFFDFA]"
          aria-hidden
        >
          {initialsOf(person.name)}
        </span>
        <span className="min-w-0 max-wide:sr-only">
          <b className="block truncate text-13">{person.name}</b>
          <span className="block truncate text-12 text-rail-text-2">{person.role}</span>
          <span className="sr-only">: theme and sign out</span>
        </span>
      </MenuButton>
      <MenuItems
        anchor="top start"
        className="z-40 w-52 rounded-2 border border-rule-strong bg-sheet p-1 shadow-3 [--anchor-gap:6px] focus:outline-none"
      >
        <MenuItem>
          <button type="button" className={item} onClick={() => setTheme(theme === 'dark' ? 'light' : 'dark')}>
            {theme === 'dark' ? (
              <Sun size={16} strokeWidth={1.75} aria-hidden />
            ) : (
              <Moon size={16} strokeWidth={1.75} aria-hidden />
            )}
            {theme === 'dark' ? 'Light theme' : 'Dark theme'}
          </button>
        </MenuItem>
        <MenuItem>
          <button type="button" className={item} onClick={onSignOut}>
            <LogOut size={16} strokeWidth={1.75} aria-hidden />
            Sign out
          </button>
        </MenuItem>
      </MenuItems>
    </Menu>
  );
}
