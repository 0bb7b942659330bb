import { clock, day } from '../../lib/dates.ts';
import { useNow } from '../../lib/use-now.ts';

export function UtcClock({ className }: { className?: string }) {
  const now = useNow(10_000);
  return (
    <time dateTime={now.toISOString()} className={className}>
      {day(now)} <b className="text-ink">{clock(now)} UTC</b>
    </time>
  );
}
