import { ONE_MINUTE_OVER_TEN } from '../constants.ts';

/** Up to this radius the factor is that of the eyewall [m]. */
export const INNER_RADIUS = 100_000;
/** From this radius on the factor is that of the outer vortex [m]. */
export const OUTER_RADIUS = 700_000;
/** 10-min wind at 10 m over gradient wind near the eyewall [1]. Source: Franklin et al. (2003), 1-min 0.90. */
export const INNER_FACTOR = 0.9 / ONE_MINUTE_OVER_TEN;
/** The same in the outer vortex [1]. Source: Knaff et al. (2011), 1-min 0.75, from memory. */
export const OUTER_FACTOR = 0.75 / ONE_MINUTE_OVER_TEN;

/**
 * 10-min wind at 10 m over open sea as a share of the gradient wind.
 *
 * @param r Distance from the centre [m], ≥ 0.
 * @returns Factor [1], from 0.857 within 100 km to 0.714 beyond 700 km. NaN for NaN.
 * @source Franklin, Black & Valde (2003), Wea. Forecasting 18, 32–44; taper Knaff et al. (2011), from memory.
 */
export function surfaceFactor(r: number): number {
  if (r <= INNER_RADIUS) return INNER_FACTOR;
  if (r >= OUTER_RADIUS) return OUTER_FACTOR;
  return INNER_FACTOR + ((r - INNER_RADIUS) / (OUTER_RADIUS - INNER_RADIUS)) * (OUTER_FACTOR - INNER_FACTOR);
}
