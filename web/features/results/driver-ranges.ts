import type { SpreadRow } from '#contract/studies.ts';

/** From the lowest to the highest change; the same twice where one value was tried. */
export type Change = readonly [low: number, high: number];

/** One setting of the ring with everything that was tried of it. */
export interface DriverRange {
  choice: string;
  title: string;
  inUse: string;
  gustMs: Change | null;
  grossMinor: Change | null;
  tried: readonly SpreadRow[];
  /** Why nothing that was tried moves anything. */
  reason: string | null;
}

const changeOf = (changes: readonly (number | null)[]): Change | null => {
  const known = changes.filter((change) => change !== null);
  return known.length === 0 ? null : [Math.min(...known), Math.max(...known)];
};

const width = (change: Change | null): number =>
  change === null ? 0 : Math.max(0, change[1]) - Math.min(0, change[0]);

/** The rows gathered by setting, the widest change of the loss first, then of the gust; those without effect last. */
export const driverRanges = (rows: readonly SpreadRow[]): DriverRange[] => {
  const ranges = [...new Set(rows.map(({ choice }) => choice))].map((choice): DriverRange => {
    const tried = rows.filter((row) => row.choice === choice);
    const [first] = tried;
    return {
      choice,
      title: first!.title,
      inUse: first!.from.title,
      gustMs: changeOf(tried.map(({ peakGustChangeMs }) => peakGustChangeMs)),
      grossMinor: changeOf(tried.map(({ grossChangeMinor }) => grossChangeMinor)),
      tried,
      reason: tried.every(({ reason }) => reason !== null) ? first!.reason : null,
    };
  });
  const acts = ({ reason }: DriverRange) => (reason === null ? 1 : 0);
  return ranges.sort(
    (a, b) => acts(b) - acts(a) || width(b.grossMinor) - width(a.grossMinor) || width(b.gustMs) - width(a.gustMs),
  );
};

/** Which settings dominate, in a sentence; null where none does anything. */
export const dominantWords = (ranges: readonly DriverRange[]): string | null => {
  // Leaving the vortices out isn’t a setting of the ring but its absence.
  const [first, second] = ranges.filter(({ choice, reason }) => reason === null && choice !== 'mesovortices');
  if (!first) return null;
  const name = ({ title }: DriverRange) => title.charAt(0).toLowerCase() + title.slice(1);
  return second ? `Most depends on ${name(first)}, then on ${name(second)}.` : `Most depends on ${name(first)}.`;
};
