import type { ComponentProps, ReactNode } from 'react';
import { CircleAlert } from 'lucide-react';
import { classNames } from '../lib/class-names.ts';
import { ScrollArea } from './scroll-area.tsx';
import { Skeleton } from './skeleton.tsx';

/** Scrolls inside itself when it must; the page never scrolls sideways. */
export function Table({
  label,
  className,
  children,
}: {
  /** What the table lists, for those who don't see its card. */
  label: string;
  className?: string;
  children: ReactNode;
}) {
  return (
    <ScrollArea
      label={`${label}, scrolls sideways`}
      className={classNames('relative min-w-0 overflow-x-auto', className)}
    >
      <table className="w-full border-collapse text-14" aria-label={label}>
        {children}
      </table>
    </ScrollArea>
  );
}

/** Drops a column by declared priority: 1 stays on a phone, 2 from 768, 3 from 1100. */
export type Priority = 1 | 2 | 3;
const PRIORITIES: Record<Priority, string> = { 1: '', 2: 'max-md:hidden', 3: 'max-wide:hidden' };

interface CellLook {
  numeric?: boolean;
  priority?: Priority;
}
const cellLook = ({ numeric = false, priority = 1 }: CellLook) =>
  classNames(PRIORITIES[priority], numeric ? 'text-right' : 'text-left');

export function Th({ numeric, priority, className, ...rest }: CellLook & ComponentProps<'th'>) {
  return (
    <th
      scope="col"
      {...rest}
      className={classNames(
        'border-b border-rule-strong px-2.5 py-1.5 text-12 font-normal whitespace-nowrap text-ink-2 first:pl-4 last:pr-4',
        cellLook({ numeric, priority }),
        className,
      )}
    />
  );
}

export function Td({ numeric, priority, className, ...rest }: CellLook & ComponentProps<'td'>) {
  return (
    <td
      {...rest}
      className={classNames('row px-2.5 first:pl-4 last:pr-4', cellLook({ numeric, priority }), className)}
    />
  );
}

export function Tr({ selected = false, className, ...rest }: { selected?: boolean } & ComponentProps<'tr'>) {
  return (
    <tr
      {...rest}
      aria-selected={selected || undefined}
      className={classNames(
        'border-b border-rule last:border-b-0',
        selected && 'bg-selected shadow-[inset_3px_0_var(--action)]',
        rest.onClick && !selected && 'cursor-pointer hover:bg-hover',
        className,
      )}
    />
  );
}

/** Rows in final positions while the first page is read; the header stays live. */
export function SkeletonRows({ columns, rows = 8 }: { columns: number; rows?: number }) {
  return Array.from({ length: rows }, (_, row) => (
    <Tr key={row} aria-hidden>
      {Array.from({ length: columns }, (_, column) => (
        <Td key={column}>
          <Skeleton width={column === 0 ? '60%' : '45%'} className={column === 0 ? '' : 'ml-auto'} />
        </Td>
      ))}
    </Tr>
  ));
}

/** An empty list teaches the next action. */
export function EmptyRow({ columns, children }: { columns: number; children: ReactNode }) {
  return (
    <tr>
      <td colSpan={columns} className="px-4 py-8 text-14">
        {children}
      </td>
    </tr>
  );
}

/** Above rows that are kept when a later page failed. */
export function TableBanner({ children, onRetry }: { children: ReactNode; onRetry: () => void }) {
  return (
    <div role="alert" className="flex items-center gap-2 bg-error-tint px-4 py-2 text-13 text-error">
      <CircleAlert size={16} strokeWidth={1.75} className="flex-none" aria-hidden />
      <span className="text-ink">{children}</span>
      <button type="button" className="ml-auto font-bold text-link underline underline-offset-2" onClick={onRetry}>
        Try again
      </button>
    </div>
  );
}
