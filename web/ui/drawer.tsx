import { useEffect, useId, useRef, type ReactNode } from 'react';
import { X } from 'lucide-react';
import { classNames } from '../lib/class-names.ts';
import { IconButton } from './button.tsx';

interface DrawerProps {
  title: ReactNode;
  /** Beside the title: place, state chip. */
  aside?: ReactNode;
  onClose: () => void;
  children: ReactNode;
  footer?: ReactNode;
  /** Previous and next, at the right of the head. */
  controls?: ReactNode;
  className?: string;
}

/** Stands beside what it explains; a full page on a phone. Escape closes and focus returns to the opener. */
export function Drawer({ title, aside, onClose, children, footer, controls, className }: DrawerProps) {
  const titleId = useId();
  const panel = useRef<HTMLElement>(null);
  useEffect(() => {
    const opener = document.activeElement;
    panel.current?.focus({ preventScroll: true });
    return () => {
      if (opener instanceof HTMLElement) opener.focus({ preventScroll: true });
    };
  }, []);
  return (
    <aside
      ref={panel}
      tabIndex={-1}
      aria-labelledby={titleId}
      onKeyDown={(event) => {
        if (event.key === 'Escape') onClose();
      }}
      className={classNames(
        'flex min-h-0 flex-col border-l-3 border-rule-strong bg-sheet shadow-2 outline-none max-rail:fixed max-rail:inset-0 max-rail:z-30 max-rail:border-l-0',
        className,
      )}
    >
      <header className="flex items-center gap-2.5 border-b border-rule px-4 py-2.5">
        <h2 id={titleId} className="text-18">
          {title}
        </h2>
        {aside}
        <div className="ml-auto flex items-center gap-1">
          {controls}
          <IconButton label="Close" icon={X} onClick={onClose} />
        </div>
      </header>
      <div className="min-h-0 flex-1 overflow-y-auto">{children}</div>
      {footer && <footer className="border-t border-rule bg-well px-4 py-2.5 text-12 text-ink-2">{footer}</footer>}
    </aside>
  );
}
