import { ONE_MINUTE_OVER_TEN } from '../constants.ts';
import type { WindOptions } from '../track/options.ts';

/** Up to this radius the factor is that of the eyewall [m]. */
export const INNER_RADIUS = 100_000;
/** From this radius on the factor is that of the outer vortex [m]. */
export const OUTER_RADIUS = 700_000;
/** 10-min wind at 10 m over gradient wind near the eyewall [1]. Source: Franklin et al. (2003), 1-min 0.90. */
export const INNER_FACTOR = 0.9 / ONE_MINUTE_OVER_TEN;
/** The same in the outer vortex [1]. Source: Knaff et al. (2011), 1-min 0.75, from memory. */
export const OUTER_FACTOR = 0.75 / ONE_MINUTE_OVER_TEN;
/**
 * Wind at 10 m over the mean of the lowest 500 m, both of the same averaging time; the mean is taken for the gradient
 * wind and the factor holds at every radius [1]. Source: Powell, Vickery & Reinhold (2003), Nature 422, 279–283, from memory.
 */
export const POWELL_FACTOR = 0.78;
/**
 * 10-min wind at 10 m over gradient wind, at every radius [1]. Source: Holland, Belanger & Fritz (2010), Mon. Wea. Rev.
 * 138, 4393–4401, from memory.
 */
export const HOLLAND_FACTOR = 0.8;

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

/** The published surface factors by name: radius [m] to 10-min wind at 10 m over open sea as a share of the gradient wind [1]. */
export const SURFACE_FACTORS: Readonly<Record<WindOptions['surfaceFactor'], (r: number) => number>> = {
  franklin: surfaceFactor,
  'powell-2003': () => POWELL_FACTOR,
  'holland-2010': () => HOLLAND_FACTOR,
};
