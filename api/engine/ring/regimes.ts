import { AMPLITUDE_NODES, AMPLITUDE_WEIGHTS, MEAN_AMPLITUDE } from './draws.ts';

/** How the vortices of a ring live: mostly kept up with a few breakdowns, always kept up, or always breaking down. */
export type AmplitudeRegime = 'mixed' | 'quasi-steady' | 'breakdown';

/** Every regime, the default first. */
export const AMPLITUDE_REGIMES = ['mixed', 'quasi-steady', 'breakdown'] as const satisfies readonly AmplitudeRegime[];

/** Strengths of a single vortex [1], and how often each comes, in thousandths. Judgement, checked on barotropic runs. */
const INDIVIDUAL = [0.5, 0.65, 0.75, 0.85, 1] as const;
const INDIVIDUAL_THOUSANDTHS = [200, 200, 200, 300, 100] as const;
/** Amplitude of the regime [1]: rings kept up by heating, and rings left alone. Fitted to own barotropic runs. */
const REGIME_FACTOR = { 'quasi-steady': 0.4, breakdown: 1.1 } as const;

/**
 * Strength factors of the draws under a regime, on the same weights whatever the regime.
 *
 * @param regime The regime.
 * @returns Factors a, ascending [1], shape (11,). Mixed: AMPLITUDE_NODES. Otherwise each is the mean of regime times
 *          individual strength over the node's share of probability, so that the mean of the distribution is kept exactly.
 * @source Individual strengths 0.5 to 1, and the amplitudes 0.40 and 1.10 of the two regimes, from own barotropic runs.
 */
export function amplitudeNodes(regime: AmplitudeRegime): readonly number[] {
  return regime === 'mixed' ? AMPLITUDE_NODES : INDIVIDUAL_NODES.map((u) => REGIME_FACTOR[regime] * u);
}

/**
 * Weighted mean of the strength factors.
 *
 * @param regime The regime.
 * @returns Mean factor [1].
 * @source Definition.
 */
export function meanAmplitude(regime: AmplitudeRegime): number {
  if (regime === 'mixed') return MEAN_AMPLITUDE;
  return REGIME_FACTOR[regime] * INDIVIDUAL_MEAN;
}

const INDIVIDUAL_MEAN = INDIVIDUAL.reduce((sum, u, i) => sum + u * INDIVIDUAL_THOUSANDTHS[i]!, 0) / 1000;

/** Means of the individual strength over the nodes' shares of probability; whole thousandths keep the shares exact. */
const INDIVIDUAL_NODES: readonly number[] = (() => {
  let from = 0;
  return AMPLITUDE_WEIGHTS.map((weight) => {
    const share = Math.round(1000 * weight);
    const to = from + share;
    let mean = 0;
    let start = 0;
    INDIVIDUAL.forEach((u, i) => {
      const end = start + INDIVIDUAL_THOUSANDTHS[i]!;
      mean += u * (Math.max(Math.min(to, end) - Math.max(from, start), 0) / share);
      start = end;
    });
    from = to;
    return mean;
  });
})();
