import { classNames } from '../lib/class-names.ts';

/** A line that stands where text will stand. */
export function Skeleton({ width = '100%', className }: { width?: string; className?: string }) {
  return <span className={classNames('block h-2.5 rounded-1 bg-panel', className)} style={{ width }} />;
}
