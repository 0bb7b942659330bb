import type { SpreadReply, SpreadRow } from '#contract/studies.ts';
import type { Outcome, TrialResult } from '../../compute/spread.ts';
import { noEffectReason, type SpreadFacts } from './spread-reasons.ts';
import type { Switch } from './spread-switches.ts';

/** A change of the strongest gust that no screen shows. */
const LEAST_SHOWN_MS = 1e-6;

/** One switch as it is told: what came out, the change of the centre, or why there is none. */
export const rowOf = (tried: Switch, result: TrialResult, facts: SpreadFacts): SpreadRow => {
  const { choice, title, from, to } = tried;
  const head = { choice, title, from, to: { value: to.value, title: to.title, source: to.source } };
  if ('refused' in result) {
    const reason = `Can’t be computed here: ${result.refused}.`;
    return { ...head, peakGustMs: null, peakGustChangeMs: null, grossMinor: null, grossChangeMinor: null, reason };
  }
  const base = facts.base.outcome;
  if (result.sameGusts && result.sameLosses) {
    return {
      ...head,
      peakGustMs: base.peakMs,
      peakGustChangeMs: 0,
      grossMinor: base.grossMinor,
      grossChangeMinor: base.grossMinor && 0,
      reason: noEffectReason(tried, facts),
    };
  }
  const { outcome } = result;
  const peakGustChangeMs = outcome.peakMs.p50 - base.peakMs.p50;
  const grossChangeMinor = grossChange(outcome, base);
  return {
    ...head,
    peakGustMs: outcome.peakMs,
    peakGustChangeMs,
    grossMinor: outcome.grossMinor,
    grossChangeMinor,
    reason:
      Math.abs(peakGustChangeMs) < LEAST_SHOWN_MS && (grossChangeMinor ?? 0) === 0
        ? 'Changes something at some sites, but neither the strongest gust nor the event’s loss.'
        : null,
  };
};

const grossChange = (outcome: Outcome, base: Outcome): number | null =>
  outcome.grossMinor && base.grossMinor ? outcome.grossMinor.p50 - base.grossMinor.p50 : null;

/** Widest change of the loss first, then of the gust; those without effect come last, in the chain’s order. */
export const ranked = (rows: readonly SpreadRow[]): SpreadRow[] => {
  const has = (row: SpreadRow) => (row.reason === null ? 1 : 0);
  const gross = (row: SpreadRow) => Math.abs(row.grossChangeMinor ?? 0);
  const gust = (row: SpreadRow) => Math.abs(row.peakGustChangeMs ?? 0);
  return [...rows].sort((a, b) => has(b) - has(a) || gross(b) - gross(a) || gust(b) - gust(a));
};

/** What stands before any switch is tried. */
export const baseOf = ({ peakMs, strongest, grossMinor }: Outcome, refs: readonly string[]): SpreadReply['base'] => ({
  peakGustMs: peakMs,
  strongestSite: strongest === null ? '' : refs[strongest]!,
  grossMinor,
});
