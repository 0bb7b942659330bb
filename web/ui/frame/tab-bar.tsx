import { useState } from 'react';
import { Dialog, DialogBackdrop, DialogPanel, DialogTitle } from '@headlessui/react';
import { LogOut, Menu, Moon, Sun } from 'lucide-react';
import { Link, useLocation } from 'react-router-dom';
import { classNames } from '../../lib/class-names.ts';
import { useTheme } from '../../lib/theme.ts';
import { isCurrent, type NavigationItem } from './navigation.ts';
import { UnitSwitch } from './unit-switch.tsx';

interface TabBarProps {
  /** At most four; the rest goes to More. */
  items: readonly NavigationItem[];
  more: readonly NavigationItem[];
  person: { name: string; role: string };
  organisation: { name: string };
  onSignOut: () => void;
}

const TAB =
  'flex flex-1 flex-col items-center justify-center gap-0.75 text-12 no-underline focus-visible:outline-rail-mark focus-visible:-outline-offset-4';

/** The rail of a phone. */
export function TabBar({ items, more, person, organisation, onSignOut }: TabBarProps) {
  const { pathname } = useLocation();
  const [open, setOpen] = useState(false);
  const [theme, setTheme] = useTheme();
  const inMore = more.some((item) => isCurrent(item, pathname));
  const row = 'flex h-12 w-full items-center gap-3 border-b border-rule px-4 text-15 text-ink no-underline';
  return (
    <nav aria-label="Main" data-print="hide" className="flex bg-rail rail:hidden">
      {items.map((item) => {
        const current = isCurrent(item, pathname);
        const Icon = item.icon;
        return (
          <Link
            key={item.to}
            to={item.to}
            aria-current={current ? 'page' : undefined}
            className={classNames(TAB, current ? 'font-bold text-rail-text' : 'text-rail-text-2')}
          >
            <Icon size={20} strokeWidth={1.75} className={current ? 'text-rail-mark' : undefined} aria-hidden />
            {item.label}
          </Link>
        );
      })}
      <button
        type="button"
        aria-haspopup="dialog"
        aria-expanded={open}
        onClick={() => setOpen(true)}
        className={classNames(TAB, inMore ? 'font-bold text-rail-text' : 'text-rail-text-2')}
      >
        <Menu size={20} strokeWidth={1.75} className={inMore ? 'text-rail-mark' : undefined} aria-hidden />
        More
      </button>
      <Dialog open={open} onClose={setOpen} className="relative z-40 outline-none">
        <DialogBackdrop className="fixed inset-0 bg-scrim" />
        <DialogPanel className="fixed inset-x-0 bottom-0 rounded-t-3 bg-sheet pb-3 shadow-3">
          <DialogTitle className="px-4 pt-4 pb-2 leading-tight">
            <b className="block text-16">{person.name}</b>
            <span className="text-13 font-normal tracking-normal text-ink-2">
              {person.role}, {organisation.name}
            </span>
          </DialogTitle>
          <div className="flex items-center justify-between gap-3 border-y border-rule px-4 py-2.5">
            <span className="text-15">Wind unit</span>
            <UnitSwitch />
          </div>
          {more.map((item) => {
            const Icon = item.icon;
            return (
              <Link key={item.to} to={item.to} className={row} onClick={() => setOpen(false)}>
                <Icon size={18} strokeWidth={1.75} className="text-ink-2" aria-hidden />
                {item.label}
              </Link>
            );
          })}
          <button type="button" className={row} onClick={() => setTheme(theme === 'dark' ? 'light' : 'dark')}>
            {theme === 'dark' ? (
              <Sun size={18} strokeWidth={1.75} className="text-ink-2" aria-hidden />
            ) : (
              <Moon size={18} strokeWidth={1.75} className="text-ink-2" aria-hidden />
            )}
            {theme === 'dark' ? 'Light theme' : 'Dark theme'}
          </button>
          <button type="button" className={classNames(row, 'border-b-0')} onClick={onSignOut}>
            <LogOut size={18} strokeWidth={1.75} className="text-ink-2" aria-hidden />
            Sign out
          </button>
        </DialogPanel>
      </Dialog>
    </nav>
  );
}
