import type { RunSummary } from '#contract/runs.ts';
import { minorPerUnit } from '../../lib/money.ts';
import { logAxis, type Axis } from '../../ui/charts/axis.ts';

const MAX_DECADES = 5;
const MIN_DECADES = 3;

/** A log axis that holds the gross results of these runs; null when none has any loss yet. */
export const grossAxis = (runs: readonly RunSummary[]): Axis | null => {
  const values = runs
    .flatMap(({ gross, grossPlainMinor }) => [gross?.p5 ?? 0, gross?.p95 ?? 0, grossPlainMinor ?? 0])
    .filter((value) => value > 0);
  if (values.length === 0) return null;
  const high = Math.max(...values);
  // A very small loss doesn't squeeze the others: it stands at the left end.
  const low = Math.max(Math.min(...values), high / 10 ** MAX_DECADES);
  return logAxis(Math.min(low, high / 10 ** (MIN_DECADES - 1)), high);
};

/** "100 k", "10 m": a decade tick in whole units of the currency. */
export const decadeLabel = (minor: number, currency: string): string => {
  const units = minor / minorPerUnit(currency);
  if (units >= 1e9) return `${units / 1e9} bn`;
  if (units >= 1e6) return `${units / 1e6} m`;
  if (units >= 1e3) return `${units / 1e3} k`;
  return String(units);
};
