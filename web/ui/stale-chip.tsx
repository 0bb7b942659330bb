import { ClockAlert } from 'lucide-react';
import { ageWords, type Stale } from '#contract/track-age.ts';
import { utc } from '../lib/dates.ts';
import { Chip } from './chip.tsx';

/** The advisory a track is from is older than the service's limit: since when, in words and with its own mark. */
export function StaleChip({ stale, what = 'Stale' }: { stale: Stale; what?: string }) {
  return (
    <span title={`Track as of ${utc(stale.asOf)}`}>
      <Chip tone="event" icon={ClockAlert}>
        {what}, {ageWords(stale.ageHours)} old
      </Chip>
    </span>
  );
}
