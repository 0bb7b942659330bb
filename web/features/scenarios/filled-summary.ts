import type { ResolvedFix } from '#contract/scenarios.ts';
import { counted } from '../../lib/numbers.ts';

/** Fields the table shows; the ring's defaults belong to the method note, not to each track. */
const NAMES: Record<string, [one: string, many: string]> = {
  radiusOfMaxWindM: ['radius', 'radii'],
  centralPressureHpa: ['pressure', 'pressures'],
  maxWindMs: ['wind', 'winds'],
};

/** "4 radii filled: Vickery & Wadhera (2008), all hurricanes. Type over any of them." */
export const filledSummary = (fixes: readonly ResolvedFix[]): string | null => {
  const parts = Object.entries(NAMES).flatMap(([field, [one, many]]) => {
    const relations = fixes.flatMap(({ filled }) => filled[field] ?? []);
    if (relations.length === 0) return [];
    return [`${counted(relations.length, one, many)} filled: ${[...new Set(relations)].join('; ')}.`];
  });
  return parts.length === 0 ? null : `${parts.join(' ')} Type over any of them.`;
};
