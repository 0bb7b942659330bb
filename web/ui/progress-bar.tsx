import { classNames } from '../lib/class-names.ts';

interface ProgressBarProps {
  label: string;
  done: number;
  total: number | null;
  className?: string;
}

/** How far, of how much; without a total only that it is under way. */
export function ProgressBar({ label, done, total, className }: ProgressBarProps) {
  const share = total ? Math.min(1, done / total) : null;
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={total ?? undefined}
      aria-valuenow={total ? done : undefined}
      className={classNames('h-1 overflow-hidden rounded-1 bg-chart-grid', className)}
    >
      <div
        className={classNames(
          'h-full rounded-1 bg-action transition-[width] duration-(--calm)',
          share === null && 'animate-pulse motion-reduce:animate-none',
        )}
        style={{ width: share === null ? '35%' : `${share * 100}%` }}
      />
    </div>
  );
}
