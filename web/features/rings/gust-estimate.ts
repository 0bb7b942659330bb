/**
 * Drawn strengths of vortices at which half, 90 % and 99 % of the draws’ weight is reached, over the amplitude.
 * Judged weights: 75 % quasi-steady, 15 % between, 10 % breakdown, each times the vortex’s own strength.
 */
export const DRAWN_STRENGTHS = [
  { share: 0.5, name: 'Half of the draws', strength: 0.34 },
  { share: 0.9, name: '90 % of the draws', strength: 0.64 },
  { share: 0.99, name: '99 % of the draws', strength: 0.935 },
] as const;
export const MEAN_STRENGTH = 0.38415;
/** 3-s gust over the 1-min wind, open sea. Source: WMO/TD-1555, Harper et al. (2010), from memory. */
const GUST_FACTOR = 1.11;

/** Gust over the radius of maximum wind under a vortex of a strength, and what it adds to the ring without vortices. */
export const gustUnder = (
  strength: number,
  { maxWindMs, amplitude, windIs }: { maxWindMs: number; amplitude: number; windIs: 'mean' | 'peak' },
): { gustMs: number; extraMs: number } => {
  const mean = windIs === 'mean' ? maxWindMs : maxWindMs / (1 + MEAN_STRENGTH * amplitude);
  const gustMs = GUST_FACTOR * mean * (1 + strength * amplitude);
  return { gustMs, extraMs: gustMs - GUST_FACTOR * maxWindMs };
};
