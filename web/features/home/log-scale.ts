import type { RunSummary } from '#contract/runs.ts';
import { minorPerUnit } from '../../lib/money.ts';

/** Position on a log axis whose ends are whole decades, so that width reads as relative spread. */
export interface LogScale {
  /** Decades from `from` to `to`, as powers of ten of whole currency units. */
  from: number;
  to: number;
  /** 0–1 across the axis. */
  at: (minor: number) => number;
}

const MIN_DECADES = 3;

/** A scale that holds the gross results of these runs; null when none has any loss yet. */
export const logScaleFor = (runs: readonly RunSummary[]): LogScale | null => {
  const values = runs
    .flatMap((run) =>
      [run.gross?.p5, run.gross?.p95, run.grossPlainMinor].map((minor) => (minor ?? 0) / minorPerUnit(run.currency)),
    )
    .filter((value) => value > 0);
  if (values.length === 0) return null;
  let to = Math.ceil(Math.log10(Math.max(...values)));
  let from = Math.floor(Math.log10(Math.min(...values)));
  // A very small loss doesn't squeeze the others; it stands at the left end.
  from = Math.max(from, to - 5);
  while (to - from < MIN_DECADES) from -= 1;
  if (from < 0) {
    to -= from;
    from = 0;
  }
  const per = minorPerUnit(runs[0]?.currency ?? 'USD');
  return {
    from,
    to,
    at: (minor) => (minor <= 0 ? 0 : Math.min(1, Math.max(0, (Math.log10(minor / per) - from) / (to - from)))),
  };
};

/** "1,000", "100 k", "10 m": the value of a decade tick. */
export const decadeLabel = (power: number): string => {
  if (power >= 9) return `${10 ** (power - 9)} bn`;
  if (power >= 6) return `${10 ** (power - 6)} m`;
  if (power >= 3) return `${10 ** (power - 3)} k`;
  return String(10 ** power);
};
