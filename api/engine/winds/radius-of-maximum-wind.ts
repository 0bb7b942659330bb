import { PA_PER_HPA } from '../units.ts';

/** Range in which an estimated radius of maximum wind is used [m]. */
const RADIUS_RANGE = [8_000, 150_000] as const;

/**
 * Radius of maximum wind from pressure deficit and latitude, all hurricanes.
 *
 * @param deficit  Pressure deficit [Pa].
 * @param latitude Latitude of the centre [deg].
 * @returns Radius [m], not clamped; spread of its logarithm 0.441.
 * @source Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517; constants from memory.
 */
export function vickeryWadheraRadius(deficit: number, latitude: number): number {
  const hPa = deficit / PA_PER_HPA;
  return 1000 * Math.exp(3.015 - 6.291e-5 * hPa * hPa + 0.0337 * Math.abs(latitude));
}

/**
 * Keeps an estimated radius in the range in which it is used.
 *
 * @param radius Radius of maximum wind [m].
 * @returns Radius in 8..150 km [m].
 * @source Product rule.
 */
export function clampedRadius(radius: number): number {
  return Math.min(Math.max(radius, RADIUS_RANGE[0]), RADIUS_RANGE[1]);
}
